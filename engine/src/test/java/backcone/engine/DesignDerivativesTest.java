package backcone.engine;

import static org.assertj.core.api.Assertions.assertThat;

import backcone.engine.eval.Derivatives;
import backcone.engine.eval.Evaluator;
import backcone.engine.eval.Run;
import backcone.engine.graph.DriveBuilder;
import backcone.engine.graph.DriveGraph;
import backcone.engine.graph.Op;
import backcone.engine.graph.Slot;
import backcone.engine.graph.Tape;
import backcone.engine.model.ValueKind;
import backcone.engine.numeric.Interpolation;
import java.io.IOException;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Random;
import java.util.TreeMap;
import org.junit.jupiter.api.Test;

/**
 * Derivatives against central differences, over designs around every sample drive: each check of each rating, and a few of
 * the values on the way. Where something goes in steps within the difference (an arm, the rows of a table, a whole number)
 * there is nothing to compare.
 */
class DesignDerivativesTest {
    private static final int DESIGNS = 1000;
    private static final int NUMBERS = 5;
    private static final int VALUES = 4;
    private static final double STEP = 1e-4;

    /** Of values on the way, less than this is what rounding leaves of zero. */
    private static final double NOTHING = 1e-9;

    private static final String ON_THE_WAY = "values on the way";

    private record Asked(String name, int register, int[] bends) {}

    /** What became of the comparisons of one check. */
    private static final class Count {
        int compared;
        int bent;
        int open;

        @Override
        public String toString() {
            return compared + " compared, " + bent + " with a step, " + open + " open";
        }
    }

    @Test
    void derivativesAreWhatDifferencesSay() throws IOException {
        Random random = new Random(20261201);
        List<SampleGraphs.Named> all = new ArrayList<>();
        for (SampleGraphs.Named g : SampleGraphs.all()) {
            if (!g.graph().inputs().isEmpty()) {
                all.add(g);
            }
        }
        Map<String, Count> counts = new TreeMap<>();
        List<String> wrong = new ArrayList<>();
        for (int k = 0; k < all.size(); k++) {
            SampleGraphs.Named named = all.get(k);
            DriveGraph g = named.graph();
            List<Asked> checks = checks(g);
            Run written = new Run(g);
            checks.removeIf(a -> Double.isNaN(written.at(a.register())));
            List<Slot> values = values(g, written);
            int designs = DESIGNS / all.size() + (k < DESIGNS % all.size() ? 1 : 0);
            for (int i = 0; i < designs; i++) {
                double[] inputs = varied(g, random);
                Run run = new Run(g, inputs);
                List<Asked> asked = new ArrayList<>(checks);
                for (int j = 0; j < VALUES && !values.isEmpty(); j++) {
                    Slot s = values.get(random.nextInt(values.size()));
                    asked.add(new Asked(ON_THE_WAY, s.register(), bends(g.tape(), s.register())));
                }
                compare(named.name(), run, inputs, asked, random, counts, wrong);
            }
        }
        assertThat(wrong).isEmpty();
        int compared = 0;
        int met = 0;
        for (Map.Entry<String, Count> c : counts.entrySet()) {
            // a check that steps in every design (a line of life that bends at its key, a bin that begins) can't be
            // compared
            assertThat(c.getValue().compared + c.getValue().bent)
                    .as(c.getKey() + ": " + c.getValue())
                    .isPositive();
            compared += c.getValue().compared;
            met += c.getValue().compared + c.getValue().bent + c.getValue().open;
        }
        assertThat(compared).as(counts.toString()).isGreaterThan(met / 2);
    }

    private static void compare(
            String name,
            Run run,
            double[] inputs,
            List<Asked> asked,
            Random random,
            Map<String, Count> counts,
            List<String> wrong) {
        DriveGraph g = run.graph;
        double[] before = run.values().clone();
        Map<Integer, Derivatives> derivatives = new LinkedHashMap<>();
        for (int n = 0; n < NUMBERS; n++) {
            DriveGraph.Input input = g.inputs().get(random.nextInt(g.inputs().size()));
            int index = g.tape().b(input.register());
            double x = inputs[index];
            if (x == 0 || input.literal() == null) {
                continue;
            }
            double[][] beside = {
                with(g, inputs, index, x * (1 + STEP)),
                with(g, inputs, index, x * (1 - STEP)),
                with(g, inputs, index, x * (1 + STEP / 2)),
                with(g, inputs, index, x * (1 - STEP / 2))
            };
            for (Asked a : asked) {
                if (!g.tape().depends(a.register(), input.register())) {
                    continue;
                }
                Count c = counts.computeIfAbsent(a.name(), k -> new Count());
                double y = run.at(a.register());
                if (a.name().equals(ON_THE_WAY) && Math.abs(y) < NOTHING) {
                    continue;
                }
                Derivatives d = derivatives.computeIfAbsent(a.register(), k -> new Derivatives(run, k));
                if (Double.isNaN(y)) {
                    c.open++;
                    if (!Double.isNaN(d.by(input))) {
                        wrong.add(name + ": " + a.name() + " is open and has a derivative");
                    }
                } else if (bent(g.tape(), a.bends(), before, beside)) {
                    c.bent++;
                } else {
                    c.compared++;
                    double got = d.by(input) * x;
                    // two steps, so that their common error falls out: lives go with powers of several hundred
                    double wide = (beside[0][a.register()] - beside[1][a.register()]) / (2 * STEP);
                    double near = (beside[2][a.register()] - beside[3][a.register()]) / STEP;
                    double expected = (4 * near - wide) / 3;
                    if (!(Math.abs(got - expected) <= 1e-6 * (Math.abs(y) + Math.abs(expected)))) {
                        wrong.add(name + ": " + a.name() + " = " + y + " by `" + input.slot() + "` = " + x + ": " + got
                                + ", by differences " + expected);
                    }
                }
            }
        }
        assertThat(run.values()).as("the values of a run are only read").containsExactly(before);
    }

    private static double[] with(DriveGraph g, double[] inputs, int index, double x) {
        double[] other = inputs.clone();
        other[index] = x;
        return new Evaluator(g.tape()).run(1, other).clone();
    }

    /** Every number of the text within 10 %, whole ones whole. */
    private static double[] varied(DriveGraph g, Random random) {
        double[] v = g.inputValues();
        for (int i = 0; i < v.length; i++) {
            DriveGraph.Input input = g.inputs().get(i);
            Slot s = input.slot();
            if (input.literal() == null) {
                continue;
            }
            double x = v[i] * (0.9 + 0.2 * random.nextDouble());
            boolean whole = s != null
                    && s.decl.kind instanceof ValueKind.Quantity q
                    && q.kind().whole();
            v[i] = whole ? Math.rint(x) : x;
        }
        return v;
    }

    private static List<Asked> checks(DriveGraph g) {
        List<Asked> out = new ArrayList<>();
        for (DriveGraph.RateUse r : g.rates()) {
            if (r.space() != null) {
                for (Slot s : DriveBuilder.checks(g, r.space())) {
                    if (s.register() >= 0) {
                        out.add(new Asked(
                                r.syntax().method().text() + " " + s.decl.name,
                                s.register(),
                                bends(g.tape(), s.register())));
                    }
                }
            }
        }
        return out;
    }

    private static List<Slot> values(DriveGraph g, Run run) {
        List<Slot> out = new ArrayList<>();
        for (int r = 0; r < g.tape().size(); r++) {
            Slot s = g.ownerOf(r);
            if (s != null && s.register() == r && !Double.isNaN(run.at(r))) {
                out.add(s);
            }
        }
        return out;
    }

    /** The registers behind one at which something may go in steps or have a corner. */
    private static int[] bends(Tape t, int register) {
        boolean[] behind = new boolean[t.size()];
        List<Integer> todo = new ArrayList<>(List.of(register));
        int[] out = new int[t.size()];
        int n = 0;
        while (!todo.isEmpty()) {
            int r = todo.remove(todo.size() - 1);
            if (behind[r]) {
                continue;
            }
            behind[r] = true;
            Op op = t.op(r);
            switch (op) {
                case SELECT, MIN, MAX, ABS, SIGN, TABLE, NEAREST_KEY, NEXT_KEY, FLOOR, CEIL, ROUND, COMMON_DIVISOR:
                    out[n++] = r;
                    break;
                default:
            }
            int count = t.operands(r);
            if (count > 0) {
                todo.add(t.a(r));
            }
            if (count > 1) {
                todo.add(t.b(r));
            }
            if (count > 2 || op == Op.ROOT || op == Op.SETTLE) {
                todo.add(t.c(r));
            }
        }
        return Arrays.copyOf(out, n);
    }

    private static boolean bent(Tape t, int[] bends, double[] v, double[][] beside) {
        for (int r : bends) {
            for (double[] other : beside) {
                if (side(t, r, v) != side(t, r, other)) {
                    return true;
                }
            }
        }
        return false;
    }

    /** A number that is another one on the other side of a step. */
    private static double side(Tape t, int r, double[] v) {
        double x = v[t.a(r)];
        switch (t.op(r)) {
            case SELECT:
                return Double.isNaN(x) ? 2 : x != 0 ? 1 : 0;
            case MIN, MAX:
                return Math.signum(x - v[t.b(r)]);
            case ABS, SIGN:
                return Math.signum(x);
            case TABLE: {
                Interpolation table = t.table(t.b(r));
                int i = table.segment(x);
                // on a row itself: a number of its own, so that leaving the row shows
                return i >= 0 ? (x == table.first() || table.listed(x) == 1 ? -i - 2 : i) : zero(v[r]) + 0.5;
            }
            default:
                return zero(v[r]);
        }
    }

    private static double zero(double v) {
        return Double.isNaN(v) ? 0.25 : v;
    }
}
