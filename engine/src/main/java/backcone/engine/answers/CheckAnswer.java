package backcone.engine.answers;

/** A check of a rating that nothing requires: its value is shown, no verdict. NaN where open. */
public record CheckAnswer(
        String id,
        String meaning,
        double value,
        String unit,
        String method,
        java.util.List<RequirementAnswer.Missing> missing) {}
