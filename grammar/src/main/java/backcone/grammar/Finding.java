package backcone.grammar;

/**
 * Something wrong that the token list already shows. {@code text} is what the finding is about as the author wrote it;
 * {@code other} depends on the kind.
 */
public record Finding(Kind kind, int start, int end, String text, String other) {

    public enum Kind {
        /** {@code 1,5} or {@code 1,480}. */
        DECIMAL_COMMA,
        /** {@code .5}. */
        POINT_FIRST,
        /** {@code 5.}. */
        POINT_LAST,
        /** {@code 1.2.3}. */
        TWO_POINTS,
        /** {@code 1e999}. */
        TOO_LARGE,
        /** {@code 1e-999}. */
        TOO_SMALL,
        /** {@code 1 480} or {@code 1_480}; {@code other} is the number without its gap. */
        GROUPED_DIGITS,
        /** {@code 2027-02-30}. */
        NO_SUCH_DAY,
        /** {@code 10 m_n}; {@code other} is the factor. */
        MISSING_TIMES,
        /** {@code teeth = 16 hand = left}; {@code text} is the second entry's name. */
        TWO_ENTRIES,
        /** A bracket that its entry does not close. */
        UNCLOSED_BRACKET,
        OPEN_STRING,
        BAD_CHARACTER,
        /** {@code other} is the line that opened it. */
        UNCLOSED_BRACE,
        /** A body without its opening brace; {@code text} is the line that should have it. */
        UNOPENED_BRACE,
        STRAY_BRACE,
        TOO_DEEP
    }
}
