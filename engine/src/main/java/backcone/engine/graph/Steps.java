package backcone.engine.graph;

import org.jspecify.annotations.Nullable;

/**
 * Operations of a tape in the order in which they run, packed one behind the other: all of them, or those that change with one
 * register. Made once per tape and question; only read afterwards.
 */
public final class Steps {
    public final int count;
    public final Op[] op;
    public final int[] register;
    public final int[] a;
    public final int[] b;
    public final int[] c;

    /** For the operation that begins a region: where the region ends. */
    public final int[] end;

    Steps(Tape tape, boolean @Nullable [] keep) {
        int[] order = tape.order;
        int all = tape.ordered;
        int n = all;
        if (keep != null) {
            n = 0;
            for (int i = 0; i < all; i++) {
                if (keep[order[i]]) {
                    n++;
                }
            }
        }
        count = n;
        op = new Op[n];
        register = new int[n];
        a = new int[n];
        b = new int[n];
        c = new int[n];
        end = new int[n];
        int[] open = new int[n]; // where the regions began that are not closed yet
        int depth = 0;
        int k = 0;
        for (int i = 0; i < all; i++) {
            int r = order[i];
            if (keep != null && !keep[r]) {
                continue;
            }
            Op o = tape.op(r);
            op[k] = o;
            register[k] = r;
            a[k] = tape.a[r];
            b[k] = tape.b[r];
            c[k] = tape.c[r];
            if (o == Op.ROOT || o == Op.SETTLE) {
                open[depth++] = k;
            } else if (o == Op.END) {
                end[open[--depth]] = k;
            }
            k++;
        }
    }
}
