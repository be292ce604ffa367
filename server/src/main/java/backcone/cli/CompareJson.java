package backcone.cli;

import backcone.engine.review.Comparison;
import backcone.engine.review.Comparison.DriveChange;
import backcone.engine.review.Comparison.Move;
import backcone.engine.review.Comparison.Share;
import backcone.engine.review.Edit;
import com.fasterxml.jackson.core.JsonGenerator;
import java.io.IOException;
import java.io.PrintWriter;
import java.util.List;
import java.util.Locale;

/** A comparison as JSON in full precision; {@code schema/compare.schema.json} describes it. */
final class CompareJson {
    private final JsonGenerator g;
    private final PrintWriter out;

    CompareJson(PrintWriter out) throws IOException {
        this.out = out;
        this.g = JsonReport.generator(out);
    }

    void write(Compared c) throws IOException {
        g.writeStartObject();
        g.writeStringField("backcone", Version.TEXT);
        g.writeStringField("caution", Caution.TEXT);
        g.writeStringField("before", c.before);
        g.writeStringField("after", c.after);
        g.writeArrayFieldStart("specs");
        for (Comparison s : c.specs) {
            spec(s);
        }
        g.writeEndArray();
        strings("unused", c.unused);
        g.writeEndObject();
        g.flush();
        out.println();
    }

    private void strings(String name, List<String> values) throws IOException {
        g.writeArrayFieldStart(name);
        for (String v : values) {
            g.writeString(v);
        }
        g.writeEndArray();
    }

    private void spec(Comparison s) throws IOException {
        g.writeStartObject();
        JsonReport.text(g, "before", s.before() == null ? null : s.before().path());
        JsonReport.text(g, "after", s.after() == null ? null : s.after().path());
        strings("remarks", s.remarks());
        g.writeArrayFieldStart("edits");
        for (Edit e : s.edits()) {
            g.writeStartObject();
            g.writeNumberField("id", e.id());
            g.writeStringField("kind", e.kind().name().toLowerCase(Locale.ROOT));
            g.writeStringField("file", e.file().path());
            JsonReport.text(g, "drive", e.drive());
            g.writeStringField("path", e.path());
            JsonReport.text(g, "before", e.before());
            JsonReport.text(g, "after", e.after());
            g.writeEndObject();
        }
        g.writeEndArray();
        g.writeArrayFieldStart("drives");
        for (DriveChange d : s.drives()) {
            drive(d);
        }
        g.writeEndArray();
        g.writeEndObject();
    }

    private void drive(DriveChange d) throws IOException {
        g.writeStartObject();
        g.writeStringField("name", d.name());
        JsonReport.text(g, "former_name", d.formerName());
        g.writeStringField("fate", d.fate().name().toLowerCase(Locale.ROOT));
        ids("edits", d.edits());
        g.writeArrayFieldStart("lowered");
        for (Comparison.Lowered l : d.lowered()) {
            g.writeStartObject();
            g.writeStringField("what", l.what());
            g.writeStringField("path", l.path());
            g.writeStringField("before", l.before());
            g.writeStringField("after", l.after());
            g.writeEndObject();
        }
        g.writeEndArray();
        g.writeArrayFieldStart("states");
        for (Comparison.StateChange s : d.states()) {
            g.writeStartObject();
            g.writeStringField("requirement", s.id());
            JsonReport.text(g, "before", s.before() == null ? null : s.before().word());
            JsonReport.text(g, "after", s.after() == null ? null : s.after().word());
            g.writeEndObject();
        }
        g.writeEndArray();
        g.writeArrayFieldStart("facts");
        for (Comparison.FactChange f : d.facts()) {
            g.writeStartObject();
            g.writeStringField("path", f.path());
            JsonReport.number(g, "before", f.before());
            JsonReport.number(g, "after", f.after());
            g.writeStringField("unit", f.unit());
            g.writeBooleanField("turned", f.turned());
            g.writeEndObject();
        }
        g.writeEndArray();
        g.writeArrayFieldStart("moved");
        for (Move m : d.moved()) {
            move(m);
        }
        g.writeEndArray();
        g.writeArrayFieldStart("together");
        for (Comparison.Together t : d.together()) {
            g.writeStartObject();
            ids("edits", t.edits());
            g.writeStringField("why", t.why());
            g.writeEndObject();
        }
        g.writeEndArray();
        strings("remarks", d.remarks());
        g.writeEndObject();
    }

    private void ids(String name, List<Integer> ids) throws IOException {
        g.writeArrayFieldStart(name);
        for (int i : ids) {
            g.writeNumber(i);
        }
        g.writeEndArray();
    }

    private void move(Move m) throws IOException {
        g.writeStartObject();
        g.writeStringField("requirement", m.id());
        JsonReport.number(g, "before", m.before());
        JsonReport.number(g, "after", m.after());
        JsonReport.number(g, "value_before", m.valueBefore());
        JsonReport.number(g, "value_after", m.valueAfter());
        g.writeStringField("unit", m.unit());
        g.writeArrayFieldStart("shares");
        for (Share s : m.shares()) {
            g.writeStartObject();
            g.writeStringField("edit", s.text());
            ids("edits", s.edits());
            JsonReport.number(g, "share", s.share());
            JsonReport.number(g, "error", s.error());
            g.writeBooleanField("bar", s.bar());
            g.writeEndObject();
        }
        g.writeEndArray();
        g.writeEndObject();
    }
}
