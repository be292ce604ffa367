package backcone.engine.diagnostics;

/** How loudly a diagnostic speaks. {@code HINT} stays off the problem list. */
public enum Severity {
    ERROR,
    WARNING,
    INFORMATION,
    HINT
}
