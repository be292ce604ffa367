package backcone.engine.answers;

import backcone.engine.diagnostics.Code;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.eval.Run;
import backcone.engine.graph.DriveBuilder;
import backcone.engine.graph.DriveGraph;
import backcone.engine.graph.DriveSource;
import backcone.engine.graph.Element;
import backcone.engine.graph.Problems;
import backcone.engine.graph.Reach;
import backcone.engine.graph.RequirementUse;
import backcone.engine.graph.Slot;
import backcone.engine.syntax.Entry;
import backcone.engine.syntax.Note;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import backcone.engine.units.Numbers;
import backcone.engine.units.Unit;
import java.time.LocalDate;
import java.time.format.DateTimeParseException;
import java.util.ArrayList;
import java.util.HashSet;
import java.util.LinkedHashMap;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;
import org.jspecify.annotations.Nullable;

/** Evaluates the graphs of a drive (one per case) and says what came out: states, margins, reserves and findings. */
public final class DriveResults {
    private static final double SLACK = 1e-9;
    private static final double USUAL_TIGHT = 0.1;
    private final DriveSource source;
    private final LocalDate today;
    private final Problems problems;
    private final Map<Slot, Set<String>> missing = new LinkedHashMap<>();
    private final List<RequirementAnswer> requirements = new ArrayList<>();
    private final List<CheckAnswer> unrequired = new ArrayList<>();
    private final Set<Entry.Waive> usedWaivers = new HashSet<>();
    private final Trusts trusts = new Trusts();
    private final boolean statesOnly;

    /** Of the requirement at hand among those of its graph. */
    private int index;

    private DriveResults(DriveSource source, LocalDate today, Problems problems, boolean statesOnly) {
        this.source = source;
        this.today = today;
        this.problems = problems;
        this.statesOnly = statesOnly;
    }

    public static DriveAnswer of(DriveSource source, List<Run> runs, LocalDate today, Problems problems) {
        return new DriveResults(source, today, problems, false).answer(runs);
    }

    /** States and margins alone: no load reserve, no other readings, no checks that nothing requires. */
    public static DriveAnswer states(DriveSource source, List<Run> runs, LocalDate today, Problems problems) {
        return new DriveResults(source, today, problems, true).answer(runs);
    }

    private DriveAnswer answer(List<Run> runs) {
        for (Run run : runs) {
            new Facts(run, problems).report();
            Map<DriveGraph.LimitUse, Boolean> passed = limits(run);
            List<RequirementUse> all = run.graph.requirements();
            for (int i = 0; i < all.size(); i++) {
                index = i;
                requirement(run, all.get(i), passed);
            }
            if (!statesOnly) {
                rest(run);
            }
        }
        deviations(runs);
        for (Map.Entry<Slot, Set<String>> e : missing.entrySet()) {
            missingInput(e.getKey(), e.getValue());
        }
        RequirementAnswer governing = null;
        for (RequirementAnswer r : requirements) {
            if (!Double.isNaN(r.loadReserve()) && (governing == null || r.loadReserve() < governing.loadReserve())) {
                governing = r;
            }
        }
        return new DriveAnswer(
                source.name(),
                source.title(),
                source.file(),
                source.span(),
                List.copyOf(requirements),
                List.copyOf(unrequired),
                governing == null ? null : governing.id(),
                assumptions(runs),
                trusts.weakest(),
                trusts.recalled());
    }

    // ---- requirements

    private void requirement(Run run, RequirementUse u, Map<DriveGraph.LimitUse, Boolean> passed) {
        DriveGraph.RateUse rate = u.rate;
        String because = null;
        for (Note n : notes(u.entry)) {
            if (n instanceof Note.Because b) {
                because = b.text();
            }
        }
        List<RequirementAnswer.Missing> open = new ArrayList<>();
        List<RequirementAnswer.Passed> outside = new ArrayList<>();
        String fault = null;
        double v = run.at(u.value);
        double required = run.at(u.required);
        double upper = run.at(u.upper);
        double margin = Double.NaN;
        State state;
        boolean condition = u.form == RequirementUse.Form.CONDITION;
        if (rate != null && rate.space() == null) {
            state = State.OPEN;
            fault = rate.why();
        } else if (condition && u.value < 0) {
            state = u.holds ? State.CLEAR : State.SHORT;
            v = u.holds ? 1 : 0;
        } else {
            fault = applies(run, rate);
            if (fault == null && (Double.isNaN(v) || (!condition && Double.isNaN(required)))) {
                Reasons.Why why = new Reasons(run).of(Double.isNaN(v) ? u.value : u.required);
                for (Slot s : why.open()) {
                    open.add(Reasons.missing(s));
                    missing.computeIfAbsent(s, k -> new LinkedHashSet<>()).add(u.id);
                }
                fault = fault(u, why);
            }
            if (fault != null || Double.isNaN(v) || (!condition && Double.isNaN(required))) {
                state = State.OPEN;
            } else {
                margin = margin(u.form, v, required, upper);
                boolean met = condition ? v != 0 : met(u.form, v, required, upper);
                double tight = u.tight < 0 || Double.isNaN(run.at(u.tight)) ? USUAL_TIGHT : run.at(u.tight);
                state = !met ? State.SHORT : rate == null || margin >= tight - SLACK ? State.CLEAR : State.TIGHT;
                outside = outside(run, u, passed);
                if (outside.stream().anyMatch(p -> !p.waived())) {
                    state = State.OUTSIDE;
                }
            }
        }
        RequirementAnswer.Acceptance acceptance = null;
        RequirementUse.Acceptance a = u.acceptance;
        if (a != null) {
            acceptance = acceptance(run, u, a, state, v);
            if (state == State.SHORT && !acceptance.expired() && met(u.form, v, run.at(a.bound()), Double.NaN)) {
                state = State.ACCEPTED;
            }
        }
        if (rate != null && !Double.isNaN(v) && !statesOnly) {
            trusts.add(run, u.value);
        }
        boolean known = state == State.CLEAR
                || state == State.TIGHT
                || state == State.SHORT
                || state == State.ACCEPTED
                || state == State.OUTSIDE;
        double reserve = rate != null && known && !statesOnly ? reserve(run, u, required) : Double.NaN;
        List<RequirementAnswer.Band> bands =
                known && rate != null && !statesOnly ? bands(run, u, state, required) : List.of();
        Unit unit = u.unit;
        RequirementAnswer r = new RequirementAnswer(
                u.id,
                rate == null ? null : rate.mesh().path(),
                rate == null ? null : rate.name(),
                member(u),
                u.slot == null ? null : u.slot.decl.name,
                rate == null ? null : rate.syntax().method().text(),
                rate == null || rate.syntax().edition() == null
                        ? null
                        : rate.syntax().edition().text(),
                run.graph.activeCase() == null ? null : run.graph.activeCase().name,
                u.meaning,
                in(unit, v),
                condition ? Double.NaN : in(unit, required),
                in(unit, upper),
                comparison(u.form),
                unit == null ? "" : text(unit),
                margin,
                reserve,
                state,
                u.file,
                u.span(),
                open,
                outside,
                acceptance,
                bands,
                because,
                fault);
        requirements.add(r);
        say(r, u, run);
    }

    private static @Nullable String member(RequirementUse u) {
        if (u.rate == null || u.rate.space() == null) {
            return null;
        }
        String rest = u.id.substring(u.rate.id().length() + 1);
        int dot = rest.lastIndexOf('.');
        return dot < 0 ? null : rest.substring(0, dot);
    }

    private static List<Note> notes(Entry e) {
        if (e instanceof Entry.Requirement r) {
            return r.notes();
        } else if (e instanceof Entry.Require r) {
            return r.notes();
        } else if (e instanceof Entry.Assert a) {
            return a.notes();
        }
        return List.of();
    }

    static String text(Unit u) {
        return u.text().equals("1") ? "" : u.text();
    }

    static double in(@Nullable Unit u, double v) {
        return u == null || Double.isNaN(v) ? v : u.fromBase(v);
    }

    private static String comparison(RequirementUse.Form f) {
        switch (f) {
            case AT_LEAST:
                return ">=";
            case AT_MOST:
                return "<=";
            case BETWEEN:
                return "between";
            default:
                return "==";
        }
    }

    private @Nullable String fault(RequirementUse u, Reasons.Why why) {
        if (why.faults().isEmpty()) {
            return why.open().isEmpty() ? "something it rests on could not be understood" : null;
        }
        Reasons.Fault first = why.faults().get(0);
        Code code = first.op() == backcone.engine.graph.Op.ROOT || first.op() == backcone.engine.graph.Op.SETTLE
                ? Code.NO_ROOT
                : first.op() == backcone.engine.graph.Op.TABLE ? Code.BEYOND_TABLE : Code.FAULT;
        if (first.op() != backcone.engine.graph.Op.OPEN) {
            Slot s = first.slot();
            Diagnostic d =
                    Diagnostic.of(code, u.file, u.span(), "`" + u.id + "` can't be computed: " + first.message() + ".");
            problems.add(
                    s == null
                            ? d
                            : d.withRelated(
                                    s.decl.file, s.decl.span, "the equation of `" + s.decl.symbolOrName() + "`"));
        }
        return first.message();
    }

    private static double margin(RequirementUse.Form f, double v, double required, double upper) {
        switch (f) {
            case AT_LEAST:
                return required == 0
                        ? (v >= 0 ? Double.POSITIVE_INFINITY : Double.NEGATIVE_INFINITY)
                        : required > 0 ? v / required - 1 : (v - required) / -required;
            case AT_MOST:
                return v == 0 ? Double.POSITIVE_INFINITY : v > 0 ? required / v - 1 : (required - v) / -v;
            case BETWEEN: {
                double half = (upper - required) / 2;
                return Math.min(v - required, upper - v) / half;
            }
            default:
                return 0;
        }
    }

    private static boolean met(RequirementUse.Form f, double v, double required, double upper) {
        switch (f) {
            case AT_LEAST:
                return v >= required - SLACK * Math.abs(required);
            case AT_MOST:
                return v <= required + SLACK * Math.abs(required);
            case BETWEEN:
                return v >= required - SLACK * Math.abs(required) && v <= upper + SLACK * Math.abs(upper);
            default:
                return Math.abs(v - required) <= SLACK * Math.abs(required);
        }
    }

    private @Nullable String applies(Run run, DriveGraph.@Nullable RateUse rate) {
        Element space = rate == null ? null : rate.space();
        if (rate == null || space == null) {
            return null;
        }
        for (DriveGraph.AppliesUse a : run.graph.applies()) {
            boolean fails = a.condition() < 0 ? !a.holds() : run.at(a.condition()) == 0;
            if (fails && (a.at() == space || a.at().parent == space)) {
                String text = a.syntax().otherwise() == null
                        ? "the method does not cover this pair"
                        : a.syntax().otherwise();
                problems.add(Diagnostic.of(
                                Code.NOT_APPLICABLE,
                                rate.file(),
                                rate.syntax().method().span(),
                                "`" + rate.syntax().method() + "` does not rate `"
                                        + rate.mesh().path() + "`: " + text + ".")
                        .withRelated(a.file(), a.syntax().span(), "the condition of the method"));
                return text;
            }
        }
        return null;
    }

    // ---- limits

    private Map<DriveGraph.LimitUse, Boolean> limits(Run run) {
        Map<DriveGraph.LimitUse, Boolean> passed = new LinkedHashMap<>();
        for (DriveGraph.LimitUse l : run.graph.limits()) {
            boolean fails = l.condition() < 0 ? !l.holds() : run.at(l.condition()) == 0;
            if (!fails) {
                continue;
            }
            boolean waived = waived(run, l);
            passed.put(l, waived);
            String level = l.def().syntax().level() == null
                    ? (l.def().ofMethod() ? "outside" : "warning")
                    : l.def().syntax().level().text();
            if (waived || level.equals("outside")) {
                continue;
            }
            Code code = level.equals("error")
                    ? Code.IMPOSSIBLE
                    : level.equals("sum")
                            ? Code.SUM_OF_SHARES
                            : level.equals("hint") ? Code.CUSTOM_HINT : Code.LIMIT_PASSED;
            Element at = l.at().isSpace() && l.at().parent != null ? l.at().parent : l.at();
            FileId file = run.graph.fileOfElement(at);
            problems.add(Diagnostic.of(code, file, at.headSpan(), capital(limitText(run, l)) + ".")
                    .withRelated(
                            l.def().file(),
                            l.def().syntax().span(),
                            "the limit `" + l.def().syntax().name() + "`"));
        }
        return passed;
    }

    private static String capital(String s) {
        return s.isEmpty() ? s : Character.toUpperCase(s.charAt(0)) + s.substring(1);
    }

    /** Value, limit and what to say, for example {@code face width over cone distance is 0.352, limit 0.333: …}. */
    static String limitText(Run run, DriveGraph.LimitUse l) {
        Entry.Limit x = l.def().syntax();
        StringBuilder b = new StringBuilder();
        String path = l.at().path();
        if (l.at().space() != null) {
            path = l.at().space().path();
        }
        b.append('`')
                .append(path.isEmpty() ? x.name().text() : path)
                .append("`: ")
                .append(x.meaning() == null ? x.name().text() : x.meaning());
        if (l.left() >= 0 && l.compare() != null) {
            Unit u = l.unit();
            b.append(" is ")
                    .append(Numbers.format(in(u, run.at(l.left())), 4))
                    .append(u == null || text(u).isEmpty() ? "" : " " + text(u));
            b.append(", limit ").append(l.compare().ops().get(0).sign).append(' ');
            b.append(Numbers.format(in(u, run.at(l.right())), 4))
                    .append(u == null || text(u).isEmpty() ? "" : " " + text(u));
        }
        if (x.otherwise() != null) {
            b.append(": ").append(x.otherwise());
        }
        return b.toString();
    }

    private boolean waived(Run run, DriveGraph.LimitUse l) {
        for (DriveSource.Layer layer : source.layers()) {
            for (Entry e : layer.body()) {
                if (!(e instanceof Entry.Waive w) || !names(w.path().text(), l)) {
                    continue;
                }
                usedWaivers.add(w);
                LocalDate until = until(w.notes());
                if (until == null) {
                    continue;
                }
                if (today.isAfter(until)) {
                    problems.add(
                            Code.WAIVER_EXPIRED,
                            layer.file(),
                            w.span(),
                            "This waiver ended on " + until + ": " + limitText(run, l)
                                    + ". Mend it, or extend the waiver with a reason.");
                    continue;
                }
                return true;
            }
        }
        return false;
    }

    private static boolean names(String path, DriveGraph.LimitUse l) {
        String full = l.path();
        if (path.equals(full)) {
            return true;
        }
        String name = l.def().syntax().name().text();
        if (!path.endsWith("." + name)) {
            return false;
        }
        String said = path.substring(0, path.length() - name.length() - 1);
        said = said.endsWith(".limit") ? said.substring(0, said.length() - 6) : said;
        String at = l.at().path();
        return at.equals(said) || at.startsWith(said + ".");
    }

    private List<RequirementAnswer.Passed> outside(
            Run run, RequirementUse u, Map<DriveGraph.LimitUse, Boolean> passed) {
        List<RequirementAnswer.Passed> out = new ArrayList<>();
        DriveGraph.RateUse rate = u.rate;
        if (rate == null || u.slot == null) {
            return out;
        }
        for (Map.Entry<DriveGraph.LimitUse, Boolean> e : passed.entrySet()) {
            DriveGraph.LimitUse l = e.getKey();
            boolean mine = l.at() == rate.space() || l.at().space() == rate.space();
            String level = l.def().syntax().level() == null
                    ? ""
                    : l.def().syntax().level().text();
            boolean impossible = level.equals("error") && (l.at() == rate.mesh() || l.at().parent == rate.mesh());
            if (!(mine && (level.isEmpty() || level.equals("outside"))) && !impossible) {
                continue;
            }
            if (mine && !concerns(run, l, u)) {
                continue;
            }
            out.add(new RequirementAnswer.Passed(l.path(), limitText(run, l), e.getValue()));
        }
        return out;
    }

    /** With {@code for y} only what depends on y; of a limit said for one member, only what depends on that member's values. */
    private boolean concerns(Run run, DriveGraph.LimitUse l, RequirementUse u) {
        if (!l.targets().isEmpty()) {
            for (Slot s : l.targets()) {
                int r = s.register();
                if (run.graph.reach().of(index, r)) {
                    return true;
                }
            }
            return false;
        }
        Slot slot = u.slot;
        if (l.at().space() != null && slot != null && slot.owner.space() != null) {
            return l.at().name.equals(slot.owner.name) || slot.owner.name.isEmpty();
        }
        return true;
    }

    // ---- load reserve and open points

    private double reserve(Run run, RequirementUse u, double required) {
        Reach reach = run.graph.reach();
        if (!reach.of(index, run.graph.loadRegister())
                || (u.form != RequirementUse.Form.AT_LEAST && u.form != RequirementUse.Form.AT_MOST)) {
            return Double.NaN;
        }
        java.util.function.DoubleUnaryOperator scaled = run.underLoad(reach, index);
        boolean metNow = met(u.form, run.at(u.value), required, Double.NaN);
        double inner = 1;
        double outer = 1;
        double step = metNow ? 1.1 : 1 / 1.1;
        boolean found = false;
        for (int i = 0; i < 80 && !found; i++) {
            inner = outer;
            outer *= step;
            double v = scaled.applyAsDouble(outer);
            found = Double.isNaN(v) || met(u.form, v, required, Double.NaN) != metNow;
            if (Double.isNaN(v)) {
                return Double.NaN;
            }
        }
        if (!found) {
            return Double.NaN;
        }
        return Reserve.between(inner, outer, metNow, load -> distance(u.form, scaled.applyAsDouble(load), required));
    }

    /** How far a value lies on the good side of its bound; not negative where the bound is met. */
    private static double distance(RequirementUse.Form f, double v, double required) {
        double slack = SLACK * Math.abs(required);
        return f == RequirementUse.Form.AT_LEAST ? v - (required - slack) : required + slack - v;
    }

    private List<RequirementAnswer.Band> bands(Run run, RequirementUse u, State state, double required) {
        List<RequirementAnswer.Band> out = new ArrayList<>();
        for (DriveGraph.OpenPoint p : run.graph.openPoints()) {
            if (!run.graph.reach().of(index, run.graph.inputs().get(p.input()).register())) {
                continue;
            }
            double v = run.with(p.input(), 1)[u.value];
            if (Double.isNaN(v)) {
                continue;
            }
            double tight = u.tight < 0 ? USUAL_TIGHT : run.at(u.tight);
            State other = !met(u.form, v, required, Double.NaN)
                    ? State.SHORT
                    : margin(u.form, v, required, Double.NaN) >= tight - SLACK ? State.CLEAR : State.TIGHT;
            State here = state == State.ACCEPTED ? State.SHORT : state;
            if (other != here
                    && here != State.OUTSIDE
                    && out.stream()
                            .noneMatch(b -> b.equation().equals(p.slot().decl.name)
                                    && b.reading().equals(p.reading()))) {
                out.add(new RequirementAnswer.Band(p.slot().decl.name, p.reading(), in(u.unit, v), other));
            }
        }
        return out;
    }

    // ---- deviations

    static @Nullable LocalDate until(List<Note> notes) {
        for (Note n : notes) {
            if (n instanceof Note.Until u && u.day() != null) {
                return date(u.day().text());
            }
        }
        return null;
    }

    private static @Nullable LocalDate date(String text) {
        try {
            return LocalDate.parse(text);
        } catch (DateTimeParseException e) {
            return null; // the parser has said that this is no date
        }
    }

    private RequirementAnswer.Acceptance acceptance(
            Run run, RequirementUse u, RequirementUse.Acceptance a, State state, double v) {
        LocalDate until = until(a.syntax().notes());
        String by = "";
        String because = "";
        for (Note n : a.syntax().notes()) {
            if (n instanceof Note.By b) {
                by = b.person();
            } else if (n instanceof Note.Because b) {
                because = b.text();
            }
        }
        boolean complete = until != null && !by.isBlank() && !because.isBlank();
        boolean expired = !complete || today.isAfter(until);
        double bound = run.at(a.bound());
        if (complete && state == State.SHORT) {
            if (today.isAfter(until)) {
                problems.add(
                        Code.ACCEPTANCE_EXPIRED,
                        a.file(),
                        a.syntax().span(),
                        "This acceptance ended on " + until + "; `" + u.id
                                + "` is short again. Mend it, or extend the acceptance with a reason.");
            } else if (!met(u.form, v, bound, Double.NaN)) {
                problems.add(
                        Code.SHORT,
                        a.file(),
                        a.syntax().span(),
                        "`" + u.id + "` is " + say(u, v) + ", below even what is accepted (" + say(u, bound) + ").");
            } else if (!today.plusDays(30).isBefore(until)) {
                problems.add(
                        Code.ACCEPTANCE_SOON,
                        a.file(),
                        a.syntax().span(),
                        "This acceptance ends on " + until + ", within 30 days; `" + u.id
                                + "` will then be short. Mend it, or extend the acceptance with a reason.");
            }
        }
        return new RequirementAnswer.Acceptance(
                in(u.unit, bound), until == null ? "" : until.toString(), by, because, expired);
    }

    private static String say(RequirementUse u, double v) {
        Unit unit = u.unit;
        String t = unit == null ? "" : text(unit);
        return Numbers.format(in(unit, v), 4) + (t.isEmpty() ? "" : " " + t);
    }

    private void deviations(List<Run> runs) {
        Set<Entry> covered = new HashSet<>();
        Set<Entry.Accept> needed = new HashSet<>();
        Set<Entry.Accept> open = new HashSet<>();
        for (Run run : runs) {
            for (RequirementUse u : run.graph.requirements()) {
                if (u.acceptance != null) {
                    covered.add(u.acceptance.syntax());
                    for (RequirementAnswer r : requirements) {
                        if (r.id().equals(u.id)) {
                            if (r.state() == State.SHORT || r.state() == State.ACCEPTED) {
                                needed.add(u.acceptance.syntax());
                            } else if (r.state() == State.OPEN || r.state() == State.OUTSIDE) {
                                open.add(u.acceptance.syntax());
                            }
                        }
                    }
                }
            }
        }
        for (DriveSource.Layer l : source.layers()) {
            for (Entry e : l.body()) {
                if (e instanceof Entry.Accept a) {
                    complete("An acceptance", a.notes(), l.file(), a.span());
                    if (runs.stream().anyMatch(r -> r.graph.ambiguous().contains(a))) {
                        continue;
                    }
                    if (!covered.contains(a)) {
                        problems.add(
                                Code.UNKNOWN_REQUIREMENT,
                                l.file(),
                                a.path().span(),
                                "Nothing here requires `" + a.path().text() + "`, so there is nothing to accept."
                                        + backcone.engine.model.Suggest.sentence(
                                                a.path().text(), ids()));
                    } else if (!needed.contains(a) && !open.contains(a)) {
                        problems.add(
                                Code.ACCEPTANCE_NOT_NEEDED,
                                l.file(),
                                a.span(),
                                "`" + a.path().text() + "` is met; this acceptance is no longer needed. Remove it.");
                    }
                } else if (e instanceof Entry.Waive w) {
                    complete("A waiver", w.notes(), l.file(), w.span());
                    if (!usedWaivers.contains(w)
                            && runs.stream()
                                    .noneMatch(r -> r.graph.limits().stream()
                                            .anyMatch(x -> names(w.path().text(), x)))) {
                        problems.add(
                                Code.UNKNOWN_REQUIREMENT,
                                l.file(),
                                w.path().span(),
                                "There is no limit `" + w.path().text() + "` to waive.");
                    }
                }
            }
        }
    }

    private List<String> ids() {
        List<String> out = new ArrayList<>();
        requirements.forEach(r -> out.add(r.id()));
        return out;
    }

    private void complete(String what, List<Note> notes, FileId file, Span span) {
        List<String> lacks = new ArrayList<>();
        if (notes.stream().noneMatch(n -> n instanceof Note.Until u && u.day() != null)) {
            lacks.add("a date (`until 2027-06-30`)");
        }
        if (notes.stream().noneMatch(n -> n instanceof Note.By b && !b.person().isBlank())) {
            lacks.add("a person (`by \"…\"`)");
        }
        if (notes.stream()
                .noneMatch(n -> n instanceof Note.Because b && !b.text().isBlank())) {
            lacks.add("a reason (`because \"…\"`)");
        }
        if (!lacks.isEmpty()) {
            problems.add(
                    Code.NEEDS_REASON,
                    file,
                    span,
                    what + " counts only with date, person and reason; this one lacks " + String.join(" and ", lacks)
                            + ".");
        }
    }

    // ---- what is said

    private void say(RequirementAnswer r, RequirementUse u, Run run) {
        String unit = r.unit().isEmpty() ? "" : " " + r.unit();
        String value = Numbers.format(r.value(), 4) + unit;
        String bound = r.comparison().equals("between")
                ? "between " + Numbers.format(r.required(), 4) + " and " + Numbers.format(r.upper(), 4) + unit
                : r.comparison() + " " + Numbers.format(r.required(), 4) + unit;
        Span at = u.span();
        switch (r.state()) {
            case SHORT:
                if (u.asserted) {
                    problems.add(
                            Code.ASSERT_FAILED,
                            r.file(),
                            at,
                            u.form == RequirementUse.Form.CONDITION
                                    ? "This was stated as a fact and does not hold: " + u.meaning + "."
                                    : "`" + r.id() + "` was stated as " + bound + " and is " + value + ".");
                } else if (u.form == RequirementUse.Form.CONDITION) {
                    problems.add(Code.SHORT, r.file(), at, "This requirement does not hold: " + u.meaning + ".");
                } else {
                    problems.add(decides(
                            run,
                            u,
                            Diagnostic.of(
                                    Code.SHORT,
                                    r.file(),
                                    at,
                                    "`" + r.id() + "` is " + value + ", required " + bound + ": " + shortBy(r)
                                            + reserveText(r) + ".")));
                }
                break;
            case OUTSIDE:
                for (RequirementAnswer.Passed p : r.outside()) {
                    if (!p.waived()) {
                        problems.add(
                                Code.OUTSIDE,
                                r.file(),
                                at,
                                "`" + r.id() + "` is " + value + ", but outside the method: " + p.message() + ".");
                    }
                }
                break;
            case TIGHT:
                problems.add(
                        Code.TIGHT,
                        r.file(),
                        at,
                        "`" + r.id() + "` is " + value + ", required " + bound + ": met with " + percent(r.margin())
                                + reserveText(r) + ".");
                break;
            case ACCEPTED: {
                RequirementAnswer.Acceptance a = r.accepted();
                problems.add(
                        Code.ACCEPTED,
                        r.file(),
                        at,
                        "`" + r.id() + "` is " + value + ", required " + bound + ": accepted until "
                                + (a == null ? "" : a.until() + " by " + a.by()) + ".");
                break;
            }
            default:
                break;
        }
    }

    private static String shortBy(RequirementAnswer r) {
        if (r.comparison().equals("between")) {
            boolean below = r.value() < r.required();
            double off = below ? r.required() - r.value() : r.value() - r.upper();
            return (below ? "below it by " : "above it by ")
                    + Numbers.format(off, 3)
                    + (r.unit().isEmpty() ? "" : " " + r.unit());
        }
        return "short by " + Numbers.format(Math.abs(r.margin()) * 100, 2) + " %";
    }

    private static String reserveText(RequirementAnswer r) {
        return Double.isNaN(r.loadReserve())
                ? ""
                : ", just met at " + Numbers.format(r.loadReserve(), 3) + " times the load";
    }

    static String percent(double fraction) {
        return (fraction >= 0 ? "+" : "−") + Numbers.format(Math.abs(fraction) * 100, 2) + " %";
    }

    private static Diagnostic decides(Run run, RequirementUse u, Diagnostic d) {
        Slot s = u.slot;
        return s == null ? d : d.withRelated(s.decl.file, s.decl.span, "how `" + s.decl.name + "` is computed");
    }

    private void missingInput(Slot s, Set<String> waiting) {
        if (s.decl.neededBecause == null
                && problems.all().stream()
                        .anyMatch(d -> d.severity() == backcone.engine.diagnostics.Severity.ERROR
                                && (d.code() == Code.UNKNOWN_NAME || d.code() == Code.UNKNOWN_KIND))) {
            return; // a shaft or mesh that is not understood leaves the train open; that is said where it stands
        }
        Element e = s.owner;
        FileId file = new FileId("");
        Span span = Span.NONE;
        Element x = e;
        while (x != null && file.path().isEmpty()) {
            if (x.fileOrNull() != null) {
                file = java.util.Objects.requireNonNull(x.fileOrNull());
                span = x.headSpan();
            }
            x = x.parent;
        }
        List<String> ids = new ArrayList<>(waiting);
        String who = ids.size() <= 3
                ? String.join(", ", ids)
                : ids.get(0) + ", " + ids.get(1) + " and " + (ids.size() - 2) + " more";
        String hint = s.decl.neededBecause == null ? "" : " It is never assumed: " + s.decl.neededBecause + ".";
        problems.add(
                Code.MISSING_INPUT,
                file,
                uniqueSpan(span, s),
                "`" + s.path() + "` (" + (s.decl.meaning == null ? s.decl.name : s.decl.meaning) + ") is not given; "
                        + who + (ids.size() == 1 ? " waits for it." : " wait for it.") + hint);
    }

    /** Several inputs missing in one block are several findings at one place; their spans differ by one so that none hides another. */
    private final Map<String, Integer> atPlace = new LinkedHashMap<>();

    private Span uniqueSpan(Span s, Slot slot) {
        String key = s.start() + ":" + s.end();
        int n = atPlace.merge(key, 1, Integer::sum) - 1;
        int end = Math.max(s.start() + 1, s.end() - n);
        return new Span(s.start(), end);
    }

    private void rest(Run run) {
        Set<String> required = new HashSet<>();
        requirements.forEach(r -> required.add(r.id()));
        for (DriveGraph.RateUse r : run.graph.rates()) {
            Element space = r.space();
            if (space == null) {
                continue;
            }
            for (Slot s : DriveBuilder.checks(run.graph, space)) {
                String id = s.path();
                if (required.contains(id)) {
                    continue;
                }
                double v = run.at(s.register());
                List<RequirementAnswer.Missing> open = new ArrayList<>();
                if (Double.isNaN(v) && s.register() >= 0) {
                    for (Slot m : new Reasons(run).of(s.register()).open()) {
                        open.add(Reasons.missing(m));
                    }
                }
                Unit u = run.graph.shownUnit(s);
                unrequired.add(new CheckAnswer(
                        id,
                        s.decl.meaning == null ? s.decl.name : s.decl.meaning,
                        in(u, v),
                        u == null ? "" : text(u),
                        r.syntax().method().text(),
                        open));
            }
        }
    }

    private static List<String> assumptions(List<Run> runs) {
        Set<String> out = new LinkedHashSet<>();
        for (Run run : runs) {
            for (Element e : run.graph.elements()) {
                for (Slot s : run.graph.givenSlots(e)) {
                    String reason = s.assumed();
                    if (reason != null) {
                        out.add(s.path() + ": " + reason);
                    }
                }
            }
        }
        return List.copyOf(out);
    }
}
