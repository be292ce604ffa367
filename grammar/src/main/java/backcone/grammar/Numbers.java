package backcone.grammar;

import backcone.grammar.gen.BackconeLexer;
import java.time.DateTimeException;
import java.time.LocalDate;
import java.util.ArrayList;
import java.util.List;

/**
 * First pass over the token list: numbers, their units, dates. A unit stands right after its number on the same line
 * and holds no blanks, so it becomes one UNIT token and {@code 5 mm / t} stays a division.
 */
final class Numbers {
    private final List<Tok> in;
    private final List<Finding> findings;
    private final List<Tok> out;
    private int i;

    private Numbers(List<Tok> in, List<Finding> findings) {
        this.in = in;
        this.findings = findings;
        this.out = new ArrayList<>(in.size() + 16);
    }

    /** Expects the end-of-file token at the end of the list. */
    static List<Tok> glue(List<Tok> tokens, List<Finding> findings) {
        Numbers pass = new Numbers(tokens, findings);
        pass.run();
        return pass.out;
    }

    private void run() {
        while (i < in.size()) {
            Tok t = in.get(i);
            switch (t.getType()) {
                case BackconeLexer.NUMBER -> number(t);
                case BackconeLexer.DOT -> pointFirst(t);
                case BackconeLexer.DATE -> date(t);
                case BackconeLexer.NAME -> {
                    out.add(t);
                    i++;
                    if (t.is("in") && out.size() > 1 && endsOperand(out.get(out.size() - 2))) {
                        t.setType(BackconeLexer.IN);
                        unitAfterIn();
                    }
                }
                default -> {
                    out.add(t);
                    i++;
                }
            }
        }
    }

    private Tok at(int index) {
        return in.get(Math.min(index, in.size() - 1));
    }

    private int typeAt(int index) {
        return at(index).getType();
    }

    private static boolean endsOperand(Tok t) {
        return switch (t.getType()) {
            case BackconeLexer.NAME,
                    BackconeLexer.NUMBER,
                    BackconeLexer.UNIT,
                    BackconeLexer.RPAREN,
                    BackconeLexer.RBRACE -> true;
            default -> false;
        };
    }

    // ---- numbers

    private void number(Tok t) {
        i++;
        Tok number = t;
        if (typeAt(i) == BackconeLexer.COMMA && t.touches(at(i)) && digits(i + 1) && at(i).touches(at(i + 1))) {
            number = decimalComma(t);
        } else if (typeAt(i) == BackconeLexer.DOT && t.touches(at(i))) {
            number = secondPoint(t);
        } else if (t.end() - t.start() <= 3 && groupOfThree(t, i)) {
            number = groupedDigits(t);
        }
        out.add(number);
        if (!number.faulty) {
            checkSize(number);
        }
        afterNumber(number);
    }

    private boolean digits(int index) {
        return typeAt(index) == BackconeLexer.NUMBER;
    }

    private static boolean sameLine(Tok a, Tok b) {
        return a.getLine() == b.getLine();
    }

    /** {@code 1,5} or {@code 1,480,000}: one unreadable number, since both readings are common. */
    private Tok decimalComma(Tok first) {
        Tok last = first;
        while (typeAt(i) == BackconeLexer.COMMA && last.touches(at(i)) && digits(i + 1) && at(i).touches(at(i + 1))) {
            last = at(i + 1);
            i += 2;
        }
        return unreadable(first, last, Finding.Kind.DECIMAL_COMMA, "");
    }

    /** {@code 5.} or {@code 1.2.3}. */
    private Tok secondPoint(Tok first) {
        Tok point = at(i);
        i++;
        if (digits(i) && point.touches(at(i))) {
            Tok last = at(i);
            i++;
            while (typeAt(i) == BackconeLexer.DOT && last.touches(at(i)) && digits(i + 1)) {
                last = at(i + 1);
                i += 2;
            }
            return unreadable(first, last, Finding.Kind.TWO_POINTS, "");
        }
        Tok whole = span(first, point);
        boolean power = first.getText().indexOf('e') >= 0 || first.getText().indexOf('E') >= 0;
        whole.unreadable = power;
        find(Finding.Kind.POINT_LAST, whole, power ? first.getText() : first.getText() + ".0");
        return whole;
    }

    /** Three digits, and perhaps decimals, behind a blank. Other numbers side by side lack something between them. */
    private boolean groupOfThree(Tok before, int index) {
        if (!digits(index) || !sameLine(before, at(index)) || before.getText().indexOf('.') >= 0) {
            return false;
        }
        String group = at(index).getText();
        int point = group.indexOf('.');
        return (point < 0 ? group.length() : point) == 3
                && group.chars().allMatch(c -> c == '.' || Character.isDigit(c));
    }

    /** {@code 1 480} or {@code 12 000 000}. */
    private Tok groupedDigits(Tok first) {
        Tok last = first;
        StringBuilder joined = new StringBuilder(first.getText());
        while (groupOfThree(last, i)) {
            last = at(i);
            joined.append(last.getText());
            i++;
        }
        return unreadable(first, last, Finding.Kind.GROUPED_DIGITS, joined.toString());
    }

    private void pointFirst(Tok point) {
        boolean behindName =
                !out.isEmpty() && out.get(out.size() - 1).touches(point) && endsOperand(out.get(out.size() - 1));
        if (behindName || !digits(i + 1) || !point.touches(at(i + 1))) {
            out.add(point);
            i++;
            return;
        }
        Tok number = span(point, at(i + 1));
        number.setType(BackconeLexer.NUMBER);
        i += 2;
        find(Finding.Kind.POINT_FIRST, number, "0" + number.getText());
        out.add(number);
        afterNumber(number);
    }

    private void checkSize(Tok number) {
        if (number.end() - number.start() < 18
                && number.getText().indexOf('e') < 0
                && number.getText().indexOf('E') < 0) {
            return;
        }
        String text = number.getText();
        double value = Double.parseDouble(text);
        if (Double.isInfinite(value)) {
            number.unreadable = true;
            find(Finding.Kind.TOO_LARGE, number, "");
        } else if (value == 0 && hasDigitsOtherThanZero(text)) {
            number.unreadable = true;
            find(Finding.Kind.TOO_SMALL, number, "");
        }
    }

    private static boolean hasDigitsOtherThanZero(String text) {
        for (int k = 0; k < text.length(); k++) {
            char c = text.charAt(k);
            if (c == 'e' || c == 'E') {
                return false;
            }
            if (c >= '1' && c <= '9') {
                return true;
            }
        }
        return false;
    }

    private void date(Tok t) {
        out.add(t);
        i++;
        String text = t.getText();
        boolean runsOn = t.touches(at(i)) && (digits(i) || typeAt(i) == BackconeLexer.NAME);
        if (runsOn) {
            Tok whole = span(t, at(i));
            out.set(out.size() - 1, whole);
            i++;
            find(Finding.Kind.NO_SUCH_DAY, whole, "");
            return;
        }
        try {
            LocalDate.of(
                    Integer.parseInt(text.substring(0, 4)),
                    Integer.parseInt(text.substring(5, 7)),
                    Integer.parseInt(text.substring(8, 10)));
        } catch (DateTimeException noSuchDay) {
            find(Finding.Kind.NO_SUCH_DAY, t, "");
        }
    }

    // ---- units

    private void afterNumber(Tok number) {
        Tok next = at(i);
        if (!sameLine(number, next)) {
            return;
        }
        if (next.getType() == BackconeLexer.LPAREN) {
            times(number, next, next.getText());
            return;
        }
        if (next.getType() == BackconeLexer.NAME) {
            String word = next.getText();
            if (word.charAt(0) == '_' && number.touches(next) && word.matches("[_0-9]+")) {
                out.set(
                        out.size() - 1,
                        unreadable(
                                number, next, Finding.Kind.GROUPED_DIGITS, (number.getText() + word).replace("_", "")));
                i++;
                return;
            }
            if (Words.neverUnit(word) || startsFact(i)) {
                return;
            }
            boolean path = next.touches(at(i + 1))
                    && (typeAt(i + 1) == BackconeLexer.LPAREN
                            || (typeAt(i + 1) == BackconeLexer.DOT && typeAt(i + 2) == BackconeLexer.NAME));
            boolean name = word.indexOf('_') >= 0 && !Words.UNDERSCORED_UNITS.contains(word);
            if (path || name) {
                times(number, next, word);
                return;
            }
        } else if (next.getType() == BackconeLexer.SLASH) {
            boolean reciprocal = !number.touches(next)
                    && next.touches(at(i + 1))
                    && typeAt(i + 1) == BackconeLexer.NAME
                    && Words.RECIPROCAL_UNITS.contains(at(i + 1).getText());
            if (!reciprocal) {
                return;
            }
        } else if (next.getType() != BackconeLexer.PERCENT && next.getType() != BackconeLexer.DEGREE && !oneOver(i)) {
            return;
        }
        unit();
    }

    /** {@code 16 material = …}: the word is the next entry, not a unit. */
    private boolean startsFact(int index) {
        int k = index + 1;
        while (typeAt(k) == BackconeLexer.DOT && typeAt(k + 1) == BackconeLexer.NAME) {
            k += 2;
        }
        return typeAt(k) == BackconeLexer.ASSIGN;
    }

    private boolean oneOver(int index) {
        return digits(index)
                && at(index).is("1")
                && typeAt(index + 1) == BackconeLexer.SLASH
                && at(index).touches(at(index + 1))
                && at(index + 1).touches(at(index + 2))
                && (typeAt(index + 2) == BackconeLexer.NAME || typeAt(index + 2) == BackconeLexer.LPAREN);
    }

    private void unitAfterIn() {
        int type = typeAt(i);
        boolean starts = (type == BackconeLexer.NAME && !Words.neverUnit(at(i).getText()))
                || type == BackconeLexer.PERCENT
                || type == BackconeLexer.DEGREE
                || (digits(i) && at(i).is("1"));
        if (starts && sameLine(out.get(out.size() - 1), at(i))) {
            unit();
        }
    }

    /** Glues the unit that starts at {@code i}: all that touches and reads as a unit, and no trailing operator. */
    private void unit() {
        Tok first = at(i);
        int end = first.getType() == BackconeLexer.SLASH ? i + 2 : i + 1;
        while (true) {
            int more = unitTail(end);
            if (more == end) {
                break;
            }
            end = more;
        }
        Tok unit = span(first, at(end - 1));
        unit.setType(BackconeLexer.UNIT);
        out.add(unit);
        i = end;
    }

    /** The index behind one more touching {@code *x}, {@code /x} or {@code ^n}, or {@code index} when there is none. */
    private int unitTail(int index) {
        if (!at(index - 1).touches(at(index)) || !at(index).touches(at(index + 1))) {
            return index;
        }
        int type = typeAt(index);
        if (type == BackconeLexer.CARET) {
            int k = typeAt(index + 1) == BackconeLexer.MINUS && at(index + 1).touches(at(index + 2))
                    ? index + 2
                    : index + 1;
            return digits(k) ? k + 1 : group(k, index);
        }
        if (type == BackconeLexer.STAR || type == BackconeLexer.SLASH) {
            int next = typeAt(index + 1);
            boolean callOrPath = at(index + 1).touches(at(index + 2))
                    && (typeAt(index + 2) == BackconeLexer.LPAREN || typeAt(index + 2) == BackconeLexer.DOT);
            if ((next == BackconeLexer.NAME && !callOrPath)
                    || next == BackconeLexer.PERCENT
                    || next == BackconeLexer.DEGREE
                    || digits(index + 1)) {
                return index + 2;
            }
            return group(index + 1, index);
        }
        return index;
    }

    /** The index behind a bracket of touching unit text, or {@code otherwise}. */
    private int group(int index, int otherwise) {
        if (typeAt(index) != BackconeLexer.LPAREN) {
            return otherwise;
        }
        int depth = 0;
        for (int k = index; k < in.size(); k++) {
            switch (typeAt(k)) {
                case BackconeLexer.LPAREN -> depth++;
                case BackconeLexer.RPAREN -> {
                    depth--;
                    if (depth == 0) {
                        return k + 1;
                    }
                }
                case BackconeLexer.NAME,
                        BackconeLexer.NUMBER,
                        BackconeLexer.STAR,
                        BackconeLexer.SLASH,
                        BackconeLexer.CARET,
                        BackconeLexer.MINUS -> {}
                default -> {
                    return otherwise;
                }
            }
            if (!at(k).touches(at(k + 1))) {
                return otherwise;
            }
        }
        return otherwise;
    }

    // ---- findings

    private void times(Tok number, Tok next, String word) {
        Tok last = next;
        String factor = word;
        int k = i + 1;
        while (last.touches(at(k)) && typeAt(k) == BackconeLexer.DOT && typeAt(k + 1) == BackconeLexer.NAME) {
            last = at(k + 1);
            factor += "." + last.getText();
            k += 2;
        }
        if (next.getType() == BackconeLexer.NAME && last.touches(at(k)) && typeAt(k) == BackconeLexer.LPAREN) {
            last = at(k);
            factor += "(";
        }
        find(Finding.Kind.MISSING_TIMES, span(number, last), factor);
        Tok star = Tok.inserted(next, BackconeLexer.STAR, next.start());
        star.faulty = true;
        out.add(star);
    }

    private Tok unreadable(Tok first, Tok last, Finding.Kind kind, String other) {
        Tok whole = span(first, last);
        whole.unreadable = true;
        find(kind, whole, other);
        return whole;
    }

    private void find(Finding.Kind kind, Tok where, String other) {
        where.faulty = true;
        findings.add(new Finding(kind, where.start(), where.end(), where.getText(), other));
    }

    private static Tok span(Tok first, Tok last) {
        Tok t = new Tok(first.pair(), first.getType(), first.getChannel(), first.start(), last.end() - 1);
        t.setLine(first.getLine());
        return t;
    }
}
