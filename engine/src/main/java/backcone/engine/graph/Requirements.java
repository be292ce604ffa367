package backcone.engine.graph;

import backcone.engine.diagnostics.Code;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.model.English;
import backcone.engine.model.Suggest;
import backcone.engine.model.ValueKind;
import backcone.engine.syntax.Entry;
import backcone.engine.syntax.Expr;
import backcone.engine.syntax.Name;
import backcone.engine.syntax.Note;
import backcone.engine.text.FileId;
import backcone.engine.units.Dimension;
import backcone.engine.units.Unit;
import backcone.engine.units.Units;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;
import org.jspecify.annotations.Nullable;

/** Requirements, assertions and acceptances of a drive: found, unit-checked and put on the tape. */
final class Requirements {
    private final DriveGraph graph;
    private final DriveSource source;
    private int unnamed;

    Requirements(DriveGraph graph, DriveSource source) {
        this.graph = graph;
        this.source = source;
    }

    void compile(boolean ofDrive) {
        for (DriveGraph.RateUse r : graph.rates) {
            rate(r);
        }
        if (ofDrive) {
            List<RequirementUse> below = new ArrayList<>();
            for (DriveSource.Layer l : source.layers()) {
                List<RequirementUse> here = new ArrayList<>();
                for (Entry e : l.body()) {
                    RequirementUse u = e instanceof Entry.Require r
                            ? require(r, l.file())
                            : e instanceof Entry.Assert a ? asserted(a, l.file()) : null;
                    if (u != null) {
                        here.add(u);
                    }
                }
                // a variant's line for a fact replaces that of its base
                below.removeIf(old -> here.stream()
                        .anyMatch(u -> u.id.equals(old.id) && u.asserted == old.asserted && u.slot != null));
                below.addAll(here);
            }
            graph.requirements.addAll(below);
        }
        for (RequirementUse u : graph.requirements) {
            tight(u);
        }
        acceptances();
    }

    // ---- checks of ratings

    private void rate(DriveGraph.RateUse r) {
        Map<String, RequirementUse> found = new LinkedHashMap<>();
        Map<String, Boolean> isMember = new LinkedHashMap<>();
        for (Entry e : r.syntax().body()) {
            if (!(e instanceof Entry.Requirement q) || q.path().names().stream().anyMatch(Name::isHole)) {
                continue;
            }
            for (RequirementUse u : check(r, q)) {
                boolean member = q.path().names().size() > 1;
                RequirementUse old = found.get(u.id);
                if (old != null && java.util.Objects.equals(isMember.get(u.id), member)) {
                    graph.problems.add(Diagnostic.of(
                                    Code.DUPLICATE_REQUIREMENT,
                                    r.file(),
                                    q.span(),
                                    "`" + q.path().text() + "` is required twice; keep one line.")
                            .withRelated(r.file(), old.span(), "required here"));
                    continue;
                }
                if (old == null || member) {
                    found.put(u.id, u);
                    isMember.put(u.id, member);
                }
            }
        }
        graph.requirements.addAll(found.values());
    }

    private List<RequirementUse> check(DriveGraph.RateUse r, Entry.Requirement q) {
        List<RequirementUse> out = new ArrayList<>();
        Element space = r.space();
        if (space == null) {
            out.add(use(q, r, q.path().text(), null));
            return out;
        }
        List<Name> names = q.path().names();
        String last = names.get(names.size() - 1).text();
        Checks.At at = Checks.of(space.shape).get(last);
        if (at == null) {
            Set<String> all = new LinkedHashSet<>(Checks.of(space.shape).keySet());
            String near = Suggest.nearest(last, all);
            Name n = names.get(names.size() - 1);
            Diagnostic d = Diagnostic.of(
                    Code.UNKNOWN_CHECK,
                    r.file(),
                    n.span(),
                    "`" + r.syntax().method() + "` has no check `" + last + "`; it has " + Compiler.list(all) + "."
                            + (near == null ? "" : " Did you mean `" + near + "`?"));
            graph.problems.add(near == null ? d : d.withFix("write " + near, n.span(), near));
            return out;
        }
        List<Element> chosen = new ArrayList<>();
        for (int i = 0; i < names.size() - 1; i++) {
            String n = names.get(i).text();
            Object x = space.own(n);
            if (x == null && space.parent != null) {
                x = space.parent.own(n);
            }
            if (x instanceof Element e) {
                chosen.add(e);
            } else {
                graph.problems.add(
                        Code.UNKNOWN_NAME,
                        r.file(),
                        names.get(i).span(),
                        "There is no `" + n + "` in `" + r.mesh().name + "`.");
                return out;
            }
        }
        for (Slot s : DriveBuilder.checks(graph, space)) {
            if (s.decl != at.decl()) {
                continue;
            }
            List<Element> axes = new ArrayList<>();
            s.owner.axes.forEach(a -> axes.add(a.element()));
            if (axes.containsAll(chosen)) {
                StringBuilder id = new StringBuilder();
                for (Element e : axes) {
                    id.append(e.name).append('.');
                }
                out.add(use(q, r, id + last, s));
            }
        }
        return out;
    }

    private RequirementUse use(Entry.Requirement q, DriveGraph.RateUse r, String check, @Nullable Slot s) {
        RequirementUse u = new RequirementUse(
                q,
                r.file(),
                r.id() + "." + check,
                q.cmp() == Expr.Cmp.LE || q.cmp() == Expr.Cmp.LT
                        ? RequirementUse.Form.AT_MOST
                        : RequirementUse.Form.AT_LEAST,
                false);
        u.rate = r;
        u.slot = s;
        if (q.cmp() == Expr.Cmp.EQ || q.cmp() == Expr.Cmp.NE) {
            graph.problems.add(
                    Code.WRONG_FORM,
                    r.file(),
                    q.span(),
                    "A check is required to be at least (`>=`) or at most (`<=`) something.");
        }
        Frame f = Frame.at(r.file(), true);
        Val bound = graph.compiler.eval(q.bound(), Ctx.of(graph.drive), f);
        if (bound instanceof Val.Num n) {
            u.required = n.register();
            u.dimension = n.dimension();
            u.unit = unitOf(q.bound());
        }
        if (s != null) {
            u.meaning = s.decl.meaning == null ? s.decl.name : s.decl.meaning;
            if (graph.compiler.value(s) instanceof Val.Num v) {
                u.value = v.register();
                fits(u, v, q.bound(), s.decl.name, f);
            }
            if (u.unit == null && s.decl.kind instanceof ValueKind.Quantity k) {
                u.unit = k.kind().shown();
            }
        }
        return u;
    }

    private void fits(RequirementUse u, Val.Num value, Expr bound, String name, Frame f) {
        Dimension want = value.dimension();
        Dimension has = u.dimension;
        if (want != null && has != null && want != has) {
            if (has.isNone()) {
                graph.problems.add(
                        Code.MISSING_UNIT,
                        f.file,
                        bound.span(),
                        "`" + name + "` is " + English.a(Units.standard().nameOf(want)) + "; its limit needs a unit.");
            } else {
                graph.problems.add(
                        Code.WRONG_UNIT,
                        f.file,
                        bound.span(),
                        "`" + name + "` is " + English.a(Units.standard().nameOf(want)) + "; this limit is "
                                + English.a(Units.standard().nameOf(has)) + ".");
            }
            u.value = graph.compiler.openRegister(new Val.Bad());
        }
        if (u.dimension == null) {
            u.dimension = want;
        }
    }

    private @Nullable Unit unitOf(Expr e) {
        if (e instanceof Expr.Num n
                && n.unit() != null
                && Units.standard().parse(n.unit().text()) instanceof Units.Parse.Ok ok) {
            return ok.unit();
        }
        if (e instanceof Expr.Neg n) {
            return unitOf(n.operand());
        }
        return null;
    }

    // ---- requirements of the drive

    private RequirementUse require(Entry.Require r, FileId file) {
        unnamed++;
        Ctx ctx = Ctx.of(graph.drive);
        Frame f = Frame.at(file, true);
        if (r.middle() != null && r.tolerance() != null) {
            RequirementUse u = named(r, r.subject(), file, RequirementUse.Form.BETWEEN, false);
            Val m = graph.compiler.eval(r.middle(), ctx, f);
            Val t = graph.compiler.eval(r.tolerance(), ctx, f);
            if (m instanceof Val.Num mid && t instanceof Val.Num tol) {
                Val.Num half = tol.dimension() != null && tol.dimension().isNone()
                        ? graph.compiler.arithmetic(Expr.Op.MUL, mid, tol, r.tolerance(), f)
                        : tol;
                u.required = graph.compiler
                        .arithmetic(Expr.Op.SUB, mid, half, r.middle(), f)
                        .register();
                u.upper = graph.compiler
                        .arithmetic(Expr.Op.ADD, mid, half, r.middle(), f)
                        .register();
                u.dimension = mid.dimension();
                u.unit = unitOf(r.middle());
            }
            subject(u, r.subject(), r.middle(), ctx, f);
            return u;
        }
        if (r.low() != null && r.high() != null) {
            RequirementUse u = named(r, r.subject(), file, RequirementUse.Form.BETWEEN, false);
            Val lo = graph.compiler.eval(r.low(), ctx, f);
            Val hi = graph.compiler.eval(r.high(), ctx, f);
            if (lo instanceof Val.Num l && hi instanceof Val.Num h) {
                graph.compiler.same(l.dimension(), h.dimension(), r.high(), f, "the two ends of one band");
                u.required = l.register();
                u.upper = h.register();
                u.dimension = l.dimension();
                u.unit = unitOf(r.low());
            }
            subject(u, r.subject(), r.low(), ctx, f);
            return u;
        }
        return condition(r, r.subject(), file, false, ctx, f);
    }

    private RequirementUse asserted(Entry.Assert a, FileId file) {
        unnamed++;
        return condition(a, a.condition(), file, true, Ctx.of(graph.drive), Frame.at(file, true));
    }

    private RequirementUse condition(Entry e, Expr condition, FileId file, boolean asserted, Ctx ctx, Frame f) {
        if (condition instanceof Expr.Compare c
                && c.ops().size() == 1
                && c.ops().get(0) != Expr.Cmp.NE) {
            Expr.Cmp o = c.ops().get(0);
            Val left = graph.compiler.eval(c.operands().get(0), ctx, f);
            if (left instanceof Val.Num v) {
                RequirementUse.Form form = o == Expr.Cmp.EQ
                        ? RequirementUse.Form.EQUAL
                        : o == Expr.Cmp.LE || o == Expr.Cmp.LT
                                ? RequirementUse.Form.AT_MOST
                                : RequirementUse.Form.AT_LEAST;
                RequirementUse u = named(e, c.operands().get(0), file, form, asserted);
                Expr bound = c.operands().get(1);
                Val b = graph.compiler.eval(bound, ctx, f);
                if (b instanceof Val.Num n) {
                    u.required = n.register();
                    u.dimension = n.dimension();
                    u.unit = unitOf(bound);
                }
                subject(u, c.operands().get(0), bound, ctx, f);
                return u;
            }
        }
        RequirementUse u = named(e, condition, file, RequirementUse.Form.CONDITION, asserted);
        Val v = graph.compiler.eval(condition, ctx, f);
        if (v instanceof Val.Fixed x) {
            u.holds = x.is();
        } else {
            u.value = graph.compiler.truth(v, condition, f);
        }
        return u;
    }

    private RequirementUse named(Entry e, Expr subject, FileId file, RequirementUse.Form form, boolean asserted) {
        String id = subject instanceof Expr.Path p ? p.text() : (asserted ? "assert." : "require.") + unnamed;
        RequirementUse u = new RequirementUse(e, file, id, form, asserted);
        u.subject = subject;
        u.meaning = graph.textOf(file, subject.span());
        return u;
    }

    private void subject(RequirementUse u, Expr subject, Expr bound, Ctx ctx, Frame f) {
        Val v = graph.compiler.numeric(graph.compiler.eval(subject, ctx, f), f, subject);
        if (v instanceof Val.Num n) {
            u.value = n.register();
            fits(u, n, bound, u.meaning, f);
        }
        if (subject instanceof Expr.Path p) {
            Object x = graph.scopes.path(p, ctx, new Element[1], new int[1]);
            if (x instanceof Slot s) {
                u.slot = s;
                if (s.decl.meaning != null) {
                    u.meaning = s.decl.meaning;
                }
                if (u.unit == null && s.decl.kind instanceof ValueKind.Quantity k) {
                    u.unit = k.kind().shown();
                }
            }
        }
    }

    // ---- tight limits and acceptances

    private void tight(RequirementUse u) {
        Slot.Fact special = u.slot == null ? null : graph.tightLimits.get(u.slot.decl.name);
        if (special != null) {
            Val v = graph.compiler.eval(special.value(), special.scope(), Frame.at(special.file(), true));
            if (v instanceof Val.Num n) {
                u.tight = n.register();
                return;
            }
        }
        if (graph.drive.own("tight_limit") instanceof Slot s && graph.compiler.value(s) instanceof Val.Num n) {
            u.tight = n.register();
        }
    }

    private void acceptances() {
        for (DriveSource.Layer l : source.layers()) {
            for (Entry e : l.body()) {
                if (e instanceof Entry.Accept a) {
                    accept(a, l.file());
                }
            }
        }
    }

    private void accept(Entry.Accept a, FileId file) {
        String path = a.path().text();
        List<RequirementUse> covered = new ArrayList<>();
        for (RequirementUse u : graph.requirements) {
            if (u.id.equals(path) || covers(path, u)) {
                covered.add(u);
            }
        }
        if (covered.isEmpty()) {
            graph.uncovered.add(new DriveGraph.Uncovered(a, file));
            return;
        }
        Set<String> ratings = new LinkedHashSet<>();
        for (RequirementUse u : covered) {
            ratings.add(u.rate == null ? "" : u.rate.id());
        }
        if (ratings.size() > 1) {
            graph.ambiguous.add(a);
            graph.problems.add(
                    Code.AMBIGUOUS_NAME,
                    file,
                    a.path().span(),
                    "`" + path + "` is required by several ratings; say which: " + Compiler.list(ratings) + ".");
            return;
        }
        Frame f = Frame.at(file, true);
        if (graph.compiler.eval(a.bound(), Ctx.of(graph.drive), f) instanceof Val.Num n) {
            for (RequirementUse u : covered) {
                u.acceptance = new RequirementUse.Acceptance(a, file, n.register());
            }
        }
    }

    /** {@code head.main.pitting} covers both members, {@code head.wheel.bending} the only rating that has it. */
    static boolean covers(String path, RequirementUse u) {
        if (u.rate == null) {
            return false;
        }
        String mesh = u.rate.mesh().path() + ".";
        if (!path.startsWith(mesh)) {
            return false;
        }
        String rest = path.substring(mesh.length());
        String full = u.id.substring(mesh.length());
        String inRating = full.substring(u.rate.name().length() + 1);
        String check = inRating.substring(inRating.lastIndexOf('.') + 1);
        String said = rest.startsWith(u.rate.name() + ".")
                ? rest.substring(u.rate.name().length() + 1)
                : rest;
        return said.equals(inRating) || said.equals(check);
    }

    static boolean hasReason(List<Note> notes) {
        return notes.stream().anyMatch(n -> n instanceof Note.Because);
    }
}
