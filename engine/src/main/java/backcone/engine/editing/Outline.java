package backcone.engine.editing;

import backcone.engine.syntax.Entry;
import backcone.engine.syntax.Expr;
import backcone.engine.syntax.Name;
import backcone.engine.syntax.Node;
import backcone.engine.syntax.Nodes;
import backcone.engine.text.Span;
import java.util.ArrayList;
import java.util.List;
import org.jspecify.annotations.Nullable;

/** What a text is made of: symbols, foldable ranges, and the nested ranges around a place. From the tree alone. */
public final class Outline {
    /** A named part of a text. {@code sort} is the word that opens it: drive, bevel, rate, require, method, table … */
    public record Symbol(String name, String detail, String sort, Span span, Span nameSpan, List<Symbol> inside) {}

    private Outline() {}

    public static List<Symbol> symbols(Scene scene) {
        return symbols(scene.text, scene.tree.entries(), 0);
    }

    private static List<Symbol> symbols(String text, List<Entry> entries, int depth) {
        List<Symbol> out = new ArrayList<>();
        if (depth > 60) {
            return out;
        }
        for (Entry e : entries) {
            Symbol s = symbol(text, e, depth);
            if (s != null) {
                out.add(s);
            }
        }
        return out;
    }

    private static @Nullable Symbol symbol(String text, Entry e, int depth) {
        List<Entry> body = Nodes.body(e);
        List<Symbol> inside = body == null ? List.of() : symbols(text, body, depth + 1);
        if (e instanceof Entry.Block b) {
            Name n = b.name() == null ? b.head() : b.name();
            return n.isHole()
                    ? null
                    : of(
                            n,
                            b.name() == null ? title(b.title()) : b.head().text() + title(b.title()),
                            b.head().text(),
                            e,
                            inside);
        } else if (e instanceof Entry.Rate r) {
            String name = "rate " + r.mesh().text() + (r.as() == null ? "" : " as " + r.as());
            return new Symbol(
                    name, "by " + r.method(), "rate", e.span(), r.mesh().span(), inside);
        } else if (e instanceof Entry.Require r) {
            return new Symbol(
                    line(text, e), "", "require", e.span(), r.subject().span(), List.of());
        } else if (e instanceof Entry.Requirement r) {
            return new Symbol(line(text, e), "", "require", e.span(), r.path().span(), List.of());
        } else if (e instanceof Entry.Accept a) {
            return new Symbol(line(text, e), "", "accept", e.span(), a.path().span(), List.of());
        } else if (e instanceof Entry.Waive a) {
            return new Symbol(line(text, e), "", "accept", e.span(), a.path().span(), List.of());
        } else if (e instanceof Entry.Use u) {
            return new Symbol("use " + u.path(), "", "use", e.span(), u.pathSpan(), List.of());
        }
        Name n = Nodes.name(e);
        if (n == null || n.isHole()) {
            return null;
        }
        String meaning = e instanceof Entry.Drive d
                ? d.title()
                : e instanceof Entry.Variant v
                        ? "of " + v.base() + title(v.title())
                        : e instanceof Entry.Declaration d
                                ? d.meaning()
                                : e instanceof Entry.Check c
                                        ? c.meaning()
                                        : e instanceof Entry.Method m
                                                ? m.meaning()
                                                : e instanceof Entry.Kind k
                                                        ? k.meaning()
                                                        : e instanceof Entry.Chapter c
                                                                ? c.meaning()
                                                                : e instanceof Entry.Table t
                                                                        ? t.meaning()
                                                                        : e instanceof Entry.Let l
                                                                                ? shown(text, l.value())
                                                                                : null;
        return of(n, meaning == null ? "" : meaning, sort(e), e, inside);
    }

    private static String sort(Entry e) {
        return e.getClass().getSimpleName().toLowerCase(java.util.Locale.ROOT);
    }

    private static String title(@Nullable String t) {
        return t == null ? "" : " " + t;
    }

    private static Symbol of(Name n, String detail, String sort, Entry e, List<Symbol> inside) {
        Span at = e.span();
        Span name = n.span().start() < at.start() || n.span().end() > at.end() ? at : n.span();
        return new Symbol(n.text(), detail, sort, at, name, inside);
    }

    private static String shown(String text, Expr e) {
        String s = text.substring(e.span().start(), Math.min(e.span().end(), text.length()))
                .replaceAll("\\s+", " ");
        return s.length() > 40 ? s.substring(0, 39) + "\u2026" : s;
    }

    private static String line(String text, Entry e) {
        int end = text.indexOf('\n', e.span().start());
        end = end < 0 || end > e.span().end() ? e.span().end() : end;
        String s = text.substring(e.span().start(), Math.min(end, text.length()))
                .strip()
                .replaceAll("\\s+", " ");
        int because = s.indexOf(" because ");
        s = because > 0 ? s.substring(0, because) : s;
        return s.length() > 60 ? s.substring(0, 59) + "\u2026" : s.isEmpty() ? "?" : s;
    }

    /** Ranges that an editor may fold; {@code comment} for runs of comment lines. */
    public record Fold(Span span, boolean comment) {}

    public static List<Fold> folds(Scene scene) {
        List<Fold> out = new ArrayList<>();
        for (Entry e : scene.tree.entries()) {
            fold(e, out, 0);
        }
        int start = -1;
        int end = -1;
        int lastLine = -5;
        for (var c : scene.tree.comments()) {
            int lineStart = scene.text.lastIndexOf('\n', Math.max(0, c.span().start() - 1)) + 1;
            boolean alone = scene.text
                    .substring(Math.min(lineStart, c.span().start()), c.span().start())
                    .isBlank();
            if (!alone) {
                continue;
            }
            if (start >= 0 && lineStart == lastLine) {
                end = c.span().end();
            } else {
                if (start >= 0 && scene.text.indexOf('\n', start) < end) {
                    out.add(new Fold(new Span(start, end), true));
                }
                start = c.span().start();
                end = c.span().end();
            }
            int next = scene.text.indexOf('\n', c.span().end());
            lastLine = next < 0 ? scene.text.length() : next + 1;
        }
        if (start >= 0 && scene.text.indexOf('\n', start) >= 0 && scene.text.indexOf('\n', start) < end) {
            out.add(new Fold(new Span(start, end), true));
        }
        return out;
    }

    private static void fold(Entry e, List<Fold> out, int depth) {
        if (depth > 60) {
            return;
        }
        List<Entry> body = Nodes.body(e);
        if (body != null || e instanceof Entry.Table || e instanceof Entry.Family || e instanceof Entry.Choice) {
            out.add(new Fold(e.span(), false));
        }
        if (body != null) {
            for (Entry x : body) {
                fold(x, out, depth + 1);
            }
        }
    }

    /** The ranges around an offset, the smallest first. */
    public static List<Span> around(Scene scene, int offset) {
        List<Span> out = new ArrayList<>();
        Node n = scene.tree;
        for (int guard = 0; guard < 300; guard++) {
            Span s = n.span();
            if (out.isEmpty() || !out.get(0).equals(s)) {
                out.add(0, s);
            }
            Node[] next = new Node[1];
            Nodes.children(n, c -> {
                if (next[0] == null && c.span().contains(offset) && c.span().length() > 0) {
                    next[0] = c;
                }
            });
            if (next[0] == null) {
                break;
            }
            n = next[0];
        }
        // each holds the one before
        List<Span> nested = new ArrayList<>();
        for (Span s : out) {
            if (nested.isEmpty()) {
                nested.add(s);
            } else {
                Span inner = nested.get(nested.size() - 1);
                if (s.start() <= inner.start() && inner.end() <= s.end() && !s.equals(inner)) {
                    nested.add(s);
                }
            }
        }
        return nested;
    }
}
