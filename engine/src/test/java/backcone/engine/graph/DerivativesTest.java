package backcone.engine.graph;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import backcone.engine.eval.Derivatives;
import backcone.engine.eval.Evaluator;
import backcone.engine.numeric.Interpolation;
import backcone.engine.numeric.Interpolation.Between;
import backcone.engine.numeric.Interpolation.Beyond;
import java.util.function.DoubleUnaryOperator;
import org.junit.jupiter.api.Test;

/** Every operation against the derivative that a table of derivatives lists. */
class DerivativesTest {
    private final Tape t = new Tape();
    private int inputs;

    private int input(double v) {
        return t.emit(Op.INPUT, 0, inputs++, 0, v);
    }

    private int op(Op o, int a, int b, int c) {
        return t.emit(o, a, b, c, 0);
    }

    private Derivatives of(int register) {
        t.finish();
        return new Derivatives(t, new Evaluator(t).run(1, null), register);
    }

    private static void one(Op o, double x, double expected) {
        DerivativesTest d = new DerivativesTest();
        int in = d.input(x);
        int y = d.op(o, in, 0, 0);
        assertThat(d.of(y).by(in)).as(o + " at " + x).isCloseTo(expected, within(1e-14 * Math.abs(expected)));
    }

    private static void two(Op o, double x, double z, double byX, double byZ) {
        DerivativesTest d = new DerivativesTest();
        int a = d.input(x);
        int b = d.input(z);
        int y = d.op(o, a, b, 0);
        Derivatives got = d.of(y);
        assertThat(got.by(a)).as(o + " at " + x + ", " + z).isCloseTo(byX, within(1e-14 * Math.abs(byX)));
        assertThat(got.by(b)).as(o + " at " + x + ", " + z).isCloseTo(byZ, within(1e-14 * Math.abs(byZ)));
    }

    @Test
    void operationsOfOneValue() {
        one(Op.NEG, 3, -1);
        one(Op.ABS, -3, -1);
        one(Op.ABS, 3, 1);
        one(Op.SQRT, 9, 1.0 / 6);
        one(Op.EXP, 2, Math.exp(2));
        one(Op.LN, 4, 0.25);
        one(Op.LOG10, 10, 0.1 / Math.log(10));
        one(Op.SIN, 1, Math.cos(1));
        one(Op.COS, 1, -Math.sin(1));
        one(Op.TAN, 1, 1 / (Math.cos(1) * Math.cos(1)));
        one(Op.ASIN, 0.6, 1.25);
        one(Op.ACOS, 0.6, -1.25);
        one(Op.ATAN, 2, 0.2);
    }

    @Test
    void operationsOfTwoValues() {
        two(Op.ADD, 3, 5, 1, 1);
        two(Op.SUB, 3, 5, 1, -1);
        two(Op.MUL, 3, 5, 5, 3);
        two(Op.MUL, 0, 5, 5, 0);
        two(Op.DIV, 3, 4, 0.25, -3.0 / 16);
        two(Op.POW, 2, 3, 12, 8 * Math.log(2));
        two(Op.POW, 5, 2, 10, 25 * Math.log(5));
        two(Op.POW, 4, 0.5, 0.25, 2 * Math.log(4));
        two(Op.POW, 5, 0, 0, Math.log(5));
        two(Op.POW, 0, 1.5, 0, 0);
        two(Op.ATAN2, 3, 4, 4.0 / 25, -3.0 / 25);
        two(Op.MIN, 3, 4, 1, 0);
        two(Op.MAX, 3, 4, 0, 1);
    }

    @Test
    void whatGoesInStepsHasNoSlope() {
        for (Op o : new Op[] {Op.FLOOR, Op.CEIL, Op.ROUND, Op.SIGN, Op.NOT}) {
            one(o, 2.3, 0);
        }
        for (Op o : new Op[] {Op.LT, Op.LE, Op.GT, Op.GE, Op.EQ, Op.NE, Op.AND, Op.OR}) {
            two(o, 2, 3, 0, 0);
        }
        two(Op.COMMON_DIVISOR, 12, 18, 0, 0);
    }

    @Test
    void aValueUsedTwiceCountsTwice() {
        int x = input(3);
        int y = op(Op.MUL, x, x, 0);
        assertThat(of(op(Op.MUL, y, y, 0)).by(x)).isEqualTo(4 * 27);
    }

    @Test
    void aChoiceCountsByItsArm() {
        int on = input(1);
        int off = input(0);
        int x = input(3);
        int broken = op(Op.LN, input(-1), 0, 0);
        int first = op(Op.SELECT, on, x, broken);
        int second = op(Op.SELECT, off, broken, x);
        Derivatives d = of(op(Op.ADD, first, second, 0));
        assertThat(d.by(x)).isEqualTo(2);
        assertThat(d.by(on)).isZero();
    }

    private static Interpolation table(Between b, Beyond below, Beyond above) {
        return new Interpolation(new double[] {10, 20, 40}, new double[] {5, 3, 2}, b, below, above);
    }

    private static double table(Interpolation t, double key) {
        DerivativesTest d = new DerivativesTest();
        int x = d.input(key);
        int y = d.op(Op.TABLE, x, d.t.addTable(t), 0);
        return d.of(y).by(x);
    }

    @Test
    void tablesHaveTheSlopeOfTheRowsInUse() {
        assertThat(table(table(Between.LINEAR, Beyond.HOLD, Beyond.HOLD), 12)).isEqualTo(-0.2);
        assertThat(table(table(Between.LINEAR, Beyond.HOLD, Beyond.HOLD), 30)).isEqualTo(-0.05);
        // a + b / x through (20, 3) and (40, 2): 1 + 40 / x
        assertThat(table(table(Between.INVERSE, Beyond.HOLD, Beyond.HOLD), 25)).isCloseTo(-0.064, within(1e-15));
        // c x^p through (20, 3) and (40, 2): p = ln(2/3) / ln 2
        double p = Math.log(2 / 3.0) / Math.log(2);
        assertThat(table(table(Between.LOGLOG, Beyond.HOLD, Beyond.HOLD), 30))
                .isCloseTo(3 * p / 20 * Math.pow(1.5, p - 1), within(1e-15));
        assertThat(table(table(Between.STEP, Beyond.HOLD, Beyond.HOLD), 30)).isZero();
        assertThat(table(table(Between.EXACT, Beyond.HOLD, Beyond.HOLD), 20)).isZero();
    }

    @Test
    void tablesAreFlatWhereTheyHoldAndNothingWhereTheyRefuse() {
        Interpolation held = table(Between.LINEAR, Beyond.HOLD, Beyond.HOLD);
        assertThat(table(held, 5)).isZero();
        assertThat(table(held, 50)).isZero();
        Interpolation further = table(Between.LINEAR, Beyond.EXTEND, Beyond.EXTEND);
        assertThat(table(further, 5)).isEqualTo(-0.2);
        assertThat(table(further, 50)).isEqualTo(-0.05);
        Interpolation refused = table(Between.LINEAR, Beyond.REFUSE, Beyond.REFUSE);
        assertThat(table(refused, 5)).isNaN();
        assertThat(table(refused, 40)).isEqualTo(-0.05);
        assertThat(table(refused, 20)).isEqualTo(-0.05);
    }

    /** x³ + a x = b; by the theorem x_a = −x / (3 x² + a), x_b = 1 / (3 x² + a). */
    @Test
    void aRootMovesAsItsEquationSays() {
        int a = input(2);
        int b = input(12);
        int lo = t.emit(Op.CONST, 0, 0, 0, 0);
        int hi = t.emit(Op.CONST, 0, 0, 0, 10);
        int from = t.position();
        int x = op(Op.ROOT, lo, hi, 0);
        int square = op(Op.MUL, x, x, 0);
        int left = op(Op.ADD, op(Op.MUL, square, x, 0), op(Op.MUL, a, x, 0), 0);
        int aside = op(Op.MUL, b, b, 0);
        close(from, x, op(Op.SUB, left, b, 0));
        assertThat(new Evaluator(t).run(1, null)[x]).isCloseTo(2, within(1e-14));
        assertThat(of(x).by(b)).isCloseTo(1.0 / 14, within(1e-14));
        assertThat(of(x).by(a)).isCloseTo(-2.0 / 14, within(1e-14));
        // what was computed on the way may be used afterwards: x² + b²
        Derivatives d = of(op(Op.ADD, square, aside, 0));
        assertThat(d.by(b)).isCloseTo(2 * 2 / 14.0 + 24, within(1e-13));
        assertThat(d.by(a)).isCloseTo(-2 * 2 * 2 / 14.0, within(1e-14));
    }

    private void close(int from, int x, int last) {
        t.residual(x, last);
        t.emit(Op.END, x, last, 0, 0);
        t.close(from, x);
        t.finish();
    }

    /** x = cos(k x): x_k = −x sin(k x) / (1 + k sin(k x)). */
    @Test
    void anIterationMovesAsItsEquationSays() {
        int k = input(0.7);
        int start = t.emit(Op.CONST, 0, 0, 0, 0.5);
        int tolerance = t.emit(Op.CONST, 0, 0, 0, 1e-15);
        int from = t.position();
        int x = t.emit(Op.SETTLE, start, tolerance, 0, 500);
        close(from, x, op(Op.COS, op(Op.MUL, k, x, 0), 0, 0));
        double at = new Evaluator(t).run(1, null)[x];
        double sine = Math.sin(0.7 * at);
        assertThat(of(x).by(k)).isCloseTo(-at * sine / (1 + 0.7 * sine), within(1e-14));
    }

    /** Outer x with x · y(x) = a, where y² = b + x: everything by differences of the closed form. */
    @Test
    void aRootWithinARoot() {
        int a = input(6);
        int b = input(7);
        int lo = t.emit(Op.CONST, 0, 0, 0, 0);
        int hi = t.emit(Op.CONST, 0, 0, 0, 50);
        int outer = t.position();
        int x = op(Op.ROOT, lo, hi, 0);
        int sum = op(Op.ADD, b, x, 0);
        int inner = t.position();
        int y = op(Op.ROOT, lo, hi, 0);
        close(inner, y, op(Op.SUB, op(Op.MUL, y, y, 0), sum, 0));
        close(outer, x, op(Op.SUB, op(Op.MUL, x, y, 0), a, 0));
        assertThat(new Evaluator(t).run(1, null)[x]).isCloseTo(2, within(1e-13));
        assertThat(new Evaluator(t).run(1, null)[y]).isCloseTo(3, within(1e-13));
        // F = x √(b + x) − a at x = 2, b = 7: F_x = 3 + 2/6, F_b = 2/6
        assertThat(of(x).by(a)).isCloseTo(0.3, within(1e-12));
        assertThat(of(x).by(b)).isCloseTo(-0.1, within(1e-12));
        // y = √(b + x): y_b = (1 + x_b) / 6, y_a = x_a / 6
        assertThat(of(y).by(a)).isCloseTo(0.05, within(1e-12));
        assertThat(of(y).by(b)).isCloseTo(0.15, within(1e-12));
    }

    @Test
    void theLoadCountsLikeAnInput() {
        int load = t.emit(Op.LOAD, 0, 0, 0, 1);
        int p = input(30);
        assertThat(of(op(Op.POW, op(Op.MUL, load, p, 0), input(2), 0)).by(load)).isEqualTo(1800);
    }

    @Test
    void whatHasNoValueHasNoDerivative() {
        int x = input(-4);
        int fault = op(Op.SQRT, x, 0, 0);
        int zero = input(0);
        int edge = op(Op.SQRT, zero, 0, 0);
        int open = t.emit(Op.OPEN, t.addReason(""), 0, 0, 0);
        assertThat(of(fault).by(x)).isNaN();
        assertThat(of(edge).by(zero)).isNaN();
        assertThat(of(edge).by(x)).isZero();
        assertThat(of(op(Op.ADD, x, open, 0)).by(x)).isNaN();
        assertThat(of(-1).by(x)).isNaN();
        assertThat(of(x).by(-1)).isNaN();
        int lo = t.emit(Op.CONST, 0, 0, 0, 0);
        int from = t.position();
        int r = op(Op.ROOT, lo, zero, 0);
        close(from, r, op(Op.ADD, r, x, 0));
        assertThat(of(r).by(x)).isNaN();
    }

    /** A tape that grew after the run: no register of it is asked for that has no value. */
    @Test
    void aTapeMayGrowAfterTheRun() {
        int x = input(3);
        int y = op(Op.MUL, x, x, 0);
        t.finish();
        double[] values = new Evaluator(t).run(1, null);
        int later = op(Op.SIN, y, 0, 0);
        t.finish();
        assertThat(new Derivatives(t, values, y).by(x)).isEqualTo(6);
        assertThat(new Derivatives(t, values, later).by(x)).isNaN();
    }

    @Test
    void valuesAreOnlyRead() {
        int x = input(3);
        int y = op(Op.EXP, op(Op.SIN, x, 0, 0), 0, 0);
        t.finish();
        double[] values = new Evaluator(t).run(1, null);
        double[] before = values.clone();
        DoubleUnaryOperator twice = k -> new Derivatives(t, values, y).by(x);
        assertThat(twice.applyAsDouble(1)).isEqualTo(twice.applyAsDouble(2));
        assertThat(values).containsExactly(before);
    }
}
