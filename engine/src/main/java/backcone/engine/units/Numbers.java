package backcone.engine.units;

import java.math.BigDecimal;
import java.math.MathContext;
import java.math.RoundingMode;

/** Printing numbers, the same on every machine and in every locale. */
public final class Numbers {
    private static final double LARGEST_PLAIN = 1e9;
    private static final double SMALLEST_PLAIN = 1e-4;

    private Numbers() {}

    /** To so many significant digits, with an exponent only where zeros would hide the number; NaN is a dash. */
    public static String format(double value, int significant) {
        if (Double.isNaN(value)) {
            return "–";
        }
        if (Double.isInfinite(value)) {
            return value > 0 ? "∞" : "-∞";
        }
        if (value == 0) {
            return "0";
        }
        BigDecimal d = new BigDecimal(value).round(new MathContext(significant, RoundingMode.HALF_EVEN));
        return write(d);
    }

    /** The shortest text that reads back as the same number. */
    public static String exact(double value) {
        if (Double.isNaN(value) || Double.isInfinite(value)) {
            return format(value, 1);
        }
        if (value == 0) {
            return "0";
        }
        return write(new BigDecimal(Double.toString(value)));
    }

    private static String write(BigDecimal d) {
        double size = Math.abs(d.doubleValue());
        BigDecimal s = d.stripTrailingZeros();
        if (size < SMALLEST_PLAIN || size >= LARGEST_PLAIN) {
            int exponent = s.precision() - s.scale() - 1;
            return s.movePointLeft(exponent).stripTrailingZeros().toPlainString() + "e" + exponent;
        }
        return s.toPlainString();
    }
}
