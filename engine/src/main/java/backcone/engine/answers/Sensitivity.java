package backcone.engine.answers;

import backcone.engine.text.FileId;
import backcone.engine.text.Span;

/**
 * How much a value moves with one number of a text: 1 % more of the number, as it is written, gives {@code relative} % more
 * of the value. {@code name} is the value in whose text the number stands ({@code head.face_width}), {@code written} the
 * number in {@code unit}; file and span are those of the number itself.
 */
public record Sensitivity(String name, double relative, double written, String unit, FileId file, Span span) {
    /** +1 where the value grows with the number, −1 where it falls. */
    public int sign() {
        return relative < 0 ? -1 : 1;
    }
}
