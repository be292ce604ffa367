package backcone.engine.units;

import java.util.HashMap;
import java.util.List;
import java.util.Map;
import java.util.Set;
import org.jspecify.annotations.Nullable;

public final class Units {
    private static final Units U = new Units();
    private final Map<String, Unit> table = new HashMap<>();

    public sealed interface Parse {
        record Ok(Unit unit) implements Parse {}

        record Bad(String message, @Nullable String nearest) implements Parse {}
    }

    private Units() {
        Dimension L = Dimension.base("length"), M = Dimension.base("mass"), T = Dimension.base("time"), K = Dimension.base("temperature"), A = Dimension.base("angle"), N = Dimension.NONE;
        Dimension F = M.times(L).over(T.power(2, 1)), P = F.over(L.power(2, 1)), W = F.times(L).over(T), E = F.times(L);
        u("1", N, 1); u("%", N, 0.01); u("cycles", N, 1);
        u("mm", L, 1); u("um", L, 1e-3); u("cm", L, 10); u("dm", L, 100); u("m", L, 1000); u("km", L, 1e6); u("in", L, 25.4); u("uin", L, 25.4e-6); u("ft", L, 304.8);
        u("s", T, 1); u("ms", T, 1e-3); u("min", T, 60); u("h", T, 3600); u("d", T, 86400); u("yr", T, 31557600);
        u("rad", A, 1); u("deg", A, Math.PI / 180); u("°", A, Math.PI / 180); u("arcmin", A, Math.PI / 10800); u("rev", A, 2 * Math.PI); u("rpm", A.over(T), Math.PI / 30);
        u("Hz", N.over(T), 1); u("N", F, 1); u("kN", F, 1000); u("kgf", F, 9.80665); u("lbf", F, 4.4482216152605);
        u("Pa", P, 1e-6); u("kPa", P, 1e-3); u("MPa", P, 1); u("GPa", P, 1000); u("psi", P, 4.4482216152605 / 645.16); u("ksi", P, 4448.2216152605 / 645.16); u("bar", P, 0.1);
        u("W", W, 1000); u("kW", W, 1e6); u("hp", W, 745699.87158227022); u("PS", W, 735498.75);
        k("J", E, 1000, "Energy"); k("kWh", E, 3.6e9, "Energy"); k("Nm", E, 1000, "Torque"); k("kNm", E, 1e6, "Torque");
        u("kg", M, 1e-3); u("g", M, 1e-6); u("t", M, 1); u("lb", M, 0.45359237e-3);
        u("cSt", L.power(2, 1).over(T), 1); u("K", K, 1); u("mPa*s", P.times(T), 1e-9);
        table.put("degC", new Unit("degC", K, 1, 1, 273.15, null)); table.put("degF", new Unit("degF", K, 5, 9, 273.15 - 32 * 5 / 9.0, null));
        for (String h : List.of("HBW", "HV", "HRC", "HR15N", "ISO17485", "ISO1328", "AGMA_Q", "AGMA_A")) u(h, Dimension.base(h), 1);
        table.put("HB", table.get("HBW"));
    }

    private void u(String t, Dimension d, double s) {
        table.put(t, new Unit(t, d, s >= 1 ? s : s < 1 && 1 / s == Math.rint(1 / s) ? 1 : s, s < 1 && 1 / s == Math.rint(1 / s) ? Math.rint(1 / s) : 1, 0, null));
    }

    private void k(String t, Dimension d, double s, String kind) {
        table.put(t, new Unit(t, d, s, 1, 0, kind));
    }

    public static Units standard() {
        return U;
    }

    public Parse parse(String text) {
        Unit known = table.get(text);
        if (known != null) return new Parse.Ok(known);
        try {
            int[] i = {0};
            Unit v = expr(text, i);
            if (i[0] == text.length()) return new Parse.Ok(new Unit(text, v.dimension(), v.numerator(), v.denominator(), 0, kindOf(text)));
        } catch (RuntimeException e) {
            // temporary
        }
        return new Parse.Bad("`" + text + "` is no unit.", null);
    }

    private static @Nullable String kindOf(String t) {
        return t.matches("(N|kN|lbf|kgf)\\*.*") ? "Torque" : null;
    }

    private Unit expr(String t, int[] i) {
        Unit x = t.charAt(i[0]) == '/' ? table.get("1") : factor(t, i);
        while (i[0] < t.length() && (t.charAt(i[0]) == '*' || t.charAt(i[0]) == '/')) {
            boolean mul = t.charAt(i[0]++) == '*';
            Unit y = factor(t, i);
            x = mul ? new Unit("", x.dimension().times(y.dimension()), x.numerator() * y.numerator(), x.denominator() * y.denominator(), 0, null)
                    : new Unit("", x.dimension().over(y.dimension()), x.numerator() * y.denominator(), x.denominator() * y.numerator(), 0, null);
        }
        return x;
    }

    private Unit factor(String t, int[] i) {
        Unit x;
        if (t.charAt(i[0]) == '(') {
            i[0]++;
            x = expr(t, i);
            i[0]++;
        } else {
            int s = i[0];
            while (i[0] < t.length() && "*/^()".indexOf(t.charAt(i[0])) < 0) i[0]++;
            x = table.get(t.substring(s, i[0]));
            if (x == null) throw new IllegalArgumentException();
        }
        if (i[0] < t.length() && t.charAt(i[0]) == '^') {
            int s = ++i[0];
            while (i[0] < t.length() && (Character.isDigit(t.charAt(i[0])) || t.charAt(i[0]) == '-')) i[0]++;
            int n = Integer.parseInt(t.substring(s, i[0]));
            x = new Unit("", x.dimension().power(n, 1), Math.pow(x.numerator(), n), Math.pow(x.denominator(), n), 0, null);
        }
        return x;
    }

    public String describe(String text) {
        return "";
    }

    public List<String> unitsOf(Dimension d) {
        return List.of();
    }

    public String nameOf(Dimension d) {
        return d.toString();
    }

    public Set<String> words() {
        return table.keySet();
    }
}
