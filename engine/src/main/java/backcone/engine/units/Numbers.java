package backcone.engine.units;

import java.math.BigDecimal;
import java.math.MathContext;
import java.math.RoundingMode;
import org.jspecify.annotations.Nullable;

/** Printing numbers, the same on every machine and in every locale. */
public final class Numbers {
    private static final double LARGEST_PLAIN = 1e7;
    private static final double SMALLEST_PLAIN = 1e-3;

    /** {@code 0.0005} reads as fast as {@code 5e-4}; with more digits the zeros hide the number. */
    private static final int SHORT = 6;

    private static final int MOST_ZEROS = 6;

    /** Every double is told from its neighbours by so many digits, and most decimals typed have no more than 15. */
    private static final int ALL_DIGITS = 17;

    private static final int TYPED_DIGITS = 15;

    private Numbers() {}

    /**
     * To so many significant digits, without zeros at the end, with an exponent where zeros would hide the number:
     * {@code 3.14}, {@code 12500}, {@code 1.23e-4}. NaN is a dash.
     */
    public static String format(double value, int significant) {
        String odd = withoutDigits(value);
        if (odd != null) {
            return odd;
        }
        BigDecimal d = strip(new BigDecimal(value).round(digits(Math.max(1, significant))));
        double size = Math.abs(d.doubleValue());
        if (size >= LARGEST_PLAIN) {
            return scientific(d);
        }
        String plain = d.toPlainString();
        int length = d.signum() < 0 ? plain.length() - 1 : plain.length();
        return size < SMALLEST_PLAIN && length > SHORT ? scientific(d) : plain;
    }

    /** The shortest text that reads back as the same number, without an exponent unless there are many zeros. */
    public static String exact(double value) {
        String odd = withoutDigits(value);
        if (odd != null) {
            return odd;
        }
        BigDecimal d = shortest(value);
        int zeros = d.scale() < 0 ? -d.scale() : d.scale() - d.precision();
        return zeros > MOST_ZEROS ? scientific(d) : d.toPlainString();
    }

    /** Not {@code Double.toString}: before JDK 19 it gives a digit too many for some numbers. */
    private static BigDecimal shortest(double value) {
        BigDecimal whole = new BigDecimal(value);
        boolean fewBits = Math.abs(value) < Double.MIN_NORMAL;
        for (int n = fewBits ? 1 : TYPED_DIGITS; n < ALL_DIGITS; n++) {
            BigDecimal d = whole.round(digits(n));
            if (d.doubleValue() == value) {
                return strip(d);
            }
        }
        return strip(whole.round(digits(ALL_DIGITS)));
    }

    private static @Nullable String withoutDigits(double value) {
        if (Double.isNaN(value)) {
            return "–";
        }
        if (Double.isInfinite(value)) {
            return value > 0 ? "∞" : "-∞";
        }
        return value == 0 ? "0" : null;
    }

    private static MathContext digits(int n) {
        return new MathContext(n, RoundingMode.HALF_EVEN);
    }

    private static BigDecimal strip(BigDecimal d) {
        return d.stripTrailingZeros();
    }

    private static String scientific(BigDecimal d) {
        int exponent = d.precision() - d.scale() - 1;
        return strip(d.movePointLeft(exponent)).toPlainString() + "e" + exponent;
    }
}
