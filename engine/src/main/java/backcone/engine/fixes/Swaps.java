package backcone.engine.fixes;

import backcone.engine.graph.DriveGraph;
import backcone.engine.graph.Element;
import backcone.engine.graph.Slot;
import backcone.engine.model.Library;
import backcone.engine.syntax.Entry;
import backcone.engine.syntax.Expr;
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
            Map<String, Named> all = blocks();
            Named was = all.get(p.text());
            if (was == null) {
                continue;
            }
            for (Map.Entry<String, Named> other : all.entrySet()) {
                Named now = other.getValue();
                if (now.block != was.block
                        && library.isKind(
                                now.block.head().text(), was.block.head().text())
                        && fits(was, now)) {
                    out.add(new Swap(slot, p.span(), other.getKey()));
                }
            }
        }
        return out;
    }

    /** A block and the file it stands in. */
    private record Named(Entry.Block block, FileId file) {}

    /** Blocks that the text can name, by the name it would write. */
    private Map<String, Named> blocks() {
        Map<String, Named> out = new LinkedHashMap<>();
        for (String n : subject.top().names()) {
            DriveGraph.TopEntry t = subject.top().find(n);
            if (t == null) {
                continue;
            }
            if (t.entry() instanceof Entry.Block b) {
                out.put(n, new Named(b, t.file()));
            }
            t.inside().forEach((k, v) -> {
                if (v.entry() instanceof Entry.Block b) {
                    out.put(n + "." + k, new Named(b, v.file()));
                }
            });
        }
        return out;
    }

    private boolean fits(Named was, Named other) {
        String how = "";
        for (String w : step.words()) {
            if (w.equals("same") || w.equals("keep") || w.equals("raise")) {
                how = w;
                continue;
            }
            List<Expr> a = values(was.block, w);
            List<Expr> b = values(other.block, w);
            boolean ok = how.equals("raise") ? higher(a, b) : texts(was, a).equals(texts(other, b));
            if (!ok || how.equals("same") && a.isEmpty()) {
                return false;
            }
        }
        return true;
    }

    /** All that a block says of a name: one spoken name may have a value on each of several scales. */
    private static List<Expr> values(Entry.Block block, String name) {
        List<Expr> out = new ArrayList<>();
        List<Entry> body = block.body();
        if (body != null) {
            for (Entry e : body) {
                if (e instanceof Entry.Fact f && f.path().text().equals(name)) {
                    out.add(f.value());
                }
            }
        }
        return out;
    }

    private List<String> texts(Named in, List<Expr> values) {
        String text = in.file.equals(subject.file()) ? subject.text() : subject.textOf(in.file);
        List<String> out = new ArrayList<>();
        for (Expr e : values) {
            if (text != null) {
                out.add(text.substring(e.span().start(), e.span().end()).replaceAll("\\s+", " "));
            }
        }
        return out;
    }

    /** Whether, on every scale that both are told on, the lower end of one lies above the lower end of the other. */
    private static boolean higher(List<Expr> was, List<Expr> now) {
        boolean any = false;
        for (Expr x : was) {
            for (Expr y : now) {
                Expr.Num a = low(x);
                Expr.Num b = low(y);
                if (a == null || b == null) {
                    return false;
                }
                Unit ua = a.unit() == null ? null : Axis.unit(a.unit().text());
                Unit ub = b.unit() == null ? null : Axis.unit(b.unit().text());
                boolean bare = a.unit() == null && b.unit() == null;
                if (bare || ua != null && ub != null && ua.dimension().equals(ub.dimension())) {
                    double p = bare || ua == null ? a.value() : ua.toBase(a.value());
                    double q = bare || ub == null ? b.value() : ub.toBase(b.value());
                    if (q <= p) {
                        return false;
                    }
                    any = true;
                }
            }
        }
        return any;
    }

    private static Expr.@Nullable Num low(@Nullable Expr e) {
        return e instanceof Expr.Num n ? n : e instanceof Expr.Range r ? low(r.low()) : null;
    }
}
