package backcone.engine.units;

import java.util.Map;
import java.util.TreeMap;
import java.util.concurrent.ConcurrentHashMap;

/** Powers of base quantities. Exponents are exact fractions; equal dimensions are the same object. */
public final class Dimension {
    /** Exponents are counted in parts of this, which halves, thirds, quarters, fifths … twelfths divide. */
    private static final long PARTS = 27720;

    private static final ConcurrentHashMap<Map<String, Long>, Dimension> ALL = new ConcurrentHashMap<>();

    /** The dimension of a pure number. */
    public static final Dimension NONE = of(new TreeMap<>());

    private final Map<String, Long> exponents;
    private final ConcurrentHashMap<Dimension, Dimension> products = new ConcurrentHashMap<>();
    private final ConcurrentHashMap<Dimension, Dimension> quotients = new ConcurrentHashMap<>();

    private Dimension(Map<String, Long> exponents) {
        this.exponents = exponents;
    }

    private static Dimension of(TreeMap<String, Long> exponents) {
        exponents.values().removeIf(v -> v == 0);
        Map<String, Long> key = Map.copyOf(exponents);
        return ALL.computeIfAbsent(key, Dimension::new);
    }

    /** A base quantity by name: length, time, angle, temperature, force, or a hardness scale or grading system. */
    public static Dimension base(String name) {
        TreeMap<String, Long> m = new TreeMap<>();
        m.put(name, PARTS);
        return of(m);
    }

    public Dimension times(Dimension d) {
        if (d == NONE) {
            return this;
        }
        Dimension known = products.get(d);
        if (known == null) {
            TreeMap<String, Long> m = new TreeMap<>(exponents);
            d.exponents.forEach((k, v) -> m.merge(k, v, Long::sum));
            known = of(m);
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
            TreeMap<String, Long> m = new TreeMap<>(exponents);
            d.exponents.forEach((k, v) -> m.merge(k, -v, Long::sum));
            known = of(m);
            quotients.put(d, known);
        }
        return known;
    }

    /** The dimension to the power {@code numerator/denominator}. */
    public Dimension power(int numerator, int denominator) {
        TreeMap<String, Long> m = new TreeMap<>();
        exponents.forEach((k, v) -> m.put(k, v * numerator / denominator));
        return of(m);
    }

    public boolean isNone() {
        return this == NONE;
    }

    @Override
    public String toString() {
        if (exponents.isEmpty()) {
            return "pure number";
        }
        StringBuilder over = new StringBuilder();
        StringBuilder under = new StringBuilder();
        new TreeMap<>(exponents).forEach((k, v) -> {
            StringBuilder b = v > 0 ? over : under;
            b.append(b.length() == 0 ? "" : " ").append(k);
            long a = Math.abs(v);
            if (a != PARTS) {
                b.append('^')
                        .append(
                                a % PARTS == 0
                                        ? Long.toString(a / PARTS)
                                        : "(" + Numbers.exact((double) a / PARTS) + ")");
            }
        });
        String top = over.length() == 0 ? "1" : over.toString();
        return under.length() == 0 ? top : top + " / " + under;
    }
}
