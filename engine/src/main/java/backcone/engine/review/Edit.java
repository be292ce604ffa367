package backcone.engine.review;

import backcone.engine.syntax.Expr;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import org.jspecify.annotations.Nullable;

/**
 * One edit between two states of a text. {@code path} is the name inside its drive or library ({@code head.pinion.teeth});
 * {@code drive} is null for what stands outside drives. {@code before} and {@code after} are the author's words, null where
 * there was or is nothing. {@code from} and {@code to} are set where only a number in the same unit changed.
 */
public record Edit(
        int id,
        Kind kind,
        FileId file,
        @Nullable String drive,
        String path,
        @Nullable String before,
        @Nullable String after,
        Span span,
        Expr.@Nullable Num from,
        Expr.@Nullable Num to) {

    public enum Kind {
        /** Another value of a fact, or of a name for a value. */
        VALUE,
        /** The same value in another unit, to the digits written. */
        UNIT,
        /** A record, a title, a source, a reason: nothing that is computed. */
        RECORD,
        /** A block or a fact that is new. */
        ADDED,
        /** A block or a fact that is gone. */
        REMOVED,
        /** Something changed that is no single value: a table, a method, where a gear sits. */
        STRUCTURE,
        /** A requirement, an assertion: its bound changed, it came or went. */
        REQUIREMENT,
        /** An acceptance came, went or changed. */
        ACCEPTANCE,
        /** A waived limit came, went or changed. */
        WAIVER,
        /** A value forced over an equation came, went or changed. */
        OVERRIDE,
        /** Another admissible reading at an open point. */
        READING
    }

    /** Whether it can move a number at all. */
    public boolean counts() {
        return kind != Kind.RECORD && kind != Kind.ACCEPTANCE && kind != Kind.WAIVER;
    }

    /** {@code head.face_width: 23 mm -> 26 mm}. */
    public String text() {
        if (before == null) {
            return path + ": new" + (after == null || after.isEmpty() ? "" : ", " + after);
        }
        if (after == null) {
            return path + ": gone" + (before.isEmpty() ? "" : ", was " + before);
        }
        return path + ": " + before + " -> " + after;
    }
}
