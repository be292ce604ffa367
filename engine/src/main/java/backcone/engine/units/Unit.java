package backcone.engine.units;

import java.math.BigDecimal;
import java.math.MathContext;
import java.math.RoundingMode;
import org.jspecify.annotations.Nullable;

/**
 * A unit as written. A value in it times {@code numerator/denominator} (plus {@code offset}) is the value in mm, N, s,
 * rad, K. The scale is kept as two factors that are exact where they can be, because two exact factors round less than
 * one inexact one: 25 um is 0.025 mm to the last digit. {@code kind} names the quantity kind this text belongs to where
 * kinds share the dimension, else it is null.
 */
public record Unit(
        String text,
        Dimension dimension,
        double numerator,
        double denominator,
        double offset,
        @Nullable String kind) {

    private static final MathContext DIGITS = new MathContext(34, RoundingMode.HALF_EVEN);

    /** Decimals with more places than this are none that somebody types. */
    private static final double MOST_PLACES = 1e12;

    private static final double LARGEST_WHOLE = 0x1p53;

    /** As many digits as every decimal keeps on its way through a double. */
    private static final MathContext TYPED = new MathContext(15, RoundingMode.HALF_EVEN);

    /**
     * The value in computing units. The value counts as the decimal that somebody typed: 0.1 in is 2.54 mm and
     * 7.85 kg/dm^3 are 7.85e-9 t/mm^3, as if those had been typed.
     */
    public double toBase(double value) {
        if (offset != 0) {
            return shifted(value);
        }
        if (numerator == denominator) {
            return value;
        }
        if (value == Math.rint(value)) {
            return scaled(value, numerator, denominator);
        }
        for (double power = 10; power <= MOST_PLACES; power *= 10) {
            double digits = Math.rint(value * power);
            if (digits / power == value && Math.abs(digits) < LARGEST_WHOLE) {
                double d = denominator * power;
                boolean exact = Math.fma(denominator, power, -d) == 0;
                return exact ? scaled(digits, numerator, d) : scaled(value, numerator, denominator);
            }
        }
        return scaled(value, numerator, denominator);
    }

    /**
     * The number to write in this unit for a value in computing units. What was typed comes back: of the numbers that
     * give this value, one with few digits is taken.
     */
    public double fromBase(double value) {
        if (offset == 0 && numerator == denominator) {
            return value;
        }
        double plain = offset != 0 ? unshifted(value) : scaled(value, denominator, numerator);
        if (plain == 0 || Double.isNaN(plain) || Double.isInfinite(plain)) {
            return plain;
        }
        double typed = offset != 0
                ? withoutNoise(plain, value)
                : new BigDecimal(plain).round(TYPED).doubleValue();
        return typed != plain && toBase(typed) == value ? typed : plain;
    }

    /** A temperature scale: it stands for a whole value only, never in a product. */
    public boolean isOffset() {
        return offset != 0;
    }

    /** {@code value * n / d}, rounded once: the two rounding errors are carried along. */
    private static double scaled(double value, double n, double d) {
        double product = value * n;
        if (d == 1) {
            return product;
        }
        double quotient = product / d;
        double size = Math.abs(product);
        if (!(size > 1e-270 && size < 1e290 && Math.abs(quotient) > 1e-270)) {
            // zero, no number, or so close to the ends of the range that the errors below can't be told
            return Double.isInfinite(product) ? value / d * n : quotient;
        }
        double lost = Math.fma(value, n, -product);
        double left = Math.fma(-quotient, d, product);
        return quotient + (left + lost) / d;
    }

    // Temperatures are computed on their decimals, so that 20 degC and 68 degF are both 293.15 K.

    private double shifted(double value) {
        if (Double.isNaN(value) || Double.isInfinite(value)) {
            return value;
        }
        return BigDecimal.valueOf(value)
                .add(shift())
                .multiply(new BigDecimal(numerator))
                .divide(new BigDecimal(denominator), DIGITS)
                .doubleValue();
    }

    private double unshifted(double value) {
        if (Double.isNaN(value) || Double.isInfinite(value)) {
            return value;
        }
        return BigDecimal.valueOf(value)
                .multiply(new BigDecimal(denominator))
                .divide(new BigDecimal(numerator), DIGITS)
                .subtract(shift())
                .doubleValue();
    }

    /** Rounded to the places that a temperature in kelvin still holds. */
    private double withoutNoise(double degrees, double kelvin) {
        double step = Math.ulp(kelvin) * denominator / numerator;
        int places = (int) Math.floor(-Math.log10(step)) - 1;
        return new BigDecimal(degrees).setScale(places, RoundingMode.HALF_EVEN).doubleValue();
    }

    /** The offset counted in this unit: 273.15 and 459.67 are short decimals, while 459.67 * 5/9 is none. */
    private BigDecimal shift() {
        return BigDecimal.valueOf(offset * denominator / numerator).setScale(9, RoundingMode.HALF_EVEN);
    }
}
