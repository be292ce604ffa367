package backcone.engine.fixes;

import backcone.engine.diagnostics.Code;
import backcone.engine.graph.DriveGraph;
import backcone.engine.syntax.Entry;
import backcone.engine.syntax.FileSyntax;
import backcone.engine.syntax.Node;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import org.jspecify.annotations.Nullable;

/**
 * Blocks that several drives could share: one written inside a member becomes a block with a name, in the library that the text
 * uses; one that a library has already becomes a reference. Offered only if nothing that is computed changes.
 */
final class Shared {
    private final Subject subject;

    Shared(Subject subject) {
        this.subject = subject;
    }

    List<Fix> at(Span range) {
        List<Fix> out = new ArrayList<>();
        List<Node> around = Walk.around(subject.syntax().entries(), range);
        Entry.Block block = Walk.last(around, Entry.Block.class);
        if (block == null || block.body() == null || !onHead(block, range)) {
            return out;
        }
        boolean top = subject.syntax().entries().contains(block);
        if (top) {
            moved(block, out);
            twice(block, out);
        } else if (block.name() == null
                && block.on() == null
                && libraries(block).size() > 0) {
            referenced(block, out);
            named(block, out);
        }
        out.removeIf(f -> !Lets.same(subject, subject.edited(f.edits())));
        return out;
    }

    private boolean onHead(Entry.Block b, Span range) {
        int brace = subject.text().indexOf('{', b.span().start());
        return brace < 0 || range.start() <= brace + 1;
    }

    /** Named blocks of this kind that the text can refer to, by name. */
    private Map<String, DriveGraph.TopEntry> known(Entry.Block block) {
        Map<String, DriveGraph.TopEntry> out = new LinkedHashMap<>();
        String kind = block.head().text();
        for (String n : subject.top().names()) {
            DriveGraph.TopEntry t = subject.top().find(n);
            if (t == null) {
                continue;
            }
            if (t.entry() instanceof Entry.Block b && b.head().text().equals(kind)) {
                out.put(n, t);
            }
            t.inside().forEach((k, v) -> {
                if (v.entry() instanceof Entry.Block b && b.head().text().equals(kind)) {
                    out.put(n + "." + k, v);
                }
            });
        }
        return out;
    }

    /** Used files that hold blocks of this kind, and the prefix under which they are named here. */
    private Map<FileId, String> libraries(Entry.Block block) {
        Map<FileId, String> out = new LinkedHashMap<>();
        known(block).forEach((name, t) -> {
            if (!t.file().equals(subject.file())) {
                out.putIfAbsent(t.file(), name.substring(0, name.indexOf('.') + 1));
            }
        });
        return out;
    }

    private void referenced(Entry.Block block, List<Fix> out) {
        List<String> mine = facts(block, subject.text());
        for (Map.Entry<String, DriveGraph.TopEntry> e : known(block).entrySet()) {
            Entry.Block other = (Entry.Block) e.getValue().entry();
            String text = textOf(e.getValue().file());
            if (text != null && facts(other, text).containsAll(mine)) {
                out.add(new Fix(
                        "refer to `" + e.getKey() + "`, which says the same",
                        Fix.Kind.REWRITE,
                        false,
                        List.of(new TextEdit(subject.file(), block.span(), block.head() + " = " + e.getKey())),
                        List.of()));
            }
        }
    }

    private void named(Entry.Block block, List<Fix> out) {
        String name = name(block);
        for (Map.Entry<FileId, String> lib : libraries(block).entrySet()) {
            String text = textOf(lib.getKey());
            if (text == null) {
                continue;
            }
            List<TextEdit> edits = new ArrayList<>();
            edits.add(new TextEdit(subject.file(), block.span(), block.head() + " = " + lib.getValue() + name));
            edits.add(appended(lib.getKey(), text, outdented(block, name)));
            out.add(new Fix(
                    "move to " + lib.getKey().path() + " as `" + name + "`",
                    Fix.Kind.EXTRACT,
                    false,
                    edits,
                    List.of()));
        }
    }

    /** A named block of this file goes to a library; what refers to it finds it there. */
    private void moved(Entry.Block block, List<Fix> out) {
        if (block.name() == null) {
            return;
        }
        for (Map.Entry<FileId, String> lib : libraries(block).entrySet()) {
            String text = textOf(lib.getKey());
            if (text == null || !lib.getValue().isEmpty()) {
                continue; // behind a name of its own, every use here would have to change
            }
            List<TextEdit> edits = new ArrayList<>();
            edits.add(removed(block));
            edits.add(appended(
                    lib.getKey(),
                    text,
                    subject.text().substring(block.span().start(), block.span().end())));
            out.add(new Fix(
                    "move `" + block.name() + "` to " + lib.getKey().path(),
                    Fix.Kind.EXTRACT,
                    false,
                    edits,
                    List.of()));
        }
    }

    /** The same name here and in a library: what stands here goes, if it says the same. */
    private void twice(Entry.Block block, List<Fix> out) {
        if (block.name() == null) {
            return;
        }
        for (Map.Entry<FileId, FileSyntax> f : subject.used().entrySet()) {
            String text = subject.textOf(f.getKey());
            for (Entry e : f.getValue().entries()) {
                if (text != null
                        && e instanceof Entry.Block b
                        && b.name() != null
                        && b.name().text().equals(block.name().text())
                        && facts(b, text).containsAll(facts(block, subject.text()))) {
                    out.add(new Fix(
                            "remove `" + block.name() + "`: " + f.getKey().path() + " has it",
                            Fix.Kind.QUICK_FIX,
                            true,
                            List.of(removed(block)),
                            List.of(Code.DUPLICATE_NAME.id())));
                }
            }
        }
    }

    private static List<String> facts(Entry.Block b, String text) {
        List<String> out = new ArrayList<>();
        for (Entry e : b.body() == null ? List.<Entry>of() : b.body()) {
            String t = e instanceof Entry.Fact f
                    ? f.path().text() + " = "
                            + text.substring(
                                    f.value().span().start(), f.value().span().end())
                    : text.substring(e.span().start(), e.span().end());
            out.add(t.replaceAll("\\s+", " "));
        }
        return out;
    }

    private @Nullable String textOf(FileId f) {
        return f.equals(subject.file()) ? subject.text() : subject.textOf(f);
    }

    /** After the title or the designation, and free: {@code material_42CrMo4}. */
    private String name(Entry.Block b) {
        String base = b.title();
        for (Entry e : b.body() == null ? List.<Entry>of() : b.body()) {
            if (e instanceof Entry.Fact f
                    && f.path().text().equals("designation")
                    && f.value() instanceof backcone.engine.syntax.Expr.Str s) {
                base = s.value();
            }
        }
        String word = base == null ? "" : base.replaceAll("[^A-Za-z0-9]+", "_").replaceAll("^_|_$", "");
        String name = b.head() + (word.isEmpty() ? "" : "_" + word);
        String free = name.equals(b.head().text()) ? name + "_1" : name;
        for (int i = 2; subject.top().find(free) != null; i++) {
            free = name + "_" + i;
        }
        return free;
    }

    /** The block with a name, its lines moved left to the margin. */
    private String outdented(Entry.Block b, String name) {
        String text = subject.text();
        int cut = Edits.indent(text, b.span().start()).length();
        String whole = text.substring(b.span().start(), b.span().end());
        String rest = whole.substring(b.head().text().length());
        StringBuilder out = new StringBuilder(b.head() + " " + name);
        boolean first = true;
        for (String line : rest.split("\n", -1)) {
            if (!first) {
                int k = 0;
                while (k < cut && k < line.length() && line.charAt(k) == ' ') {
                    k++;
                }
                out.append('\n').append(line, k, line.length());
            } else {
                out.append(line);
            }
            first = false;
        }
        return out.toString();
    }

    private static TextEdit appended(FileId f, String text, String block) {
        String nl = Edits.newline(text);
        String before = text.isEmpty() ? "" : text.endsWith("\n") ? nl : nl + nl;
        return new TextEdit(f, new Span(text.length(), text.length()), before + block + nl);
    }

    /** The lines of a block, with the empty one behind them. */
    private TextEdit removed(Entry.Block b) {
        String text = subject.text();
        int from = Edits.lineStart(text, b.span().start());
        int to = b.span().end();
        for (int i = 0; i < 2; i++) {
            int end = Edits.lineEnd(text, to);
            if (!text.substring(to, end).isBlank()) {
                break;
            }
            int next = text.indexOf('\n', end);
            if (next < 0) {
                to = text.length();
                break;
            }
            to = next + 1;
        }
        return new TextEdit(subject.file(), new Span(from, to), "");
    }
}
