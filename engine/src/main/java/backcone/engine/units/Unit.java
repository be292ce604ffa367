package backcone.engine.units;

import org.jspecify.annotations.Nullable;

/**
 * A unit as written. A value in it times numerator/denominator (plus offset) is the value in mm, N, s, rad, K.
 * {@code kind} names the quantity kind this text belongs to where two kinds share the dimension, else it is null.
 */
public record Unit(
        String text,
        Dimension dimension,
        double numerator,
        double denominator,
        double offset,
        @Nullable String kind) {

    /** The value in computing units. */
    public double toBase(double value) {
        return value * numerator / denominator + offset;
    }

    /** The number to write in this unit for a value in computing units. */
    public double fromBase(double value) {
        return (value - offset) * denominator / numerator;
    }

    /** A temperature scale: it stands for a whole value only, never in a product. */
    public boolean isOffset() {
        return offset != 0;
    }
}
