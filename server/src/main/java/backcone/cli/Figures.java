package backcone.cli;

import backcone.engine.answers.RequirementAnswer;
import backcone.engine.answers.State;
import backcone.engine.units.Numbers;
import java.math.BigDecimal;
import java.math.MathContext;
import java.math.RoundingMode;

/** Numbers of a requirement as a table shows them: so many digits that equal figures look equal and others do not. */
final class Figures {
    private static final int USUAL = 4;
    private static final int MOST = 12;
    private static final double LARGEST_PLAIN = 1e7;
    private static final double SMALLEST_PLAIN = 1e-3;

    private Figures() {}

    static String withUnit(String number, String unit) {
        return unit.isEmpty() ? number : number + " " + unit;
    }

    /** The value, with more digits than usual where the verdict would otherwise look wrong (0.99997 against 1). */
    static String value(RequirementAnswer r) {
        double v = r.value();
        if (Double.isNaN(v)) {
            return "–";
        }
        if (Double.isNaN(r.required()) && r.unit().isEmpty() && (v == 0 || v == 1)) {
            return v == 1 ? "true" : "false"; // a condition
        }
        int digits = USUAL;
        while (digits < MOST && (looksLike(v, r.required(), digits) || looksLike(v, r.upper(), digits))) {
            digits++;
        }
        return withUnit(fixed(v, digits), r.unit());
    }

    private static boolean looksLike(double v, double bound, int digits) {
        return !Double.isNaN(bound)
                && Math.abs(v - bound) > 1e-9 * Math.abs(bound)
                && Double.parseDouble(fixed(v, digits)) == Double.parseDouble(fixed(bound, digits));
    }

    /** Always that many digits, so that columns line up; whole numbers stay whole. */
    static String fixed(double v, int digits) {
        double size = Math.abs(v);
        if (v == Math.rint(v) && size < LARGEST_PLAIN) {
            return Long.toString(Math.round(v));
        }
        if (Double.isNaN(v) || Double.isInfinite(v) || size >= LARGEST_PLAIN || size < SMALLEST_PLAIN) {
            return Numbers.format(v, digits);
        }
        BigDecimal d = new BigDecimal(v).round(new MathContext(digits));
        int scale = digits - (d.precision() - d.scale());
        return d.setScale(Math.max(0, scale), RoundingMode.HALF_EVEN).toPlainString();
    }

    static String required(RequirementAnswer r) {
        if (r.comparison().equals("between")) {
            return withUnit(Numbers.format(r.required(), 5) + " … " + Numbers.format(r.upper(), 5), r.unit());
        }
        if (Double.isNaN(r.required())) {
            return r.state() == State.OPEN && r.method() != null ? "–" : "holds";
        }
        return withUnit(r.comparison() + " " + Numbers.format(r.required(), 6), r.unit());
    }

    /** In percent; nothing where a margin says nothing. */
    static String margin(double margin, String comparison) {
        if (Double.isNaN(margin) || comparison.equals("==")) {
            return "";
        }
        if (Double.isInfinite(margin)) {
            return margin > 0 ? "ample" : "none";
        }
        double percent = margin * 100;
        double size = Math.abs(percent);
        String number = size >= 99.5
                ? Long.toString(Math.round(size))
                : size >= 9.95
                        ? fixedDecimals(size, 0)
                        : size >= 0.095 ? fixedDecimals(size, 1) : Numbers.format(size, 2);
        return (percent < 0 ? "−" : "+") + number + " %";
    }

    private static String fixedDecimals(double v, int decimals) {
        return new BigDecimal(v).setScale(decimals, RoundingMode.HALF_EVEN).toPlainString();
    }

    /** The factor on torque. */
    static String reserve(double reserve) {
        if (Double.isNaN(reserve)) {
            return "";
        }
        if (Double.isInfinite(reserve)) {
            return "any";
        }
        int decimals = reserve >= 99.5 ? 0 : reserve >= 9.995 ? 1 : 2;
        return "× " + (reserve < 0.1 ? Numbers.format(reserve, 2) : fixedDecimals(reserve, decimals));
    }
}
