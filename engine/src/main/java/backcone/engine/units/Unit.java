package backcone.engine.units;

import org.jspecify.annotations.Nullable;

public record Unit(String text, Dimension dimension, double numerator, double denominator, double offset, @Nullable String kind) {
    public double toBase(double v) {
        return v * numerator / denominator + offset;
    }

    public double fromBase(double v) {
        return (v - offset) * denominator / numerator;
    }

    public boolean isOffset() {
        return offset != 0;
    }
}
