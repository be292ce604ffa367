package backcone.engine.units;

import java.util.ArrayList;
import java.util.List;

/**
 * Reads unit texts: words joined by {@code *} and {@code /}, which bind alike and from left to right, with whole
 * exponents and brackets. A leading slash reads as one over.
 */
final class UnitText {
    private static final int DEEPEST = 20;
    private static final int LARGEST_EXPONENT = 30;
    static final int LONGEST = 100;

    private final String text;
    private final UnitTable table;
    private int at;
    private int depth;

    /** Why a text is no unit. Built without a stack trace: it is an answer, not an accident. */
    static final class Unreadable extends Exception {
        private static final long serialVersionUID = 1;

        enum Why {
            FORM,
            UNKNOWN_WORD,
            TEMPERATURE_IN_PRODUCT,
            TOO_LARGE,
            TOO_LONG
        }

        final Why why;
        final String word;

        Unreadable(Why why, String word) {
            super(word, null, false, false);
            this.why = why;
            this.word = word;
        }
    }

    /** A stretch of a unit text: a word, or the signs between words. */
    record Piece(String text, boolean isWord) {}

    private UnitText(String text, UnitTable table) {
        this.text = text;
        this.table = table;
    }

    static Scale read(String text, UnitTable table) throws Unreadable {
        if (text.length() > LONGEST) {
            throw new Unreadable(Unreadable.Why.TOO_LONG, "");
        }
        UnitText t = new UnitText(text, table);
        Scale s = t.whole();
        if (!s.isReasonable()) {
            throw new Unreadable(Unreadable.Why.TOO_LARGE, "");
        }
        return s;
    }

    /** Words and the signs between them, in order. Exponents belong to the signs. */
    static List<Piece> pieces(String text) {
        List<Piece> out = new ArrayList<>();
        int start = 0;
        boolean exponent = false;
        for (int i = 0; i <= text.length(); i++) {
            boolean sign = i == text.length() || isSign(text.charAt(i));
            if (!sign) {
                continue;
            }
            if (i > start) {
                out.add(new Piece(text.substring(start, i), !exponent));
            }
            if (i < text.length()) {
                out.add(new Piece(text.substring(i, i + 1), false));
                exponent = text.charAt(i) == '^';
            }
            start = i + 1;
        }
        return out;
    }

    static boolean isSign(char c) {
        return c == '*' || c == '/' || c == '^' || c == '(' || c == ')';
    }

    private Scale whole() throws Unreadable {
        Scale s;
        if (at < text.length() && text.charAt(at) == '/') {
            s = Scale.ONE;
        } else {
            s = factor();
        }
        s = rest(s);
        if (at < text.length()) {
            throw new Unreadable(Unreadable.Why.FORM, "");
        }
        return s;
    }

    private Scale product() throws Unreadable {
        if (++depth > DEEPEST) {
            throw new Unreadable(Unreadable.Why.FORM, "");
        }
        Scale s = rest(factor());
        depth--;
        return s;
    }

    private Scale rest(Scale first) throws Unreadable {
        Scale s = first;
        while (at < text.length() && (text.charAt(at) == '*' || text.charAt(at) == '/')) {
            boolean over = text.charAt(at++) == '/';
            Scale f = factor();
            refuseTemperature(s);
            refuseTemperature(f);
            s = over ? s.over(f) : s.times(f);
        }
        return s;
    }

    private Scale factor() throws Unreadable {
        Scale s;
        if (at < text.length() && text.charAt(at) == '(') {
            at++;
            s = product();
            if (at >= text.length() || text.charAt(at) != ')') {
                throw new Unreadable(Unreadable.Why.FORM, "");
            }
            at++;
        } else {
            int start = at;
            while (at < text.length() && !isSign(text.charAt(at))) {
                at++;
            }
            String word = text.substring(start, at);
            if (word.isEmpty()) {
                throw new Unreadable(Unreadable.Why.FORM, "");
            }
            Scale known = table.scale(word);
            if (known == null) {
                throw new Unreadable(Unreadable.Why.UNKNOWN_WORD, word);
            }
            s = known;
        }
        if (at < text.length() && text.charAt(at) == '^') {
            refuseTemperature(s);
            s = s.power(exponent());
            if (!s.isReasonable()) {
                throw new Unreadable(Unreadable.Why.TOO_LARGE, "");
            }
        }
        return s;
    }

    private int exponent() throws Unreadable {
        at++;
        int sign = 1;
        if (at < text.length() && text.charAt(at) == '-') {
            sign = -1;
            at++;
        }
        int start = at;
        int e = 0;
        while (at < text.length() && text.charAt(at) >= '0' && text.charAt(at) <= '9') {
            e = Math.min(LARGEST_EXPONENT + 1, 10 * e + text.charAt(at++) - '0');
        }
        if (at == start) {
            throw new Unreadable(Unreadable.Why.FORM, "");
        }
        if (e > LARGEST_EXPONENT) {
            throw new Unreadable(Unreadable.Why.TOO_LARGE, "");
        }
        return sign * e;
    }

    private static void refuseTemperature(Scale s) throws Unreadable {
        if (s.shift() != null) {
            throw new Unreadable(Unreadable.Why.TEMPERATURE_IN_PRODUCT, "");
        }
    }
}
