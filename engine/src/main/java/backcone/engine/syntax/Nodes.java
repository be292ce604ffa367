package backcone.engine.syntax;

import java.util.List;
import java.util.function.Consumer;
import org.jspecify.annotations.Nullable;

/** Walks trees: the nodes directly below a node, in the order of the text. */
public final class Nodes {
    private Nodes() {}

    /** Calls {@code visit} for the node and everything below it. */
    public static void walk(Node n, Consumer<Node> visit) {
        visit.accept(n);
        children(n, c -> walk(c, visit));
    }

    public static void children(Node n, Consumer<Node> out) {
        if (n instanceof Entry e) {
            entry(e, out);
        } else if (n instanceof Expr e) {
            expr(e, out);
        } else if (n instanceof Note e) {
            note(e, out);
        } else if (n instanceof FileSyntax f) {
            all(f.entries(), out);
        } else if (n instanceof Expr.Arm a) {
            one(a.when(), out);
            out.accept(a.value());
        } else if (n instanceof Entry.Row r) {
            all(r.cells(), out);
        } else if (n instanceof Entry.Cell c) {
            all(c.values(), out);
        } else if (n instanceof Entry.Word w) {
            out.accept(w.name());
        } else if (n instanceof Entry.Parameter p) {
            out.accept(p.name());
            out.accept(p.kind());
        } else if (n instanceof Note.Taken t) {
            out.accept(t.path());
            one(t.alias(), out);
            out.accept(t.unit());
        }
    }

    private static void one(@Nullable Node n, Consumer<Node> out) {
        if (n != null) {
            out.accept(n);
        }
    }

    private static void all(@Nullable List<? extends Node> list, Consumer<Node> out) {
        if (list != null) {
            for (Node n : list) {
                out.accept(n);
            }
        }
    }

    /** The entries in braces of an entry; null where it has none. */
    public static @Nullable List<Entry> body(Entry e) {
        if (e instanceof Entry.Block b) {
            return b.body();
        } else if (e instanceof Entry.Drive d) {
            return d.body();
        } else if (e instanceof Entry.Variant v) {
            return v.body();
        } else if (e instanceof Entry.Rate r) {
            return r.body();
        } else if (e instanceof Entry.Kind k) {
            return k.body();
        } else if (e instanceof Entry.Chapter c) {
            return c.body();
        } else if (e instanceof Entry.Method m) {
            return m.body();
        } else if (e instanceof Entry.Each x) {
            return x.body();
        } else if (e instanceof Entry.Example x) {
            return x.body();
        }
        return null;
    }

    /** What an entry is called; null where it has no name. */
    public static @Nullable Name name(Entry e) {
        if (e instanceof Entry.Block b) {
            return b.name();
        } else if (e instanceof Entry.Drive d) {
            return d.name();
        } else if (e instanceof Entry.Variant v) {
            return v.name();
        } else if (e instanceof Entry.Family f) {
            return f.name();
        } else if (e instanceof Entry.Let l) {
            return l.name();
        } else if (e instanceof Entry.Kind k) {
            return k.name();
        } else if (e instanceof Entry.Chapter c) {
            return c.name();
        } else if (e instanceof Entry.Method m) {
            return m.name();
        } else if (e instanceof Entry.Declaration d) {
            return d.name();
        } else if (e instanceof Entry.Check c) {
            return c.name();
        } else if (e instanceof Entry.Table t) {
            return t.name();
        } else if (e instanceof Entry.Function f) {
            return f.name();
        } else if (e instanceof Entry.Choice c) {
            return c.name();
        } else if (e instanceof Entry.Quantity q) {
            return q.name();
        } else if (e instanceof Entry.Source s) {
            return s.name();
        } else if (e instanceof Entry.Limit l) {
            return l.name();
        } else if (e instanceof Entry.Role r) {
            return r.name();
        } else if (e instanceof Entry.Collect c) {
            return c.name();
        } else if (e instanceof Entry.Cases c) {
            return c.name();
        } else if (e instanceof Entry.Part p) {
            return p.name();
        }
        return null;
    }

    private static void entry(Entry e, Consumer<Node> out) {
        if (e instanceof Entry.Fact f) {
            out.accept(f.path());
            out.accept(f.value());
            all(f.notes(), out);
        } else if (e instanceof Entry.Requirement r) {
            out.accept(r.path());
            out.accept(r.bound());
            all(r.notes(), out);
        } else if (e instanceof Entry.Block b) {
            out.accept(b.head());
            one(b.name(), out);
            one(b.on(), out);
            all(b.body(), out);
        } else if (e instanceof Entry.Declaration d) {
            out.accept(d.name());
            one(d.symbol(), out);
            out.accept(d.kind());
            one(d.unit(), out);
            one(d.value(), out);
            all(d.notes(), out);
        } else if (e instanceof Entry.Drive d) {
            out.accept(d.name());
            all(d.body(), out);
        } else if (e instanceof Entry.Use u) {
            one(u.alias(), out);
        } else if (e instanceof Entry.Let l) {
            out.accept(l.name());
            out.accept(l.value());
            all(l.notes(), out);
        } else if (e instanceof Entry.Rate r) {
            out.accept(r.mesh());
            out.accept(r.method());
            one(r.edition(), out);
            one(r.as(), out);
            one(r.under(), out);
            all(r.body(), out);
        } else if (e instanceof Entry.UseReading u) {
            out.accept(u.reading());
            out.accept(u.target());
            all(u.notes(), out);
        } else if (e instanceof Entry.Require r) {
            out.accept(r.subject());
            one(r.low(), out);
            one(r.high(), out);
            one(r.tolerance(), out);
            one(r.middle(), out);
            all(r.notes(), out);
        } else if (e instanceof Entry.Assert a) {
            out.accept(a.condition());
            all(a.notes(), out);
        } else if (e instanceof Entry.Override o) {
            out.accept(o.path());
            out.accept(o.value());
            all(o.notes(), out);
        } else if (e instanceof Entry.Accept a) {
            out.accept(a.path());
            out.accept(a.bound());
            all(a.notes(), out);
        } else if (e instanceof Entry.Waive w) {
            out.accept(w.path());
            all(w.notes(), out);
        } else if (e instanceof Entry.Variant v) {
            out.accept(v.name());
            out.accept(v.base());
            all(v.body(), out);
        } else if (e instanceof Entry.Family f) {
            out.accept(f.name());
            out.accept(f.base());
            all(f.rows(), out);
        } else if (e instanceof Entry.FactFor f) {
            out.accept(f.name());
            out.accept(f.target());
            out.accept(f.value());
            all(f.notes(), out);
        } else {
            handbook(e, out);
        }
    }

    private static void handbook(Entry e, Consumer<Node> out) {
        if (e instanceof Entry.Quantity q) {
            out.accept(q.name());
            out.accept(q.unit());
            all(q.unlike(), out);
        } else if (e instanceof Entry.Source s) {
            out.accept(s.name());
        } else if (e instanceof Entry.Choice c) {
            out.accept(c.name());
            all(c.words(), out);
        } else if (e instanceof Entry.Kind k) {
            out.accept(k.name());
            one(k.parent(), out);
            all(k.body(), out);
        } else if (e instanceof Entry.Chapter c) {
            out.accept(c.name());
            out.accept(c.kind());
            all(c.body(), out);
        } else if (e instanceof Entry.Method m) {
            out.accept(m.name());
            out.accept(m.kind());
            all(m.body(), out);
        } else if (e instanceof Entry.Include i) {
            all(i.methods(), out);
        } else if (e instanceof Entry.Function f) {
            out.accept(f.name());
            all(f.parameters(), out);
            out.accept(f.kind());
            out.accept(f.value());
            all(f.notes(), out);
        } else if (e instanceof Entry.Table t) {
            out.accept(t.name());
            all(t.keys(), out);
            one(t.kind(), out);
            one(t.unit(), out);
            all(t.notes(), out);
            all(t.rows(), out);
        } else if (e instanceof Entry.Parts p) {
            all(p.names(), out);
            out.accept(p.kind());
            one(p.as(), out);
        } else if (e instanceof Entry.Part p) {
            out.accept(p.name());
            out.accept(p.kind());
        } else if (e instanceof Entry.Role r) {
            out.accept(r.name());
            out.accept(r.value());
        } else if (e instanceof Entry.Collect c) {
            out.accept(c.name());
            out.accept(c.kind());
            out.accept(c.where());
        } else if (e instanceof Entry.Cases c) {
            out.accept(c.name());
            all(c.words(), out);
        } else if (e instanceof Entry.Each x) {
            out.accept(x.collection());
            all(x.body(), out);
        } else if (e instanceof Entry.Edition x) {
            all(x.editions(), out);
        } else if (e instanceof Entry.Relation r) {
            one(r.when(), out);
            out.accept(r.equation());
            all(r.notes(), out);
        } else if (e instanceof Entry.Check c) {
            out.accept(c.name());
            one(c.kind(), out);
            out.accept(c.value());
            all(c.notes(), out);
        } else if (e instanceof Entry.Limit l) {
            out.accept(l.name());
            one(l.level(), out);
            all(l.targets(), out);
            out.accept(l.condition());
            all(l.notes(), out);
        } else if (e instanceof Entry.Applies a) {
            out.accept(a.condition());
        } else if (e instanceof Entry.Example x) {
            all(x.notes(), out);
            all(x.body(), out);
        } else if (e instanceof Entry.Gives g) {
            out.accept(g.path());
            out.accept(g.value());
            one(g.within(), out);
        }
    }

    private static void expr(Expr e, Consumer<Node> out) {
        if (e instanceof Expr.Num n) {
            one(n.unit(), out);
        } else if (e instanceof Expr.Path p) {
            all(p.names(), out);
        } else if (e instanceof Expr.Neg n) {
            out.accept(n.operand());
        } else if (e instanceof Expr.Not n) {
            out.accept(n.operand());
        } else if (e instanceof Expr.Binary b) {
            out.accept(b.left());
            out.accept(b.right());
        } else if (e instanceof Expr.Compare c) {
            all(c.operands(), out);
        } else if (e instanceof Expr.Given g) {
            out.accept(g.path());
        } else if (e instanceof Expr.Call c) {
            out.accept(c.callee());
            all(c.args(), out);
        } else if (e instanceof Expr.Each x) {
            out.accept(x.collection());
            one(x.body(), out);
        } else if (e instanceof Expr.Column c) {
            out.accept(c.row());
            out.accept(c.name());
        } else if (e instanceof Expr.Choose c) {
            one(c.subject(), out);
            all(c.arms(), out);
        } else if (e instanceof Expr.Root r) {
            out.accept(r.left());
            out.accept(r.right());
            out.accept(r.low());
            out.accept(r.high());
        } else if (e instanceof Expr.Settle s) {
            out.accept(s.value());
            out.accept(s.start());
            out.accept(s.tolerance());
            out.accept(s.most());
        } else if (e instanceof Expr.In i) {
            out.accept(i.operand());
            out.accept(i.unit());
        } else if (e instanceof Expr.Range r) {
            out.accept(r.low());
            out.accept(r.high());
        } else if (e instanceof Expr.Toleranced t) {
            out.accept(t.nominal());
            out.accept(t.low());
            out.accept(t.high());
        } else if (e instanceof Expr.Dated d) {
            out.accept(d.value());
            out.accept(d.day());
        } else if (e instanceof Expr.BlockRef b) {
            out.accept(b.kind());
            out.accept(b.name());
        }
    }

    private static void note(Note n, Consumer<Node> out) {
        if (n instanceof Note.Per p) {
            one(p.source(), out);
            one(p.on(), out);
            one(p.trust(), out);
        } else if (n instanceof Note.Until u) {
            one(u.day(), out);
        } else if (n instanceof Note.Taking t) {
            all(t.items(), out);
        } else if (n instanceof Note.Reading r) {
            out.accept(r.name());
            out.accept(r.value());
            all(r.notes(), out);
        } else if (n instanceof Note.InRange r) {
            out.accept(r.low());
            out.accept(r.high());
        } else if (n instanceof Note.Rows r) {
            all(r.words(), out);
        } else if (n instanceof Note.Worst w) {
            out.accept(w.end());
        } else if (n instanceof Note.Is i) {
            out.accept(i.what());
        } else if (n instanceof Note.Offer o) {
            out.accept(o.value());
        } else if (n instanceof Note.Within w) {
            out.accept(w.amount());
        }
    }
}
