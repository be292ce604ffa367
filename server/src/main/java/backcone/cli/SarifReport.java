package backcone.cli;

import backcone.engine.Analysis;
import backcone.engine.answers.DriveAnswer;
import backcone.engine.answers.Explanation;
import backcone.engine.answers.RequirementAnswer;
import backcone.engine.answers.State;
import backcone.engine.diagnostics.Code;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.diagnostics.Pages;
import backcone.engine.diagnostics.Severity;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import com.fasterxml.jackson.core.JsonGenerator;
import java.io.IOException;
import java.io.PrintWriter;
import java.nio.charset.StandardCharsets;
import java.security.MessageDigest;
import java.security.NoSuchAlgorithmException;
import java.util.ArrayList;
import java.util.HashMap;
import java.util.HashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;

/** Findings as SARIF 2.1.0, so that a review page shows each at its line. Paths are from the folder the command ran in. */
final class SarifReport implements Report {
    private static final int FACTS = 12;
    private final PrintWriter out;
    private final JsonGenerator g;

    SarifReport(PrintWriter out) throws IOException {
        this.out = out;
        this.g = JsonReport.generator(out);
        g.writeStartObject();
        g.writeStringField("$schema", "https://json.schemastore.org/sarif-2.1.0.json");
        g.writeStringField("version", "2.1.0");
        g.writeArrayFieldStart("runs");
        g.writeStartObject();
        g.writeObjectFieldStart("tool");
        g.writeObjectFieldStart("driver");
        g.writeStringField("name", "backcone");
        g.writeStringField("version", Version.TEXT);
        g.writeStringField("semanticVersion", Version.TEXT);
        g.writeArrayFieldStart("rules");
        for (Code c : Code.values()) {
            rule(c);
        }
        g.writeEndArray();
        g.writeEndObject();
        g.writeEndObject();
        g.writeStringField("columnKind", "unicodeCodePoints");
        g.writeArrayFieldStart("results");
    }

    private void rule(Code c) throws IOException {
        g.writeStartObject();
        g.writeStringField("id", c.id());
        message("shortDescription", c.title());
        String page = Pages.of(c);
        message("fullDescription", first(page, c.title()));
        g.writeObjectFieldStart("help");
        g.writeStringField("text", page.isEmpty() ? c.title() : page);
        g.writeStringField("markdown", page.isEmpty() ? c.title() : page);
        g.writeEndObject();
        g.writeObjectFieldStart("defaultConfiguration");
        g.writeStringField("level", level(c.severity()));
        g.writeEndObject();
        g.writeEndObject();
    }

    /** The first paragraph below the title. */
    private static String first(String page, String otherwise) {
        for (String p : page.split("\n\\s*\n", -1)) {
            String s = p.strip();
            if (!s.isEmpty() && !s.startsWith("#") && !s.startsWith("```")) {
                return s.replace('\n', ' ');
            }
        }
        return otherwise;
    }

    private static String level(Severity s) {
        return switch (s) {
            case ERROR -> "error";
            case WARNING -> "warning";
            default -> "note";
        };
    }

    private void message(String name, String text) throws IOException {
        g.writeObjectFieldStart(name);
        g.writeStringField("text", text);
        g.writeEndObject();
    }

    @Override
    public void file(Checked c) throws IOException {
        Map<String, Integer> twins = new HashMap<>();
        for (Diagnostic d : c.diagnostics()) {
            if (d.severity() == Severity.HINT) {
                continue; // tight margins and customs are for the editor
            }
            g.writeStartObject();
            g.writeStringField("ruleId", d.code().id());
            g.writeNumberField("ruleIndex", d.code().ordinal());
            g.writeStringField("level", level(d.severity()));
            message("message", d.message());
            g.writeArrayFieldStart("locations");
            location(c, d.file(), d.span(), null);
            g.writeEndArray();
            g.writeObjectFieldStart("partialFingerprints");
            String print = c.shown(d.file()) + "\n" + d.code().id() + "\n"
                    + c.places(d.file())
                            .lineText(c.places(d.file()).line(d.span().start()))
                            .strip();
            int twin = twins.merge(print, 1, Integer::sum);
            g.writeStringField("backcone/v1", hash(print + "\n" + twin));
            g.writeEndObject();
            if (!d.related().isEmpty()) {
                g.writeArrayFieldStart("relatedLocations");
                for (Diagnostic.Related r : d.related()) {
                    if (!r.file().isHandbook()) {
                        location(c, r.file(), r.span(), r.message());
                    }
                }
                g.writeEndArray();
            }
            flow(c, d);
            g.writeEndObject();
        }
        Throwable fault = c.fault();
        if (fault != null) {
            g.writeStartObject();
            g.writeStringField("ruleId", Code.INTERNAL.id());
            g.writeNumberField("ruleIndex", Code.INTERNAL.ordinal());
            g.writeStringField("level", "error");
            message("message", "The program failed on this file (" + fault + ").");
            g.writeArrayFieldStart("locations");
            g.writeStartObject();
            g.writeObjectFieldStart("physicalLocation");
            g.writeObjectFieldStart("artifactLocation");
            g.writeStringField("uri", uri(c.shown()));
            g.writeEndObject();
            g.writeEndObject();
            g.writeEndObject();
            g.writeEndArray();
            g.writeEndObject();
        }
    }

    /** From a requirement that is not met to the given facts it rests on. */
    private void flow(Checked c, Diagnostic d) throws IOException {
        Analysis a = c.analysis();
        if (a == null || (d.code() != Code.SHORT && d.code() != Code.OUTSIDE)) {
            return;
        }
        for (DriveAnswer drive : c.drives()) {
            for (RequirementAnswer r : drive.requirements()) {
                if ((r.state() == State.SHORT || r.state() == State.OUTSIDE)
                        && r.file().equals(d.file())
                        && r.span().equals(d.span())
                        && d.message().contains("`" + r.id() + "`")) {
                    List<Explanation> facts = new ArrayList<>();
                    a.explain(drive.name() + "." + r.id()).ifPresent(e -> given(e, facts, new HashSet<>()));
                    if (facts.isEmpty()) {
                        return;
                    }
                    g.writeArrayFieldStart("codeFlows");
                    g.writeStartObject();
                    g.writeArrayFieldStart("threadFlows");
                    g.writeStartObject();
                    g.writeArrayFieldStart("locations");
                    step(c, d.file(), d.span(), r.id());
                    for (Explanation e : facts) {
                        FileId file = e.file();
                        if (file != null) {
                            step(c, file, e.span(), e.name());
                        }
                    }
                    g.writeEndArray();
                    g.writeEndObject();
                    g.writeEndArray();
                    g.writeEndObject();
                    g.writeEndArray();
                    return;
                }
            }
        }
    }

    private static void given(Explanation e, List<Explanation> out, Set<String> seen) {
        if (!seen.add(e.name()) || out.size() >= FACTS) {
            return;
        }
        FileId file = e.file();
        if (file != null && !file.isHandbook() && e.from().isEmpty()) {
            out.add(e);
        }
        for (Explanation x : e.from()) {
            given(x, out, seen);
        }
    }

    private void step(Checked c, FileId file, Span span, String message) throws IOException {
        g.writeStartObject();
        g.writeFieldName("location");
        location(c, file, span, message);
        g.writeEndObject();
    }

    private void location(Checked c, FileId file, Span span, @org.jspecify.annotations.Nullable String message)
            throws IOException {
        Places p = c.places(file);
        g.writeStartObject();
        g.writeObjectFieldStart("physicalLocation");
        g.writeObjectFieldStart("artifactLocation");
        g.writeStringField("uri", uri(c.shown(file)));
        g.writeEndObject();
        g.writeObjectFieldStart("region");
        g.writeNumberField("startLine", p.line(span.start()));
        g.writeNumberField("startColumn", p.column(span.start()));
        g.writeNumberField("endLine", p.line(span.end()));
        g.writeNumberField("endColumn", p.column(span.end()));
        g.writeEndObject();
        g.writeEndObject();
        if (message != null) {
            message("message", message);
        }
        g.writeEndObject();
    }

    private static String uri(String path) {
        StringBuilder b = new StringBuilder();
        for (byte x : path.replace('\\', '/').getBytes(StandardCharsets.UTF_8)) {
            char ch = (char) (x & 0xff);
            if (ch < 128 && (Character.isLetterOrDigit(ch) || "/._-~".indexOf(ch) >= 0)) {
                b.append(ch);
            } else {
                b.append('%')
                        .append(Character.toUpperCase(Character.forDigit(ch >> 4, 16)))
                        .append(Character.toUpperCase(Character.forDigit(ch & 15, 16)));
            }
        }
        return b.toString();
    }

    private static String hash(String s) {
        try {
            byte[] d = MessageDigest.getInstance("SHA-256").digest(s.getBytes(StandardCharsets.UTF_8));
            StringBuilder b = new StringBuilder();
            for (int i = 0; i < 16; i++) {
                b.append(Character.forDigit(d[i] >> 4 & 15, 16)).append(Character.forDigit(d[i] & 15, 16));
            }
            return b.toString();
        } catch (NoSuchAlgorithmException e) {
            throw new IllegalStateException("every Java has SHA-256", e);
        }
    }

    @Override
    public void end(List<String> unreachable) throws IOException {
        g.writeEndArray();
        g.writeArrayFieldStart("invocations");
        g.writeStartObject();
        g.writeBooleanField("executionSuccessful", unreachable.isEmpty());
        if (!unreachable.isEmpty()) {
            g.writeArrayFieldStart("toolExecutionNotifications");
            for (String u : unreachable) {
                g.writeStartObject();
                g.writeStringField("level", "error");
                message("message", u);
                g.writeEndObject();
            }
            g.writeEndArray();
        }
        g.writeEndObject();
        g.writeEndArray();
        g.writeEndObject();
        g.writeEndArray();
        g.writeEndObject();
        g.flush();
        out.println();
    }
}
