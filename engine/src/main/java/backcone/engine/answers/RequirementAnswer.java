package backcone.engine.answers;

import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import java.util.List;
import org.jspecify.annotations.Nullable;

/**
 * One requirement with its result. {@code value}, {@code required} and {@code upper} are in {@code unit}; NaN where not
 * known. {@code comparison} is {@code >=}, {@code <=}, {@code between} or {@code ==}; {@code upper} is only set for
 * {@code between}. {@code margin} is a fraction (0.05 is 5 %). {@code loadReserve} is the factor on torque at which the
 * requirement would just be met, NaN where load does not act on it.
 */
public record RequirementAnswer(
        String id,
        @Nullable String mesh,
        @Nullable String rating,
        @Nullable String member,
        @Nullable String check,
        @Nullable String method,
        @Nullable String edition,
        @Nullable String caseName,
        String meaning,
        double value,
        double required,
        double upper,
        String comparison,
        String unit,
        double margin,
        double loadReserve,
        State state,
        FileId file,
        Span span,
        List<Missing> missing,
        List<Passed> outside,
        @Nullable Acceptance accepted,
        List<Band> bands,
        @Nullable String because,
        @Nullable String fault) {

    /** The same at another place. */
    public RequirementAnswer at(Span other) {
        return new RequirementAnswer(
                id,
                mesh,
                rating,
                member,
                check,
                method,
                edition,
                caseName,
                meaning,
                value,
                required,
                upper,
                comparison,
                unit,
                margin,
                loadReserve,
                state,
                file,
                other,
                missing,
                outside,
                accepted,
                bands,
                because,
                fault);
    }

    /** An input that is not given: where it belongs ({@code head.face_width}) and what it means. */
    public record Missing(String path, String meaning, String kind) {}

    /** A validity limit that is passed. */
    public record Passed(String path, String message, boolean waived) {}

    /** {@code accept … until … by … because …}: the value accepted, in the requirement's unit. */
    public record Acceptance(double accepted, String until, String by, String because, boolean expired) {}

    /** Another admissible reading at an open point that would turn the state. */
    public record Band(String equation, String reading, double value, State state) {}
}
