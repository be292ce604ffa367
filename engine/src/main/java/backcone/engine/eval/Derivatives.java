package backcone.engine.eval;

import backcone.engine.graph.DriveGraph;
import backcone.engine.graph.Op;
import backcone.engine.graph.Tape;

/**
 * How one register moves with every other, by one sweep backwards over the values of a run; the values themselves are only
 * read. A choice counts by the arm taken, a least or greatest value by the one it is, a table by the rows in use; what
 * goes in steps (comparisons, rounding, steps and keys of tables) has slope 0, and whole numbers count as continuous.
 * Roots and iterations move as their equation says: x with F(x, p) = 0 by −F_p / F_x, x = G(x, p) by G_p / (1 − G_x).
 * NaN where the register is open or at fault, or a slope is infinite.
 */
public final class Derivatives {
    private final Tape tape;
    private final double[] value;
    private final double[] slope;
    private final boolean none;

    public Derivatives(Run run, int register) {
        this(run.graph.tape(), run.values(), register);
    }

    /** Of a register of a tape; {@code value} are the values of all its registers. */
    public Derivatives(Tape tape, double[] value, int register) {
        this.tape = tape;
        this.value = value;
        // a register compiled after the run has no value in it
        this.none = register < 0 || register >= value.length || Double.isNaN(value[register]);
        this.slope = new double[none ? 0 : tape.size()];
        if (!none) {
            slope[register] = 1;
            sweep(0, tape.length(), slope);
        }
    }

    /** By a register. */
    public double by(int register) {
        if (none || register < 0 || register >= slope.length) {
            return Double.NaN;
        }
        double s = slope[register];
        return Double.isFinite(s) ? s : Double.NaN;
    }

    /** By an input of the drive, in base units. */
    public double by(DriveGraph.Input input) {
        return by(input.register());
    }

    /** By the factor on the load; 0 where no given value scales with load. */
    public double byLoad(DriveGraph graph) {
        return graph.loadRegister() < 0 && !none ? 0 : by(graph.loadRegister());
    }

    /** From positions {@code to} (exclusive) down to {@code from}: hands on what each register has gathered in {@code d}. */
    private void sweep(int from, int to, double[] d) {
        int[] begins = begins(from, to);
        for (int i = to - 1; i >= from; i--) {
            int r = tape.at(i);
            Op op = tape.op(r);
            if (op == Op.END) {
                int begin = begins[i - from];
                unknown(begin, i, d);
                i = begin;
            } else if (d[r] != 0) {
                step(op, r, d[r], d);
            }
        }
    }

    /** Where the region begins that ends at a position: of the outermost regions only. */
    private int[] begins(int from, int to) {
        int[] out = new int[to - from];
        for (int i = from; i < to; i++) {
            Op op = tape.op(tape.at(i));
            if (op == Op.ROOT || op == Op.SETTLE) {
                int end = tape.blockEnd(i);
                out[end - from] = i;
                i = end;
            }
        }
        return out;
    }

    /** A region: first what was computed on the way is handed down to the unknown, then the unknown by its equation. */
    private void unknown(int begin, int end, double[] d) {
        int x = tape.at(begin);
        boolean used = d[x] != 0;
        for (int i = begin + 1; i < end && !used; i++) {
            used = d[tape.at(i)] != 0;
        }
        if (!used) {
            return;
        }
        sweep(begin + 1, end, d);
        double dx = d[x];
        if (dx == 0) {
            return;
        }
        double[] g = new double[tape.size()];
        g[tape.b(tape.at(end))] = 1;
        sweep(begin + 1, end, g);
        double factor = tape.op(x) == Op.ROOT ? -dx / g[x] : dx / (1 - g[x]);
        boolean[] inside = new boolean[tape.size()];
        for (int i = begin; i <= end; i++) {
            inside[tape.at(i)] = true;
        }
        for (int r = 0; r < g.length; r++) {
            if (g[r] != 0 && !inside[r]) {
                d[r] += factor * g[r];
            }
        }
    }

    private void step(Op op, int r, double s, double[] d) {
        int a = tape.a(r);
        int b = tape.b(r);
        double y = value[r];
        switch (op) {
            case NEG:
                d[a] -= s;
                break;
            case ABS:
                add(d, a, s, Math.signum(value[a]));
                break;
            case SQRT:
                add(d, a, s, 0.5 / y);
                break;
            case EXP:
                add(d, a, s, y);
                break;
            case LN:
                add(d, a, s, 1 / value[a]);
                break;
            case LOG10:
                add(d, a, s, 1 / (value[a] * Math.log(10)));
                break;
            case SIN:
                add(d, a, s, Math.cos(value[a]));
                break;
            case COS:
                add(d, a, s, -Math.sin(value[a]));
                break;
            case TAN:
                add(d, a, s, 1 + y * y);
                break;
            case ASIN:
                add(d, a, s, 1 / Math.sqrt((1 - value[a]) * (1 + value[a])));
                break;
            case ACOS:
                add(d, a, s, -1 / Math.sqrt((1 - value[a]) * (1 + value[a])));
                break;
            case ATAN:
                add(d, a, s, 1 / (1 + value[a] * value[a]));
                break;
            case ADD:
                d[a] += s;
                d[b] += s;
                break;
            case SUB:
                d[a] += s;
                d[b] -= s;
                break;
            case MUL: {
                double u = value[a];
                double v = value[b];
                add(d, a, s, v);
                add(d, b, s, u);
                break;
            }
            case DIV:
                add(d, a, s, 1 / value[b]);
                add(d, b, s, -y / value[b]);
                break;
            case POW:
                power(a, b, y, s, d);
                break;
            case ATAN2: {
                double u = value[a];
                double v = value[b];
                double square = u * u + v * v;
                add(d, a, s, v / square);
                add(d, b, s, -u / square);
                break;
            }
            case MIN:
                d[value[a] <= value[b] ? a : b] += s;
                break;
            case MAX:
                d[value[a] >= value[b] ? a : b] += s;
                break;
            case SELECT:
                d[value[a] != 0 ? b : tape.c(r)] += s;
                break;
            case TABLE:
                add(d, a, s, tape.table(b).slope(value[a]));
                break;
            default:
            // numbers, truths, and what goes in steps
        }
    }

    private void power(int a, int b, double y, double s, double[] d) {
        double x = value[a];
        double e = value[b];
        if (e != 0) {
            add(d, a, s, e == 1 ? 1 : e == 2 ? 2 * x : e * Math.pow(x, e - 1));
        }
        // an exponent that is a number needs no slope, and below zero there is none
        if (tape.op(b) != Op.CONST) {
            add(d, b, s, x == 0 && e > 0 ? 0 : y * Math.log(x));
        }
    }

    private static void add(double[] d, int r, double s, double by) {
        if (by != 0) {
            d[r] += s * by;
        }
    }
}
