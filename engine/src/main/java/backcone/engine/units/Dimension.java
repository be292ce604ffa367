package backcone.engine.units;

import java.math.BigInteger;
import java.util.ArrayList;
import java.util.List;
import java.util.concurrent.ConcurrentHashMap;
import org.jspecify.annotations.Nullable;

/**
 * A product of powers of base quantities, with exact fractions as exponents. Equal dimensions are the same object, so
 * {@code ==} compares them.
 *
 * <p>Force is a base quantity here and mass follows from it, because the computing units are mm, N and s. Which of the
 * two is printed depends on what reads shorter: a stress is {@code force / length^2}, a density {@code mass / length^3}.
 */
public final class Dimension {
    private static final String LENGTH = "length";
    private static final String TIME = "time";
    private static final String FORCE = "force";
    private static final String MASS = "mass";

    private static final ConcurrentHashMap<List<Power>, Dimension> ALL = new ConcurrentHashMap<>();

    /** The dimension of a pure number. */
    public static final Dimension NONE = of(List.of());

    /** Sorted by name, no exponent is zero. */
    private final List<Power> powers;

    private final ConcurrentHashMap<Dimension, Dimension> products = new ConcurrentHashMap<>(4);
    private final ConcurrentHashMap<Dimension, Dimension> quotients = new ConcurrentHashMap<>(4);

    /** A base quantity with its exponent, a fraction in lowest terms whose denominator is positive. */
    private record Power(String base, BigInteger numerator, BigInteger denominator) {
        static Power of(String base, BigInteger n, BigInteger d) {
            BigInteger g = n.gcd(d);
            boolean lowest = g.equals(BigInteger.ONE);
            return new Power(base, lowest ? n : n.divide(g), lowest ? d : d.divide(g));
        }

        Power plus(Power o) {
            return of(
                    base,
                    numerator.multiply(o.denominator).add(o.numerator.multiply(denominator)),
                    denominator.multiply(o.denominator));
        }

        Power negated() {
            return new Power(base, numerator.negate(), denominator);
        }

        // Written out, because those that a record makes for itself cost tens of milliseconds at a cold start.

        @Override
        public boolean equals(@Nullable Object o) {
            return o instanceof Power p
                    && base.equals(p.base)
                    && numerator.equals(p.numerator)
                    && denominator.equals(p.denominator);
        }

        @Override
        public int hashCode() {
            return base.hashCode() + 31 * (numerator.hashCode() + 31 * denominator.hashCode());
        }

        boolean isZero() {
            return numerator.signum() == 0;
        }
    }

    private Dimension(List<Power> powers) {
        this.powers = powers;
    }

    private static Dimension of(List<Power> powers) {
        List<Power> key = List.copyOf(powers);
        Dimension known = ALL.get(key);
        if (known != null) {
            return known;
        }
        Dimension fresh = new Dimension(key);
        Dimension earlier = ALL.putIfAbsent(key, fresh);
        return earlier == null ? fresh : earlier;
    }

    /**
     * A base quantity by name: length, time, angle, temperature, force, or a hardness scale or grading system. Any name
     * makes one; mass is known as force times time squared over length.
     */
    public static Dimension base(String name) {
        if (name.equals(MASS)) {
            return base(FORCE).times(base(TIME).power(2, 1)).over(base(LENGTH));
        }
        return of(List.of(new Power(name, BigInteger.ONE, BigInteger.ONE)));
    }

    public Dimension times(Dimension d) {
        if (d == NONE) {
            return this;
        }
        Dimension known = products.get(d);
        if (known == null) {
            known = of(merge(powers, d.powers, false));
            products.put(d, known);
        }
        return known;
    }

    public Dimension over(Dimension d) {
        if (d == NONE) {
            return this;
        }
        Dimension known = quotients.get(d);
        if (known == null) {
            known = of(merge(powers, d.powers, true));
            quotients.put(d, known);
        }
        return known;
    }

    /** This dimension to the power {@code numerator/denominator}, exactly. The denominator must not be zero. */
    public Dimension power(int numerator, int denominator) {
        if (denominator == 0) {
            throw new ArithmeticException("an exponent over zero");
        }
        if (numerator == denominator) {
            return this;
        }
        if (numerator == 0) {
            return NONE;
        }
        BigInteger n = BigInteger.valueOf(denominator < 0 ? -(long) numerator : numerator);
        BigInteger d = BigInteger.valueOf(Math.abs((long) denominator));
        List<Power> out = new ArrayList<>(powers.size());
        for (Power p : powers) {
            out.add(Power.of(p.base, p.numerator.multiply(n), p.denominator.multiply(d)));
        }
        return of(out);
    }

    public boolean isNone() {
        return this == NONE;
    }

    /** Whether all exponents lie within plus and minus {@code limit}. */
    boolean isWithin(int limit) {
        BigInteger most = BigInteger.valueOf(limit);
        for (Power p : powers) {
            if (p.numerator.abs().compareTo(most.multiply(p.denominator)) > 0) {
                return false;
            }
        }
        return true;
    }

    private static List<Power> merge(List<Power> a, List<Power> b, boolean over) {
        List<Power> out = new ArrayList<>(a.size() + b.size());
        int i = 0;
        int j = 0;
        while (i < a.size() || j < b.size()) {
            int order = i == a.size() ? 1 : j == b.size() ? -1 : a.get(i).base.compareTo(b.get(j).base);
            if (order < 0) {
                out.add(a.get(i++));
                continue;
            }
            Power p = over ? b.get(j).negated() : b.get(j);
            j++;
            if (order == 0) {
                p = a.get(i++).plus(p);
            }
            if (!p.isZero()) {
                out.add(p);
            }
        }
        return out;
    }

    /** In base names: {@code length^2 / time}, {@code 1 / (length temperature)}, {@code force^(1/2)}. */
    @Override
    public String toString() {
        if (powers.isEmpty()) {
            return "pure number";
        }
        List<Power> byMass = byMass();
        List<Power> shown = size(byMass) < size(powers) ? byMass : powers;
        StringBuilder over = new StringBuilder();
        StringBuilder under = new StringBuilder();
        int below = 0;
        for (Power p : shown) {
            boolean up = p.numerator.signum() > 0;
            StringBuilder b = up ? over : under;
            below += up ? 0 : 1;
            b.append(b.length() == 0 ? "" : " ").append(p.base);
            BigInteger n = p.numerator.abs();
            if (!p.denominator.equals(BigInteger.ONE)) {
                b.append("^(").append(n).append('/').append(p.denominator).append(')');
            } else if (!n.equals(BigInteger.ONE)) {
                b.append('^').append(n);
            }
        }
        String top = over.length() == 0 ? "1" : over.toString();
        return below == 0 ? top : top + " / " + (below == 1 ? under : "(" + under + ")");
    }

    /** The same powers with the force written as mass times length over time squared. */
    private List<Power> byMass() {
        for (Power p : powers) {
            if (p.base.equals(FORCE)) {
                BigInteger two = BigInteger.TWO;
                List<Power> change = List.of(
                        p.negated(),
                        new Power(LENGTH, p.numerator, p.denominator),
                        new Power(MASS, p.numerator, p.denominator),
                        Power.of(TIME, p.numerator.multiply(two).negate(), p.denominator));
                return merge(powers, change, false);
            }
        }
        return powers;
    }

    private static double size(List<Power> powers) {
        double sum = 0;
        for (Power p : powers) {
            sum += Math.abs(p.numerator.doubleValue() / p.denominator.doubleValue());
        }
        return sum;
    }
}
