package backcone.engine.graph;

import backcone.engine.diagnostics.Code;
import backcone.engine.model.BodyDef;
import backcone.engine.model.Decl;
import backcone.engine.model.ValueKind;
import backcone.engine.syntax.Entry;
import backcone.engine.syntax.Expr;
import backcone.engine.syntax.Note;
import java.util.ArrayList;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;
import org.jspecify.annotations.Nullable;

/**
 * Decides before any number is looked at which relation is solved for which name: as long as some relation has exactly
 * one name that is neither given nor computable, it is solved for that name. Text order decides ties.
 */
final class Relations {
    private final DriveGraph graph;
    private int epoch = 1;

    Relations(DriveGraph graph) {
        this.graph = graph;
    }

    void orient() {
        for (Element e : new ArrayList<>(graph.elements)) {
            if (graph.isSharedBlock(e)) {
                continue;
            }
            gather(e, Ctx.of(e), e.shape);
            if (e.isSpace() || !e.fixed) {
                nested(e, e, e.shape, List.of());
            }
        }
        boolean progress = true;
        while (progress) {
            progress = false;
            for (RelationUse r : graph.relations) {
                if (r.active && r.solved == null && solveFor(r)) {
                    progress = true;
                    epoch++;
                }
            }
        }
    }

    /** Relations inside {@code each}, for every combination of elements. */
    private void nested(Element space, Element at, Shape shape, List<Axis> axes) {
        for (Map.Entry<String, Shape> each : shape.each.entrySet()) {
            if (!interesting(each.getValue())) {
                continue;
            }
            Element[] holder = new Element[1];
            Object x = graph.scopes.collection(each.getKey(), new Ctx(space, axes, null), holder);
            if (!(x instanceof Val.Group g)) {
                continue;
            }
            for (Element el : g.elements()) {
                if (el.fixed && el.parent == space && axes.isEmpty()) {
                    continue; // its shape holds them already
                }
                List<Axis> more = new ArrayList<>(axes);
                more.add(new Axis(each.getKey(), el));
                Element combo = space.combo(more, graph.nextId);
                if (combo != null) {
                    gather(combo, Ctx.of(combo), combo.shape);
                    nested(space, combo, each.getValue(), more);
                }
            }
        }
    }

    private static boolean interesting(Shape s) {
        return !s.relations.isEmpty() || s.each.values().stream().anyMatch(Relations::interesting);
    }

    private void gather(Element e, Ctx ctx, Shape shape) {
        for (BodyDef.RelationDef def : shape.relations) {
            RelationUse use = new RelationUse(def, ctx);
            graph.relations.add(use);
            Expr when = def.syntax().when();
            if (when != null) {
                Val v = graph.compiler.eval(when, ctx, Frame.at(def.file(), false));
                use.active = v instanceof Val.Fixed x && x.is();
                if (v instanceof Val.Truth) {
                    graph.problems.add(
                            Code.NOT_SOLVABLE,
                            def.file(),
                            when.span(),
                            "The condition of a relation speaks of words, references and what is given, not of numbers.");
                }
            }
            if (!use.active) {
                continue;
            }
            List<Slot> all = new ArrayList<>();
            graph.slotsIn(def.syntax().equation(), ctx, all);
            use.active = complete(def.syntax().equation(), ctx);
            Set<Slot> distinct = new LinkedHashSet<>(all);
            use.slots.addAll(distinct);
            for (Slot s : distinct) {
                s.relations.add(use);
            }
        }
    }

    /** Whether every name of the relation can be reached: no reference on the way is open. */
    private boolean complete(Expr e, Ctx ctx) {
        if (e instanceof Expr.Path p) {
            Object x = graph.scopes.path(p, ctx, new Element[1], new int[1]);
            return !(x instanceof Val.Open) && !(x instanceof Val.Bad);
        } else if (e instanceof Expr.Binary b) {
            return complete(b.left(), ctx) && complete(b.right(), ctx);
        } else if (e instanceof Expr.Neg n) {
            return complete(n.operand(), ctx);
        } else if (e instanceof Expr.Compare c) {
            return c.operands().stream().allMatch(x -> complete(x, ctx));
        } else if (e instanceof Expr.Call c) {
            for (Expr a : c.args()) {
                if (!(a instanceof Expr.Each) && !complete(a, ctx)) {
                    return false;
                }
            }
        }
        return true;
    }

    private boolean solveFor(RelationUse r) {
        Slot unknown = null;
        for (Slot s : r.slots) {
            if (!available(s)) {
                if (unknown != null) {
                    return false;
                }
                unknown = s;
            }
        }
        if (unknown == null || unknown.decl.value != null || !(unknown.decl.kind instanceof ValueKind.Quantity)) {
            return false;
        }
        unknown.solvedBy = r;
        r.solved = unknown;
        return true;
    }

    // ---- availability

    boolean available(Slot s) {
        if (s.available == 1) {
            return true;
        }
        if (s.available == -1 && s.epoch == epoch) {
            return false;
        }
        if (s.probing) {
            return false;
        }
        s.probing = true;
        boolean yes;
        try {
            yes = probe(s);
        } finally {
            s.probing = false;
        }
        s.available = yes ? 1 : -1;
        s.epoch = epoch;
        return yes;
    }

    private boolean probe(Slot s) {
        Slot.Fact f = s.fact();
        if (f != null) {
            return has(f.value(), f.scope(), s);
        }
        if (s.inline != null || s.solvedBy != null) {
            return true;
        }
        Expr e = s.decl.value;
        return e != null && has(e, Ctx.of(s.owner), s, s.decl);
    }

    private boolean has(Expr e, Ctx ctx, Slot s) {
        return has(e, ctx, s, null);
    }

    private boolean has(Expr e, Ctx ctx, Slot s, @Nullable Decl decl) {
        if (e instanceof Expr.Num
                || e instanceof Expr.Str
                || e instanceof Expr.Day
                || e instanceof Expr.Given
                || e instanceof Expr.Dated
                || e instanceof Expr.BlockRef) {
            return true;
        } else if (e instanceof Expr.Path p) {
            return path(p, ctx, s, decl);
        } else if (e instanceof Expr.Binary b) {
            return has(b.left(), ctx, s, decl) && has(b.right(), ctx, s, decl);
        } else if (e instanceof Expr.Neg n) {
            return has(n.operand(), ctx, s, decl);
        } else if (e instanceof Expr.Not n) {
            return has(n.operand(), ctx, s, decl);
        } else if (e instanceof Expr.Compare c) {
            return c.operands().stream().allMatch(x -> has(x, ctx, s, decl));
        } else if (e instanceof Expr.In i) {
            return has(i.operand(), ctx, s, decl);
        } else if (e instanceof Expr.Column c) {
            return has(c.row(), ctx, s, decl);
        } else if (e instanceof Expr.Range r) {
            return has(r.low(), ctx, s, decl) && has(r.high(), ctx, s, decl);
        } else if (e instanceof Expr.Toleranced t) {
            return has(t.nominal(), ctx, s, decl);
        } else if (e instanceof Expr.Root r) {
            return has(r.low(), ctx, s, decl)
                    && has(r.high(), ctx, s, decl)
                    && hasWithUnknown(r.left(), ctx, s, decl)
                    && hasWithUnknown(r.right(), ctx, s, decl);
        } else if (e instanceof Expr.Settle x) {
            return has(x.start(), ctx, s, decl) && hasWithUnknown(x.value(), ctx, s, decl);
        } else if (e instanceof Expr.Call c) {
            return call(c, ctx, s, decl);
        } else if (e instanceof Expr.Choose c) {
            return choose(c, ctx, s, decl);
        }
        return false;
    }

    private boolean hasWithUnknown(Expr e, Ctx ctx, Slot s, @Nullable Decl decl) {
        int before = s.available;
        s.available = 1;
        try {
            return has(e, ctx, s, decl);
        } finally {
            s.available = before;
        }
    }

    private boolean path(Expr.Path p, Ctx ctx, Slot s, @Nullable Decl decl) {
        // a word of the choice asked for is that word, even where something else around it has the same name
        if (s.decl.kind instanceof ValueKind.Choice c
                && p.names().size() == 1
                && c.kind().has(p.text())) {
            return true;
        }
        Expr.Path real = p;
        if (decl != null) {
            for (Note.Taken t : decl.taking) {
                String says = t.alias() != null ? t.alias().text() : t.path().text();
                if (says.equals(p.text())) {
                    real = t.path();
                }
            }
        }
        Element[] holder = new Element[1];
        Object x = graph.scopes.path(real, ctx, holder, new int[1]);
        if (x instanceof Slot t) {
            return available(t);
        }
        if (x instanceof Shape.Spoken sp) {
            return graph.compiler.spoken(sp, holder[0]) != null;
        }
        if (x == null) {
            return real.names().size() == 1; // pi, self, a word
        }
        return !(x instanceof Val.Open) && !(x instanceof Val.Bad);
    }

    private boolean call(Expr.Call c, Ctx ctx, Slot s, @Nullable Decl decl) {
        for (Expr a : c.args()) {
            if (a instanceof Expr.Each each) {
                Val.Group g = new Builtins(graph.compiler).group(each, ctx, Frame.at(s.decl.file, false));
                if (g == null) {
                    return false;
                }
                Expr body = each.body();
                if (body == null) {
                    continue;
                }
                if (g.elements().isEmpty() && !g.kind().equals("collect")) {
                    return false;
                }
                for (Element el : g.elements()) {
                    if (!has(body, Builtins.at(ctx, g, el), s, decl)) {
                        return false;
                    }
                }
            } else if (!(a instanceof Expr.Path p
                            && p.names().size() == 1
                            && graph.shapes.library.tables.containsKey(p.text()))
                    && !has(a, ctx, s, decl)) {
                return false;
            }
        }
        return true;
    }

    private boolean choose(Expr.Choose c, Ctx ctx, Slot s, @Nullable Decl decl) {
        Expr subject = c.subject();
        Frame f = Frame.at(s.decl.file, false);
        if (subject != null) {
            if (!has(subject, ctx, s, decl)) {
                return false;
            }
            if (!structural(subject, ctx)) {
                return arms(c, ctx, s, decl);
            }
            Val v = graph.compiler.eval(subject, ctx, f);
            if (v instanceof Val.Open || v instanceof Val.Bad || v instanceof Val.Picked || v instanceof Val.Num) {
                return !(v instanceof Val.Open) && arms(c, ctx, s, decl);
            }
            for (Expr.Arm a : c.arms()) {
                Expr when = a.when();
                if (when == null || (graph.compiler.matches(v, when, ctx, f) instanceof Val.Fixed x && x.is())) {
                    return has(a.value(), ctx, s, decl);
                }
            }
            return false;
        }
        for (Expr.Arm a : c.arms()) {
            Expr when = a.when();
            if (when == null) {
                return has(a.value(), ctx, s, decl);
            }
            if (structural(when, ctx)) {
                if (graph.compiler.eval(when, ctx, f) instanceof Val.Fixed x) {
                    if (x.is()) {
                        return has(a.value(), ctx, s, decl);
                    }
                    continue;
                }
            }
            if (!has(when, ctx, s, decl) || !has(a.value(), ctx, s, decl)) {
                return false;
            }
        }
        return false;
    }

    private boolean arms(Expr.Choose c, Ctx ctx, Slot s, @Nullable Decl decl) {
        return c.arms().stream().allMatch(a -> has(a.value(), ctx, s, decl));
    }

    /** Whether an expression is settled without looking at numbers. */
    boolean structural(Expr e, Ctx ctx) {
        if (e instanceof Expr.Num || e instanceof Expr.Str || e instanceof Expr.Given) {
            return true;
        } else if (e instanceof Expr.Path p) {
            Object x = graph.scopes.path(p, ctx, new Element[1], new int[1]);
            if (x instanceof Slot s) {
                return !(s.decl.kind instanceof ValueKind.Quantity) && !(s.decl.kind instanceof ValueKind.Inferred);
            }
            return x == null
                    || x instanceof Element
                    || x instanceof Entry.Role
                    || x instanceof Val.Ref
                    || x instanceof Val.Word
                    || x instanceof Val.Text;
        } else if (e instanceof Expr.Binary b) {
            return (b.op() == Expr.Op.AND || b.op() == Expr.Op.OR)
                    && structural(b.left(), ctx)
                    && structural(b.right(), ctx);
        } else if (e instanceof Expr.Not n) {
            return structural(n.operand(), ctx);
        } else if (e instanceof Expr.Compare c) {
            return c.operands().stream().allMatch(x -> structural(x, ctx));
        } else if (e instanceof Expr.Call c) {
            String n = c.callee().text();
            if (n.equals("count")) {
                return c.args().size() == 1 && c.args().get(0) instanceof Expr.Each x && x.body() == null;
            }
            return n.equals("upstream") || n.equals("downstream") || n.equals("case_at_hand");
        }
        return false;
    }
}
