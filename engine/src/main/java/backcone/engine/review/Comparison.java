package backcone.engine.review;

import backcone.engine.answers.RequirementAnswer;
import backcone.engine.answers.State;
import backcone.engine.text.FileId;
import java.util.List;
import org.jspecify.annotations.Nullable;

/**
 * Two states of one spec. {@code before} or {@code after} is null where the file is new or gone. {@code remarks} say what could
 * not be compared, for example a text that did not parse.
 */
public record Comparison(
        @Nullable FileId before,
        @Nullable FileId after,
        List<Edit> edits,
        List<DriveChange> drives,
        List<String> remarks) {

    public enum Fate {
        SAME,
        CHANGED,
        ADDED,
        REMOVED
    }

    /**
     * A drive in both states. {@code edits} are those that concern it, by their ids in {@link Comparison#edits()};
     * {@code together} names edits that cannot stand alone.
     */
    public record DriveChange(
            String name,
            @Nullable String formerName,
            Fate fate,
            List<Integer> edits,
            List<Lowered> lowered,
            List<StateChange> states,
            List<FactChange> facts,
            List<Move> moved,
            List<Together> together,
            List<String> remarks) {}

    /** A bar that is lower than before, or that may be: nothing about the design became better by it. */
    public record Lowered(String what, String path, String before, String after) {}

    /** Null where the requirement is new or gone. */
    public record StateChange(
            String id,
            @Nullable State before,
            @Nullable State after,
            @Nullable RequirementAnswer was,
            @Nullable RequirementAnswer is) {}

    /** Values in {@code unit}; NaN where there is none. */
    public record FactChange(String path, String meaning, double before, double after, String unit, boolean turned) {}

    /** A margin that moved, with the share of each edit or group of edits; the shares add up to the move. */
    public record Move(
            String id,
            String meaning,
            double before,
            double after,
            double valueBefore,
            double valueAfter,
            String unit,
            State was,
            State is,
            List<Share> shares) {}

    /** {@code error} is the standard error where orders were sampled, else 0; {@code bar} when it moved the bar, not the value. */
    public record Share(List<Integer> edits, String text, double share, double error, boolean bar) {}

    /** Edits that are made together, because apart they have no meaning; {@code why} is what is wrong then. */
    public record Together(List<Integer> edits, String why) {}
}
