package backcone.engine.fixes;

import backcone.engine.graph.DriveGraph;
import backcone.engine.graph.Element;
import backcone.engine.graph.Slot;
import backcone.engine.model.Library;
import backcone.engine.syntax.Entry;
import backcone.engine.syntax.Expr;
import backcone.engine.syntax.FileSyntax;
import backcone.engine.syntax.Name;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import backcone.engine.units.Unit;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Set;
import org.jspecify.annotations.Nullable;

/** Another block of the files in reach in place of the one that is named: a steel hardened further, a thicker oil. */
final class Swaps {
    private final Subject subject;
    private final Library library;
    private final Steps steps;
    private final Steps.Step step;

    Swaps(Subject subject, Library library, Steps steps, Steps.Step step) {
        this.subject = subject;
        this.library = library;
        this.steps = steps;
        this.step = step;
    }

    /** The name at this place becomes another. */
    record Swap(Slot slot, Span at, String name) {}

    List<Swap> of(DriveGraph g, Element e, Set<String> known) {
        List<Swap> out = new ArrayList<>();
        for (Slot slot : g.givenSlots(e)) {
            Slot.Fact f = slot.fact();
            if (f == null
                    || !slot.decl.name.equals(step.name())
                    || steps.never.contains(step.name())
                    || !f.file().equals(subject.file())
                    || !(f.value() instanceof Expr.Path p)
                    || !known.add(p.span() + " " + step.name())) {
                continue;
            }
            Map<String, Entry.Block> all = blocks();
            Entry.Block was = all.get(p.text());
            if (was == null) {
                continue;
            }
            for (Map.Entry<String, Entry.Block> other : all.entrySet()) {
                if (other.getValue() != was
                        && library.isKind(
                                other.getValue().head().text(), was.head().text())
                        && fits(was, other.getValue())) {
                    out.add(new Swap(slot, p.span(), other.getKey()));
                }
            }
        }
        return out;
    }

    /** Blocks that the text can name, by the name it would write. */
    private Map<String, Entry.Block> blocks() {
        Map<String, Entry.Block> out = new LinkedHashMap<>();
        for (String n : subject.top().names()) {
            DriveGraph.TopEntry t = subject.top().find(n);
            if (t == null) {
                continue;
            }
            if (t.entry() instanceof Entry.Block b) {
                out.put(n, b);
            }
            t.inside().forEach((k, v) -> {
                if (v.entry() instanceof Entry.Block b) {
                    out.put(n + "." + k, b);
                }
            });
        }
        return out;
    }

    private boolean fits(Entry.Block was, Entry.Block other) {
        String how = "";
        for (String w : step.words()) {
            if (w.equals("same") || w.equals("keep") || w.equals("raise")) {
                how = w;
                continue;
            }
            Expr a = value(was, w);
            Expr b = value(other, w);
            boolean ok = switch (how) {
                case "same" -> a != null && b != null && text(was, a).equals(text(other, b));
                case "keep" -> a == null ? b == null : b != null && text(was, a).equals(text(other, b));
                default -> higher(a, b);
            };
            if (!ok) {
                return false;
            }
        }
        return true;
    }

    private static @Nullable Expr value(Entry.Block block, String name) {
        Expr out = null;
        List<Entry> body = block.body();
        if (body != null) {
            for (Entry e : body) {
                if (e instanceof Entry.Fact f && f.path().text().equals(name) && out == null) {
                    out = f.value();
                }
            }
        }
        return out;
    }

    private String text(Entry.Block block, Expr e) {
        for (FileId f : files()) {
            FileSyntax t =
                    f.equals(subject.file()) ? subject.syntax() : subject.used().get(f);
            if (t != null && t.entries().contains(block)) {
                String text = f.equals(subject.file()) ? subject.text() : subject.textOf(f);
                if (text != null) {
                    return text.substring(e.span().start(), e.span().end()).replaceAll("\\s+", " ");
                }
            }
        }
        return "";
    }

    private List<FileId> files() {
        List<FileId> out = new ArrayList<>(List.of(subject.file()));
        out.addAll(subject.used().keySet());
        return out;
    }

    /** Whether the lower end of one number lies above the lower end of the other, on one scale. */
    private static boolean higher(@Nullable Expr was, @Nullable Expr now) {
        Expr.Num a = low(was);
        Expr.Num b = low(now);
        if (a == null || b == null) {
            return false;
        }
        Name ua = a.unit();
        Name ub = b.unit();
        if (ua == null || ub == null) {
            return ua == null && ub == null && b.value() > a.value();
        }
        Unit x = Axis.unit(ua.text());
        Unit y = Axis.unit(ub.text());
        return x != null
                && y != null
                && x.dimension().equals(y.dimension())
                && y.toBase(b.value()) > x.toBase(a.value());
    }

    private static Expr.@Nullable Num low(@Nullable Expr e) {
        return e instanceof Expr.Num n ? n : e instanceof Expr.Range r ? low(r.low()) : null;
    }
}
