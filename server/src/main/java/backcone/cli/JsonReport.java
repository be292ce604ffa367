package backcone.cli;

import backcone.engine.answers.DriveAnswer;
import backcone.engine.answers.RequirementAnswer;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.text.Span;
import com.fasterxml.jackson.core.JsonFactory;
import com.fasterxml.jackson.core.JsonGenerator;
import java.io.IOException;
import java.io.PrintWriter;
import java.util.List;
import java.util.Locale;
import org.jspecify.annotations.Nullable;

/** The findings and requirements of checked files as JSON; {@code schema/check.schema.json} describes it. */
final class JsonReport {
    static final String VERSION = "0.1.0";

    private JsonReport() {}

    static JsonGenerator generator(PrintWriter out) throws IOException {
        JsonGenerator g = new JsonFactory().createGenerator(out);
        g.disable(JsonGenerator.Feature.AUTO_CLOSE_TARGET);
        g.useDefaultPrettyPrinter();
        return g;
    }

    static void write(List<CheckCommand.Checked> all, PrintWriter out) throws IOException {
        JsonGenerator g = generator(out);
        g.writeStartObject();
        g.writeStringField("backcone", VERSION);
        g.writeStringField("caution", Caution.TEXT);
        g.writeArrayFieldStart("files");
        for (CheckCommand.Checked c : all) {
            file(g, c);
        }
        g.writeEndArray();
        g.writeEndObject();
        g.flush();
        out.println();
    }

    private static void file(JsonGenerator g, CheckCommand.Checked c) throws IOException {
        Places places = new Places(c.analysis().text());
        g.writeStartObject();
        g.writeStringField("path", FileSet.shown(c.file()).replace('\\', '/'));
        g.writeArrayFieldStart("problems");
        for (Diagnostic d : c.analysis().diagnostics()) {
            g.writeStartObject();
            g.writeStringField("code", d.code().id());
            g.writeStringField("severity", d.severity().name().toLowerCase(Locale.ROOT));
            g.writeStringField("message", d.message());
            range(g, places, d.span());
            g.writeEndObject();
        }
        g.writeEndArray();
        g.writeArrayFieldStart("drives");
        for (DriveAnswer d : c.analysis().drives()) {
            drive(g, places, d);
        }
        g.writeEndArray();
        g.writeEndObject();
    }

    private static void drive(JsonGenerator g, Places places, DriveAnswer d) throws IOException {
        g.writeStartObject();
        g.writeStringField("name", d.name());
        text(g, "title", d.title());
        text(g, "governing", d.governing());
        text(g, "trust", d.weakestTrust());
        g.writeArrayFieldStart("requirements");
        for (RequirementAnswer r : d.requirements()) {
            requirement(g, places, r);
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

    private static void requirement(JsonGenerator g, Places places, RequirementAnswer r) throws IOException {
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
        range(g, places, r.span());
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

    private static void range(JsonGenerator g, Places places, Span s) throws IOException {
        g.writeObjectFieldStart("range");
        position(g, "start", places, s.start());
        position(g, "end", places, s.end());
        g.writeEndObject();
    }

    private static void position(JsonGenerator g, String name, Places places, int offset) throws IOException {
        g.writeObjectFieldStart(name);
        g.writeNumberField("line", places.line(offset));
        g.writeNumberField("column", places.column(offset));
        g.writeEndObject();
    }
}
