package backcone.cli;

import backcone.engine.answers.CheckAnswer;
import backcone.engine.answers.DriveAnswer;
import backcone.engine.answers.RequirementAnswer;
import backcone.engine.diagnostics.Code;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import com.fasterxml.jackson.core.JsonFactory;
import com.fasterxml.jackson.core.JsonGenerator;
import java.io.IOException;
import java.io.PrintWriter;
import java.util.List;
import java.util.Locale;
import org.jspecify.annotations.Nullable;

/** The findings and requirements of checked files as JSON; {@code schema/check.schema.json} describes it. */
final class JsonReport implements Report {
    private final PrintWriter out;
    private final JsonGenerator g;

    JsonReport(PrintWriter out) throws IOException {
        this.out = out;
        this.g = generator(out);
        g.writeStartObject();
        g.writeStringField("backcone", Version.TEXT);
        g.writeStringField("caution", Caution.TEXT);
        g.writeArrayFieldStart("files");
    }

    static JsonGenerator generator(PrintWriter out) throws IOException {
        JsonGenerator g = new JsonFactory().createGenerator(out);
        g.disable(JsonGenerator.Feature.AUTO_CLOSE_TARGET);
        g.useDefaultPrettyPrinter();
        return g;
    }

    @Override
    public void file(Checked c) throws IOException {
        g.writeStartObject();
        g.writeStringField("path", slashes(c.shown()));
        g.writeArrayFieldStart("problems");
        for (Diagnostic d : c.diagnostics()) {
            g.writeStartObject();
            g.writeStringField("code", d.code().id());
            g.writeStringField("severity", d.severity().name().toLowerCase(Locale.ROOT));
            g.writeStringField("message", d.message());
            range(c, d.file(), d.span());
            g.writeEndObject();
        }
        Throwable fault = c.fault();
        if (fault != null) {
            g.writeStartObject();
            g.writeStringField("code", Code.INTERNAL.id());
            g.writeStringField("severity", "error");
            g.writeStringField(
                    "message", "The program failed on this file (" + fault + "); standard error tells what to send.");
            range(c, new FileId(c.shown()), Span.NONE);
            g.writeEndObject();
        }
        g.writeEndArray();
        g.writeArrayFieldStart("drives");
        for (DriveAnswer d : c.drives()) {
            drive(c, d);
        }
        g.writeEndArray();
        g.writeEndObject();
    }

    @Override
    public void end(List<String> unreachable) throws IOException {
        g.writeEndArray();
        g.writeArrayFieldStart("unreachable");
        for (String u : unreachable) {
            g.writeString(u);
        }
        g.writeEndArray();
        g.writeEndObject();
        g.flush();
        out.println();
    }

    private static String slashes(String path) {
        return path.replace('\\', '/');
    }

    private void drive(Checked c, DriveAnswer d) throws IOException {
        g.writeStartObject();
        g.writeStringField("name", d.name());
        text(g, "title", d.title());
        text(g, "governing", d.governing());
        text(g, "trust", d.weakestTrust());
        g.writeArrayFieldStart("requirements");
        for (RequirementAnswer r : d.requirements()) {
            requirement(c, r);
        }
        g.writeEndArray();
        g.writeArrayFieldStart("checks");
        for (CheckAnswer k : d.unrequired()) {
            g.writeStartObject();
            g.writeStringField("id", k.id());
            g.writeStringField("meaning", k.meaning());
            g.writeStringField("method", k.method());
            number(g, "value", k.value());
            g.writeStringField("unit", k.unit());
            g.writeEndObject();
        }
        g.writeEndArray();
        g.writeArrayFieldStart("assumptions");
        for (String a : d.assumptions()) {
            g.writeString(a);
        }
        g.writeEndArray();
        g.writeArrayFieldStart("recalled");
        for (String a : d.recalled()) {
            g.writeString(a);
        }
        g.writeEndArray();
        g.writeEndObject();
    }

    private void requirement(Checked c, RequirementAnswer r) throws IOException {
        g.writeStartObject();
        g.writeStringField("id", r.id());
        text(g, "method", r.method());
        text(g, "edition", r.edition());
        text(g, "case", r.caseName());
        number(g, "value", r.value());
        g.writeStringField("comparison", r.comparison());
        number(g, "required", r.required());
        if (!Double.isNaN(r.upper())) {
            number(g, "upper", r.upper());
        }
        g.writeStringField("unit", r.unit());
        number(g, "margin", r.margin());
        number(g, "load_reserve", r.loadReserve());
        g.writeStringField("state", r.state().word());
        range(c, r.file(), r.span());
        RequirementAnswer.Acceptance a = r.accepted();
        if (a == null) {
            g.writeNullField("accepted");
        } else {
            g.writeObjectFieldStart("accepted");
            number(g, "value", a.accepted());
            g.writeStringField("until", a.until());
            g.writeStringField("by", a.by());
            g.writeStringField("because", a.because());
            g.writeBooleanField("expired", a.expired());
            g.writeEndObject();
        }
        g.writeArrayFieldStart("missing");
        for (RequirementAnswer.Missing m : r.missing()) {
            g.writeString(m.path());
        }
        g.writeEndArray();
        g.writeArrayFieldStart("outside");
        for (RequirementAnswer.Passed p : r.outside()) {
            g.writeStartObject();
            g.writeStringField("limit", p.path());
            g.writeStringField("message", p.message());
            g.writeBooleanField("waived", p.waived());
            g.writeEndObject();
        }
        g.writeEndArray();
        g.writeArrayFieldStart("open_points");
        for (RequirementAnswer.Band b : r.bands()) {
            g.writeStartObject();
            g.writeStringField("equation", b.equation());
            g.writeStringField("reading", b.reading());
            number(g, "value", b.value());
            g.writeStringField("state", b.state().word());
            g.writeEndObject();
        }
        g.writeEndArray();
        text(g, "fault", r.fault());
        g.writeEndObject();
    }

    static void text(JsonGenerator g, String name, @Nullable String value) throws IOException {
        if (value == null) {
            g.writeNullField(name);
        } else {
            g.writeStringField(name, value);
        }
    }

    static void number(JsonGenerator g, String name, double v) throws IOException {
        if (Double.isNaN(v) || Double.isInfinite(v)) {
            g.writeNullField(name);
        } else {
            g.writeNumberField(name, v);
        }
    }

    /** Lines and columns from 1; with its path where it lies in another file, such as the drive a variant starts from. */
    private void range(Checked c, FileId file, Span s) throws IOException {
        if (!c.isOwn(file)) {
            g.writeStringField("path", slashes(c.shown(file)));
        }
        Places places = c.places(file);
        g.writeObjectFieldStart("range");
        position("start", places, s.start());
        position("end", places, s.end());
        g.writeEndObject();
    }

    private void position(String name, Places places, int offset) throws IOException {
        g.writeObjectFieldStart(name);
        g.writeNumberField("line", places.line(offset));
        g.writeNumberField("column", places.column(offset));
        g.writeEndObject();
    }
}
