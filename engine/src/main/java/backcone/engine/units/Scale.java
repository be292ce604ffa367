package backcone.engine.units;

import java.math.BigDecimal;
import java.math.BigInteger;
import java.math.MathContext;
import org.jspecify.annotations.Nullable;

/**
 * An exact scale: a fraction times a power of pi, to mm, N, s, rad and K. With a {@code shift} it is a scale of
 * temperature: the shift is added to a value before it is multiplied.
 */
record Scale(
        Dimension dimension,
        BigInteger numerator,
        BigInteger denominator,
        int pi,
        @Nullable BigDecimal shift) {
    static final Scale ONE = base(Dimension.NONE);

    private static final MathContext DIGITS = new MathContext(40);
    private static final BigDecimal PI =
            new BigDecimal("3.14159265358979323846264338327950288419716939937510582097494459");

    /** More than any double holds: beyond this a scale is of no use, and reading must stay cheap. */
    private static final int MOST_BITS = 3000;

    private static final int LARGEST_EXPONENT = 60;

    static Scale base(Dimension d) {
        return new Scale(d, BigInteger.ONE, BigInteger.ONE, 0, null);
    }

    static Scale number(BigDecimal value) {
        BigInteger digits = value.unscaledValue();
        BigInteger power = BigInteger.TEN.pow(Math.abs(value.scale()));
        return value.scale() > 0
                ? of(Dimension.NONE, digits, power, 0)
                : of(Dimension.NONE, digits.multiply(power), BigInteger.ONE, 0);
    }

    private static Scale of(Dimension d, BigInteger n, BigInteger q, int pi) {
        BigInteger g = n.gcd(q);
        return g.equals(BigInteger.ONE)
                ? new Scale(d, n, q, pi, null)
                : new Scale(d, n.divide(g), q.divide(g), pi, null);
    }

    Scale withPi() {
        return new Scale(dimension, numerator, denominator, pi + 1, shift);
    }

    Scale shifted(BigDecimal by) {
        return new Scale(dimension, numerator, denominator, pi, by);
    }

    Scale times(Scale o) {
        return of(
                dimension.times(o.dimension),
                numerator.multiply(o.numerator),
                denominator.multiply(o.denominator),
                pi + o.pi);
    }

    Scale over(Scale o) {
        return of(
                dimension.over(o.dimension),
                numerator.multiply(o.denominator),
                denominator.multiply(o.numerator),
                pi - o.pi);
    }

    Scale power(int e) {
        int a = Math.abs(e);
        BigInteger n = numerator.pow(a);
        BigInteger d = denominator.pow(a);
        return new Scale(dimension.power(e, 1), e < 0 ? d : n, e < 0 ? n : d, pi * e, null);
    }

    /** Whether numbers and exponents are of a size that means something. */
    boolean isReasonable() {
        return numerator.bitLength() <= MOST_BITS
                && denominator.bitLength() <= MOST_BITS
                && Math.abs(pi) <= LARGEST_EXPONENT
                && dimension.isWithin(LARGEST_EXPONENT);
    }

    /** The unit with this scale, or null when its size is beyond a double. */
    @Nullable
    Unit unit(String text, @Nullable String kind) {
        double n = upper();
        double d = denominator.doubleValue();
        if (!isExact(denominator) || Double.isInfinite(n) || n == 0 || (pi == 0 && !isExact(numerator))) {
            BigDecimal whole = new BigDecimal(numerator).divide(new BigDecimal(denominator), DIGITS);
            n = whole.multiply(piPower(), DIGITS).doubleValue();
            d = 1;
        }
        if (Double.isInfinite(n) || n < Double.MIN_NORMAL) {
            return null;
        }
        double offset = 0;
        if (shift != null) {
            BigDecimal above = shift.multiply(new BigDecimal(numerator));
            offset = above.divide(new BigDecimal(denominator), DIGITS).doubleValue();
        }
        return new Unit(text, dimension, n, d, offset, kind);
    }

    private double upper() {
        return pi == 0
                ? numerator.doubleValue()
                : new BigDecimal(numerator).multiply(piPower(), DIGITS).doubleValue();
    }

    private BigDecimal piPower() {
        if (pi == 0) {
            return BigDecimal.ONE;
        }
        BigDecimal power = PI.pow(Math.abs(pi), DIGITS);
        return pi > 0 ? power : BigDecimal.ONE.divide(power, DIGITS);
    }

    /** Whether the number is a double without rounding. */
    private static boolean isExact(BigInteger i) {
        int length = i.bitLength();
        return length <= 53 || (length <= 1000 && length - i.getLowestSetBit() <= 53);
    }
}
