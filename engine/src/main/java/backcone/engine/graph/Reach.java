package backcone.engine.graph;

/**
 * On which registers each of some registers rests, whatever the numbers are: all of them found in one pass backwards over the
 * tape.
 */
public final class Reach {
    private final int[] targets;
    private final int words;
    private final long[] bits;

    Reach(Tape tape, int[] targets) {
        this.targets = targets;
        this.words = (targets.length + 63) / 64;
        this.bits = new long[tape.size() * words];
        for (int t = 0; t < targets.length; t++) {
            if (targets[t] >= 0) {
                bits[targets[t] * words + t / 64] |= 1L << (t % 64);
            }
        }
        for (int i = tape.ordered - 1; i >= 0; i--) {
            int r = tape.order[i];
            int n = tape.operands(r);
            Op op = tape.op(r);
            if (op == Op.END) {
                continue;
            }
            if (n > 0) {
                hand(r, tape.a[r]);
            }
            if (n > 1) {
                hand(r, tape.b[r]);
            }
            if (n > 2) {
                hand(r, tape.c[r]);
            }
            if ((op == Op.ROOT || op == Op.SETTLE) && hand(r, tape.c[r])) {
                i = tape.blockEnd(i); // its region once more
            }
        }
    }

    /** Whether that told something new. */
    private boolean hand(int from, int to) {
        boolean news = false;
        for (int w = 0; w < words; w++) {
            long before = bits[to * words + w];
            long now = before | bits[from * words + w];
            bits[to * words + w] = now;
            news |= now != before;
        }
        return news;
    }

    public int register(int target) {
        return targets[target];
    }

    /** Whether target number {@code target} rests on a register, or is it. */
    public boolean of(int target, int register) {
        int at = register * words + target / 64;
        // a register compiled later is not among them
        return register >= 0 && at < bits.length && (bits[at] >> (target % 64) & 1) != 0;
    }
}
