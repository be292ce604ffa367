package backcone.engine.parse;

import backcone.engine.diagnostics.Code;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import backcone.grammar.Finding;
import java.util.Map;

/** Words for what the token list has found. */
final class Findings {
    /** Signs from word processors and standards, with what is written instead. */
    private static final Map<String, String> INSTEAD = Map.ofEntries(
            Map.entry("\u00D7", "*"),
            Map.entry("\u00B7", "*"),
            Map.entry("\u22C5", "*"),
            Map.entry("\u2219", "*"),
            Map.entry("\u00F7", "/"),
            Map.entry("\u2215", "/"),
            Map.entry("\u2212", "-"),
            Map.entry("\u2013", "-"),
            Map.entry("\u2014", "-"),
            Map.entry("\u2264", "<="),
            Map.entry("\u2265", ">="),
            Map.entry("\u2260", "!="),
            Map.entry("\u00B2", "^2"),
            Map.entry("\u00B3", "^3"),
            Map.entry("\u2044", "/"),
            Map.entry("\u2026", ".."),
            Map.entry("\u21D2", "=>"),
            Map.entry("&", "and"),
            Map.entry("&&", "and"),
            Map.entry("!", "not"));

    private final FileId file;

    Findings(FileId file) {
        this.file = file;
    }

    Diagnostic say(Finding f) {
        String text = f.text();
        Span span = new Span(f.start(), f.end());
        switch (f.kind()) {
            case DECIMAL_COMMA -> {
                return decimalComma(text, span);
            }
            case POINT_FIRST -> {
                return of(Code.BAD_NUMBER, span, "a digit is missing before the point: write `" + f.other() + "`")
                        .withFix("write " + f.other(), span, f.other());
            }
            case POINT_LAST -> {
                String whole = text.substring(0, text.length() - 1);
                return pointLast(text, whole, f.other(), span);
            }
            case TWO_POINTS -> {
                return of(
                        Code.BAD_NUMBER,
                        span,
                        "`" + text
                                + "` holds more than one point: a number has one decimal point and no signs between its digits");
            }
            case TOO_LARGE -> {
                return of(
                        Code.BAD_NUMBER,
                        span,
                        "`" + text
                                + "` is larger than any number that can be computed with: write a smaller one, or another unit");
            }
            case TOO_SMALL -> {
                return of(
                        Code.BAD_NUMBER,
                        span,
                        "`" + text + "` is too close to zero to be told from it: write `0`, or another unit");
            }
            case GROUPED_DIGITS -> {
                return of(
                                Code.BAD_NUMBER,
                                span,
                                "the digits of a number stand together: write `" + f.other() + "` instead of "
                                        + Forms.quoted(text))
                        .withFix("write " + f.other(), span, f.other());
            }
            case NO_SUCH_DAY -> {
                return of(
                        Code.BAD_DATE,
                        span,
                        "there is no day `" + text + "`: a date is year, month, day, written as `2027-06-30`");
            }
            case MISSING_TIMES -> {
                return missingTimes(f, span);
            }
            case TWO_ENTRIES -> {
                return of(
                                Code.SYNTAX,
                                span,
                                "`" + text
                                        + "` starts another entry on the same line: put it on a line of its own, or `;` before it")
                        .withFix("put `;` before `" + text + "`", new Span(f.start(), f.start()), "; ");
            }
            case UNCLOSED_BRACKET -> {
                return of(Code.SYNTAX, span, "an opening `(` is not closed in this entry: write the missing `)`");
            }
            case OPEN_STRING -> {
                return of(
                                Code.UNCLOSED_STRING,
                                span,
                                "the text " + Forms.quoted(text)
                                        + " has no end: write `\"` where it ends, on the same line")
                        .withFix("end the text with `\"`", new Span(f.end(), f.end()), "\"");
            }
            case BAD_CHARACTER -> {
                return badCharacter(text, span);
            }
            case UNCLOSED_BRACE -> {
                return of(Code.UNCLOSED_BLOCK, span, unclosed(text));
            }
            case UNOPENED_BRACE -> {
                return of(
                                Code.SYNTAX,
                                new Span(f.end(), f.end()),
                                "the lines below " + Forms.quoted(text)
                                        + " are closed by a `}`, but no `{` opens them: write `{` at the end of this line")
                        .withFix("write `{`", new Span(f.end(), f.end()), " {");
            }
            case STRAY_BRACE -> {
                return of(
                                Code.STRAY_BRACE,
                                span,
                                "this `}` closes nothing: remove it, or write the missing `{` further up")
                        .withFix("remove `}`", span, "");
            }
            case TOO_DEEP -> {
                return of(
                        Code.TOO_DEEP,
                        span,
                        text.equals("operators")
                                ? "this expression holds more than 500 operators: split it with `let`"
                                : "blocks and brackets are nested more than 100 deep here: what lies deeper is not read; take some of it out");
            }
        }
        throw new IllegalStateException("a kind of finding without words: " + f.kind());
    }

    private Diagnostic pointLast(String text, String whole, String decimal, Span span) {
        String or = decimal.equals(whole) ? "" : " or `" + decimal + "`";
        Diagnostic d = of(Code.BAD_NUMBER, span, "`" + text + "` ends with its point: write `" + whole + "`" + or)
                .withFix("write " + whole, span, whole);
        return or.isEmpty() ? d : d.withFix("write " + decimal, span, decimal);
    }

    private static String unclosed(String head) {
        return head.isEmpty()
                ? "this `{` is not closed: write the `}` that ends it"
                : "the `{` of " + Forms.quoted(head) + " is not closed: write the `}` that ends it";
    }

    /** {@code 1,5} may be 1.5 or two numbers; {@code 1,480} may be 1.480 or 1480. Never guessed. */
    private Diagnostic decimalComma(String text, Span span) {
        String[] parts = text.split(",", -1);
        boolean groups = parts[0].length() <= 3 && parts[0].indexOf('.') < 0;
        for (int i = 1; i < parts.length; i++) {
            int digits = parts[i].indexOf('.') < 0 ? parts[i].length() : parts[i].indexOf('.');
            groups &= digits == 3;
        }
        String joined = text.replace(",", "");
        if (parts.length > 2) {
            return of(
                            Code.DECIMAL_COMMA,
                            span,
                            "`" + text + "`: a comma has no place in a number; write `" + joined + "`")
                    .withFix("write " + joined, span, joined);
        }
        String decimal = text.replace(".", "").replace(',', '.');
        if (groups) {
            return of(
                            Code.DECIMAL_COMMA,
                            span,
                            "`" + text + "` can be read as `" + decimal + "` or as `" + joined
                                    + "`: write the one you mean, without the comma")
                    .withFix("write " + decimal, span, decimal)
                    .withFix("write " + joined, span, joined);
        }
        if (parts[0].indexOf('.') >= 0) {
            return of(
                            Code.DECIMAL_COMMA,
                            span,
                            "`" + text + "`: the decimal sign is a point and digits are not grouped; write `" + decimal
                                    + "`")
                    .withFix("write " + decimal, span, decimal);
        }
        String two = parts[0] + ", " + parts[1];
        return of(
                        Code.DECIMAL_COMMA,
                        span,
                        "the decimal sign is a point: write `" + decimal + "`; if `" + text
                                + "` are two numbers, put a blank between them, `" + two + "`")
                .withFix("write " + decimal, span, decimal);
    }

    private Diagnostic missingTimes(Finding f, Span span) {
        String factor = f.other();
        int gap = f.end() - factor.length();
        String number =
                f.text().substring(0, f.text().length() - factor.length()).strip();
        boolean bracket = factor.endsWith("(");
        String proposal = number + " * " + factor + (bracket ? " … )" : "");
        String message = bracket
                ? "a multiplication is always written: did you mean `" + proposal + "`?"
                : "`" + factor + "` is no unit, and a multiplication is always written: did you mean `" + proposal
                        + "`?";
        return of(Code.MISSING_OPERATOR, span, message).withFix("write `*`", new Span(gap, gap), "* ");
    }

    private Diagnostic badCharacter(String text, Span span) {
        String instead = INSTEAD.get(text);
        if (instead != null) {
            return of(Code.BAD_CHARACTER, span, "`" + text + "` has no meaning here: write `" + instead + "` instead")
                    .withFix("write `" + instead + "`", span, instead);
        }
        int c = text.codePointAt(0);
        if (c == '\'') {
            return of(
                    Code.BAD_CHARACTER,
                    span,
                    "`'` has no meaning here: texts stand between straight quotes, `\"…\"`, and minutes of arc are"
                            + " written `arcmin`");
        }
        if ("\u201C\u201D\u201E\u00AB\u00BB\u2018\u2019".indexOf(c) >= 0) {
            return of(
                    Code.BAD_CHARACTER,
                    span,
                    "`" + text + "` does not quote here: put texts between straight quotes, `\"…\"`");
        }
        if (c == '[' || c == ']') {
            return of(
                    Code.BAD_CHARACTER,
                    span,
                    "`" + text + "` has no meaning here: expressions use round brackets, `( … )`");
        }
        if (c == '\u00B1') {
            return of(
                    Code.BAD_CHARACTER,
                    span,
                    "`" + text + "` has no meaning here: a tolerance is written `112 mm tol -0.02 mm .. +0.02 mm`");
        }
        if (c == '\u221A') {
            return of(Code.BAD_CHARACTER, span, "`" + text + "` has no meaning here: write `sqrt( … )`");
        }
        if (c == '\u00B0') {
            return of(
                    Code.BAD_CHARACTER,
                    span,
                    "a degree sign stands right after its number, as in `20°`; or write `20 deg`");
        }
        if (Character.isLetter(c)) {
            return of(
                    Code.BAD_CHARACTER,
                    span,
                    "`" + text
                            + "` can't stand in a name: names hold Latin letters a to z, Greek letters, digits and `_`");
        }
        if (Character.isISOControl(c) || !Character.isDefined(c) || Character.isSurrogate((char) c)) {
            return of(
                    Code.BAD_CHARACTER,
                    span,
                    String.format("a character that can't be shown (U+%04X) stands here: remove it", c));
        }
        return of(Code.BAD_CHARACTER, span, "`" + text + "` has no meaning here: remove it, or put the text in quotes");
    }

    private Diagnostic of(Code code, Span span, String message) {
        return Diagnostic.of(code, file, span, message);
    }
}
