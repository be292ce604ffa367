package backcone.engine.review;

/** A value that others depend on, in {@code unit}: {@code head.ratio}, {@code head.pinion.mass}. */
public record ReviewFact(String path, String meaning, double value, String unit) {}
