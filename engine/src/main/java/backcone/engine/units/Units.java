package backcone.engine.units;

import backcone.engine.units.UnitTable.Instead;
import backcone.engine.units.UnitTable.Named;
import backcone.engine.units.UnitText.Piece;
import backcone.engine.units.UnitText.Unreadable;
import java.util.ArrayDeque;
import java.util.ArrayList;
import java.util.Deque;
import java.util.HashMap;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;
import java.util.concurrent.ConcurrentHashMap;
import org.jspecify.annotations.Nullable;

/** The catalogue of units, and the reading of unit texts such as {@code N/(mm*um)}. The same for every caller. */
public final class Units {
    /** Enough for every spelling in use; texts beyond are read anew. */
    private static final int REMEMBERED = 4096;

    private static final Units STANDARD = new Units(UnitTable.load());

    private final UnitTable table;
    private final Suggestions suggestions;
    private final Map<String, Parse> known = new ConcurrentHashMap<>();
    private volatile @Nullable Map<Dimension, Named> named;

    /** What reading a unit text gives. */
    public sealed interface Parse {
        record Ok(Unit unit) implements Parse {}

        /** The message names what was found and, where there is one, the nearest unit text, which can be read. */
        record Bad(String message, @Nullable String nearest) implements Parse {}
    }

    Units(UnitTable table) {
        this.table = table;
        this.suggestions = new Suggestions(table);
    }

    public static Units standard() {
        return STANDARD;
    }

    // ---- reading

    /** Reads a unit as it stands behind a number, without blanks. Never throws. */
    public Parse parse(String text) {
        Parse p = known.get(text);
        if (p == null) {
            p = read(text);
            if (known.size() < REMEMBERED && text.length() <= UnitText.LONGEST) {
                known.put(text, p);
            }
        }
        return p;
    }

    private Parse read(String text) {
        Instead instead = table.instead(text);
        if (instead != null) {
            return meant(text, instead);
        }
        try {
            Unit unit = UnitText.read(text, table).unit(text, kind(text));
            return unit == null ? tooLarge(text) : new Parse.Ok(unit);
        } catch (Unreadable e) {
            return bad(text, e);
        }
    }

    /** The kind of a word stands in the table; a force times a length, in that order, is a torque. */
    private @Nullable String kind(String text) {
        UnitTable.Entry e = table.entry(text);
        if (e != null) {
            return e.kind();
        }
        int star = text.indexOf('*');
        if (star < 0) {
            return null;
        }
        Scale a = table.scale(text.substring(0, star));
        Scale b = table.scale(text.substring(star + 1));
        Scale force = table.scale("N");
        Scale length = table.scale("mm");
        if (a == null || b == null || force == null || length == null) {
            return null;
        }
        if (a.dimension() == force.dimension() && b.dimension() == length.dimension()) {
            return "Torque";
        }
        Dimension energy = force.dimension().times(length.dimension());
        boolean turned = a.dimension() == length.dimension();
        return !turned && a.dimension().times(b.dimension()) == energy ? "Energy" : null;
    }

    // ---- messages

    private static Parse meant(String text, Instead instead) {
        String meant = instead.meant();
        if (meant == null) {
            return new Parse.Bad("There is no unit `" + text + "`: " + instead.why() + ".", null);
        }
        String what = instead.why().isEmpty()
                ? "There is no unit `" + text + "`."
                : "`" + text + "` is " + instead.why() + ".";
        return new Parse.Bad(what + " Did you mean `" + meant + "`?", meant);
    }

    private Parse bad(String text, Unreadable e) {
        switch (e.why) {
            case TOO_LONG:
                return new Parse.Bad("This is too long for a unit.", null);
            case TOO_LARGE:
                return tooLarge(text);
            case TEMPERATURE_IN_PRODUCT:
                String inKelvin = differences(text);
                boolean reads = !inKelvin.equals(text) && parse(inKelvin) instanceof Parse.Ok;
                return new Parse.Bad(
                        "A degree of a temperature scale stands alone, as in `20 degC`; within `" + text
                                + "` differences of temperature are counted in `K`."
                                + (reads ? " Did you mean `" + inKelvin + "`?" : ""),
                        reads ? inKelvin : null);
            case UNKNOWN_WORD:
                if (Character.isDigit(e.word.charAt(0))) {
                    return new Parse.Bad(
                            "A unit holds no number besides exponents and a leading `1/`; found `" + e.word + "`.",
                            null);
                }
                Instead instead = table.insteadInAnyCase(e.word);
                if (instead != null && instead.meant() == null) {
                    return meant(e.word, instead);
                }
                String near = suggestions.nearest(text);
                return near != null
                        ? new Parse.Bad("There is no unit `" + e.word + "`. Did you mean `" + near + "`?", near)
                        : new Parse.Bad(
                                "There is no unit `" + e.word + "`. `backcone handbook units` lists them.", null);
            case FORM:
                if (text.isBlank()) {
                    return new Parse.Bad("A unit is missing here.", null);
                }
                String written = suggestions.nearest(text);
                return new Parse.Bad(
                        "`" + text + "` is no unit; write units like `N/mm^2` or `kg/(m*s)`, without blanks."
                                + (written == null ? "" : " Did you mean `" + written + "`?"),
                        written);
        }
        throw new AssertionError(e.why);
    }

    private static Parse tooLarge(String text) {
        return new Parse.Bad("`" + text + "` has an exponent too large for a unit.", null);
    }

    /** The text with Celsius in products replaced by kelvin. Degrees Fahrenheit differ from kelvin also in size. */
    private static String differences(String text) {
        StringBuilder b = new StringBuilder();
        for (Piece p : UnitText.pieces(text)) {
            b.append(p.isWord() && (p.text().equals("degC") || p.text().equals("°C")) ? "K" : p.text());
        }
        return b.toString();
    }

    // ---- words

    /**
     * What a unit means, for hover: {@code pound-force}, {@code newton per square millimetre, stress}. Empty when
     * unknown.
     */
    public String describe(String text) {
        UnitTable.Entry word = table.entry(text);
        if (word != null) {
            return word.meaning();
        }
        if (!(parse(text) instanceof Parse.Ok ok)) {
            return "";
        }
        String kind = ok.unit().kind();
        if (kind != null) {
            return spoken(text) + (kind.equals("Torque") ? ", torque" : ", energy");
        }
        for (Named n : table.dimensions()) {
            if (n.spellings().contains(text)) {
                return spoken(text) + ", " + n.name();
            }
        }
        Named dimension = named().get(ok.unit().dimension());
        return spoken(text) + (dimension == null ? "" : ", " + dimension.name());
    }

    private String spoken(String text) {
        StringBuilder over = new StringBuilder();
        StringBuilder under = new StringBuilder();
        List<Piece> pieces = UnitText.pieces(text);
        Deque<Boolean> outer = new ArrayDeque<>();
        boolean group = false;
        boolean divided = false;
        for (int i = 0; i < pieces.size(); i++) {
            Piece p = pieces.get(i);
            switch (p.text()) {
                case "*" -> divided = false;
                case "/" -> divided = true;
                case "(" -> {
                    outer.push(group);
                    group ^= divided;
                    divided = false;
                }
                case ")" -> group = outer.pop();
                default -> {
                    if (p.isWord()) {
                        String exponent = i + 2 < pieces.size()
                                        && pieces.get(i + 1).text().equals("^")
                                ? pieces.get(i + 2).text()
                                : "1";
                        boolean negative = exponent.charAt(0) == '-';
                        StringBuilder b = group ^ divided ^ negative ? under : over;
                        raised(b, p.text(), negative ? exponent.substring(1) : exponent);
                    }
                }
            }
        }
        String per = under.length() == 0 ? "" : "per " + under;
        return over.length() == 0 ? per : per.isEmpty() ? over.toString() : over + " " + per;
    }

    private void raised(StringBuilder b, String word, String exponent) {
        UnitTable.Entry e = table.entry(word);
        if (e == null || word.equals("1")) {
            return;
        }
        int comma = e.meaning().indexOf(',');
        String meaning = comma < 0 ? e.meaning() : e.meaning().substring(0, comma);
        b.append(b.length() == 0 ? "" : " ");
        switch (exponent) {
            case "1" -> b.append(meaning);
            case "2" -> b.append("square ").append(meaning);
            case "3" -> b.append("cubic ").append(meaning);
            default -> b.append(meaning).append(" to the power ").append(exponent);
        }
    }

    /** Spellings of a dimension that a user may be offered, commonest first. */
    public List<String> unitsOf(Dimension d) {
        Set<String> out = new LinkedHashSet<>();
        for (Named n : table.dimensions()) {
            if (parse(n.spellings().get(0)) instanceof Parse.Ok ok && ok.unit().dimension() == d) {
                out.addAll(n.spellings());
            }
        }
        for (String w : table.words()) {
            Scale s = table.scale(w);
            if (s != null && s.dimension() == d && table.instead(w) == null) {
                out.add(w);
            }
        }
        return List.copyOf(out);
    }

    /** The same for one quantity kind: without the spellings that say they belong to another one. */
    public List<String> unitsOf(Dimension d, String kind) {
        List<String> out = new ArrayList<>();
        for (String u : unitsOf(d)) {
            if (parse(u) instanceof Parse.Ok ok) {
                String k = ok.unit().kind();
                if (k == null || k.equals(kind)) {
                    out.add(u);
                }
            }
        }
        return out;
    }

    /** An everyday name of a dimension, or its base form. */
    public String nameOf(Dimension d) {
        Named n = named().get(d);
        return n == null ? "quantity of dimension " + d : n.name();
    }

    private Map<Dimension, Named> named() {
        Map<Dimension, Named> m = named;
        if (m == null) {
            m = new HashMap<>();
            for (Named n : table.dimensions()) {
                if (parse(n.spellings().get(0)) instanceof Parse.Ok ok) {
                    m.putIfAbsent(ok.unit().dimension(), n);
                }
            }
            named = m;
        }
        return m;
    }

    /** Every word that may stand in a unit text, commonest first within a dimension. */
    public Set<String> words() {
        return table.words();
    }
}
