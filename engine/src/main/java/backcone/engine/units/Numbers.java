package backcone.engine.units;

public final class Numbers {
    private Numbers() {}

    public static String format(double v, int n) {
        if (Double.isNaN(v) || Double.isInfinite(v)) return "?";
        return exact(new java.math.BigDecimal(v).round(new java.math.MathContext(n)).doubleValue());
    }

    public static String exact(double v) {
        return v == Math.rint(v) && Math.abs(v) < 1e15 ? Long.toString((long) v) : Double.toString(v);
    }
}
