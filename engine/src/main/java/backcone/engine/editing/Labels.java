package backcone.engine.editing;

import backcone.engine.answers.RequirementAnswer;
import backcone.engine.answers.State;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import backcone.engine.units.Numbers;
import java.util.ArrayList;
import java.util.EnumMap;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import org.jspecify.annotations.Nullable;

/** Short texts about requirements. */
final class Labels {
    /** What fits into one line beside a text. */
    static final int LONGEST = 43;

    private Labels() {}

    static String number(double v) {
        return Numbers.format(v, 4);
    }

    static String percent(double fraction) {
        double p = fraction * 100;
        String digits = Math.abs(p) >= 99.95
                ? String.format(Locale.ROOT, "%.0f", Math.abs(p))
                : String.format(Locale.ROOT, "%.1f", Math.abs(p));
        boolean zero = digits.equals("0.0");
        return (zero ? "" : p < 0 ? "\u2212" : "+") + digits + " %";
    }

    /** Value, margin and load reserve, in at most 43 characters. */
    static String hint(RequirementAnswer r) {
        if (r.state() == State.OPEN) {
            String why = !r.missing().isEmpty()
                    ? "needs " + last(r.missing().get(0).path())
                            + (r.missing().size() > 1 ? " and " + (r.missing().size() - 1) + " more" : "")
                    : r.fault() == null ? "" : r.fault();
            return cut("open" + (why.isEmpty() ? "" : ": " + why));
        }
        String value = number(r.value()) + (r.unit().isEmpty() ? "" : " " + r.unit());
        StringBuilder b = new StringBuilder(value);
        if (!Double.isNaN(r.margin()) && !Double.isInfinite(r.margin())) {
            b.append(", ").append(percent(r.margin()));
        }
        if (!Double.isNaN(r.loadReserve())) {
            b.append(", load \u00D7").append(Numbers.format(r.loadReserve(), 3));
        }
        String word = r.state() == State.CLEAR ? "" : r.state().word();
        if (!word.isEmpty() && b.length() + word.length() + 2 <= LONGEST) {
            b.append(", ").append(word);
        }
        return cut(b.toString());
    }

    /** The same in words. */
    static String sentence(RequirementAnswer r) {
        StringBuilder b = new StringBuilder("**").append(r.state().word()).append("**");
        if (r.state() == State.OPEN) {
            return b.append(r.fault() == null ? "" : ": " + Hovers.escape(r.fault()))
                    .toString();
        }
        String unit = r.unit().isEmpty() ? "" : " " + r.unit();
        b.append(": ").append(number(r.value())).append(unit);
        if (!Double.isNaN(r.required())) {
            b.append(", required ")
                    .append(Hovers.escape(r.comparison()))
                    .append(' ')
                    .append(number(r.required()));
            if (!Double.isNaN(r.upper())) {
                b.append(" and ").append(number(r.upper()));
            }
            b.append(unit);
        }
        if (!Double.isNaN(r.margin()) && !Double.isInfinite(r.margin())) {
            b.append(", margin ").append(percent(r.margin()));
        }
        if (!Double.isNaN(r.loadReserve())) {
            b.append(", just met at ")
                    .append(Numbers.format(r.loadReserve(), 3))
                    .append(" times the load");
        }
        return b.toString();
    }

    private static String cut(String s) {
        return s.length() <= LONGEST ? s : s.substring(0, LONGEST - 1).stripTrailing() + "\u2026";
    }

    private static String last(String path) {
        return path.substring(path.lastIndexOf('.') + 1);
    }

    /** {@code 1 short, 2 tight, 5 clear}. */
    static String counts(List<RequirementAnswer> all) {
        Map<State, Integer> n = new EnumMap<>(State.class);
        all.forEach(r -> n.merge(r.state(), 1, Integer::sum));
        List<String> out = new ArrayList<>();
        for (State s : List.of(State.SHORT, State.OUTSIDE, State.OPEN, State.ACCEPTED, State.TIGHT, State.CLEAR)) {
            if (n.containsKey(s)) {
                out.add(n.get(s) + " " + s.word());
            }
        }
        return out.isEmpty() ? "nothing required" : String.join(", ", out);
    }

    static String text(Scene scene, FileId file, Span span) {
        @Nullable String t = scene.texts.apply(file);
        return t == null || span.end() > t.length()
                ? "…"
                : t.substring(span.start(), span.end()).replaceAll("\\s+", " ").replace('`', '\'');
    }
}
