package backcone.engine.numeric;

/** Reading between the rows of a table whose keys rise. NaN where it may not be read. */
public final class Interpolation {
    public enum Between {
        EXACT,
        LINEAR,
        INVERSE,
        LOGLOG,
        STEP
    }

    public enum Beyond {
        HOLD,
        EXTEND,
        REFUSE
    }

    private final double[] keys;
    private final double[] values;
    private final Between between;
    private final Beyond below;
    private final Beyond above;

    public Interpolation(double[] keys, double[] values, Between between, Beyond below, Beyond above) {
        this.keys = keys.clone();
        this.values = values.clone();
        this.between = between;
        this.below = below;
        this.above = above;
    }

    public double first() {
        return keys[0];
    }

    public double last() {
        return keys[keys.length - 1];
    }

    /** The value at {@code key}, in the table's own units. */
    public double at(double key) {
        int n = keys.length;
        if (Double.isNaN(key) || n == 0) {
            return Double.NaN;
        }
        if (key < keys[0]) {
            return below == Beyond.REFUSE ? near(key, 0) : below == Beyond.HOLD || n == 1 ? values[0] : between(key, 0);
        }
        if (key > keys[n - 1]) {
            return above == Beyond.REFUSE
                    ? near(key, n - 1)
                    : above == Beyond.HOLD || n == 1 ? values[n - 1] : between(key, n - 2);
        }
        int i = index(key);
        if (keys[i] == key) {
            return values[i];
        }
        if (between == Between.EXACT) {
            double low = near(key, i);
            return Double.isNaN(low) && i + 1 < n ? near(key, i + 1) : low;
        }
        if (between == Between.STEP) {
            return values[i];
        }
        return between(key, i);
    }

    /**
     * The rows between which the value at {@code key} is read: {@code i} for rows i and i + 1; at a row's own key the rows
     * above it, at the last those below. −1 where the value does not move with the key: steps, listed keys only, held
     * ends.
     */
    public int segment(double key) {
        int n = keys.length;
        if (Double.isNaN(key) || n < 2 || between == Between.EXACT || between == Between.STEP) {
            return -1;
        }
        if (key < keys[0]) {
            return below == Beyond.HOLD ? -1 : 0;
        }
        if (key > keys[n - 1]) {
            return above == Beyond.HOLD ? -1 : n - 2;
        }
        return Math.min(index(key), n - 2);
    }

    /** The derivative of {@link #at} by the key, in the table's own units; NaN where the table may not be read. */
    public double slope(double key) {
        double y = at(key);
        if (Double.isNaN(y)) {
            return Double.NaN;
        }
        int i = segment(key);
        if (i < 0) {
            return 0;
        }
        double x0 = keys[i];
        double x1 = keys[i + 1];
        double y0 = values[i];
        double y1 = values[i + 1];
        switch (between) {
            case INVERSE:
                return -(y1 - y0) / (1 / x1 - 1 / x0) / (key * key);
            case LOGLOG:
                return y / key * Math.log(y1 / y0) / Math.log(x1 / x0);
            default:
                return (y1 - y0) / (x1 - x0);
        }
    }

    /** A key that differs from a row's by rounding only is that row's. */
    private double near(double key, int i) {
        return Math.abs(key - keys[i]) <= 1e-9 * Math.abs(keys[i]) ? values[i] : Double.NaN;
    }

    private double between(double key, int i) {
        double x0 = keys[i];
        double x1 = keys[i + 1];
        double y0 = values[i];
        double y1 = values[i + 1];
        switch (between) {
            case INVERSE:
                double t = (1 / key - 1 / x0) / (1 / x1 - 1 / x0);
                return y0 + t * (y1 - y0);
            case LOGLOG:
                double s = Math.log(key / x0) / Math.log(x1 / x0);
                return y0 * Math.exp(s * Math.log(y1 / y0));
            default:
                return y0 + (key - x0) / (x1 - x0) * (y1 - y0);
        }
    }

    /** Largest i with keys[i] <= key. */
    private int index(double key) {
        int lo = 0;
        int hi = keys.length - 1;
        while (lo < hi) {
            int mid = (lo + hi + 1) >>> 1;
            if (keys[mid] <= key) {
                lo = mid;
            } else {
                hi = mid - 1;
            }
        }
        return lo;
    }

    /** The key nearest to x. */
    public double nearestKey(double x) {
        double best = Double.NaN;
        for (double k : keys) {
            if (Double.isNaN(best) || Math.abs(k - x) < Math.abs(best - x)) {
                best = k;
            }
        }
        return best;
    }

    /** The smallest key that is not below x; NaN when there is none. */
    public double nextKey(double x) {
        for (double k : keys) {
            if (k >= x * (1 - 1e-9)) {
                return k;
            }
        }
        return Double.NaN;
    }

    /** 1 when x is one of the keys, else 0. */
    public double listed(double x) {
        for (double k : keys) {
            if (Math.abs(k - x) <= 1e-9 * Math.abs(k)) {
                return 1;
            }
        }
        return 0;
    }
}
