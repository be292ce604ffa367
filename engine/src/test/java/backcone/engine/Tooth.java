package backcone.engine;

import java.util.function.DoubleFunction;
import java.util.function.DoubleUnaryOperator;

/**
 * A tooth of a spur gear as a rack tool leaves it, in modules. The tool rolls over the pitch circle; what it touches in each
 * position is found by the law of gearing (the common normal passes through the pitch point) and turned back onto the gear.
 * Tangents and curvatures are those of the points, by differences. The tooth stands upright: its middle is the y axis, the
 * right flank is looked at.
 */
final class Tooth {
    /** Half of it and twice of it give the same to eight figures at least. */
    private static final double FINE = 4e-3;

    private final double radius;
    private final double angle;
    private final double depth;
    private final double edge;
    private final double centre;
    private final double flankAt;
    private final double shift;

    /**
     * @param teeth teeth of the (virtual) gear, a fraction too
     * @param angle pressure angle of the rack
     * @param depth depth of the tool's tip below its reference line
     * @param edge radius of the tool's tip corner
     * @param protuberance how far the corner stands out over the finished flank
     * @param shift distance of the reference line from the pitch circle, outward
     * @param thicker half of what the tooth has more in thickness at the reference line
     */
    Tooth(double teeth, double angle, double depth, double edge, double protuberance, double shift, double thicker) {
        this.radius = teeth / 2;
        this.angle = angle;
        this.depth = depth;
        this.edge = edge;
        this.shift = shift;
        // half a tooth of the tool at its reference line; the flank comes nearer to the middle of the tool's tooth
        // below
        this.flankAt = Math.PI / 4 - thicker;
        // the corner touches the flank, moved out by the protuberance, and the line of the tips
        double down = depth - edge;
        this.centre = flankAt - down * Math.tan(angle) - (edge - protuberance) / Math.cos(angle);
    }

    /** Whether the tool has a tip: its two corners do not overlap. */
    boolean toolIsPossible() {
        return centre > 0;
    }

    /** The tool's corner from its middle, and from the pitch point when the gear has turned by {@code roll}. */
    private double[] corner(double roll) {
        // at roll 0 the middle of a tooth of the tool stands over the pitch point; gear below at (0, -radius)
        return new double[] {-centre + radius * roll, -(depth - edge) + shift};
    }

    /** A point of the fillet, in the gear, when the gear has turned by {@code roll}. */
    double[] fillet(double roll) {
        double[] c = corner(roll);
        double far = Math.hypot(c[0], c[1]);
        return onGear(c[0] * (1 + edge / far), c[1] * (1 + edge / far), roll);
    }

    /** A point of the flank that the straight side of the tool leaves. */
    double[] flank(double roll) {
        // the side: through (-flankAt, 0) of the tool, falling towards the tool's middle
        double sx = -flankAt + radius * roll;
        double sy = shift;
        double dx = Math.sin(angle);
        double dy = -Math.cos(angle);
        double along = -(sx * dx + sy * dy);
        return onGear(sx + along * dx, sy + along * dy, roll);
    }

    /** From the frame at the pitch point into the gear, whose tooth is turned upright. */
    private double[] onGear(double x, double y, double roll) {
        // the rack moves by radius * roll to the right over the top of the gear: the gear turns clockwise
        double back = roll - Math.PI / (2 * radius);
        double px = x;
        double py = y + radius;
        double c = Math.cos(back);
        double s = Math.sin(back);
        return new double[] {px * c - py * s, px * s + py * c};
    }

    /** How deep a point of the gear lies inside the tool at this roll; below zero it is clear of it. */
    double insideTool(double[] p, double roll) {
        double back = roll - Math.PI / (2 * radius);
        double c = Math.cos(back);
        double s = Math.sin(back);
        double x = p[0] * c + p[1] * s;
        double y = -p[0] * s + p[1] * c - radius;
        double tx = Math.abs(x - radius * roll);
        double ty = y - shift;
        double side = (flankAt + ty * Math.tan(angle) - tx) * Math.cos(angle);
        double cornerY = -(depth - edge);
        double disc = edge - Math.hypot(tx - centre, ty - cornerY);
        double between = tx <= centre ? ty + depth : Double.NEGATIVE_INFINITY;
        double straight = ty >= cornerY - edge * Math.sin(angle) ? side : Double.NEGATIVE_INFINITY;
        return Math.max(Math.max(disc, Math.min(between, 1)), straight);
    }

    static double[] derivative(DoubleFunction<double[]> curve, double at, double step) {
        double[] out = new double[2];
        double[] w = {45 / 60.0, -9 / 60.0, 1 / 60.0};
        for (int k = 1; k <= 3; k++) {
            double[] a = curve.apply(at + k * step);
            double[] b = curve.apply(at - k * step);
            out[0] += w[k - 1] * (a[0] - b[0]) / step;
            out[1] += w[k - 1] * (a[1] - b[1]) / step;
        }
        return out;
    }

    private static double[] second(DoubleFunction<double[]> curve, double at, double step) {
        double[] m = curve.apply(at);
        double[] w = {1.5, -3 / 20.0, 1 / 90.0};
        double[] out = {-49 / 18.0 * m[0] / (step * step), -49 / 18.0 * m[1] / (step * step)};
        for (int k = 1; k <= 3; k++) {
            double[] a = curve.apply(at + k * step);
            double[] b = curve.apply(at - k * step);
            out[0] += w[k - 1] * (a[0] + b[0]) / (step * step);
            out[1] += w[k - 1] * (a[1] + b[1]) / (step * step);
        }
        return out;
    }

    /** Angle between the tangent of the fillet and the middle of the tooth. */
    double slope(double roll) {
        double[] d = derivative(this::fillet, roll, step());
        return Math.atan2(Math.abs(d[0]), Math.abs(d[1]));
    }

    /** Roll at which the fillet's tangent makes this angle with the middle of the tooth: between the bottom and the flank. */
    double rollAtSlope(double wanted) {
        double bottom = centre / radius;
        double flank = bottom - (depth - edge - shift) / Math.tan(angle) / radius;
        return bisect(r -> slope(r) - wanted, bottom - 1e-9, flank);
    }

    /** Roll at which the flank is touched at this distance from the axis. */
    double rollAtRadius(double wanted) {
        // on the line of action, from the base circle outward
        double base = rollAtBase();
        return bisect(
                r -> {
                    double[] p = flank(r);
                    return Math.hypot(p[0], p[1]) - wanted;
                },
                base,
                base + 2);
    }

    double rollAtBase() {
        return (flankAt - shift * Math.tan(angle) - radius * Math.tan(angle)) / radius;
    }

    /** Half of the tooth at a distance from the axis, as an angle at the axis. */
    double halfAngle(double wanted) {
        double[] p = flank(rollAtRadius(wanted));
        return Math.atan2(p[0], p[1]);
    }

    /** Distance of two parallel planes that touch the outer flanks of teeth whose middles stand {@code spread} to each side. */
    double span(double spread) {
        double base = rollAtBase();
        double c = Math.cos(spread);
        double s = Math.sin(spread);
        // turned aside, the flank reaches farthest where it runs along the plane
        double roll = bisect(
                r -> {
                    double[] d = derivative(this::flank, r, FINE);
                    return d[0] * c + d[1] * s;
                },
                base + 4 * FINE,
                base + 1.5);
        double[] p = flank(roll);
        return 2 * (p[0] * c + p[1] * s);
    }

    /**
     * Roll at which the fillet is narrowest against a load on the middle of the tooth at height {@code load}: the widest
     * parabola with its apex there that still lies in the tooth touches it. NaN where it is not inside the fillet.
     */
    double rollAtParabola(double load) {
        double bottom = centre / radius;
        double flank = bottom - (depth - edge - shift) / Math.tan(angle) / radius;
        DoubleUnaryOperator wide = r -> {
            double[] p = fillet(r);
            return p[0] * p[0] / (load - p[1]);
        };
        // coarse first, then between the neighbours
        int best = 0;
        int n = 400;
        for (int k = 1; k <= n; k++) {
            if (wide.applyAsDouble(flank + (bottom - flank) * k / n)
                    < wide.applyAsDouble(flank + (bottom - flank) * best / n)) {
                best = k;
            }
        }
        if (best == 0 || best == n) {
            return Double.NaN;
        }
        double h = (bottom - flank) * 1e-3;
        return bisect(
                r -> 45 * (wide.applyAsDouble(r + h) - wide.applyAsDouble(r - h))
                        - 9 * (wide.applyAsDouble(r + 2 * h) - wide.applyAsDouble(r - 2 * h))
                        + wide.applyAsDouble(r + 3 * h)
                        - wide.applyAsDouble(r - 3 * h),
                flank + (bottom - flank) * (best - 1) / n,
                flank + (bottom - flank) * (best + 1) / n);
    }

    /** Radius of the fillet at its bottom, where the tool's corner stands deepest. */
    double radiusAtBottom() {
        return filletRadius(centre / radius);
    }

    double filletRadius(double roll) {
        double[] d = derivative(this::fillet, roll, step());
        double[] dd = second(this::fillet, roll, step());
        return Math.pow(Math.hypot(d[0], d[1]), 3) / Math.abs(d[0] * dd[1] - d[1] * dd[0]);
    }

    /** Angle between the tangent of the flank and the middle of the tooth. */
    double flankSlope(double roll) {
        double[] d = derivative(this::flank, roll, FINE);
        return Math.atan2(Math.abs(d[0]), Math.abs(d[1]));
    }

    /** The fillet turns as the corner passes the pitch point: the nearer it passes, the finer the step. */
    private double step() {
        return FINE * 10 * (depth - edge - shift) / radius;
    }

    static double bisect(DoubleUnaryOperator f, double from, double to) {
        double a = from;
        double b = to;
        double fa = f.applyAsDouble(a);
        if (!(fa * f.applyAsDouble(b) <= 0)) {
            return Double.NaN;
        }
        for (int i = 0; i < 80; i++) {
            double m = (a + b) / 2;
            double fm = f.applyAsDouble(m);
            if (fa * fm <= 0) {
                b = m;
            } else {
                a = m;
                fa = fm;
            }
        }
        return (a + b) / 2;
    }
}
