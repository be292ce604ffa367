package backcone.engine.units;

import java.util.Map;
import java.util.TreeMap;
import java.util.concurrent.ConcurrentHashMap;

public final class Dimension {
    private static final ConcurrentHashMap<Map<String, Long>, Dimension> ALL = new ConcurrentHashMap<>();
    public static final Dimension NONE = of(new TreeMap<>());
    private final Map<String, Long> exps; // in 1/5040

    private Dimension(Map<String, Long> e) {
        exps = e;
    }

    private static Dimension of(Map<String, Long> e) {
        e.values().removeIf(v -> v == 0);
        return ALL.computeIfAbsent(Map.copyOf(e), k -> new Dimension(k));
    }

    public static Dimension base(String name) {
        TreeMap<String, Long> m = new TreeMap<>();
        m.put(name, 5040L);
        return of(m);
    }

    public Dimension times(Dimension d) {
        TreeMap<String, Long> m = new TreeMap<>(exps);
        d.exps.forEach((k, v) -> m.merge(k, v, Long::sum));
        return of(m);
    }

    public Dimension over(Dimension d) {
        return times(d.power(-1, 1));
    }

    public Dimension power(int n, int q) {
        TreeMap<String, Long> m = new TreeMap<>();
        exps.forEach((k, v) -> m.put(k, v * n / q));
        return of(m);
    }

    public boolean isNone() {
        return this == NONE;
    }

    @Override
    public String toString() {
        return exps.isEmpty() ? "1" : new TreeMap<>(exps).toString().replace("5040", "");
    }
}
