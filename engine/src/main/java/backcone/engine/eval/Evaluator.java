package backcone.engine.eval;

import backcone.engine.graph.Op;
import backcone.engine.graph.Tape;
import org.jspecify.annotations.Nullable;

/** Runs a tape. A register that is open, at fault, infinite or undefined is NaN; {@link Faults} tells why. */
public final class Evaluator {
    private static final int MOST_STEPS = 200;
    private final Tape tape;
    private final double[] value;
    private final int[] order;
    private final int[] blockEnd;

    public Evaluator(Tape tape) {
        this.tape = tape;
        this.value = new double[tape.size()];
        this.order = new int[tape.length()];
        this.blockEnd = new int[tape.length()];
        for (int i = 0; i < order.length; i++) {
            order[i] = tape.at(i);
            blockEnd[i] = tape.blockEnd(i);
        }
    }

    /**
     * Runs only what of {@code register} changes with {@code cause}; everything else keeps its value from {@code base}.
     * Same digits as a full run.
     */
    public Evaluator(Tape tape, double[] base, int register, int cause) {
        this.tape = tape;
        this.value = base.clone();
        boolean[] keep = tape.between(register, cause);
        int n = 0;
        for (int i = 0; i < tape.length(); i++) {
            n += keep[tape.at(i)] ? 1 : 0;
        }
        this.order = new int[n];
        this.blockEnd = new int[n];
        int[] start = new int[tape.size()];
        int k = 0;
        for (int i = 0; i < tape.length(); i++) {
            int r = tape.at(i);
            if (keep[r]) {
                order[k] = r;
                Op op = tape.op(r);
                if (op == Op.ROOT || op == Op.SETTLE) {
                    start[r] = k;
                } else if (op == Op.END) {
                    blockEnd[start[tape.a(r)]] = k;
                }
                k++;
            }
        }
    }

    /** Runs with the constants and inputs of the tape. {@code inputs} replaces INPUT registers where not null. */
    public double[] run(double load, double @Nullable [] inputs) {
        span(0, order.length, load, inputs);
        return value;
    }

    private void span(int from, int to, double load, double @Nullable [] inputs) {
        for (int i = from; i < to; i++) {
            int r = order[i];
            Op op = tape.op(r);
            if (op == Op.ROOT) {
                int end = blockEnd[i];
                root(i, end, load, inputs);
                i = end;
            } else if (op == Op.SETTLE) {
                int end = blockEnd[i];
                settle(i, end, load, inputs);
                i = end;
            } else if (op != Op.END) {
                double v = step(op, r, load, inputs);
                value[r] = Double.isFinite(v) ? v : Double.NaN;
            }
        }
    }

    private double step(Op op, int r, double load, double @Nullable [] inputs) {
        double[] v = value;
        switch (op) {
            case CONST:
                return tape.constant(r);
            case INPUT:
                return inputs == null ? tape.constant(r) : inputs[tape.b(r)];
            case LOAD:
                return load;
            case OPEN:
                return Double.NaN;
            case NEG:
                return -v[tape.a(r)];
            case NOT: {
                double x = v[tape.a(r)];
                return Double.isNaN(x) ? x : x == 0 ? 1 : 0;
            }
            case ABS:
                return Math.abs(v[tape.a(r)]);
            case SIGN:
                return Math.signum(v[tape.a(r)]);
            case SQRT:
                return Math.sqrt(v[tape.a(r)]);
            case EXP:
                return Math.exp(v[tape.a(r)]);
            case LN:
                return Math.log(v[tape.a(r)]);
            case LOG10:
                return Math.log10(v[tape.a(r)]);
            case SIN:
                return Math.sin(v[tape.a(r)]);
            case COS:
                return Math.cos(v[tape.a(r)]);
            case TAN:
                return Math.tan(v[tape.a(r)]);
            case ASIN:
                return Math.asin(v[tape.a(r)]);
            case ACOS:
                return Math.acos(v[tape.a(r)]);
            case ATAN:
                return Math.atan(v[tape.a(r)]);
            case FLOOR:
                return Math.floor(v[tape.a(r)] + 1e-9);
            case CEIL:
                return Math.ceil(v[tape.a(r)] - 1e-9);
            case ROUND:
                return Math.rint(v[tape.a(r)]);
            case ADD:
                return v[tape.a(r)] + v[tape.b(r)];
            case SUB:
                return v[tape.a(r)] - v[tape.b(r)];
            case MUL:
                return v[tape.a(r)] * v[tape.b(r)];
            case DIV:
                return v[tape.a(r)] / v[tape.b(r)];
            case POW:
                return power(v[tape.a(r)], v[tape.b(r)]);
            case ATAN2:
                return Math.atan2(v[tape.a(r)], v[tape.b(r)]);
            case MIN:
                return Math.min(v[tape.a(r)], v[tape.b(r)]);
            case MAX:
                return Math.max(v[tape.a(r)], v[tape.b(r)]);
            case COMMON_DIVISOR:
                return commonDivisor(v[tape.a(r)], v[tape.b(r)]);
            case LT:
            case LE:
            case GT:
            case GE:
            case EQ:
            case NE:
                return compare(op, v[tape.a(r)], v[tape.b(r)]);
            case AND: {
                double x = v[tape.a(r)];
                double y = v[tape.b(r)];
                return x == 0 || y == 0 ? 0 : x * y;
            }
            case OR: {
                double x = v[tape.a(r)];
                double y = v[tape.b(r)];
                return x == 1 || y == 1 ? 1 : x + y;
            }
            case SELECT: {
                double x = v[tape.a(r)];
                return Double.isNaN(x) ? x : x != 0 ? v[tape.b(r)] : v[tape.c(r)];
            }
            case TABLE:
                return tape.table(tape.b(r)).at(v[tape.a(r)]);
            case NEAREST_KEY:
                return tape.table(tape.b(r)).nearestKey(v[tape.a(r)]);
            case NEXT_KEY:
                return tape.table(tape.b(r)).nextKey(v[tape.a(r)]);
            case LISTED_KEY: {
                double x = v[tape.a(r)];
                return Double.isNaN(x) ? x : tape.table(tape.b(r)).listed(x);
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
        value[order[i]] = x;
        span(i + 1, end, load, inputs);
        return value[tape.b(order[end])];
    }

    /** Bracketed root by the Illinois rule with bisection as its net; the sign change is checked before. */
    private void root(int i, int end, double load, double @Nullable [] inputs) {
        int r = order[i];
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
        int r = order[i];
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
