package backcone.lsp;

import backcone.engine.diagnostics.Code;
import backcone.engine.diagnostics.Severity;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import java.util.ArrayList;
import java.util.List;
import org.eclipse.lsp4j.Diagnostic;
import org.eclipse.lsp4j.DiagnosticCodeDescription;
import org.eclipse.lsp4j.DiagnosticRelatedInformation;
import org.eclipse.lsp4j.DiagnosticSeverity;
import org.eclipse.lsp4j.DiagnosticTag;
import org.eclipse.lsp4j.Location;
import org.eclipse.lsp4j.Range;

/** The engine's answers in the protocol's words. */
final class Convert {
    static final int MOST = 1000;
    private final Desk desk;
    private final Folder folder;

    Convert(Desk desk, Folder folder) {
        this.desk = desk;
        this.folder = folder;
    }

    List<Diagnostic> diagnostics(List<backcone.engine.diagnostics.Diagnostic> all, Lines lines) {
        List<Diagnostic> out = new ArrayList<>(Math.min(all.size(), MOST + 1));
        for (backcone.engine.diagnostics.Diagnostic d : all) {
            if (out.size() == MOST) {
                Diagnostic more = new Diagnostic();
                more.setRange(new Range(lines.position(0), lines.position(0)));
                more.setSeverity(DiagnosticSeverity.Warning);
                more.setCode(Code.TOO_MANY.id());
                more.setSource("backcone");
                more.setMessage("There are " + (all.size() - MOST) + " more findings.");
                out.add(more);
                break;
            }
            out.add(diagnostic(d, lines));
        }
        return out;
    }

    Diagnostic diagnostic(backcone.engine.diagnostics.Diagnostic d, Lines lines) {
        Diagnostic out = new Diagnostic();
        out.setRange(lines.range(d.span()));
        out.setSeverity(severity(d.severity()));
        out.setCode(d.code().id());
        out.setSource("backcone");
        out.setMessage(d.message());
        if (desk.can.codeDescription()) {
            out.setCodeDescription(new DiagnosticCodeDescription(desk.handbook.uri(d.code())));
        }
        if (d.code() == Code.UNUSED_NAME && desk.can.tags()) {
            out.setTags(List.of(DiagnosticTag.Unnecessary));
        }
        if (desk.can.related() && !d.related().isEmpty()) {
            List<DiagnosticRelatedInformation> related = new ArrayList<>();
            for (backcone.engine.diagnostics.Diagnostic.Related r : d.related()) {
                related.add(new DiagnosticRelatedInformation(
                        r.file().equals(d.file())
                                ? new Location(desk.uri(folder, r.file()), lines.range(r.span()))
                                : location(r.file(), r.span()),
                        r.message()));
            }
            out.setRelatedInformation(related);
        }
        return out;
    }

    static DiagnosticSeverity severity(Severity s) {
        return switch (s) {
            case ERROR -> DiagnosticSeverity.Error;
            case WARNING -> DiagnosticSeverity.Warning;
            case INFORMATION -> DiagnosticSeverity.Information;
            case HINT -> DiagnosticSeverity.Hint;
        };
    }

    Location location(FileId file, Span span) {
        return new Location(desk.uri(folder, file), desk.lines(folder, file).range(span));
    }
}
