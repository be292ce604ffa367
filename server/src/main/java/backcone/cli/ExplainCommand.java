package backcone.cli;

import backcone.engine.Analysis;
import backcone.engine.Loader;
import backcone.engine.answers.DriveAnswer;
import backcone.engine.answers.Explanation;
import backcone.engine.answers.RequirementAnswer;
import backcone.engine.answers.Sensitivity;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.diagnostics.Severity;
import backcone.engine.model.Suggest;
import com.fasterxml.jackson.core.JsonGenerator;
import java.io.IOException;
import java.io.PrintWriter;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Objects;
import java.util.Optional;
import org.jspecify.annotations.Nullable;

/** {@code backcone explain}: how one number came about, or a whole rating in calculation order. */
final class ExplainCommand implements Command {
    private static final int WIDTH = 100;

    private static final Usage USAGE = new Usage(
            "explain",
            "Tells how a number came about: equation, numbers, units, source and trust, down to what was given.",
            List.of(
                    new Usage.Operand("FILE", "a spec", true, false),
                    new Usage.Operand(
                            "NAME",
                            "a value (head.ratio, head.main.wheel.bending) or a rating (head.main), which is"
                                    + " then told as a whole in the order of calculation",
                            true,
                            false)),
            List.of(
                    Usage.Option.oneOf(
                            "--format",
                            "FORMAT",
                            "text, json or markdown; text unless said",
                            "text",
                            "json",
                            "markdown"),
                    Usage.Option.value("--depth", "N", "how many steps down; all unless said")),
            List.of("Where a file holds several drives, the drive may stand in front: small_gate.head.ratio."),
            List.of(
                    "backcone explain head.drive head.pinion.outer_pitch_diameter",
                    "backcone explain head.drive head.lewis_buckingham",
                    "backcone explain --format markdown head.drive head.main > head.main.md",
                    "backcone explain --format json --depth 1 head.drive motor.torque"));

    private final boolean colour = Terminal.colour();

    @Override
    public Usage usage() {
        return USAGE;
    }

    @Override
    public int run(Arguments arguments, PrintWriter out, PrintWriter err) throws WrongUsage, IOException {
        String file = Objects.requireNonNull(arguments.operand(0));
        String name = Objects.requireNonNull(arguments.operand(1));
        String format = arguments.value("--format", "text");
        int depth = depth(arguments.value("--depth"));
        Path path = FileSet.path(file);
        Loader.Loaded read = path == null ? new Loader.Loaded.Missing() : DiskLoader.read(path);
        if (path == null || !(read instanceof Loader.Loaded.Text)) {
            err.println("backcone: `" + file + "` "
                    + (read instanceof Loader.Loaded.Unreadable u ? "can't be read: " + u.reason() : "does not exist")
                    + ".");
            return Status.WRONG_TEXT;
        }
        Path whole = path.toAbsolutePath().normalize();
        Warm.up(List.of(whole));
        EngineFactory engine = new EngineFactory(FileSet.root(List.of(whole)), Today.day());
        Analysis analysis = engine.analyse(whole);
        warn(file, analysis, err);
        Optional<List<Explanation>> rating = analysis.explainRating(name);
        if (rating.isPresent()) {
            rating(file, name, rating.get(), analysis, format, out);
            return Status.FINE;
        }
        Optional<Explanation> one = analysis.explain(name);
        if (one.isPresent()) {
            value(one.get(), format, depth, out);
            return Status.FINE;
        }
        String near = nearest(name, analysis.names());
        throw new WrongUsage(
                USAGE,
                "nothing in `" + file + "` is called `" + name + "`."
                        + (near == null ? "" : " Did you mean `" + near + "`?"));
    }

    private static int depth(@Nullable String text) throws WrongUsage {
        if (text == null) {
            return Integer.MAX_VALUE;
        }
        int depth;
        try {
            depth = Integer.parseInt(text);
        } catch (NumberFormatException e) {
            depth = -1;
        }
        if (depth < 0) {
            throw new WrongUsage(USAGE, "`--depth` is a whole number of steps, not `" + text + "`.");
        }
        return depth;
    }

    /** A number from a text with mistakes may rest on less than its author wrote. */
    private static void warn(String file, Analysis analysis, PrintWriter err) {
        int wrong = 0;
        for (Diagnostic d : analysis.diagnostics()) {
            if (d.severity() == Severity.ERROR && !Checked.aboutStates(d)) {
                wrong++;
            }
        }
        if (wrong > 0) {
            err.println("backcone: " + (wrong == 1 ? "one thing is" : wrong + " things are") + " wrong in `" + file
                    + "`; `backcone check " + file + "` tells what.");
        }
    }

    /** Names behind the same dot come first: what was mistyped is most often the last word. */
    private static @Nullable String nearest(String name, List<String> names) {
        int dot = name.lastIndexOf('.');
        String before = name.substring(0, dot + 1);
        List<String> last = new ArrayList<>();
        for (String n : names) {
            if (n.startsWith(before) && n.indexOf('.', before.length()) < 0) {
                last.add(n.substring(before.length()));
            }
        }
        String near = Suggest.nearest(name.substring(dot + 1), last);
        return near != null ? before + near : Suggest.nearest(name, names);
    }

    private void value(Explanation e, String format, int depth, PrintWriter out) throws IOException {
        if (format.equals("json")) {
            JsonGenerator g = JsonReport.generator(out);
            json(g, e, depth);
            g.flush();
            out.println();
        } else {
            boolean markdown = format.equals("markdown");
            tree(e, 0, depth, out, markdown);
            sensitivities(e, out, markdown);
            caution(out, markdown);
        }
    }

    /** What the value hangs on most. */
    private static void sensitivities(Explanation e, PrintWriter out, boolean markdown) {
        if (e.sensitivities().isEmpty()) {
            return;
        }
        StringBuilder b = new StringBuilder();
        for (Sensitivity s : e.sensitivities()) {
            b.append(b.length() == 0 ? "most sensitive to: " : ", ")
                    .append(markdown ? "`" + s.name() + "`" : s.name())
                    .append(s.sign() < 0 ? " −" : " +")
                    .append(backcone.engine.units.Numbers.format(Math.abs(s.relative()), 3))
                    .append(" %");
        }
        out.println();
        out.println(b.append(" (for 1 % more)"));
    }

    private void caution(PrintWriter out, boolean markdown) {
        out.println();
        out.println(markdown ? "> " + Caution.TEXT : Terminal.Ink.DIM.paint(Caution.TEXT, colour));
    }

    private void rating(
            String file, String name, List<Explanation> steps, Analysis analysis, String format, PrintWriter out)
            throws IOException {
        if (format.equals("json")) {
            JsonGenerator g = JsonReport.generator(out);
            g.writeStartArray();
            for (Explanation e : steps) {
                json(g, e, 0);
            }
            g.writeEndArray();
            g.flush();
            out.println();
            return;
        }
        boolean markdown = format.equals("markdown");
        out.println((markdown ? "# " : "") + "Rating " + name + " of " + file);
        section("Given", steps, true, out, markdown);
        section("Computed, in order", steps, false, out, markdown);
        verdicts(name, analysis, out, markdown);
        caution(out, markdown);
    }

    private void section(String title, List<Explanation> steps, boolean given, PrintWriter out, boolean markdown) {
        boolean first = true;
        for (Explanation e : steps) {
            if ((e.equation() != null && e.numbers() == null) == given) {
                if (first) {
                    heading(title, out, markdown);
                    first = false;
                }
                lines(e, markdown ? 0 : 1, out, markdown);
            }
        }
    }

    /** What was required of the rating, and how that came out. */
    private void verdicts(String name, Analysis analysis, PrintWriter out, boolean markdown) {
        boolean first = true;
        for (DriveAnswer d : analysis.drives()) {
            for (RequirementAnswer r : d.requirements()) {
                String full = r.mesh() + "." + r.rating();
                if (!name.equals(full) && !name.equals(d.name() + "." + full)) {
                    continue;
                }
                if (first) {
                    heading("Required", out, markdown);
                    first = false;
                }
                String margin = Figures.margin(r.margin(), r.comparison());
                String reserve = Figures.reserve(r.loadReserve());
                out.println((markdown ? "- " : "  ") + r.id() + " = " + Figures.value(r) + ", required "
                        + Figures.required(r) + ": "
                        + DriveTable.paint(r.state(), r.state().word(), colour && !markdown)
                        + (margin.isEmpty() ? "" : ", margin " + margin)
                        + (reserve.isEmpty() ? "" : ", load reserve " + reserve));
            }
            if (!first) {
                return; // the drive that was explained
            }
        }
    }

    private static void heading(String text, PrintWriter out, boolean markdown) {
        out.println();
        out.println(markdown ? "## " + text : text);
        if (markdown) {
            out.println();
        }
    }

    private void tree(Explanation e, int level, int depth, PrintWriter out, boolean markdown) {
        lines(e, level, out, markdown);
        if (level < depth) {
            for (Explanation x : e.from()) {
                tree(x, level + 1, depth, out, markdown);
            }
        }
    }

    /** Name and value on one line, then equation, numbers and source, each only where there is something to tell. */
    private void lines(Explanation e, int level, PrintWriter out, boolean markdown) {
        String indent = "  ".repeat(level);
        String symbol = e.symbol() == null ? "" : " " + e.symbol();
        String value = e.text() != null
                ? e.text()
                : Double.isNaN(e.value())
                        ? e.status().word()
                        : backcone.engine.units.Numbers.format(e.value(), 6)
                                + (e.unit().isEmpty() ? "" : " " + e.unit());
        String meaning = e.meaning() == null ? "" : "   " + e.meaning();
        String head = e.name() + symbol + " = " + value;
        String status = e.status() == Explanation.Status.COMPUTED
                ? ""
                : "  (" + e.status().word() + ")";
        if (markdown) {
            out.println(indent + "- **" + e.name() + "**" + symbol + " = `" + value + "`" + status + meaning);
        } else {
            out.println(
                    indent + Terminal.Ink.BOLD.paint(head, colour) + status + Terminal.Ink.DIM.paint(meaning, colour));
        }
        String more = indent + (markdown ? "  " : "    ");
        String equation = e.equation();
        String numbers = e.numbers();
        if (equation != null && numbers != null) {
            // a relation stands as it is written: it names its unknown itself
            boolean relation = e.status() == Explanation.Status.SOLVED;
            wrapped(more, (relation || e.symbol() == null ? "" : e.symbol() + " = ") + equation, out, markdown);
            if (!equation.equals(numbers) && !numbers.isEmpty()) {
                wrapped(more, (relation ? "" : "= ") + numbers, out, markdown);
            }
        }
        String source = e.source() == null ? "" : e.source();
        String trust = e.trust() == null ? "" : (source.isEmpty() ? "" : ", ") + e.trust();
        String remark = e.remark() == null ? "" : (source.isEmpty() && trust.isEmpty() ? "" : "; ") + e.remark();
        if (!(source + trust + remark).isEmpty()) {
            out.println(more + Terminal.Ink.DIM.paint(source + trust + remark, colour && !markdown));
        }
    }

    private static void wrapped(String indent, String text, PrintWriter out, boolean markdown) {
        if (markdown) {
            out.println(indent + "`" + text.replace("`", "'") + "`  ");
            return;
        }
        int room = Math.max(40, WIDTH - indent.length());
        String rest = text;
        boolean first = true;
        while (rest.length() > room) {
            int cut = rest.lastIndexOf(' ', room);
            cut = cut <= 0 ? room : cut;
            out.println(indent + (first ? "" : "  ") + rest.substring(0, cut));
            rest = rest.substring(cut).strip();
            first = false;
        }
        out.println(indent + (first ? "" : "  ") + rest);
    }

    private static void json(JsonGenerator g, Explanation e, int depth) throws IOException {
        g.writeStartObject();
        g.writeStringField("name", e.name());
        if (e.text() != null) {
            g.writeStringField("value", e.text());
        } else {
            JsonReport.number(g, "value", e.value());
        }
        g.writeStringField("unit", e.unit());
        JsonReport.text(g, "symbol", e.symbol());
        JsonReport.text(g, "meaning", e.meaning());
        JsonReport.text(g, "source", e.source());
        JsonReport.text(g, "trust", e.trust());
        JsonReport.text(g, "equation", e.equation());
        JsonReport.text(g, "numbers", e.numbers());
        g.writeStringField("status", e.status().word());
        JsonReport.text(g, "remark", e.remark());
        g.writeArrayFieldStart("from");
        if (depth > 0) {
            for (Explanation x : e.from()) {
                json(g, x, depth - 1);
            }
        }
        g.writeEndArray();
        if (!e.sensitivities().isEmpty()) {
            g.writeArrayFieldStart("sensitivities");
            for (Sensitivity s : e.sensitivities()) {
                g.writeStartObject();
                g.writeStringField("name", s.name());
                JsonReport.number(g, "relative", s.relative());
                JsonReport.number(g, "written", s.written());
                g.writeStringField("unit", s.unit());
                g.writeStringField("file", s.file().path());
                g.writeEndObject();
            }
            g.writeEndArray();
        }
        g.writeEndObject();
    }
}
