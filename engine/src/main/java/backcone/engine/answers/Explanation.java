package backcone.engine.answers;

import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import java.util.List;
import org.jspecify.annotations.Nullable;

/**
 * How one value came about. {@code value} is in {@code unit}, NaN when open; {@code text} holds a value that is no number
 * (a chosen word, a reference). {@code equation} is the text of the equation, {@code numbers} the same with numbers put
 * in; {@code remark} tells the arm or table row taken, the end of a range, or why it is open. {@code from} are the values
 * it was computed from, in order of their first use. {@code sensitivities} are the numbers it hangs on most, largest first,
 * told of the value that was asked for and not of those behind it.
 */
public record Explanation(
        String name,
        double value,
        String unit,
        @Nullable String text,
        @Nullable String symbol,
        @Nullable String meaning,
        @Nullable String source,
        @Nullable String trust,
        @Nullable String equation,
        @Nullable String numbers,
        Status status,
        @Nullable String remark,
        @Nullable FileId file,
        Span span,
        List<Explanation> from,
        List<Sensitivity> sensitivities) {

    public enum Status {
        GIVEN,
        ASSUMED,
        MEASURED,
        DEFAULT,
        COMPUTED,
        SOLVED,
        OVERRIDDEN,
        OPEN,
        FAULT;

        public String word() {
            return name().toLowerCase(java.util.Locale.ROOT);
        }
    }
}
