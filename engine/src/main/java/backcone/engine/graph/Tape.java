package backcone.engine.graph;

import backcone.engine.numeric.Interpolation;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.Map;
import java.util.concurrent.ConcurrentHashMap;
import org.jspecify.annotations.Nullable;

/**
 * One register tape: register i holds the result of operation i. Built once per structure of a drive; numbers of the
 * drive are {@link Op#INPUT} registers whose values may be replaced. {@code order} is the order of execution, in which the
 * region of an unknown stands between its ROOT or SETTLE and its END.
 */
public final class Tape {
    byte[] op = new byte[256];
    int[] a = new int[256];
    int[] b = new int[256];
    int[] c = new int[256];
    private double[] constant = new double[256];
    int size;
    int[] order = new int[256];
    int ordered;
    private final List<Interpolation> tables = new ArrayList<>();
    private final List<@Nullable Object> reasons = new ArrayList<>();
    private int[] blockEnd = new int[0];
    private final Map<Long, Steps> steps = new ConcurrentHashMap<>();
    private final Map<Integer, boolean[]> changing = new ConcurrentHashMap<>();

    private static final Op[] OPS = Op.values();
    private static final byte END = (byte) Op.END.ordinal();

    int emit(Op o, int x, int y, int z, double value) {
        if (size == op.length) {
            int n = size * 2;
            op = Arrays.copyOf(op, n);
            a = Arrays.copyOf(a, n);
            b = Arrays.copyOf(b, n);
            c = Arrays.copyOf(c, n);
            constant = Arrays.copyOf(constant, n);
        }
        if (ordered == order.length) {
            order = Arrays.copyOf(order, ordered * 2);
        }
        int r = size++;
        op[r] = (byte) o.ordinal();
        a[r] = x;
        b[r] = y;
        c[r] = z;
        constant[r] = value;
        order[ordered++] = r;
        return r;
    }

    int addTable(Interpolation t) {
        tables.add(t);
        return tables.size() - 1;
    }

    /** Why a register is open or at fault; its index is kept in the register's {@code a}. */
    int addReason(Object reason) {
        reasons.add(reason);
        return reasons.size() - 1;
    }

    int position() {
        return ordered;
    }

    /**
     * Closes the region that began at {@code from} (position of the unknown's operation): operations in it that do not
     * depend on the unknown are moved before it, so that they run once.
     */
    void close(int from, int unknown) {
        int n = ordered - from;
        int[] moved = new int[n];
        int[] kept = new int[n];
        int m = 0;
        int k = 0;
        boolean[] depends = new boolean[size];
        depends[unknown] = true;
        int i = from;
        while (i < ordered) {
            int r = order[i];
            int end = i;
            boolean dep = r == unknown;
            if (r != unknown && (op(r) == Op.ROOT || op(r) == Op.SETTLE)) {
                // an inner region moves as a whole
                while (!(op(order[end]) == Op.END && a[order[end]] == r)) {
                    end++;
                }
            }
            for (int j = i; j <= end; j++) {
                dep |= uses(order[j], depends);
            }
            for (int j = i; j <= end; j++) {
                if (dep) {
                    depends[order[j]] = true;
                    kept[k++] = order[j];
                } else {
                    moved[m++] = order[j];
                }
            }
            i = end + 1;
        }
        System.arraycopy(moved, 0, order, from, m);
        System.arraycopy(kept, 0, order, from + m, k);
    }

    private boolean uses(int r, boolean[] flags) {
        int count = operands(r);
        return (count > 0 && flags[a[r]]) || (count > 1 && flags[b[r]]) || (count > 2 && flags[c[r]]);
    }

    /** How many of a, b, c are registers. */
    public int operands(int r) {
        switch (op(r)) {
            case CONST:
            case INPUT:
            case LOAD:
            case OPEN:
                return 0;
            case NEG:
            case NOT:
            case ABS:
            case SIGN:
            case SQRT:
            case EXP:
            case LN:
            case LOG10:
            case SIN:
            case COS:
            case TAN:
            case ASIN:
            case ACOS:
            case ATAN:
            case FLOOR:
            case CEIL:
            case ROUND:
            case TABLE:
            case NEAREST_KEY:
            case NEXT_KEY:
            case LISTED_KEY:
                return 1;
            case SELECT:
                return 3;
            default:
                return 2;
        }
    }

    /** Finds where each region ends; call once when the tape is complete. */
    void finish() {
        steps.clear();
        changing.clear();
        blockEnd = new int[ordered];
        int[] start = new int[size];
        for (int i = 0; i < ordered; i++) {
            Op o = op(order[i]);
            if (o == Op.ROOT || o == Op.SETTLE) {
                start[order[i]] = i;
            } else if (o == Op.END) {
                blockEnd[start[a[order[i]]]] = i;
            }
        }
    }

    public int size() {
        return size;
    }

    public int length() {
        return ordered;
    }

    public int at(int position) {
        return order[position];
    }

    public int blockEnd(int position) {
        return blockEnd[position];
    }

    public Op op(int r) {
        return OPS[op[r]];
    }

    public int a(int r) {
        return a[r];
    }

    public int b(int r) {
        return b[r];
    }

    public int c(int r) {
        return c[r];
    }

    public double constant(int r) {
        return constant[r];
    }

    public Interpolation table(int index) {
        return tables.get(index);
    }

    public @Nullable Object reason(int index) {
        return reasons.get(index);
    }

    /** All operations in order. */
    public Steps all() {
        return steps.computeIfAbsent(-1L, k -> new Steps(this, null));
    }

    /** What of {@code register} changes with {@code cause}. */
    public Steps between(int register, int cause) {
        return between(new Reach(this, new int[] {register}), 0, cause);
    }

    /** What of the target number {@code target} of {@code reach} changes with {@code cause}. */
    public Steps between(Reach reach, int target, int cause) {
        return steps.computeIfAbsent((long) reach.register(target) << 32 | cause, k -> {
            boolean[] keep = changing(cause).clone();
            for (int r = 0; r < size; r++) {
                keep[r] &= op[r] == END ? reach.of(target, a[r]) : reach.of(target, r);
            }
            return new Steps(this, keep);
        });
    }

    /** Everything that changes with {@code cause}. */
    public Steps after(int cause) {
        return steps.computeIfAbsent(1L << 62 | cause, k -> new Steps(this, changing(cause)));
    }

    /** Whether a register changes with {@code cause}, register by register; the END of a region as its unknown. */
    private boolean[] changing(int cause) {
        return changing.computeIfAbsent(cause, k -> {
            boolean[] keep = new boolean[size];
            for (int i = 0; i < ordered; i++) {
                int x = order[i];
                if (op[x] != END) {
                    keep[x] |= x == cause || uses(x, keep);
                    continue;
                }
                int unknown = a[x];
                if (keep[b[x]] && !keep[unknown]) {
                    keep[unknown] = true;
                    i = startOf(i, unknown); // its region once more
                }
                keep[x] = keep[unknown];
            }
            return keep;
        });
    }

    private int startOf(int end, int unknown) {
        int i = end;
        while (order[i] != unknown) {
            i--;
        }
        return i;
    }

    /** Whether {@code r} depends on {@code on}, whatever the numbers are. */
    public boolean depends(int r, int on) {
        boolean[] seen = new boolean[size];
        int[] stack = new int[size * 3 + 3];
        int n = 0;
        stack[n++] = r;
        while (n > 0) {
            int x = stack[--n];
            if (x == on) {
                return true;
            }
            if (seen[x]) {
                continue;
            }
            seen[x] = true;
            int count = operands(x);
            if (op(x) == Op.ROOT || op(x) == Op.SETTLE) {
                stack[n++] = c[x];
            }
            if (count > 0) {
                stack[n++] = a[x];
            }
            if (count > 1) {
                stack[n++] = b[x];
            }
            if (count > 2) {
                stack[n++] = c[x];
            }
        }
        return false;
    }

    /** Sets the residual of an unknown, so that dependence can be followed through it. */
    void residual(int unknown, int register) {
        c[unknown] = register;
    }
}
