package backcone.engine.parse;

import java.util.ArrayList;
import java.util.List;
import org.jspecify.annotations.Nullable;

/** One line of formatted text: pieces with stops between them, where neighbouring lines may line up. */
final class Line {

    /** Where lines line up, in the order in which stops follow each other on a line. */
    enum Stop {
        SYMBOL(1, 40),
        MEANING(1, 40),
        BRACE(1, 40),
        EQUALS(1, 40),
        ARROW(1, 50),
        BAR(1, 400),
        WITHIN(1, 60),
        NOTE(5, 72),
        COMMENT(5, 80);

        /** Blanks before the stop at least. */
        final int gap;

        /** A line that is longer before the stop than this stays out of the alignment. */
        final int cap;

        Stop(int gap, int cap) {
            this.gap = gap;
            this.cap = cap;
        }

        /** True where only lines of one kind line up. */
        boolean isOfOneKind() {
            return this == EQUALS || this == NOTE;
        }
    }

    final int indent;

    /** What kind of entry the line belongs to. */
    final int kind;

    /** Lines with the same number are neighbours; 0 stands alone. */
    int run;

    boolean blankBefore;

    private final List<Stop> stops = new ArrayList<>(4);
    private final List<String> pieces = new ArrayList<>(4);
    private final StringBuilder piece = new StringBuilder();
    private @Nullable String comment;

    /** The text up to the stops that have been placed. */
    private final StringBuilder placed = new StringBuilder();

    private int nextStop;

    Line(int indent, int kind) {
        this.indent = indent;
        this.kind = kind;
    }

    boolean isEmpty() {
        return pieces.isEmpty() && piece.length() == 0;
    }

    void append(String text) {
        piece.append(text);
    }

    void stop(Stop stop) {
        pieces.add(piece.toString());
        piece.setLength(0);
        stops.add(stop);
    }

    boolean has(Stop stop) {
        return stops.contains(stop);
    }

    void comment(String text) {
        comment = comment == null ? text : comment + "  " + text;
    }

    /** No more text comes. */
    void end() {
        if (comment != null) {
            if (!isEmpty()) {
                stop(Stop.COMMENT);
            }
            piece.append(comment);
        }
        pieces.add(piece.toString());
        placed.append(" ".repeat(indent)).append(pieces.get(0));
    }

    /** The next stop that is not placed yet; null at the end of the line. */
    @Nullable
    Stop pending() {
        return nextStop < stops.size() ? stops.get(nextStop) : null;
    }

    int width() {
        return placed.length();
    }

    /** Puts what stands behind the pending stop at this column, or further right when the gap asks for it. */
    void place(int column) {
        Stop stop = stops.get(nextStop);
        int blanks = Math.max(stop.gap, column - placed.length());
        nextStop++;
        placed.append(" ".repeat(blanks)).append(pieces.get(nextStop));
    }

    String text() {
        return placed.toString();
    }
}
