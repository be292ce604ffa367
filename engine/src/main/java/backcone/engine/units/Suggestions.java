package backcone.engine.units;

import backcone.engine.units.UnitTable.Instead;
import backcone.engine.units.UnitText.Piece;
import org.jspecify.annotations.Nullable;

/** What was meant by a text that is no unit. */
final class Suggestions {
    // steps of the distance between two words
    private static final int OTHER_CASE = 1;
    private static final int SWAP = 2;
    private static final int ONE_MORE_OR_LESS = 4;
    private static final int OTHER_LETTER = 6;

    private final UnitTable table;

    Suggestions(UnitTable table) {
        this.table = table;
    }

    /** A unit text that can be read, or null. */
    @Nullable
    String nearest(String text) {
        String plain = plainSigns(text);
        String meant = accepted(plain);
        if (meant != null) {
            return meant.equals(text) ? null : meant;
        }
        StringBuilder out = new StringBuilder();
        for (Piece p : UnitText.pieces(plain)) {
            if (!p.isWord() || table.entry(p.text()) != null) {
                out.append(p.text());
                continue;
            }
            String word = word(p.text());
            if (word == null) {
                return null;
            }
            boolean alone = p.text().length() == plain.length();
            out.append(alone || word.indexOf('/') < 0 ? word : "(" + word + ")");
        }
        return accepted(out.toString());
    }

    /** The text itself when it reads as a unit, or what always is meant by it. */
    private @Nullable String accepted(String text) {
        Instead i = table.insteadInAnyCase(text);
        if (i != null && (table.instead(text) != null || !reads(text))) {
            return i.meant();
        }
        return reads(text) ? text : null;
    }

    private boolean reads(String text) {
        try {
            UnitText.read(text, table);
            return true;
        } catch (UnitText.Unreadable e) {
            return false;
        }
    }

    /** Signs of other hands: raised digits, middle dots, hyphens between words, blanks. */
    private static String plainSigns(String text) {
        StringBuilder b = new StringBuilder(text.length() + 4);
        boolean raised = false;
        for (int i = 0; i < text.length(); i++) {
            char c = text.charAt(i);
            int digit = "⁰¹²³⁴⁵⁶⁷⁸⁹".indexOf(c);
            if (digit >= 0 || c == '⁻') {
                b.append(raised ? "" : "^").append(digit >= 0 ? (char) ('0' + digit) : '-');
                raised = true;
                continue;
            }
            raised = false;
            switch (c) {
                case '·', '⋅', '×', '∗', '.' -> b.append('*');
                case '⁄', '∕', '÷' -> b.append('/');
                case '−' -> b.append('-');
                case '″', '"' -> b.append("in");
                case '-' -> b.append(b.length() > 0 && b.charAt(b.length() - 1) == '^' ? '-' : '*');
                case '*' -> {
                    if (i + 1 < text.length() && text.charAt(i + 1) == '*') {
                        b.append('^');
                        i++;
                    } else {
                        b.append('*');
                    }
                }
                case ' ', '\t', '\u00A0' -> b.append(betweenWords(text, i) ? "*" : "");
                default -> b.append(c);
            }
        }
        return b.toString();
    }

    private static boolean betweenWords(String text, int blank) {
        return blank > 0
                && blank + 1 < text.length()
                && !UnitText.isSign(text.charAt(blank - 1))
                && !UnitText.isSign(text.charAt(blank + 1))
                && text.charAt(blank + 1) != ' ';
    }

    // ---- words

    private @Nullable String word(String word) {
        Instead i = table.insteadInAnyCase(word);
        if (i != null) {
            return i.meant();
        }
        String near = otherCase(word);
        if (near != null) {
            return near;
        }
        String power = endingInPower(word);
        if (power != null) {
            return power;
        }
        String product = runTogether(word);
        if (product != null) {
            return product;
        }
        int most = switch (word.length()) {
            case 0, 1 -> 0;
            case 2 -> ONE_MORE_OR_LESS;
            case 3 -> OTHER_LETTER;
            default -> 2 * ONE_MORE_OR_LESS;
        };
        return closest(word, most);
    }

    /** The unit word with the same letters, most of them alike. */
    private @Nullable String otherCase(String word) {
        String best = null;
        int least = Integer.MAX_VALUE;
        for (String t : table.words()) {
            if (t.equalsIgnoreCase(word) && table.instead(t) == null && distance(word, t) < least) {
                least = distance(word, t);
                best = t;
            }
        }
        return best;
    }

    /** {@code mm2} for {@code mm^2}. */
    private @Nullable String endingInPower(String word) {
        int last = word.length() - 1;
        if (last < 1 || word.charAt(last) < '2' || word.charAt(last) > '4') {
            return null;
        }
        String stem = word.substring(0, last);
        if (table.entry(stem) == null) {
            Instead i = table.insteadInAnyCase(stem);
            String near = i != null ? i.meant() : otherCase(stem);
            if (near == null || table.entry(near) == null) {
                return null;
            }
            stem = near;
        }
        return stem + "^" + word.charAt(last);
    }

    /** A force and a length, or a power and a time, written as one word; {@code kgm} is the same with the old force. */
    private @Nullable String runTogether(String word) {
        for (int i = 1; i < word.length(); i++) {
            Scale a = table.scale(word.substring(0, i));
            Scale b = table.scale(word.substring(i));
            if (a == null || b == null) {
                continue;
            }
            String product = word.substring(0, i) + "*" + word.substring(i);
            Instead meant = table.instead(product);
            if (meant != null) {
                return meant.meant();
            }
            if (a.dimension().times(b.dimension()) == torque()) {
                return product;
            }
        }
        return null;
    }

    private @Nullable Dimension torque() {
        Scale s = table.scale("Nm");
        return s == null ? null : s.dimension();
    }

    /** The unit word at the least distance up to {@code most}; of equals the first of the table. */
    private @Nullable String closest(String word, int most) {
        String best = null;
        int least = most + 1;
        for (String t : table.words()) {
            // mPa is there for mPa*s only
            if (table.instead(t) != null || (t.length() - word.length()) * ONE_MORE_OR_LESS >= least) {
                continue;
            }
            int d = distance(word, t);
            if (d < least) {
                least = d;
                best = t;
            }
        }
        return best;
    }

    /** Like an edit distance; a swap of neighbours is one step, and the same letters count as nearer. */
    static int distance(String a, String b) {
        int[] before = new int[b.length() + 1];
        int[] last = new int[b.length() + 1];
        int[] row = new int[b.length() + 1];
        for (int i = 0; i <= a.length(); i++) {
            for (int j = 0; j <= b.length(); j++) {
                if (i == 0 || j == 0) {
                    row[j] = ONE_MORE_OR_LESS * (i + j);
                    continue;
                }
                int change = change(a.charAt(i - 1), b.charAt(j - 1));
                int v = Math.min(Math.min(last[j], row[j - 1]) + ONE_MORE_OR_LESS, last[j - 1] + change);
                if (i > 1 && j > 1) {
                    int swapped = change(a.charAt(i - 1), b.charAt(j - 2)) + change(a.charAt(i - 2), b.charAt(j - 1));
                    v = Math.min(v, before[j - 2] + SWAP + swapped);
                }
                row[j] = v;
            }
            int[] free = before;
            before = last;
            last = row;
            row = free;
        }
        return last[b.length()];
    }

    private static int change(char a, char b) {
        if (a == b) {
            return 0;
        }
        return Character.toLowerCase(a) == Character.toLowerCase(b) ? OTHER_CASE : OTHER_LETTER;
    }
}
