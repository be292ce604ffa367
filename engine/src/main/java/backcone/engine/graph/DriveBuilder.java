package backcone.engine.graph;

import backcone.engine.diagnostics.Code;
import backcone.engine.model.BodyDef;
import backcone.engine.model.Suggest;
import backcone.engine.syntax.Entry;
import backcone.engine.syntax.Expr;
import backcone.engine.syntax.Note;
import backcone.engine.text.FileId;
import java.util.ArrayList;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;
import org.jspecify.annotations.Nullable;

/** Builds the graph of a drive: elements, facts, ratings, relations, then everything that is always asked for. */
public final class DriveBuilder {
    private DriveBuilder() {}

    /** The cases that ratings of this drive use, the first being the one for requirements of the drive itself. */
    public static List<@Nullable String> casesInUse(DriveSource source) {
        Set<@Nullable String> out = new LinkedHashSet<>();
        String first = defaultCase(source);
        out.add(first);
        for (DriveSource.Layer l : source.layers()) {
            for (Entry e : l.body()) {
                if (e instanceof Entry.Rate r && r.under() != null && !r.under().isHole()) {
                    out.add(r.under().text());
                }
            }
        }
        return new ArrayList<>(out);
    }

    private static @Nullable String defaultCase(DriveSource source) {
        String first = null;
        for (DriveSource.Layer l : source.layers()) {
            for (Entry e : l.body()) {
                if (e instanceof Entry.Block b) {
                    String head = b.head().text();
                    String name = head.equals("duty")
                            ? "rated"
                            : b.name() == null ? null : b.name().text();
                    if ((head.equals("duty") || head.equals("case") || head.equals("spectrum")) && name != null) {
                        if (name.equals("rated")) {
                            return name;
                        }
                        if (first == null) {
                            first = name;
                        }
                    }
                }
            }
        }
        return first;
    }

    public static DriveGraph build(
            Shapes shapes,
            DriveGraph.Top top,
            DriveSource source,
            @Nullable String caseName,
            Problems problems,
            boolean traced) {
        DriveGraph g = new DriveGraph(shapes, top, problems, traced);
        Element drive = new Element(0, source.name(), shapes.of("drive"), null, "");
        drive.file = source.file();
        drive.span = source.span();
        drive.title = source.title();
        g.drive = drive;
        g.elements.add(drive);
        Elaborator el = new Elaborator(g);
        el.furnish(drive);
        boolean first = true;
        for (DriveSource.Layer l : source.layers()) {
            for (Entry e : l.body()) {
                if (e instanceof Entry.Block b && b.head().text().equals("gear") && b.name() != null) {
                    g.sharedBlocks.put(b.name().text(), new DriveGraph.TopEntry(l.file(), b, Map.of()));
                }
            }
            if (!first) {
                el.overlaid();
            }
            el.queue(drive, l.body(), l.file());
            first = false;
        }
        if (caseName != null
                && drive.named.get(caseName) instanceof Element k
                && shapes.library.isKind(k.kind(), "case")) {
            g.activeCase = k;
        }
        el.drain();
        ratings(g, el, source, caseName);
        el.drain();
        finish(g, new Requirements(g, source), java.util.Objects.equals(caseName, defaultCase(source)));
        return g;
    }

    private static void ratings(DriveGraph g, Elaborator el, DriveSource source, @Nullable String caseName) {
        String standard = defaultCase(source);
        boolean first = true;
        for (DriveSource.Layer l : source.layers()) {
            for (Entry e : l.body()) {
                if (!(e instanceof Entry.Rate r)) {
                    continue;
                }
                String under = r.under() == null || r.under().isHole()
                        ? standard
                        : r.under().text();
                if (under != null
                        && !(g.drive.named.get(under) instanceof Element k
                                && g.shapes.library.isKind(k.kind(), "case"))) {
                    if (java.util.Objects.equals(caseName, standard) && r.under() != null) {
                        List<String> cases = new ArrayList<>();
                        g.allOfKind("case").forEach(c -> cases.add(c.name));
                        g.problems.add(
                                Code.UNKNOWN_NAME,
                                l.file(),
                                r.under().span(),
                                "There is no case `" + under + "`." + Suggest.sentence(under, cases));
                    }
                    continue;
                }
                if (java.util.Objects.equals(under, caseName)) {
                    el.rate(r, l.file(), !first);
                }
            }
            first = false;
        }
    }

    /** Orients relations, then compiles what is always asked for: given values, checks, limits, agreements. */
    static void finish(DriveGraph g, @Nullable Requirements requirements, boolean ofDrive) {
        new Relations(g).orient();
        {
            for (Element e : new ArrayList<>(g.elements)) {
                for (Slot s : e.touched()) {
                    if (s.fact() != null) {
                        g.compiler.value(s);
                    }
                }
                for (Object x : new ArrayList<>(e.named.values())) {
                    if (x instanceof Slot s) {
                        g.compiler.value(s);
                    }
                }
            }
            for (DriveGraph.RateUse r : new ArrayList<>(g.rates)) {
                if (r.space() != null) {
                    for (Slot s : checks(g, r.space())) {
                        g.compiler.value(s);
                    }
                }
            }
            for (Element e : new ArrayList<>(g.elements)) {
                if (g.isSharedBlock(e)) {
                    continue;
                }
                limits(g, e, Ctx.of(e), e.shape, e);
                if (e.isSpace() || !e.fixed) {
                    nestedLimits(g, e, e.shape, List.of());
                }
            }
            for (RelationUse r : g.relations) {
                if (r.solved != null && r.solved.isWhole()) {
                    g.compiler.value(r.solved);
                }
            }
            agreements(g);
            if (requirements != null) {
                requirements.compile(ofDrive);
            }
            // limits of single values, where those values were asked for
            g.postponed.forEach(Runnable::run);
            g.postponed.clear();
        }
        unusedLets(g);
        g.tape.finish();
    }

    /** A name of the drive that nothing speaks of. */
    private static void unusedLets(DriveGraph g) {
        for (Object x : g.drive.named.values()) {
            if (x instanceof Slot s
                    && s.decl.role == backcone.engine.model.Decl.Role.LET
                    && !g.usedDecls.contains(s.decl)) {
                g.problems.add(
                        Code.UNUSED_NAME, s.decl.file, s.decl.nameNode.span(), "Nothing uses `" + s.decl.name + "`.");
            }
        }
    }

    /** The checks of a rating, the pair's first, then each member's. */
    public static List<Slot> checks(DriveGraph g, Element space) {
        List<Slot> out = new ArrayList<>();
        checks(g, space, space, space.shape, List.of(), out);
        return out;
    }

    private static void checks(DriveGraph g, Element space, Element at, Shape s, List<Axis> axes, List<Slot> out) {
        for (backcone.engine.model.Decl d : s.decls) {
            if (d.role == backcone.engine.model.Decl.Role.CHECK
                    && at.own(d.name) instanceof Slot slot
                    && slot.decl == d) {
                out.add(slot);
            }
        }
        for (Map.Entry<String, Shape> each : s.each.entrySet()) {
            if (Checks.of(each.getValue()).isEmpty()) {
                continue;
            }
            if (g.scopes.collection(each.getKey(), new Ctx(space, axes, null), new Element[1])
                    instanceof Val.Group group) {
                for (Element el : group.elements()) {
                    List<Axis> more = new ArrayList<>(axes);
                    more.add(new Axis(each.getKey(), el));
                    Element combo = space.combo(more, g.nextId);
                    if (combo != null) {
                        checks(g, space, combo, each.getValue(), more, out);
                    }
                }
            }
        }
    }

    private static boolean limited(Shape s) {
        return !s.limits.isEmpty()
                || !s.applies.isEmpty()
                || s.each.values().stream().anyMatch(DriveBuilder::limited);
    }

    private static void nestedLimits(DriveGraph g, Element space, Shape shape, List<Axis> axes) {
        for (Map.Entry<String, Shape> each : shape.each.entrySet()) {
            if (!limited(each.getValue())) {
                continue;
            }
            if (!(g.scopes.collection(each.getKey(), new Ctx(space, axes, null), new Element[1])
                    instanceof Val.Group group)) {
                continue;
            }
            for (Element el : group.elements()) {
                if (el.fixed && el.parent == space && axes.isEmpty()) {
                    continue;
                }
                List<Axis> more = new ArrayList<>(axes);
                more.add(new Axis(each.getKey(), el));
                Element combo = space.combo(more, g.nextId);
                if (combo != null) {
                    limits(g, combo, Ctx.of(combo), combo.shape, combo);
                    nestedLimits(g, space, each.getValue(), more);
                }
            }
        }
    }

    private static void limits(DriveGraph g, Element e, Ctx ctx, Shape shape, Element at) {
        for (BodyDef.LimitDef l : shape.limits) {
            if (!l.ofMethod() && !l.syntax().targets().isEmpty()) {
                g.postponed.add(() -> {
                    if (asked(g, l, ctx)) {
                        limit(g, l, ctx, at);
                    }
                });
            } else {
                limit(g, l, ctx, at);
            }
        }
        for (Shape.Applies a : shape.applies) {
            Val v = g.compiler.eval(a.syntax().condition(), ctx, Frame.at(a.body().file, false));
            g.applies.add(new DriveGraph.AppliesUse(
                    a.syntax(),
                    a.body().file,
                    at,
                    v instanceof Val.Truth t ? t.register() : -1,
                    !(v instanceof Val.Fixed x) || x.is()));
        }
    }

    /** Whether something has asked for one of the values that a limit is about. */
    private static boolean asked(DriveGraph g, BodyDef.LimitDef l, Ctx ctx) {
        for (backcone.engine.syntax.Name n : l.syntax().targets()) {
            Object x = g.scopes.path(new Expr.Path(List.of(n), n.span()), ctx, new Element[1], new int[1]);
            if (!(x instanceof Slot s) || s.value() != null) {
                return true;
            }
        }
        return false;
    }

    private static void limit(DriveGraph g, BodyDef.LimitDef l, Ctx ctx, Element at) {
        {
            Frame f = Frame.at(l.file(), false);
            Expr condition = l.syntax().condition();
            Val v = g.compiler.eval(condition, ctx, f);
            int register = v instanceof Val.Truth t ? t.register() : -1;
            boolean holds = !(v instanceof Val.Fixed x) || x.is();
            int left = -1;
            int right = -1;
            Expr.Compare compare = null;
            backcone.engine.units.Unit unit = null;
            if (register >= 0
                    && condition instanceof Expr.Compare c
                    && c.operands().size() == 2) {
                Val a = g.compiler.eval(c.operands().get(0), ctx, f);
                Val b = g.compiler.eval(c.operands().get(1), ctx, f);
                if (a instanceof Val.Num x && b instanceof Val.Num y) {
                    left = x.register();
                    right = y.register();
                    compare = c;
                    unit = x.dimension() == null || x.dimension().isNone() ? null : g.shownUnit(x.dimension());
                }
            }
            List<Slot> targets = new ArrayList<>();
            for (backcone.engine.syntax.Name n : l.syntax().targets()) {
                Object x = g.scopes.path(new Expr.Path(List.of(n), n.span()), ctx, new Element[1], new int[1]);
                if (x instanceof Slot s) {
                    g.compiler.value(s);
                    targets.add(s);
                }
            }
            g.limits.add(new DriveGraph.LimitUse(l, at, register, holds, targets, left, right, compare, unit));
        }
    }

    private static void agreements(DriveGraph g) {
        Relations known = new Relations(g);
        for (RelationUse r : g.relations) {
            if (!r.active
                    || r.solved != null
                    || !(r.def.syntax().equation() instanceof Expr.Compare c)
                    || c.operands().size() != 2) {
                continue;
            }
            if (!r.slots.stream().allMatch(known::available)) {
                continue;
            }
            Frame f = Frame.at(r.def.file(), false);
            Val a = g.compiler.eval(c.operands().get(0), r.ctx, f);
            Val b = g.compiler.eval(c.operands().get(1), r.ctx, f);
            if (a instanceof Val.Num x && b instanceof Val.Num y) {
                double within = 0.001;
                for (Note n : r.def.syntax().notes()) {
                    if (n instanceof Note.Within w
                            && g.compiler.eval(w.amount(), r.ctx, f) instanceof Val.Num t
                            && t.isConstant()) {
                        within = t.constant();
                    }
                }
                g.agreements.add(
                        new DriveGraph.Agreement(r.def, r.ctx.self(), x.register(), y.register(), within, r.slots));
            }
        }
    }

    /** A file's own top-level blocks, so that a library of materials is checked without a drive. */
    public static DriveGraph library(
            Shapes shapes, DriveGraph.Top top, FileId file, List<String> names, Problems problems) {
        DriveGraph g = new DriveGraph(shapes, top, problems, false);
        Element drive = new Element(0, "", shapes.of("drive"), null, "");
        drive.file = file;
        g.drive = drive;
        new Elaborator(g).furnish(drive);
        for (String n : names) {
            Object x = g.top(n);
            if (x instanceof Slot s) {
                g.compiler.value(s);
            }
        }
        finish(g, null, false);
        return g;
    }
}
