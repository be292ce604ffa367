package backcone.engine;

import static org.assertj.core.api.Assertions.assertThat;

import backcone.engine.answers.CheckAnswer;
import backcone.engine.answers.DriveAnswer;
import backcone.engine.answers.Explanation;
import backcone.engine.answers.RequirementAnswer;
import backcone.engine.answers.State;
import backcone.engine.diagnostics.Severity;
import backcone.engine.eval.Run;
import backcone.engine.graph.DriveGraph;
import backcone.engine.graph.RequirementUse;
import backcone.engine.graph.Slot;
import backcone.engine.parse.Formatter;
import backcone.engine.parse.Parser;
import backcone.engine.syntax.Entry;
import backcone.engine.syntax.Expr;
import backcone.engine.syntax.FileSyntax;
import backcone.engine.syntax.Node;
import backcone.engine.syntax.Nodes;
import backcone.engine.text.FileId;
import backcone.engine.units.Numbers;
import backcone.engine.units.Unit;
import backcone.engine.units.Units;
import java.io.IOException;
import java.util.ArrayList;
import java.util.Collections;
import java.util.Comparator;
import java.util.HashSet;
import java.util.List;
import java.util.Map;
import java.util.Objects;
import java.util.Random;
import java.util.Set;
import java.util.TreeMap;
import org.junit.jupiter.api.BeforeAll;
import org.junit.jupiter.api.Test;

/** What holds for any drive: the samples, the samples with other numbers, and trains made up at random with a fixed seed. */
class PropertiesTest {
    private static final long SEED = 20261201;
    private static Map<String, String> library = Map.of();
    private static List<GeneratedDrives.Text> drives = List.of();

    @BeforeAll
    static void texts() throws IOException {
        library = GeneratedDrives.library();
        drives = GeneratedDrives.all(SEED);
    }

    private static BackconeEngine engine(String path, String text) {
        return BackconeEngine.create(
                f -> {
                    String t = f.path().equals(path) ? text : library.get(f.path());
                    return t == null ? new Loader.Loaded.Missing() : new Loader.Loaded.Text(t);
                },
                Specs.TODAY);
    }

    private static Analysis analyse(GeneratedDrives.Text t) {
        return analyse(t.path(), t.text());
    }

    private static Analysis analyse(String path, String text) {
        return engine(path, text).analyse(new FileId(path));
    }

    /** So that no property holds because nothing was computed. */
    @Test
    void theDrivesAreRated() {
        int known = 0;
        int open = 0;
        Map<State, Integer> states = new TreeMap<>();
        for (GeneratedDrives.Text t : drives) {
            Analysis a = analyse(t);
            assertThat(a.diagnostics().stream()
                            .filter(d -> d.severity() == Severity.ERROR
                                    && !d.code().id().startsWith("BC5"))
                            .map(d -> d.message())
                            .toList())
                    .as(t.text())
                    .isEmpty();
            for (RequirementAnswer r : requirements(a)) {
                states.merge(r.state(), 1, Integer::sum);
                known += Double.isNaN(r.value()) ? 0 : 1;
                open += Double.isNaN(r.value()) ? 1 : 0;
            }
        }
        assertThat(known).isGreaterThan(500);
        assertThat(open).isLessThan(known / 10);
        assertThat(states.keySet()).contains(State.CLEAR, State.TIGHT, State.SHORT, State.OPEN);
    }

    // ---- units

    @Test
    void theSameDriveInOtherUnitsIsTheSameDrive() {
        Random random = new Random(SEED);
        for (GeneratedDrives.Text t : drives) {
            String other = inOtherUnits(t, random);
            assertThat(other).isNotEqualTo(t.text());
            Analysis a = analyse(t);
            Analysis b = analyse(t.path(), other);
            same(other, a, b, 1e-9);
            assertThat(codes(b)).as(other).isEqualTo(codes(a));
            values(t, other, 1e-9);
        }
    }

    /** Every number with a unit in another unit of the same kind. Percentages become plain fractions where they are facts. */
    private static String inOtherUnits(GeneratedDrives.Text t, Random random) {
        FileSyntax tree = Parser.parse(new FileId(t.path()), t.text()).tree();
        List<Expr.Num> numbers = new ArrayList<>();
        Nodes.walk(tree, n -> {
            if (n instanceof Expr.Num x && x.unit() != null) {
                numbers.add(x);
            }
        });
        numbers.sort(Comparator.comparingInt((Expr.Num n) -> n.span().start()).reversed());
        StringBuilder b = new StringBuilder(t.text());
        for (Expr.Num n : numbers) {
            Unit u = unit(Objects.requireNonNull(n.unit()).text());
            List<Unit> others = new ArrayList<>();
            for (String s : Units.standard().unitsOf(u.dimension())) {
                Unit o = unit(s);
                if (Objects.equals(o.kind(), u.kind())
                        && !s.equals(u.text())
                        && !u.dimension().isNone()) {
                    others.add(o);
                }
            }
            if (!others.isEmpty()) {
                Unit o = others.get(random.nextInt(others.size()));
                b.replace(
                        n.span().start(),
                        n.span().end(),
                        Numbers.exact(o.fromBase(u.toBase(n.value()))) + " " + o.text());
            }
        }
        return b.toString();
    }

    private static Unit unit(String text) {
        if (Units.standard().parse(text) instanceof Units.Parse.Ok ok) {
            return ok.unit();
        }
        throw new AssertionError("no unit " + text);
    }

    // ---- load

    @Test
    void moreLoadNeverRaisesAMarginOrAReserve() {
        for (GeneratedDrives.Text t : drives) {
            Map<String, RequirementAnswer> before = byId(analyse(t));
            for (double factor : new double[] {1.02, 1.3, 2.5}) {
                Map<String, RequirementAnswer> after =
                        byId(analyse(t.path(), GeneratedDrives.moreLoad(t.text(), factor)));
                assertThat(after.keySet()).isEqualTo(before.keySet());
                before.forEach((id, r) -> {
                    RequirementAnswer s = Objects.requireNonNull(after.get(id));
                    String what = t.path() + " " + id + " at load times " + factor;
                    assertThat(Double.isNaN(s.margin()) || s.margin() <= r.margin() + 1e-12 * Math.abs(r.margin()))
                            .as("%s: margin %s, was %s", what, s.margin(), r.margin())
                            .isTrue();
                    if (!Double.isNaN(s.loadReserve()) && !Double.isNaN(r.loadReserve())) {
                        assertThat(s.loadReserve()).as(what).isLessThanOrEqualTo(r.loadReserve() * (1 + 1e-9));
                    }
                });
            }
        }
    }

    /** The reserve is a factor on the load as written: what is carried at last does not change with where one starts. */
    @Test
    void theLoadThatCanBeCarriedDoesNotDependOnTheLoadAsWritten() {
        int compared = 0;
        for (GeneratedDrives.Text t : drives) {
            Map<String, RequirementAnswer> before = byId(analyse(t));
            Map<String, RequirementAnswer> after = byId(analyse(t.path(), GeneratedDrives.moreLoad(t.text(), 1.3)));
            for (Map.Entry<String, RequirementAnswer> e : before.entrySet()) {
                double was = e.getValue().loadReserve();
                double is = Objects.requireNonNull(after.get(e.getKey())).loadReserve();
                boolean rowOfFamily = e.getKey().contains("_sizes.");
                if (!rowOfFamily && !Double.isNaN(was) && !Double.isNaN(is)) {
                    assertThat(1.3 * is / was).as(t.path() + " " + e.getKey()).isCloseTo(1, within());
                    compared++;
                }
            }
        }
        assertThat(compared).isGreaterThan(300);
    }

    private static org.assertj.core.data.Offset<Double> within() {
        return org.assertj.core.api.Assertions.within(1e-6);
    }

    // ---- order and layout

    @Test
    void theOrderOfEntriesDoesNotMatter() {
        Random random = new Random(SEED + 1);
        for (GeneratedDrives.Text t : drives) {
            Analysis a = analyse(t);
            String formatted = Objects.requireNonNull(
                    Formatter.format(new FileId(t.path()), t.text()).text());
            for (int k = 0; k < 2; k++) {
                String shuffled = shuffled(formatted, random);
                Analysis b = analyse(t.path(), shuffled);
                same(shuffled, a, b, 1e-11);
            }
        }
    }

    /** The lines of a canonical text with the entries of every block in another order. Rows of tables stay. */
    private static String shuffled(String text, Random random) {
        List<String> lines = new ArrayList<>();
        for (String line : text.split("\n")) {
            String bare = line.strip();
            if (!bare.isEmpty() && !bare.startsWith("#")) {
                lines.add(line);
            }
        }
        return String.join("\n", block(lines, 0, lines.size(), random)) + "\n";
    }

    private static int indent(String line) {
        int i = 0;
        while (i < line.length() && line.charAt(i) == ' ') {
            i++;
        }
        return i;
    }

    private static List<String> block(List<String> lines, int from, int to, Random random) {
        List<List<String>> entries = new ArrayList<>();
        int i = from;
        while (i < to) {
            int level = indent(lines.get(i));
            int end = i + 1;
            while (end < to && indent(lines.get(end)) > level) {
                end++;
            }
            List<String> entry = new ArrayList<>();
            if (end < to && lines.get(end).strip().equals("}") && indent(lines.get(end)) == level) {
                entry.add(lines.get(i));
                if (lines.get(i).stripLeading().startsWith("family ")) {
                    entry.addAll(lines.subList(i + 1, end));
                } else {
                    entry.addAll(block(lines, i + 1, end, random));
                }
                end++;
                entry.add(lines.get(end - 1));
            } else {
                entry.addAll(lines.subList(i, end));
            }
            entries.add(entry);
            i = end;
        }
        Collections.shuffle(entries, random);
        List<String> out = new ArrayList<>();
        entries.forEach(out::addAll);
        return out;
    }

    @Test
    void layoutDoesNotMatter() {
        Random random = new Random(SEED + 2);
        for (GeneratedDrives.Text t : drives) {
            Analysis a = analyse(t);
            StringBuilder b = new StringBuilder();
            for (String line : t.text().split("\n")) {
                b.append(" ".repeat(random.nextInt(5)));
                String bare = line.strip();
                b.append(
                        bare.indexOf('"') >= 0 || bare.indexOf('#') >= 0
                                ? bare
                                : bare.replace(
                                                " = ",
                                                " ".repeat(random.nextInt(3)) + "=" + " ".repeat(random.nextInt(3)))
                                        .replace(" {", " ".repeat(random.nextInt(3)) + "{"));
                switch (random.nextInt(8)) {
                    case 0 -> b.append(" \n");
                    case 1 -> b.append("\n# a remark");
                    case 2 -> b.append(bare.indexOf('#') >= 0 || bare.indexOf('"') >= 0 ? "" : "   # another");
                    case 3 -> b.append(bare.isEmpty() || bare.indexOf('#') >= 0 ? "" : " \t\r");
                    default -> {}
                }
                b.append('\n');
            }
            same(b.toString(), a, analyse(t.path(), b.toString()), 0);
        }
    }

    @Test
    void formattingTwiceChangesNothingAndKeepsResults() {
        for (GeneratedDrives.Text t : drives) {
            FileId id = new FileId(t.path());
            String once = Objects.requireNonNull(Formatter.format(id, t.text()).text());
            assertThat(Formatter.format(id, once).text()).isEqualTo(once);
            Analysis a = analyse(t);
            Analysis b = analyse(t.path(), once);
            same(once, a, b, 0);
            assertThat(codes(b)).isEqualTo(codes(a));
        }
    }

    // ---- the same bits

    @Test
    void runsAgainGiveTheSameBits() {
        for (GeneratedDrives.Text t : drives) {
            Analysis a = analyse(t);
            Analysis b = analyse(t);
            assertThat(b.drives()).isEqualTo(a.drives());
            assertThat(b.diagnostics()).isEqualTo(a.diagnostics());
        }
    }

    @Test
    void plainAndTracedRunsGiveTheSameBits() {
        int compared = 0;
        for (GeneratedDrives.Text t : drives) {
            BackconeEngine engine = engine(t.path(), t.text());
            List<SampleGraphs.Named> plain = SampleGraphs.of(engine, new FileId(t.path()), false);
            List<SampleGraphs.Named> traced = SampleGraphs.of(engine, new FileId(t.path()), true);
            assertThat(traced).hasSameSizeAs(plain);
            for (int i = 0; i < plain.size(); i++) {
                DriveGraph g = plain.get(i).graph();
                DriveGraph h = traced.get(i).graph();
                Run r = new Run(g);
                Run s = new Run(h);
                assertThat(h.requirements()).hasSameSizeAs(g.requirements());
                for (int k = 0; k < g.requirements().size(); k++) {
                    RequirementUse u = g.requirements().get(k);
                    RequirementUse v = h.requirements().get(k);
                    assertThat(v.id).isEqualTo(u.id);
                    assertThat(bits(s.at(v.value))).as(t.path() + " " + u.id).isEqualTo(bits(r.at(u.value)));
                    compared++;
                }
            }
        }
        assertThat(compared).isGreaterThan(500);
    }

    /** What explain says of a check is what the answer says of it, bit for bit. */
    @Test
    void explanationsTellTheValuesOfTheAnswers() throws IOException {
        for (GeneratedDrives.Text t : GeneratedDrives.samples()) {
            Analysis a = analyse(t);
            Set<String> ratings = new HashSet<>();
            for (DriveAnswer d : a.drives()) {
                for (RequirementAnswer r : d.requirements()) {
                    if (r.rating() != null && !Double.isNaN(r.value()) && ratings.add(r.mesh() + " " + r.rating())) {
                        Explanation e = a.explain(d.name() + "." + r.id()).orElseThrow();
                        assertThat(bits(base(e.value(), e.unit())))
                                .as(r.id())
                                .isEqualTo(bits(base(r.value(), r.unit())));
                    }
                }
            }
        }
    }

    private static long bits(double v) {
        return Double.doubleToLongBits(v);
    }

    // ---- states

    @Test
    void statesFollowFromMargins() {
        for (GeneratedDrives.Text t : drives) {
            double tight = tightLimit(t);
            for (RequirementAnswer r : requirements(analyse(t))) {
                String what = t.path() + " " + r.id() + " " + r.value() + " " + r.comparison() + " " + r.required();
                if (Double.isNaN(r.value())
                        || (Double.isNaN(r.required()) && !r.comparison().equals("=="))) {
                    assertThat(r.state()).as(what).isEqualTo(State.OPEN);
                    assertThat(r.margin()).as(what).isNaN();
                    assertThat(r.missing().isEmpty() && r.fault() == null)
                            .as(what)
                            .isFalse();
                    continue;
                }
                double margin = margin(r);
                assertThat(r.margin()).as(what).isCloseTo(margin, org.assertj.core.api.Assertions.within(1e-9));
                assertThat(r.outside().stream().anyMatch(p -> !p.waived()))
                        .as(what)
                        .isEqualTo(r.state() == State.OUTSIDE);
                switch (r.state()) {
                    case CLEAR ->
                        assertThat(margin).as(what).isGreaterThanOrEqualTo(r.rating() == null ? -1e-8 : tight - 1e-8);
                    case TIGHT -> assertThat(margin).as(what).isBetween(-1e-8, tight);
                    case SHORT -> assertThat(margin).as(what).isNegative();
                    case ACCEPTED -> {
                        assertThat(margin).as(what).isNegative();
                        assertThat(r.value())
                                .isGreaterThanOrEqualTo(
                                        Objects.requireNonNull(r.accepted()).accepted());
                        assertThat(Objects.requireNonNull(r.accepted()).expired())
                                .isFalse();
                    }
                    case OUTSIDE -> {}
                    case OPEN -> assertThat(r.fault()).as(what).isNotNull();
                }
                if (!Double.isNaN(r.loadReserve()) && Math.abs(margin) > 1e-6) {
                    assertThat(r.loadReserve() >= 1)
                            .as(what + " reserve " + r.loadReserve())
                            .isEqualTo(margin >= 0);
                }
            }
        }
    }

    /** By the definition on the page of states, not by the engine's code. */
    private static double margin(RequirementAnswer r) {
        return switch (r.comparison()) {
            case ">=" -> r.value() / r.required() - 1;
            case "<=" -> r.required() / r.value() - 1;
            case "between" ->
                Math.min(r.value() - r.required(), r.upper() - r.value()) / ((r.upper() - r.required()) / 2);
            default -> 0;
        };
    }

    private static double tightLimit(GeneratedDrives.Text t) {
        double[] out = {0.1};
        for (Entry e : Parser.parse(new FileId(t.path()), t.text()).tree().entries()) {
            if (e instanceof Entry.Drive d) {
                for (Node n : d.body()) {
                    if (n instanceof Entry.Fact f
                            && f.path().text().equals("tight_limit")
                            && f.value() instanceof Expr.Num v) {
                        out[0] = v.value() / 100;
                    }
                }
            }
        }
        return out[0];
    }

    // ---- comparing

    private static List<RequirementAnswer> requirements(Analysis a) {
        List<RequirementAnswer> out = new ArrayList<>();
        a.drives().forEach(d -> out.addAll(d.requirements()));
        return out;
    }

    private static Map<String, RequirementAnswer> byId(Analysis a) {
        Map<String, RequirementAnswer> out = new TreeMap<>();
        for (DriveAnswer d : a.drives()) {
            for (RequirementAnswer r : d.requirements()) {
                out.put(d.name() + " " + r.id(), r);
            }
        }
        return out;
    }

    private static List<String> codes(Analysis a) {
        return a.diagnostics().stream().map(d -> d.code().id()).toList();
    }

    private static void same(String text, Analysis a, Analysis b, double relative) {
        Map<String, RequirementAnswer> before = byId(a);
        Map<String, RequirementAnswer> after = byId(b);
        assertThat(after.keySet()).as(text).isEqualTo(before.keySet());
        before.forEach((id, r) -> {
            RequirementAnswer s = Objects.requireNonNull(after.get(id));
            String what = id + " in\n" + text;
            assertThat(s.state()).as(what).isEqualTo(r.state());
            equal(what, base(r.value(), r.unit()), base(s.value(), s.unit()), relative, 0);
            equal(what, base(r.required(), r.unit()), base(s.required(), s.unit()), relative, 0);
            equal(what, base(r.upper(), r.unit()), base(s.upper(), s.unit()), relative, 0);
            equal(what, r.margin(), s.margin(), relative, relative * 10);
            equal(what, r.loadReserve(), s.loadReserve(), relative * 10, 0);
        });
        Map<String, CheckAnswer> rest = rest(a);
        Map<String, CheckAnswer> others = rest(b);
        assertThat(others.keySet()).as(text).isEqualTo(rest.keySet());
        rest.forEach((id, c) -> {
            CheckAnswer o = Objects.requireNonNull(others.get(id));
            equal(id + " in\n" + text, base(c.value(), c.unit()), base(o.value(), o.unit()), relative, 0);
        });
    }

    private static Map<String, CheckAnswer> rest(Analysis a) {
        Map<String, CheckAnswer> out = new TreeMap<>();
        for (DriveAnswer d : a.drives()) {
            d.unrequired().forEach(c -> out.put(d.name() + " " + c.id(), c));
        }
        return out;
    }

    /** Every value that is computed under every case, in computing units. */
    private static void values(GeneratedDrives.Text t, String other, double relative) {
        FileId id = new FileId(t.path());
        List<SampleGraphs.Named> before = SampleGraphs.of(engine(t.path(), t.text()), id, false);
        List<SampleGraphs.Named> after = SampleGraphs.of(engine(t.path(), other), id, false);
        assertThat(after).hasSameSizeAs(before);
        for (int i = 0; i < before.size(); i++) {
            Map<String, Double> values = values(before.get(i).graph());
            Map<String, Double> others = values(after.get(i).graph());
            assertThat(others.keySet()).as(other).isEqualTo(values.keySet());
            // a gap that closes is the rounding of the lengths it lies between
            values.forEach((path, v) ->
                    equal(path + " in\n" + other, v, Objects.requireNonNull(others.get(path)), relative, 1e-13));
        }
    }

    private static Map<String, Double> values(DriveGraph g) {
        Run run = new Run(g);
        Map<String, Double> out = new TreeMap<>();
        for (Slot s : g.computedSlots()) {
            if (s.register() >= 0) {
                out.put(s.path(), run.at(s.register()));
            }
        }
        return out;
    }

    private static double base(double v, String unit) {
        return unit.isEmpty() || Double.isNaN(v) ? v : unit(unit).toBase(v);
    }

    private static void equal(String what, double a, double b, double relative, double absolute) {
        if (Double.isNaN(a) || Double.isInfinite(a)) {
            assertThat(Double.compare(a, b)).as("%s: %s, then %s", what, a, b).isZero();
            return;
        }
        assertThat(Math.abs(a - b) <= relative * Math.abs(a) + absolute)
                .as("%s: %s, then %s", what, a, b)
                .isTrue();
    }
}
