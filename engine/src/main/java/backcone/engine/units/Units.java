package backcone.engine.units;

import java.io.IOException;
import java.io.InputStream;
import java.io.UncheckedIOException;
import java.math.BigDecimal;
import java.math.BigInteger;
import java.math.MathContext;
import java.nio.charset.StandardCharsets;
import java.util.ArrayList;
import java.util.HashMap;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Set;
import java.util.concurrent.ConcurrentHashMap;
import org.jspecify.annotations.Nullable;

/** The catalogue of units, read from one text, and the reading of unit texts such as {@code N/(mm*um)}. */
public final class Units {
    private static final MathContext DIGITS = new MathContext(40);
    private static final BigDecimal PI = new BigDecimal("3.141592653589793238462643383279502884197169");

    /** Everyday names of dimensions, by a unit of theirs. */
    private static final String[][] NAMES = {
        {"1", "pure number"},
        {"mm", "length"},
        {"mm^2", "area"},
        {"mm^3", "volume"},
        {"s", "time"},
        {"rad", "angle"},
        {"rpm", "speed of rotation"},
        {"Hz", "frequency"},
        {"m/s", "speed"},
        {"m/s^2", "acceleration"},
        {"K", "temperature"},
        {"N", "force"},
        {"N/mm", "force per length"},
        {"MPa", "stress"},
        {"N*mm", "torque or energy"},
        {"kW", "power"},
        {"kg", "mass"},
        {"kg/dm^3", "density"},
        {"mm^2/s", "kinematic viscosity"},
        {"mPa*s", "dynamic viscosity"},
        {"1/in", "one over a length"},
        {"1/MPa", "one over a stress"},
        {"HBW", "Brinell hardness"},
        {"HV", "Vickers hardness"},
        {"HRC", "Rockwell C hardness"},
        {"HR15N", "Rockwell 15N hardness"},
        {"ISO17485", "grade of ISO 17485"},
        {"ISO1328", "class of ISO 1328-1"},
        {"AGMA_Q", "AGMA quality number"},
        {"AGMA_A", "AGMA accuracy grade"},
        {"N/(mm*um)", "stiffness per width"},
        {"kg*m^2", "moment of inertia"},
        {"W/(m^2*K)", "heat transfer coefficient"},
        {"kg/mm", "mass per width"},
    };

    private static final Units STANDARD = new Units();

    private final Map<String, Exact> table = new LinkedHashMap<>();
    private final Map<String, String> meanings = new HashMap<>();
    private final Map<String, Parse> known = new ConcurrentHashMap<>();
    private final Map<Dimension, String> names = new HashMap<>();

    /** What reading a unit text gives. */
    public sealed interface Parse {
        record Ok(Unit unit) implements Parse {}

        /** The message names what was found and, where there is one, the nearest unit. */
        record Bad(String message, @Nullable String nearest) implements Parse {}
    }

    /** An exact scale: fraction times a power of pi. */
    private record Exact(
            Dimension dimension,
            BigInteger numerator,
            BigInteger denominator,
            int pi,
            @Nullable BigDecimal offset,
            @Nullable String kind) {
        Exact times(Exact o, int sign) {
            Dimension d = sign > 0 ? dimension.times(o.dimension) : dimension.over(o.dimension);
            BigInteger n = numerator.multiply(sign > 0 ? o.numerator : o.denominator);
            BigInteger q = denominator.multiply(sign > 0 ? o.denominator : o.numerator);
            BigInteger g = n.gcd(q);
            return new Exact(d, n.divide(g), q.divide(g), pi + sign * o.pi, null, null);
        }

        Exact power(int e) {
            Exact r = one(Dimension.NONE);
            for (int i = 0; i < Math.abs(e); i++) {
                r = r.times(this, e > 0 ? 1 : -1);
            }
            return r;
        }

        static Exact one(Dimension d) {
            return new Exact(d, BigInteger.ONE, BigInteger.ONE, 0, null, null);
        }
    }

    private Units() {
        try (InputStream in = Units.class.getResourceAsStream("units.table")) {
            if (in == null) {
                throw new IllegalStateException("units.table is missing");
            }
            String text = new String(in.readAllBytes(), StandardCharsets.UTF_8);
            int at = 0;
            while (at < text.length()) {
                int end = text.indexOf('\n', at);
                end = end < 0 ? text.length() : end;
                line(text.substring(at, end));
                at = end + 1;
            }
        } catch (IOException e) {
            throw new UncheckedIOException(e);
        }
        for (String[] n : NAMES) {
            if (parse(n[0]) instanceof Parse.Ok ok) {
                names.put(ok.unit().dimension(), n[1]);
            }
        }
    }

    public static Units standard() {
        return STANDARD;
    }

    // ---- the table

    private void line(String line) {
        if (line.isBlank() || line.charAt(0) == '#') {
            return;
        }
        String[] cells = new String[4];
        int at = 0;
        for (int i = 0; i < 4; i++) {
            int bar = i == 3 ? line.length() : line.indexOf('|', at);
            cells[i] = line.substring(at, bar).strip();
            at = bar + 1;
        }
        String kind = cells[2].isEmpty() ? null : cells[2];
        Exact e = define(cells[1]);
        table.put(cells[0], new Exact(e.dimension, e.numerator, e.denominator, e.pi, e.offset, kind));
        meanings.put(cells[0], cells[3]);
    }

    private Exact define(String text) {
        if (text.startsWith("base ")) {
            return Exact.one(Dimension.base(text.substring(5)));
        }
        Exact r = Exact.one(Dimension.NONE);
        BigDecimal offset = null;
        String[] words = text.split(" ");
        for (int i = 0; i < words.length; i++) {
            String w = words[i];
            if (w.equals("offset")) {
                String[] f = words[++i].split("/");
                offset = new BigDecimal(f[0]).divide(new BigDecimal(f[1]), DIGITS);
            } else if (w.equals("pi")) {
                r = new Exact(r.dimension, r.numerator, r.denominator, r.pi + 1, null, null);
            } else if (Character.isDigit(w.charAt(0))) {
                int slash = w.indexOf('/');
                String rest = slash < 0 ? "" : w.substring(slash + 1);
                boolean number = !rest.isEmpty() && Character.isDigit(rest.charAt(0));
                BigInteger n = new BigInteger(slash < 0 ? w : w.substring(0, slash));
                BigInteger d = number ? new BigInteger(rest) : BigInteger.ONE;
                r = new Exact(r.dimension, r.numerator.multiply(n), r.denominator.multiply(d), r.pi, null, null);
                if (!number && !rest.isEmpty()) {
                    r = r.times(new Reader(rest).read(), -1);
                }
            } else {
                r = r.times(new Reader(w).read(), 1);
            }
        }
        return new Exact(r.dimension, r.numerator, r.denominator, r.pi, offset, null);
    }

    // ---- reading

    /** Reads a unit as it stands behind a number, without blanks. Never throws. */
    public Parse parse(String text) {
        Parse p = known.get(text);
        if (p == null) {
            p = read(text);
            if (known.size() < 10_000) {
                known.put(text, p);
            }
        }
        return p;
    }

    private Parse read(String text) {
        if (text.length() > 100) {
            return new Parse.Bad("This is too long for a unit.", null);
        }
        Reader r = new Reader(text);
        Exact e;
        try {
            e = text.startsWith("/")
                    ? Exact.one(Dimension.NONE).times(new Reader(text.substring(1)).all(), -1)
                    : r.all();
        } catch (BadUnit bad) {
            return bad(text, bad);
        }
        return new Parse.Ok(unit(text, e));
    }

    private Unit unit(String text, Exact e) {
        BigDecimal scale = new BigDecimal(e.numerator).divide(new BigDecimal(e.denominator), DIGITS);
        double numerator = scale.doubleValue();
        double denominator = 1;
        if (e.pi != 0) {
            BigDecimal pi = PI.pow(Math.abs(e.pi));
            scale = e.pi > 0 ? scale.multiply(pi, DIGITS) : scale.divide(pi, DIGITS);
            numerator = scale.doubleValue();
        } else if (exact(e.numerator) && exact(e.denominator)) {
            // two exact factors round less than one inexact one: 25 um is 0.025 mm to the last digit
            numerator = e.numerator.doubleValue();
            denominator = e.denominator.doubleValue();
        }
        double offset = e.offset == null ? 0 : e.offset.doubleValue();
        String kind = e.kind != null ? e.kind : text.indexOf('*') > 0 ? torque(text, e.dimension) : null;
        return new Unit(text, e.dimension, numerator, denominator, offset, kind);
    }

    private static boolean exact(BigInteger i) {
        return i.bitLength() <= 53;
    }

    /** A force times a length, written in that order, is a torque. */
    private @Nullable String torque(String text, Dimension d) {
        Exact nm = table.get("Nmm");
        if (nm == null || d != nm.dimension) {
            return null;
        }
        Exact first = table.get(text.substring(0, text.indexOf('*')));
        Exact n = table.get("N");
        return first != null && n != null && first.dimension == n.dimension ? "Torque" : null;
    }

    /** A unit text that can't be read; {@code word} is the part that is unknown, or null. */
    private static final class BadUnit extends Exception {
        private static final long serialVersionUID = 1;
        final @Nullable String word;

        BadUnit(@Nullable String word) {
            super(word, null, false, false);
            this.word = word;
        }
    }

    private final class Reader {
        private final String text;
        private int at;
        private int depth;

        Reader(String text) {
            this.text = text;
        }

        /** For the table of units, whose texts are right. */
        Exact read() {
            try {
                return all();
            } catch (BadUnit e) {
                throw new IllegalStateException("units.table: " + text, e);
            }
        }

        Exact all() throws BadUnit {
            Exact e = product();
            if (at < text.length()) {
                throw new BadUnit(null);
            }
            return e;
        }

        private Exact product() throws BadUnit {
            if (++depth > 20) {
                throw new BadUnit(null);
            }
            Exact e = factor();
            while (at < text.length() && (text.charAt(at) == '*' || text.charAt(at) == '/')) {
                int sign = text.charAt(at++) == '*' ? 1 : -1;
                Exact f = factor();
                if (e.offset != null || f.offset != null) {
                    throw new BadUnit(null);
                }
                e = e.times(f, sign);
            }
            depth--;
            return e;
        }

        private Exact factor() throws BadUnit {
            Exact e;
            if (at < text.length() && text.charAt(at) == '(') {
                at++;
                e = product();
                if (at >= text.length() || text.charAt(at) != ')') {
                    throw new BadUnit(null);
                }
                at++;
            } else {
                int start = at;
                while (at < text.length() && "*/^()".indexOf(text.charAt(at)) < 0) {
                    at++;
                }
                String word = text.substring(start, at);
                Exact found = table.get(word);
                if (found == null) {
                    throw new BadUnit(word);
                }
                e = found;
            }
            if (at < text.length() && text.charAt(at) == '^') {
                int start = ++at;
                while (at < text.length()
                        && (Character.isDigit(text.charAt(at)) || (at == start && text.charAt(at) == '-'))) {
                    at++;
                }
                int power;
                try {
                    power = Integer.parseInt(text.substring(start, at));
                } catch (NumberFormatException x) {
                    throw new BadUnit(null);
                }
                if (Math.abs(power) > 12 || e.offset != null) {
                    throw new BadUnit(null);
                }
                e = e.power(power);
            }
            return e;
        }
    }

    // ---- help

    private Parse bad(String text, BadUnit bad) {
        String word = bad.word;
        if (word == null || word.isEmpty()) {
            return new Parse.Bad(
                    "`" + text + "` is no unit; write units like `N/mm^2` or `kg/(m*s)`, without blanks.", null);
        }
        String near = nearest(word);
        if (near == null) {
            return new Parse.Bad("There is no unit `" + word + "`. `backcone handbook units` lists them.", null);
        }
        String whole = text.replace(word, near);
        return new Parse.Bad("There is no unit `" + word + "`. Did you mean `" + whole + "`?", whole);
    }

    private @Nullable String nearest(String word) {
        for (String t : table.keySet()) {
            if (t.equalsIgnoreCase(word)) {
                return t;
            }
        }
        // two units written together
        for (int i = 1; i < word.length(); i++) {
            String a = word.substring(0, i);
            String b = word.substring(i);
            if (a.length() > 1 && table.containsKey(a) && table.containsKey(b)) {
                return a + "*" + b;
            }
        }
        String best = null;
        int least = word.length() <= 2 ? 3 : 5;
        for (String t : table.keySet()) {
            int c = cost(word, t);
            if (c < least) {
                least = c;
                best = t;
            }
        }
        return best;
    }

    /** Twice the edit distance; a swap of neighbours is one step, and unlike letters cost extra. */
    private static int cost(String a, String b) {
        int[][] d = new int[a.length() + 1][b.length() + 1];
        for (int i = 0; i <= a.length(); i++) {
            for (int j = 0; j <= b.length(); j++) {
                if (i == 0 || j == 0) {
                    d[i][j] = 2 * (i + j);
                    continue;
                }
                int change = a.charAt(i - 1) == b.charAt(j - 1) ? 0 : 3;
                int v = Math.min(Math.min(d[i - 1][j], d[i][j - 1]) + 2, d[i - 1][j - 1] + change);
                if (i > 1 && j > 1 && a.charAt(i - 1) == b.charAt(j - 2) && a.charAt(i - 2) == b.charAt(j - 1)) {
                    v = Math.min(v, d[i - 2][j - 2] + 1);
                }
                d[i][j] = v;
            }
        }
        return d[a.length()][b.length()];
    }

    /** What a unit means, for hover: {@code kilonewton}; of a product the meanings of its parts. Empty when unknown. */
    public String describe(String text) {
        String m = meanings.get(text);
        if (m != null) {
            return m;
        }
        if (!(parse(text) instanceof Parse.Ok ok)) {
            return "";
        }
        StringBuilder b = new StringBuilder();
        int start = 0;
        for (int i = 0; i <= text.length(); i++) {
            if (i == text.length() || "*/^()".indexOf(text.charAt(i)) >= 0) {
                String part = meanings.get(text.substring(start, i));
                if (part != null) {
                    b.append(b.length() == 0 ? "" : ", ").append(part);
                }
                start = i + 1;
            }
        }
        return nameOf(ok.unit().dimension()) + ": " + b;
    }

    /** Named units of a dimension, in the order of the table. */
    public List<String> unitsOf(Dimension d) {
        List<String> out = new ArrayList<>();
        table.forEach((k, v) -> {
            if (v.dimension == d) {
                out.add(k);
            }
        });
        return out;
    }

    /** An everyday name of a dimension, or its base form. */
    public String nameOf(Dimension d) {
        String n = names.get(d);
        return n == null ? "quantity of dimension " + d : n;
    }

    /** Every word that may stand in a unit text. */
    public Set<String> words() {
        return java.util.Collections.unmodifiableSet(table.keySet());
    }
}
