package backcone.engine.fixes;

import backcone.engine.answers.DriveAnswer;
import backcone.engine.answers.RequirementAnswer;
import backcone.engine.answers.State;
import backcone.engine.diagnostics.Code;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.eval.Run;
import backcone.engine.graph.DriveGraph;
import backcone.engine.graph.DriveSource;
import backcone.engine.graph.Element;
import backcone.engine.graph.RequirementUse;
import backcone.engine.graph.Slot;
import backcone.engine.model.Library;
import backcone.engine.syntax.Entry;
import backcone.engine.syntax.Expr;
import backcone.engine.syntax.Note;
import backcone.engine.text.Span;
import backcone.engine.units.Numbers;
import backcone.engine.units.Unit;
import java.util.ArrayList;
import java.util.Comparator;
import java.util.HashSet;
import java.util.IdentityHashMap;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Set;
import org.jspecify.annotations.Nullable;

/**
 * Changes of a design that meet a requirement or a limit. Candidates are told apart by running the tape with other numbers; what
 * is offered has been through the whole engine, and its title says what came out there.
 */
final class Search {
    private static final int MOST = 6;
    private static final int MOST_TOGETHER = 6;

    /** So near the bound a value is told to one digit more, so that it is not taken for the bound. */
    private static final double NEAR = 0.01;

    private final Subject subject;
    private final Trial trial;
    private final Library library;
    private final Steps steps = Steps.standard();
    private final Verdict now;

    Search(Subject subject, Trial trial) {
        this.subject = subject;
        this.trial = trial;
        this.library = subject.shapes().library();
        this.now = Verdict.of(subject.drives(), subject.diagnostics());
    }

    /** What shall come out: these requirements met (clear, where they are only tight), these findings gone. */
    private record Goal(Set<String> requirements, Set<String> drives, Set<String> findings, boolean clear, Code code) {}

    /** A change and what the tapes said to it. */
    private record Candidate(List<Axis.Setting> settings, Swaps.@Nullable Swap swap, double change) {}

    private record Ranked(
            Candidate candidate,
            Verdict verdict,
            int failing,
            int hints,
            @Nullable Subject after) {}

    List<Fix> at(Span range) {
        Goal goal = goal(range);
        return goal == null ? List.of() : offer(goal);
    }

    // ---- what is asked for

    private @Nullable Goal goal(Span range) {
        RequirementAnswer first = null;
        for (DriveAnswer d : subject.drives()) {
            for (RequirementAnswer r : d.requirements()) {
                boolean here = r.file().equals(subject.file()) && Fixes.touches(r.span(), range);
                if (here && wanting(r) && (first == null || r.state() != State.TIGHT && first.state() == State.TIGHT)) {
                    first = r;
                }
            }
        }
        if (first != null) {
            Set<String> ids = new LinkedHashSet<>();
            Set<String> drives = new LinkedHashSet<>();
            boolean clear = first.state() == State.TIGHT;
            for (DriveAnswer d : subject.drives()) {
                for (RequirementAnswer r : d.requirements()) {
                    if (r.span().equals(first.span()) && r.file().equals(subject.file()) && wanting(r)) {
                        ids.add(Verdict.id(d.name(), r.id()));
                        drives.add(d.name());
                    }
                }
            }
            return new Goal(ids, drives, Set.of(), clear, code(first.state()));
        }
        for (Diagnostic d : subject.diagnostics()) {
            if ((d.code() == Code.LIMIT_PASSED || d.code() == Code.IMPOSSIBLE || d.code() == Code.CUSTOM_HINT)
                    && Fixes.touches(d.span(), range)) {
                String key = Verdict.key("", d);
                String drive = key.substring(0, key.indexOf('|'));
                return new Goal(
                        Set.of(), drive.isEmpty() ? drivesAt(d.span()) : Set.of(drive), Set.of(key), false, d.code());
            }
        }
        return null;
    }

    private static Code code(State s) {
        return s == State.TIGHT ? Code.TIGHT : s == State.OUTSIDE ? Code.OUTSIDE : Code.SHORT;
    }

    private static boolean wanting(RequirementAnswer r) {
        return (r.state() == State.SHORT || r.state() == State.TIGHT || r.state() == State.OUTSIDE)
                && !r.comparison().equals("==")
                && !Double.isNaN(r.margin());
    }

    private Set<String> drivesAt(Span at) {
        Set<String> out = new LinkedHashSet<>();
        for (DriveAnswer d : subject.drives()) {
            if (d.span().start() <= at.start() && at.end() <= d.span().end()) {
                out.add(d.name());
            }
        }
        return out;
    }

    private static boolean reached(Goal goal, RequirementAnswer r) {
        return goal.clear ? r.state() == State.CLEAR : r.state().isMet();
    }

    private static boolean reached(Goal goal, Verdict v) {
        for (String id : goal.requirements) {
            RequirementAnswer r = v.requirements.get(id);
            if (r == null || !reached(goal, r)) {
                return false;
            }
        }
        for (String key : goal.findings) {
            if (v.has(key)) {
                return false;
            }
        }
        return true;
    }

    // ---- candidates

    private List<Fix> offer(Goal goal) {
        List<Axis> all = new ArrayList<>();
        List<Candidate> words = new ArrayList<>();
        List<List<Candidate>> families = new ArrayList<>();
        Set<String> known = new HashSet<>();
        for (String drive : goal.drives) {
            for (DriveGraph g : trial.graphs(drive)) {
                for (Element e : new ArrayList<>(g.elements())) {
                    for (Steps.Step s : steps.all) {
                        if (!library.isKind(e.kind(), s.kind())) {
                            continue;
                        }
                        if (s.way() == Steps.Way.PAIR) {
                            List<Candidate> pairs = pairs(goal, g, e, s, known);
                            if (!pairs.isEmpty()) {
                                families.add(pairs);
                            }
                        } else if (s.way() == Steps.Way.SWAP) {
                            words.addAll(swaps(g, e, s, known));
                        } else {
                            for (Slot slot : g.givenSlots(e)) {
                                Axis a = axis(goal, g, s, slot, s.name());
                                if (a != null && known.add(a.literal().span() + " " + s)) {
                                    all.add(a);
                                }
                            }
                        }
                    }
                }
            }
        }
        for (Axis a : all) {
            List<Candidate> one = new ArrayList<>();
            for (Axis.Setting s : a.settings(library)) {
                one.add(new Candidate(List.of(s), null, s.change()));
            }
            families.add(one);
        }
        List<Ranked> good = new ArrayList<>();
        for (List<Candidate> family : families) {
            Ranked best = null;
            for (Candidate c : family) {
                if (best != null && best.failing == 0 && best.hints == 0) {
                    break; // the candidates of a family stand in the order of their change
                }
                Ranked r = run(goal, c);
                if (r != null && (best == null || better(r, best))) {
                    best = r;
                }
            }
            if (best != null) {
                good.add(best);
            }
        }
        if (good.stream().noneMatch(r -> r.failing == 0)) {
            good.addAll(together(goal, all));
        }
        good.sort(Search::compare);
        List<Fix> out = new ArrayList<>();
        List<Ranked> verified = new ArrayList<>();
        for (Ranked r : good) {
            if (verified.size() >= MOST) {
                break;
            }
            add(verify(goal, r.candidate), verified);
        }
        for (Candidate c : words) {
            add(verify(goal, c), verified);
        }
        verified.sort(Search::compare);
        for (Ranked r : verified) {
            if (out.size() < MOST) {
                out.add(new Fix(
                        title(r.candidate) + " — " + effect(goal, r),
                        Fix.Kind.QUICK_FIX,
                        out.isEmpty() && r.failing == 0,
                        edits(goal, r.candidate),
                        List.of(goal.code.id())));
            }
        }
        return out;
    }

    private static void add(@Nullable Ranked r, List<Ranked> to) {
        if (r != null) {
            to.add(r);
        }
    }

    private static boolean better(Ranked a, Ranked b) {
        return compare(a, b) < 0;
    }

    /** All met first, then what adds no hint, then the least change. */
    private static int compare(Ranked a, Ranked b) {
        return Comparator.comparingInt((Ranked r) -> r.failing)
                .thenComparingInt(r -> r.hints)
                .thenComparingDouble(r -> r.candidate.change)
                .compare(a, b);
    }

    private @Nullable Axis axis(@Nullable Goal goal, DriveGraph g, Steps.Step s, Slot slot, String name) {
        Slot.Fact f = slot.fact();
        if (f == null
                || !slot.decl.name.equals(name)
                || slot.isOverridden()
                || steps.never.contains(name)
                || !f.file().equals(subject.file())
                || evidence(f.notes())) {
            return null;
        }
        Axis a = Axis.of(s, slot, f);
        return a != null && (goal == null || matters(goal, g, a.literal())) ? a : null;
    }

    /** What was measured stays what it is. */
    private static boolean evidence(List<Note> notes) {
        return notes.stream().anyMatch(n -> n instanceof Note.Measured);
    }

    private boolean matters(Goal goal, DriveGraph g, Expr.Num literal) {
        if (!goal.findings.isEmpty()) {
            for (DriveGraph.LimitUse l : g.limits()) {
                if (Trial.moves(g, literal, l.condition())) {
                    return true;
                }
            }
            return false;
        }
        for (RequirementUse u : g.requirements()) {
            for (String drive : goal.drives) {
                if (goal.requirements.contains(Verdict.id(drive, u.id))
                        && (Trial.moves(g, literal, u.value) || outsideBy(g, literal, u))) {
                    return true;
                }
            }
        }
        return false;
    }

    private static boolean outsideBy(DriveGraph g, Expr.Num literal, RequirementUse u) {
        for (DriveGraph.LimitUse l : g.limits()) {
            if (u.rate != null && l.at() == u.rate.space() && Trial.moves(g, literal, l.condition())) {
                return true;
            }
        }
        return false;
    }

    // ---- two counts whose quotient is kept

    private List<Candidate> pairs(Goal goal, DriveGraph g, Element mesh, Steps.Step s, Set<String> known) {
        Slot a = g.find(mesh.path() + "." + s.name());
        Slot b = g.find(mesh.path() + "." + s.second());
        if (a == null || b == null) {
            return List.of();
        }
        Axis first = axis(null, g, s, a, a.decl.name);
        Axis second = axis(null, g, s, b, b.decl.name);
        if (first == null
                || second == null
                || !(matters(goal, g, first.literal()) || matters(goal, g, second.literal()))
                || !known.add(first.literal().span() + " " + second.literal().span() + " " + s)) {
            return List.of();
        }
        double was = second.now() / first.now();
        int most = s.count(0);
        double within = s.number(1);
        List<Candidate> out = new ArrayList<>();
        for (int d = -most; d <= most; d++) {
            double x = first.now() + d;
            if (x < 1) {
                continue;
            }
            double middle = Math.rint(x * was);
            for (double y = middle - 2; y <= middle + 2; y++) {
                if ((d == 0 && y == second.now()) || Math.abs(y / x / was - 1) > within) {
                    continue;
                }
                List<Axis.Setting> both = new ArrayList<>();
                if (d != 0) {
                    both.add(first.count(x));
                }
                if (y != second.now()) {
                    both.add(second.count(y));
                }
                double change = s.cost() * (Math.abs(Math.log(x / first.now())) + Math.abs(Math.log(y / x / was)));
                change += preference(g, mesh, s.words().get(2), first, x, second, y);
                out.add(new Candidate(both, null, change));
            }
        }
        out.sort(Comparator.comparingDouble(Candidate::change));
        return out;
    }

    /** How much more of a counted nuisance there is than the least there can be. */
    private double preference(DriveGraph g, Element mesh, String name, Axis first, double x, Axis second, double y) {
        Slot slot = g.find(mesh.path() + "." + name);
        if (slot == null) {
            return 0;
        }
        g.demand(slot);
        if (slot.register() < 0) {
            return 0;
        }
        double[] v = g.inputValues();
        for (int k = 0; k < v.length; k++) {
            Expr.Num n = g.inputs().get(k).literal();
            if (n == first.literal()) {
                v[k] = x;
            } else if (n == second.literal()) {
                v[k] = y;
            }
        }
        double nuisance = new Run(g, v).at(slot.register());
        return nuisance > 1 ? 0.1 * Math.log(nuisance) : 0;
    }

    // ---- two numbers at once, where no single one does

    private List<Ranked> together(Goal goal, List<Axis> axes) {
        List<Ranked> out = new ArrayList<>();
        for (int i = 0; i < axes.size(); i++) {
            for (int j = i + 1; j < axes.size(); j++) {
                if (axes.get(i).literal() == axes.get(j).literal()) {
                    continue;
                }
                Ranked best = null;
                for (Axis.Setting a : thinned(axes.get(i).settings(library))) {
                    for (Axis.Setting b : thinned(axes.get(j).settings(library))) {
                        double change = a.change() + b.change();
                        if (best != null && best.failing == 0 && change >= best.candidate.change) {
                            continue;
                        }
                        Ranked r = run(goal, new Candidate(List.of(a, b), null, change));
                        if (r != null && (best == null || better(r, best))) {
                            best = r;
                        }
                    }
                }
                if (best != null && best.failing == 0) {
                    out.add(best);
                }
            }
        }
        out.sort(Search::compare);
        return out.subList(0, Math.min(3, out.size()));
    }

    private static List<Axis.Setting> thinned(List<Axis.Setting> all) {
        if (all.size() <= MOST_TOGETHER) {
            return all;
        }
        List<Axis.Setting> out = new ArrayList<>();
        for (int i = 0; i < MOST_TOGETHER; i++) {
            out.add(all.get(i * (all.size() - 1) / (MOST_TOGETHER - 1)));
        }
        return out;
    }

    // ---- another block of the files in reach

    private List<Candidate> swaps(DriveGraph g, Element e, Steps.Step s, Set<String> known) {
        return new Swaps(subject, library, steps, s)
                .of(g, e, known).stream()
                        .map(w -> new Candidate(List.of(), w, s.cost()))
                        .toList();
    }

    // ---- texts

    private List<TextEdit> edits(Goal goal, Candidate c) {
        if (c.swap != null) {
            return List.of(Edits.inPlace(subject.file(), subject.text(), c.swap.at(), c.swap.name()));
        }
        List<TextEdit> out = new ArrayList<>();
        List<String> lines = new ArrayList<>();
        Entry.Variant own = variant(goal);
        for (Axis.Setting s : c.settings) {
            Axis a = s.axis();
            if (own != null && !within(own, a.literal().span())) {
                lines.add(a.slot().path() + " = " + value(s));
            } else {
                out.add(a.edit(subject, s.value()));
            }
        }
        if (own != null && !lines.isEmpty()) {
            out.add(Edits.atEndOf(subject.file(), subject.text(), own.span(), lines));
        }
        return out;
    }

    private static boolean within(Entry e, Span at) {
        return e.span().start() <= at.start() && at.end() <= e.span().end();
    }

    private static String value(Axis.Setting s) {
        String unit = s.axis().unitText();
        return Numbers.exact(s.value()) + (unit.isEmpty() ? "" : " " + unit);
    }

    private String title(Candidate c) {
        if (c.swap != null) {
            return name(c.swap.slot()) + " = " + c.swap.name();
        }
        StringBuilder b = new StringBuilder();
        for (Axis.Setting s : c.settings) {
            b.append(b.length() > 0 ? ", " : "")
                    .append(name(s.axis().slot()))
                    .append(" = ")
                    .append(value(s));
            if (s.axis().source() != null) {
                b.append(" (source dropped)");
            }
        }
        return b.toString();
    }

    private Entry.@Nullable Variant variant(Goal goal) {
        if (goal.drives.size() != 1) {
            return null;
        }
        String name = goal.drives.iterator().next();
        for (Entry e : subject.syntax().entries()) {
            if (e instanceof Entry.Variant v && v.name().text().equals(name)) {
                return v;
            }
        }
        return null;
    }

    /** The name within its mesh; with the mesh where there are several. */
    private String name(Slot s) {
        String path = s.path();
        int dot = path.indexOf('.');
        return meshes() == 1 && dot > 0 && library.isKind(top(s.owner).kind(), "mesh") ? path.substring(dot + 1) : path;
    }

    private static Element top(Element e) {
        Element x = e;
        while (x.parent != null && x.parent.parent != null) {
            x = x.parent;
        }
        return x;
    }

    private int meshes = -1;

    private int meshes() {
        if (meshes < 0) {
            for (DriveAnswer d : subject.drives()) {
                for (DriveGraph g : trial.graphs(d.name())) {
                    int n = 0;
                    for (Element e : g.elements()) {
                        n += library.isKind(e.kind(), "mesh") && !e.isSpace() ? 1 : 0;
                    }
                    meshes = Math.max(meshes, n);
                }
            }
        }
        return meshes;
    }

    // ---- trying

    private @Nullable Ranked run(Goal goal, Candidate c) {
        IdentityHashMap<Expr.Num, Double> values = new IdentityHashMap<>();
        for (Axis.Setting s : c.settings) {
            values.put(s.axis().literal(), s.base());
        }
        boolean alone = variant(goal) != null;
        Verdict before = alone ? partOf(goal) : now();
        Verdict v = new Verdict();
        for (String d : goal.drives) {
            trial.run(d, values, v);
            for (String id : goal.requirements) {
                RequirementAnswer r = v.requirements.get(id);
                if (r != null && !reached(goal, r)) {
                    return null;
                }
            }
        }
        if (!reached(goal, v)) {
            return null;
        }
        if (!alone) {
            for (DriveSource d : subject.sources().values()) {
                if (!goal.drives.contains(d.name())) {
                    trial.run(d.name(), values, v);
                }
            }
        }
        return v.notWorseThan(before) ? new Ranked(c, v, v.failing().size(), v.newHints(before), null) : null;
    }

    private @Nullable Verdict unchanged;
    private @Nullable Verdict part;

    /** The tapes as written, so that like is held against like. */
    private Verdict now() {
        Verdict v = unchanged;
        if (v == null) {
            v = new Verdict();
            for (String d : subject.sources().keySet()) {
                trial.run(d, new IdentityHashMap<>(), v);
            }
            unchanged = v;
        }
        return v;
    }

    private Verdict partOf(Goal goal) {
        Verdict v = part;
        if (v == null) {
            v = new Verdict();
            for (String d : goal.drives) {
                trial.run(d, new IdentityHashMap<>(), v);
            }
            part = v;
        }
        return v;
    }

    /** The whole engine over the edited text. */
    private @Nullable Ranked verify(Goal goal, Candidate c) {
        Subject s = subject.edited(edits(goal, c));
        Verdict v = Verdict.of(s.drives(), s.diagnostics());
        return reached(goal, v) && v.notWorseThan(now)
                ? new Ranked(c, v, v.failing().size(), v.newHints(now), s)
                : null;
    }

    // ---- what came of it

    private String effect(Goal goal, Ranked of) {
        Verdict v = of.verdict;
        StringBuilder b = new StringBuilder();
        RequirementAnswer worst = null;
        for (String id : goal.requirements) {
            RequirementAnswer r = v.requirements.get(id);
            if (r != null && (worst == null || r.margin() < worst.margin())) {
                worst = r;
            }
        }
        if (worst != null) {
            b.append(label(worst, goal.requirements.size() > 1))
                    .append(' ')
                    .append(Numbers.format(worst.value(), Math.abs(worst.margin()) < NEAR ? 4 : 3))
                    .append(worst.unit().isEmpty() ? "" : " " + worst.unit())
                    .append(", margin ")
                    .append(margin(worst.margin()))
                    .append(", ");
        } else {
            b.append(limits(goal, of.after)).append(", ");
        }
        List<String> failing = v.failing();
        List<String> open = v.in(State.OPEN);
        if (failing.isEmpty()) {
            return b.append(open.isEmpty() ? "all requirements met" : "all others met, " + open.size() + " open")
                    .toString();
        }
        b.append("still short: ");
        for (int i = 0; i < failing.size() && i < 3; i++) {
            RequirementAnswer r = java.util.Objects.requireNonNull(v.requirements.get(failing.get(i)));
            b.append(i == 0 ? "" : ", ").append(shortId(failing.get(i), r));
        }
        return b.append(failing.size() > 3 ? " and " + (failing.size() - 3) + " more" : "")
                .toString();
    }

    /** {@code face width 30 mm, limit <= 30.23 mm}, as it is after the edit. */
    private static String limits(Goal goal, @Nullable Subject after) {
        Trial t = after == null ? null : new Trial(after);
        for (String drive : goal.drives) {
            for (DriveGraph g : t == null ? List.<DriveGraph>of() : t.graphs(drive)) {
                for (DriveGraph.LimitUse l : g.limits()) {
                    Entry.Limit x = l.def().syntax();
                    Element space = l.at().space();
                    String key = "|`" + (space == null ? l.at() : space).path() + "|the limit `" + x.name() + "`";
                    if (l.left() < 0
                            || l.compare() == null
                            || goal.findings.stream().noneMatch(k -> k.endsWith(key))) {
                        continue;
                    }
                    Run run = new Run(g);
                    return (x.meaning() == null ? x.name().text() : x.meaning()) + " "
                            + in(l.unit(), run.at(l.left())) + ", limit "
                            + l.compare().ops().get(0).sign + " " + in(l.unit(), run.at(l.right()));
                }
            }
        }
        return "within the limit";
    }

    private static String in(@Nullable Unit u, double v) {
        String text = u == null || u.text().equals("1") ? "" : " " + u.text();
        return Numbers.format(u == null ? v : u.fromBase(v), 4) + text;
    }

    private String shortId(String id, RequirementAnswer r) {
        int blank = id.indexOf(' ');
        return subject.drives().size() == 1 ? r.id() : id.substring(0, blank) + "." + r.id();
    }

    private static String label(RequirementAnswer r, boolean several) {
        String check = r.check();
        if (check == null) {
            return r.id();
        }
        return several && r.member() != null ? r.member() + "." + check : check;
    }

    static String margin(double m) {
        if (Double.isInfinite(m)) {
            return "beyond all bounds";
        }
        double percent = m * 100;
        String n = Math.abs(percent) < 10
                ? Numbers.format(Math.abs(percent), 2)
                : Numbers.format(Math.rint(Math.abs(percent)), 6);
        return (percent < 0 ? "−" : "+") + n + " %";
    }
}
