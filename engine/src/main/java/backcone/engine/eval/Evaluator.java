package backcone.engine.eval;

import backcone.engine.graph.Op;
import backcone.engine.graph.Steps;
import backcone.engine.graph.Tape;
import org.jspecify.annotations.Nullable;

/** Runs a tape. A register that is open, at fault, infinite or undefined is NaN; {@link Faults} tells why. */
public final class Evaluator {
    private static final int MOST_STEPS = 200;
    private final Tape tape;
    private final double[] value;
    private final Steps steps;

    public Evaluator(Tape tape) {
        this.tape = tape;
        this.value = new double[tape.size()];
        this.steps = tape.all();
    }

    /** Runs only {@code steps} of the tape; everything else keeps its value from {@code base}. Same digits as a full run. */
    public Evaluator(Tape tape, double[] base, Steps steps) {
        this.tape = tape;
        this.value = base.clone();
        this.steps = steps;
    }

    /** Runs with the constants and inputs of the tape. {@code inputs} replaces INPUT registers where not null. */
    public double[] run(double load, double @Nullable [] inputs) {
        span(0, steps.count, load, inputs);
        return value;
    }

    private void span(int from, int to, double load, double @Nullable [] inputs) {
        Op[] ops = steps.op;
        int[] registers = steps.register;
        double[] v = value;
        for (int i = from; i < to; i++) {
            Op op = ops[i];
            if (op == Op.ROOT) {
                int end = steps.end[i];
                root(i, end, load, inputs);
                i = end;
            } else if (op == Op.SETTLE) {
                int end = steps.end[i];
                settle(i, end, load, inputs);
                i = end;
            } else if (op != Op.END) {
                double x = step(op, i, v, load, inputs);
                v[registers[i]] = Double.isFinite(x) ? x : Double.NaN;
            }
        }
    }

    private double step(Op op, int i, double[] v, double load, double @Nullable [] inputs) {
        int[] a = steps.a;
        int[] b = steps.b;
        switch (op) {
            case CONST:
                return tape.constant(steps.register[i]);
            case INPUT:
                return inputs == null ? tape.constant(steps.register[i]) : inputs[b[i]];
            case LOAD:
                return load;
            case OPEN:
                return Double.NaN;
            case NEG:
                return -v[a[i]];
            case NOT: {
                double x = v[a[i]];
                return Double.isNaN(x) ? x : x == 0 ? 1 : 0;
            }
            case ABS:
                return Math.abs(v[a[i]]);
            case SIGN:
                return Math.signum(v[a[i]]);
            case SQRT:
                return Math.sqrt(v[a[i]]);
            case EXP:
                return Math.exp(v[a[i]]);
            case LN:
                return Math.log(v[a[i]]);
            case LOG10:
                return Math.log10(v[a[i]]);
            case SIN:
                return Math.sin(v[a[i]]);
            case COS:
                return Math.cos(v[a[i]]);
            case TAN:
                return Math.tan(v[a[i]]);
            case ASIN:
                return Math.asin(v[a[i]]);
            case ACOS:
                return Math.acos(v[a[i]]);
            case ATAN:
                return Math.atan(v[a[i]]);
            case FLOOR:
                return Math.floor(v[a[i]] + 1e-9);
            case CEIL:
                return Math.ceil(v[a[i]] - 1e-9);
            case ROUND:
                return Math.rint(v[a[i]]);
            case ADD:
                return v[a[i]] + v[b[i]];
            case SUB:
                return v[a[i]] - v[b[i]];
            case MUL:
                return v[a[i]] * v[b[i]];
            case DIV:
                return v[a[i]] / v[b[i]];
            case POW:
                return power(v[a[i]], v[b[i]]);
            case ATAN2:
                return Math.atan2(v[a[i]], v[b[i]]);
            case MIN:
                return Math.min(v[a[i]], v[b[i]]);
            case MAX:
                return Math.max(v[a[i]], v[b[i]]);
            case COMMON_DIVISOR:
                return commonDivisor(v[a[i]], v[b[i]]);
            case LT:
            case LE:
            case GT:
            case GE:
            case EQ:
            case NE:
                return compare(op, v[a[i]], v[b[i]]);
            case AND: {
                double x = v[a[i]];
                double y = v[b[i]];
                return x == 0 || y == 0 ? 0 : x * y;
            }
            case OR: {
                double x = v[a[i]];
                double y = v[b[i]];
                return x == 1 || y == 1 ? 1 : x + y;
            }
            case SELECT: {
                double x = v[a[i]];
                return Double.isNaN(x) ? x : x != 0 ? v[b[i]] : v[steps.c[i]];
            }
            case TABLE:
                return tape.table(b[i]).at(v[a[i]]);
            case NEAREST_KEY:
                return tape.table(b[i]).nearestKey(v[a[i]]);
            case NEXT_KEY:
                return tape.table(b[i]).nextKey(v[a[i]]);
            case LISTED_KEY: {
                double x = v[a[i]];
                return Double.isNaN(x) ? x : tape.table(b[i]).listed(x);
            }
            default:
                throw new IllegalStateException(op.name());
        }
    }

    /** Squares and cubes as products: the same digits on every platform, and faster. */
    private static double power(double x, double e) {
        if (e == 2) {
            return x * x;
        }
        if (e == 3) {
            return x * x * x;
        }
        if (e == 0.5) {
            return Math.sqrt(x);
        }
        return Math.pow(x, e);
    }

    private static double compare(Op op, double x, double y) {
        if (Double.isNaN(x) || Double.isNaN(y)) {
            return Double.NaN;
        }
        boolean is;
        switch (op) {
            case LT:
                is = x < y;
                break;
            case LE:
                is = x <= y;
                break;
            case GT:
                is = x > y;
                break;
            case GE:
                is = x >= y;
                break;
            case EQ:
                is = x == y;
                break;
            default:
                is = x != y;
        }
        return is ? 1 : 0;
    }

    private static double commonDivisor(double x, double y) {
        if (x != Math.rint(x) || y != Math.rint(y) || Math.abs(x) > 1e9 || Math.abs(y) > 1e9) {
            return Double.NaN;
        }
        long p = Math.abs((long) x);
        long q = Math.abs((long) y);
        while (q != 0) {
            long t = p % q;
            p = q;
            q = t;
        }
        return p;
    }

    private double residual(int i, int end, double x, double load, double @Nullable [] inputs) {
        value[steps.register[i]] = x;
        span(i + 1, end, load, inputs);
        return value[steps.b[end]];
    }

    /** Bracketed root by the Illinois rule with bisection as its net; the sign change is checked before. */
    private void root(int i, int end, double load, double @Nullable [] inputs) {
        int r = steps.register[i];
        double lo = value[tape.a(r)];
        double hi = value[tape.b(r)];
        double flo = residual(i, end, lo, load, inputs);
        double fhi = residual(i, end, hi, load, inputs);
        double x = Double.NaN;
        if (flo == 0) {
            x = lo;
        } else if (fhi == 0) {
            x = hi;
        } else if (flo < 0 != fhi < 0 && Double.isFinite(flo) && Double.isFinite(fhi)) {
            x = bracketed(i, end, lo, hi, flo, fhi, load, inputs);
        }
        value[r] = x;
        span(i + 1, end, load, inputs);
    }

    private double bracketed(
            int i, int end, double lo0, double hi0, double flo0, double fhi0, double load, double @Nullable [] inputs) {
        double lo = lo0;
        double hi = hi0;
        double flo = flo0;
        double fhi = fhi0;
        double scale = Math.max(Math.abs(flo), Math.abs(fhi));
        int side = 0;
        double x = lo;
        for (int k = 0; k < MOST_STEPS; k++) {
            double width = hi - lo;
            x = k % 8 == 7 ? lo + width / 2 : (lo * fhi - hi * flo) / (fhi - flo);
            if (!(x > Math.min(lo, hi) && x < Math.max(lo, hi))) {
                x = lo + width / 2;
            }
            if (x == lo || x == hi || Math.abs(width) <= 1e-15 * Math.abs(x)) {
                break;
            }
            double f = residual(i, end, x, load, inputs);
            if (Double.isNaN(f)) {
                return Double.NaN;
            }
            if (f == 0) {
                return x;
            }
            if (f < 0 == flo < 0) {
                lo = x;
                flo = f;
                if (side == -1) {
                    fhi /= 2;
                }
                side = -1;
            } else {
                hi = x;
                fhi = f;
                if (side == 1) {
                    flo /= 2;
                }
                side = 1;
            }
        }
        // a sign change across a pole is no root
        return Math.abs(residual(i, end, x, load, inputs)) <= 1e-6 * scale ? x : Double.NaN;
    }

    private void settle(int i, int end, double load, double @Nullable [] inputs) {
        int r = steps.register[i];
        double x = value[tape.a(r)];
        double tolerance = value[tape.b(r)];
        int most = (int) tape.constant(r);
        for (int k = 0; k < most; k++) {
            double next = residual(i, end, x, load, inputs);
            if (Double.isNaN(next)) {
                break;
            }
            if (Math.abs(next - x) <= tolerance) {
                value[r] = next;
                span(i + 1, end, load, inputs);
                return;
            }
            x = next;
        }
        value[r] = Double.NaN;
        span(i + 1, end, load, inputs);
    }
}
