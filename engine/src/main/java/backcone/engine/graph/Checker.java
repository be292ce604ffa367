package backcone.engine.graph;

import backcone.engine.diagnostics.Code;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.model.BodyDef;
import backcone.engine.model.ChoiceKind;
import backcone.engine.model.Decl;
import backcone.engine.model.FunctionDef;
import backcone.engine.model.KindDef;
import backcone.engine.model.MethodDef;
import backcone.engine.model.ValueKind;
import backcone.engine.syntax.Entry;
import backcone.engine.syntax.Expr;
import backcone.engine.syntax.Note;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import backcone.engine.units.Dimension;
import java.util.ArrayList;
import java.util.HashMap;
import java.util.HashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;
import org.jspecify.annotations.Nullable;

/**
 * Checks the names and dimensions of every declared equation, not only of those that are asked for: each is read once on
 * sample elements, with every arm of every choice.
 */
public final class Checker {
    private final DriveGraph graph;
    private final Map<String, Element> samples = new HashMap<>();
    private final Map<Slot, Val> types = new HashMap<>();
    private final Set<Slot> asking = new HashSet<>();
    private final Map<FunctionDef, Boolean> functions = new HashMap<>();

    Checker(DriveGraph graph) {
        this.graph = graph;
    }

    /** All findings in the kinds, chapters, methods and functions of a library. */
    public static List<backcone.engine.diagnostics.Diagnostic> check(Shapes shapes) {
        Problems problems = new Problems();
        DriveGraph graph = new DriveGraph(shapes, new NoTexts(), problems, false);
        graph.checking = true;
        graph.checker().all();
        return problems.all();
    }

    /** No texts around: handbook files refer to each other by name only. */
    private static final class NoTexts implements DriveGraph.Top {
        @Override
        public DriveGraph.@Nullable TopEntry find(String name) {
            return null;
        }

        @Override
        public java.util.Collection<String> names() {
            return List.of();
        }

        @Override
        public String text(FileId file, Span span) {
            return "…";
        }
    }

    private void all() {
        Elaborator el = new Elaborator(graph);
        el.furnish(graph.drive);
        graph.elements.add(graph.drive);
        graph.activeCase = sample("case");
        element(graph.drive, new ArrayList<>());
        for (KindDef k : graph.shapes.library.kinds.values()) {
            if (k.name().equals("drive") || isPart(k.name())) {
                continue;
            }
            Element e = sample(k.name());
            if (e != null) {
                whole(e);
            }
        }
        // a building block without examples of its own is read inside the methods that include it
        Set<MethodDef> included = new HashSet<>();
        for (List<MethodDef> ms : graph.shapes.library.methods.values()) {
            for (MethodDef m : ms) {
                for (Entry.Include i : m.body().includes) {
                    i.methods().forEach(n -> {
                        MethodDef other = graph.shapes.library.method(n.text(), m.kind());
                        if (other != null && other != m) {
                            included.add(other);
                        }
                    });
                }
            }
        }
        for (List<MethodDef> ms : graph.shapes.library.methods.values()) {
            for (MethodDef m : ms) {
                Element mesh = sample(m.kind());
                if (mesh != null && !(included.contains(m) && m.body().examples.isEmpty())) {
                    Element space = el.space(
                            mesh,
                            m,
                            m.name(),
                            m.body().editions.isEmpty()
                                    ? null
                                    : m.body().editions.get(0),
                            m.file(),
                            Span.NONE);
                    element(space, new ArrayList<>());
                    mesh.named.remove(m.name());
                    mesh.ratings.clear();
                }
            }
        }
        for (FunctionDef f : graph.shapes.library.functions.values()) {
            function(f);
        }
    }

    /** An element with its parts; of a fixed collection one member stands for all. */
    private void whole(Element e) {
        element(e, new ArrayList<>());
        Set<String> done = new HashSet<>();
        for (Object x : new ArrayList<>(e.named.values())) {
            if (x instanceof Element part
                    && part.parent == e
                    && part.shape != Shapes.WORD
                    && (!part.fixed || done.add(part.collection))) {
                whole(part);
            }
        }
    }

    /** Kinds that stand only inside others are read there, where the names around them exist. */
    private boolean isPart(String kind) {
        for (KindDef k : graph.shapes.library.kinds.values()) {
            Shape s = graph.shapes.of(k.name());
            for (Entry.Parts p : s.parts) {
                if (Shape.fixed(p) && related(kind, p.kind().text())) {
                    return true;
                }
            }
            for (Entry.Part p : s.part) {
                if (!k.name().equals("drive") && related(kind, p.kind().text())) {
                    return true;
                }
            }
        }
        return false;
    }

    private boolean related(String a, String b) {
        return graph.shapes.library.isKind(a, b) || graph.shapes.library.isKind(b, a);
    }

    private void function(FunctionDef f) {
        List<Val> args = new ArrayList<>();
        List<Expr> exprs = new ArrayList<>();
        for (ValueKind k : f.parameters()) {
            args.add(byKind(k, null));
            exprs.add(f.syntax().value());
        }
        if (functions.put(f, true) == null) {
            graph.compiler.callFunction(
                    f,
                    args,
                    new Expr.Call(
                            new Expr.Path(
                                    List.of(f.syntax().name()),
                                    f.syntax().name().span()),
                            exprs,
                            f.syntax().name().span()),
                    Frame.at(f.file(), false));
        }
    }

    /** One element of a kind, with the drive around it. */
    @Nullable
    Element sample(String kind) {
        Element known = samples.get(kind);
        if (known != null) {
            return known;
        }
        if (!graph.shapes.library.kinds.containsKey(kind)) {
            return null;
        }
        String collection = "";
        for (Entry.Parts p : graph.drive.shape.parts) {
            if (!Shape.fixed(p) && graph.shapes.library.isKind(kind, p.kind().text())) {
                collection = p.names().get(0).text();
            }
        }
        Element e = new Element(graph.nextId[0]++, kind, graph.shapes.of(kind), graph.drive, collection);
        samples.put(kind, e);
        new Elaborator(graph).furnish(e);
        graph.elements.add(e);
        return e;
    }

    /** The scope for what is said of each element of a collection, on a sample of it. */
    Ctx sample(Val.Group g, Ctx ctx) {
        if (!g.elements().isEmpty()) {
            return Builtins.at(ctx, g, g.elements().get(0));
        }
        Element e = sample(collectedKind(g));
        return e == null ? ctx : ctx.with(new Axis(g.collection(), e));
    }

    private String collectedKind(Val.Group g) {
        if (!g.kind().equals("collect")) {
            return g.kind();
        }
        for (KindDef k : graph.shapes.library.kinds.values()) {
            if (graph.shapes.of(k.name()).names.get(g.collection()) instanceof Entry.Collect c) {
                return c.kind().text();
            }
        }
        return "";
    }

    private void element(Element e, List<Axis> axes) {
        Shape s = e.shape;
        for (Decl d : s.clashes) {
            graph.problems.add(
                    Code.HIDDEN_NAME,
                    d.file,
                    d.nameNode.span(),
                    "`" + d.symbolOrName() + "` is declared twice for the same element.");
        }
        if (e.isSpace() || (e.space != null && e.space.isSpace())) {
            hidden(e);
        }
        for (Decl d : s.decls) {
            Object x = e.own(d.symbolOrName());
            Slot slot = x instanceof Slot t && t.decl == d ? t : new Slot(e, d);
            decl(slot);
        }
        Ctx ctx = Ctx.of(e);
        for (BodyDef.RelationDef r : s.relations) {
            Frame f = Frame.at(r.file(), false);
            if (r.syntax().when() != null) {
                graph.compiler.eval(r.syntax().when(), ctx, f);
            }
            graph.compiler.eval(r.syntax().equation(), ctx, f);
            solvable(r, ctx);
        }
        for (BodyDef.LimitDef l : s.limits) {
            graph.compiler.eval(l.syntax().condition(), ctx, Frame.at(l.file(), false));
        }
        for (Shape.Applies a : s.applies) {
            graph.compiler.eval(a.syntax().condition(), ctx, Frame.at(a.body().file, false));
        }
        Element space = e.space != null ? e.space : e;
        for (Map.Entry<String, Shape> each : s.each.entrySet()) {
            Object g = graph.scopes.collection(each.getKey(), ctx, new Element[1]);
            Val v = g instanceof Val.Group x ? x : g instanceof Entry.Collect c ? graph.compiler.collect(c, e) : null;
            if (!(v instanceof Val.Group group)) {
                continue;
            }
            Element el = !group.elements().isEmpty() ? group.elements().get(0) : sample(collectedKind(group));
            if (el == null || (el.fixed && el.parent == space && axes.isEmpty())) {
                continue;
            }
            List<Axis> more =
                    new ArrayList<>(e.space != null ? e.axes : e.fixed ? List.of(new Axis(e.collection, e)) : axes);
            more.add(new Axis(each.getKey(), el));
            Element at = e.fixed && e.parent != null ? e.parent : space;
            Element combo = at.combo(more, graph.nextId);
            if (combo != null && combo != e) {
                element(combo, more);
            }
        }
    }

    /** A relation must be solvable for each of its names: every one is reached by + - * / and fixed powers, once. */
    private void solvable(BodyDef.RelationDef r, Ctx ctx) {
        if (!(r.syntax().equation() instanceof Expr.Compare c)
                || c.operands().size() != 2
                || c.ops().get(0) != Expr.Cmp.EQ) {
            graph.problems.add(
                    Code.NOT_SOLVABLE,
                    r.file(),
                    r.syntax().equation().span(),
                    "A relation says that two things are equal: `relation : a * b == c`.");
            return;
        }
        for (Expr side : c.operands()) {
            Expr stuck = stuck(side, true);
            if (stuck != null) {
                graph.problems.add(
                        Code.NOT_SOLVABLE,
                        r.file(),
                        stuck.span(),
                        "A relation is solved by undoing + - * / and fixed powers; a name can't be brought out of this.");
            }
        }
    }

    /** The part of one side that hides a name, or null. */
    private static @Nullable Expr stuck(Expr e, boolean reachable) {
        if (e instanceof Expr.Path) {
            return reachable ? null : e;
        } else if (e instanceof Expr.Binary b) {
            boolean power = b.op() == Expr.Op.POW;
            Expr left = stuck(b.left(), reachable);
            return left != null ? left : stuck(b.right(), reachable && !power);
        } else if (e instanceof Expr.Neg n) {
            return stuck(n.operand(), reachable);
        }
        // what a function or a choice is made of is taken as known; sums are written out
        return null;
    }

    private static boolean computes(Expr e) {
        if (e instanceof Expr.Choose c) {
            return c.arms().stream().anyMatch(a -> computes(a.value()));
        }
        return e instanceof Expr.Binary
                || e instanceof Expr.Root
                || e instanceof Expr.Settle
                || (e instanceof Expr.Call c
                        && !Set.of("upstream", "downstream", "case_at_hand", "count")
                                .contains(c.callee().text()));
    }

    /** A method must not declare again what its mesh, the members or the drive have: formulas would silently take the other. */
    private void hidden(Element e) {
        Element space = e.isSpace() ? e : java.util.Objects.requireNonNull(e.space);
        List<Shape> around = new ArrayList<>();
        Element mesh = space.parent;
        if (mesh != null) {
            around.add(mesh.shape);
        }
        for (Axis a : e.axes) {
            around.add(a.element().shape);
        }
        around.add(graph.drive.shape);
        for (Decl d : e.shape.decls) {
            for (Shape s : around) {
                for (String n : d.symbol == null ? List.of(d.name) : List.of(d.name, d.symbol)) {
                    if (s.names.get(n) instanceof Shape.Member m) {
                        graph.problems.add(Diagnostic.of(
                                        Code.HIDDEN_NAME,
                                        d.file,
                                        d.nameNode.span(),
                                        "`" + n + "` is there already (" + m.decl().owner
                                                + "); give this value a name of its own.")
                                .withRelated(m.decl().file, m.decl().nameNode.span(), "declared here"));
                    }
                }
            }
        }
    }

    private void decl(Slot s) {
        Decl d = s.decl;
        Expr e = d.value;
        Ctx ctx = Ctx.of(s.owner);
        if (e != null && d.role == Decl.Role.QUANTITY && d.per == null && computes(e)) {
            graph.problems.add(
                    Code.NO_SOURCE,
                    d.file,
                    d.nameNode.span(),
                    "`" + d.symbolOrName()
                            + "` is an equation without a source; say where it comes from: `per SOURCE \"clause\", agreed`.");
        }
        if (e != null) {
            equation(s, e, ctx);
        }
        for (Note.Reading r : d.readings) {
            equation(s, r.value(), ctx);
        }
        Note.InRange range = d.range;
        if (range != null) {
            fits(s, graph.compiler.eval(range.low(), ctx, Frame.at(d.file, false)), range.low());
            fits(s, graph.compiler.eval(range.high(), ctx, Frame.at(d.file, false)), range.high());
        }
        if (d.offer != null) {
            graph.compiler.eval(d.offer, ctx, new Frame(s, d.file, Frame.NOTHING, false));
        }
        for (Note.Taken t : d.taking) {
            graph.compiler.unit(t.unit(), Frame.at(d.file, false));
        }
    }

    private void equation(Slot s, Expr e, Ctx ctx) {
        Decl d = s.decl;
        Frame f = new Frame(s, d.file, d.taking, false);
        if (d.kind instanceof ValueKind.Choice c
                && e instanceof Expr.Path p
                && p.names().size() == 1
                && c.kind().has(p.text())) {
            return;
        }
        Val v = graph.compiler.eval(e, ctx, f);
        if (d.kind instanceof ValueKind.Quantity && d.resultUnit != null) {
            if (v instanceof Val.Num n
                    && n.dimension() != null
                    && !n.dimension().isNone()) {
                graph.problems.add(
                        Code.DIMENSION_MISMATCH,
                        d.file,
                        e.span(),
                        "With `in " + d.resultUnit.text() + "` the right side must be a pure number; it has dimension "
                                + n.dimension() + ".");
            }
            return;
        }
        fits(s, v, e);
    }

    private void fits(Slot s, Val v, Expr e) {
        if (s.decl.kind instanceof ValueKind.Quantity q
                && v instanceof Val.Num n
                && n.dimension() != null
                && n.dimension() != q.kind().shown().dimension()) {
            graph.problems.add(
                    Code.DIMENSION_MISMATCH,
                    s.decl.file,
                    e.span(),
                    "`" + s.decl.symbolOrName() + "` is declared as " + q.kind().name() + " ("
                            + q.kind().shown().dimension() + "); this gives " + n.dimension() + ".");
        } else if (s.decl.kind instanceof ValueKind.Quantity
                && !(v instanceof Val.Num)
                && !(v instanceof Val.Open)
                && !(v instanceof Val.Bad)) {
            graph.problems.add(
                    Code.WRONG_FORM,
                    s.decl.file,
                    e.span(),
                    "`" + s.decl.symbolOrName() + "` is a number; this is " + Compiler.what(v) + ".");
        }
    }

    // ---- what a name is, without its value

    Val typeOf(Slot s) {
        Val known = types.get(s);
        if (known != null) {
            return known;
        }
        Val v;
        if (s.decl.kind instanceof ValueKind.Inferred && s.decl.value != null) {
            if (!asking.add(s)) {
                return new Val.Bad();
            }
            v = graph.compiler.eval(s.decl.value, Ctx.of(s.owner), new Frame(s, s.decl.file, s.decl.taking, false));
            asking.remove(s);
        } else {
            v = byKind(s.decl.kind, s);
        }
        types.put(s, v);
        return v;
    }

    private Val byKind(ValueKind k, @Nullable Slot s) {
        if (k instanceof ValueKind.Quantity q) {
            return new Val.Num(0, q.kind().shown().dimension(), Double.NaN);
        } else if (k instanceof ValueKind.Choice c) {
            return new Val.Picked(0, List.copyOf(c.kind().words().keySet()), c.kind());
        } else if (k instanceof ValueKind.Reference r) {
            Element e = sample(r.kind());
            return e == null ? new Val.Bad() : new Val.Ref(e);
        } else if (k instanceof ValueKind.Text) {
            return new Val.Text("");
        } else if (k instanceof ValueKind.Day) {
            return new Val.Day("");
        }
        return new Val.Bad();
    }

    /** Every arm is read; all must give the same sort of value. */
    Val choose(Compiler compiler, Expr.Choose c, Ctx ctx, Frame f) {
        Expr subject = c.subject();
        Val s = subject == null ? null : compiler.eval(subject, ctx, f);
        boolean otherwise = false;
        Val result = null;
        Set<String> said = new HashSet<>();
        for (Expr.Arm a : c.arms()) {
            Expr when = a.when();
            if (when == null) {
                otherwise = true;
            } else if (s == null) {
                compiler.eval(when, ctx, f);
            } else if (when instanceof Expr.Path p && p.names().size() == 1) {
                said.add(p.text());
                if (s instanceof Val.Picked w && w.kind() != null && !w.kind().has(p.text())) {
                    compiler.problem(
                            Code.UNKNOWN_CHOICE,
                            f,
                            p.span(),
                            "`" + p.text() + "` is none of "
                                    + Compiler.list(w.kind().words().keySet()) + ".");
                }
            }
            Val v = arm(compiler, a.value(), ctx, f);
            if (result == null || result instanceof Val.Bad || (result instanceof Val.Num n && n.dimension() == null)) {
                result = v;
            } else if (v instanceof Val.Num n && result instanceof Val.Num r) {
                Dimension d = compiler.same(r.dimension(), n.dimension(), a.value(), f, "alternatives of one value");
                result = new Val.Num(0, d, Double.NaN);
            }
        }
        if (s instanceof Val.Picked w
                && w.kind() != null
                && !otherwise
                && said.size() < w.kind().words().size()) {
            missing(compiler, w.kind(), said, c, f);
        }
        return result == null ? new Val.Bad() : result;
    }

    private static void missing(Compiler compiler, ChoiceKind kind, Set<String> said, Expr.Choose c, Frame f) {
        List<String> left = new ArrayList<>(kind.words().keySet());
        left.removeAll(said);
        compiler.problem(
                Code.INCOMPLETE_CHOICE,
                f,
                c.span(),
                "This choice says nothing for " + Compiler.list(left) + "; name every word or add `else`.");
    }

    private Val arm(Compiler compiler, Expr e, Ctx ctx, Frame f) {
        Slot s = f.slot;
        if (s != null
                && s.decl.kind instanceof ValueKind.Choice k
                && e instanceof Expr.Path p
                && p.names().size() == 1
                && k.kind().has(p.text())) {
            return new Val.Word(p.text(), k.kind());
        }
        return compiler.eval(e, ctx, f);
    }
}
