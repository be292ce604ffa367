package backcone.engine;

/** Circles and the line of action of two involute gears in the transverse plane; the pinion's axis is the origin. */
final class Plane {
    private Plane() {}

    /** Contact ratio of two external gears. */
    static double contactRatio(double base1, double tip1, double base2, double tip2, double axes, double teeth1) {
        double[][] p = path(base1, tip1, base2, tip2, axes);
        return Math.hypot(p[1][0] - p[0][0], p[1][1] - p[0][1]) / (2 * Math.PI * base1 / teeth1);
    }

    /**
     * Start and end of contact of two external gears: the tip circles cut off a piece of the tangent to both base circles.
     * The wheel's axis is at (axes, 0).
     */
    static double[][] path(double base1, double tip1, double base2, double tip2, double axes) {
        double phi = Math.acos((base1 + base2) / axes);
        // it touches the first base circle here, and runs on square to the radius
        double[] at = {base1 * Math.cos(phi), base1 * Math.sin(phi)};
        double[] on = {Math.sin(phi), -Math.cos(phi)};
        return cut(at, on, crossing(at, on, axes, tip2, -1), crossing(at, on, 0, tip1, 1));
    }

    /** The same within a ring, whose axis is at (−axes, 0): contact starts at the ring's tips. */
    static double[][] innerPath(double base1, double tip1, double base2, double tip2, double axes) {
        double phi = Math.acos((base2 - base1) / axes);
        double[] at = {base1 * Math.cos(phi), base1 * Math.sin(phi)};
        double[] on = {Math.sin(phi), -Math.cos(phi)};
        return cut(at, on, crossing(at, on, -axes, tip2, 1), crossing(at, on, 0, tip1, 1));
    }

    private static double[][] cut(double[] at, double[] on, double from, double to) {
        return new double[][] {{at[0] + from * on[0], at[1] + from * on[1]}, {at[0] + to * on[0], at[1] + to * on[1]}};
    }

    /** Where a line leaves (or enters) a circle around (middle, 0). */
    private static double crossing(double[] from, double[] on, double middle, double radius, int side) {
        double dx = from[0] - middle;
        double dy = from[1];
        double half = dx * on[0] + dy * on[1];
        return -half + side * Math.sqrt(half * half - dx * dx - dy * dy + radius * radius);
    }
}
