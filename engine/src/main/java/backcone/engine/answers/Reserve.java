package backcone.engine.answers;

import java.util.function.DoubleUnaryOperator;

/** Where a bound is just met between two loads of which it is met at one alone. */
final class Reserve {
    /** Relative width at which the search ends: below what any answer shows, above the noise of long equations. */
    private static final double WIDTH = 1e-12;

    private static final int MOST = 120;

    private Reserve() {}

    /**
     * The load on the side that meets the bound. {@code distance} is not negative where it is met; it may go in steps. Steps
     * along the secant, kept inside the bracket, and a halving wherever two of them have not halved it.
     */
    static double between(double inner0, double outer0, boolean metInside, DoubleUnaryOperator distance) {
        double inner = inner0;
        double outer = outer0;
        double gi = distance.applyAsDouble(inner);
        double go = distance.applyAsDouble(outer);
        double wide = Math.abs(outer - inner);
        for (int k = 0; k < MOST; k++) {
            double width = Math.abs(outer - inner);
            double least = WIDTH * Math.abs(inner);
            if (width <= least) {
                break;
            }
            double x = inner + (outer - inner) / 2;
            if (k % 3 != 2 || width <= wide / 2) {
                double t = gi / (gi - go);
                double margin = least / width / 2;
                if (t >= 0 && t <= 1) {
                    x = inner + (outer - inner) * Math.min(Math.max(t, margin), 1 - margin);
                }
            }
            if (k % 3 == 2) {
                wide = width;
            }
            if (x == inner || x == outer) {
                break;
            }
            double g = distance.applyAsDouble(x);
            if (g >= 0 == metInside) {
                inner = x;
                gi = g;
            } else {
                outer = x;
                go = g;
            }
        }
        return metInside ? inner : outer;
    }
}
