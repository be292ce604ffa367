package backcone.engine.diagnostics;

import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import java.util.List;

/**
 * One finding. The code is permanent ({@code BC2010}); {@link Code} is the registry of codes.
 * {@code message} says what was found and expected in the author's words and ends with the one next step.
 */
public record Diagnostic(
        Code code, Severity severity, FileId file, Span span, String message, List<Related> related, List<Fix> fixes) {

    /** Another place that explains the finding. */
    public record Related(FileId file, Span span, String message) {}

    /** A plain text replacement that would mend it. */
    public record Fix(String title, Span span, String newText) {}

    public static Diagnostic of(Code code, FileId file, Span span, String message) {
        return new Diagnostic(code, code.severity(), file, span, message, List.of(), List.of());
    }

    public Diagnostic withRelated(FileId where, Span span, String message) {
        var all = new java.util.ArrayList<>(related);
        all.add(new Related(where, span, message));
        return new Diagnostic(code, severity, file, this.span, this.message, List.copyOf(all), fixes);
    }

    public Diagnostic withFix(String title, Span where, String newText) {
        var all = new java.util.ArrayList<>(fixes);
        all.add(new Fix(title, where, newText));
        return new Diagnostic(code, severity, file, span, message, related, List.copyOf(all));
    }

    public Diagnostic at(Severity other) {
        return new Diagnostic(code, other, file, span, message, related, fixes);
    }
}
