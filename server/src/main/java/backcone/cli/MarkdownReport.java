package backcone.cli;

import backcone.engine.answers.DriveAnswer;
import backcone.engine.answers.RequirementAnswer;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.diagnostics.Severity;
import java.io.PrintWriter;
import java.util.EnumMap;
import java.util.List;
import java.util.Map;

/** What was checked as Markdown, for a comment on a review page: a summary, then a table per drive. */
final class MarkdownReport implements Report {
    private final PrintWriter out;
    private final StringBuilder body = new StringBuilder();
    private final Map<backcone.engine.answers.State, Integer> states =
            new EnumMap<>(backcone.engine.answers.State.class);
    private int wrong;

    MarkdownReport(PrintWriter out) {
        this.out = out;
    }

    @Override
    public void file(Checked c) {
        boolean said = false;
        for (Diagnostic d : c.diagnostics()) {
            if ((d.severity() == Severity.ERROR && !Checked.aboutStates(d)) || d.severity() == Severity.WARNING) {
                if (!said) {
                    body.append("### ").append(cell(c.shown())).append("\n\n");
                    said = true;
                }
                wrong += d.severity() == Severity.ERROR ? 1 : 0;
                body.append("- ")
                        .append(d.severity() == Severity.ERROR ? "**error**" : "warning")
                        .append(" at ")
                        .append(c.places(d.file()).at(d.span().start()))
                        .append(": ")
                        .append(d.message())
                        .append(" (")
                        .append(d.code().id())
                        .append(")\n");
            }
        }
        if (said) {
            body.append('\n');
        }
        for (DriveAnswer d : c.drives()) {
            if (d.requirements().isEmpty()) {
                continue;
            }
            body.append("### ").append(cell(d.name()));
            if (d.title() != null) {
                body.append(": ").append(cell(d.title()));
            }
            body.append("\n\n| state | requirement | value | required | margin | load reserve |\n");
            body.append("| --- | --- | --- | --- | --- | --- |\n");
            for (RequirementAnswer r : d.requirements()) {
                states.merge(r.state(), 1, Integer::sum);
                String state =
                        r.state().isMet() ? r.state().word() : "**" + r.state().word() + "**";
                body.append("| ")
                        .append(state)
                        .append(" | ")
                        .append(cell(r.id()))
                        .append(r.id().equals(d.governing()) ? " (governs)" : "")
                        .append(" | ")
                        .append(cell(Figures.value(r)))
                        .append(" | ")
                        .append(cell(Figures.required(r)))
                        .append(" | ")
                        .append(Figures.margin(r.margin(), r.comparison()))
                        .append(" | ")
                        .append(Figures.reserve(r.loadReserve()))
                        .append(" |\n");
            }
            body.append('\n');
        }
    }

    private static String cell(String s) {
        return s.replace("|", "\\|").replace("<", "&lt;").replace("\n", " ");
    }

    @Override
    public void end(List<String> unreachable) {
        out.println("## Gear drives");
        out.println();
        StringBuilder b = new StringBuilder();
        states.forEach((s, n) ->
                b.append(b.length() == 0 ? "" : ", ").append(n).append(' ').append(s.word()));
        if (wrong > 0) {
            b.append(b.length() == 0 ? "" : "; ").append(wrong).append(wrong == 1 ? " error" : " errors");
        }
        out.println(b.length() == 0 ? "No requirement found." : "**" + b + "**");
        out.println();
        for (String u : unreachable) {
            out.println("- " + u);
        }
        out.print(body);
        out.println("---");
        out.println(Caution.TEXT);
    }
}
