package backcone.cli;

import backcone.engine.Analysis;
import backcone.engine.BackconeEngine;
import backcone.engine.Loader;
import backcone.engine.answers.Explanation;
import backcone.engine.model.Suggest;
import com.fasterxml.jackson.core.JsonGenerator;
import java.io.IOException;
import java.io.PrintWriter;
import java.nio.file.Path;
import java.time.LocalDate;
import java.util.List;
import java.util.Optional;
import java.util.concurrent.Callable;
import picocli.CommandLine.Command;
import picocli.CommandLine.Model.CommandSpec;
import picocli.CommandLine.Option;
import picocli.CommandLine.ParameterException;
import picocli.CommandLine.Parameters;
import picocli.CommandLine.Spec;

/** {@code backcone explain}: how one number came about, or a whole rating in calculation order. */
@Command(
        name = "explain",
        mixinStandardHelpOptions = true,
        header = "Tells how a number came about: equation, numbers, units, source and trust, down to what was given.",
        description = {
            "",
            "NAME is a value (`head.outer_cone_distance`, `head.main.wheel.pitting`) or a rating (`head.main`), which is then told as a",
            "whole in calculation order. Where a file holds several drives the drive may stand in front."
        },
        footer = {
            "",
            "Examples:",
            "  backcone explain head.drive head.outer_cone_distance",
            "  backcone explain head.drive crown.lewis_buckingham        the whole rating, fit for a signer's file",
            "  backcone explain --format json head.drive head.pinion.torque"
        })
final class ExplainCommand implements Callable<Integer> {
    private static final int WIDTH = 100;

    @Spec
    @SuppressWarnings("NullAway.Init")
    CommandSpec spec;

    @Parameters(index = "0", paramLabel = "FILE", description = "A spec.")
    @SuppressWarnings("NullAway.Init")
    Path file;

    @Parameters(index = "1", paramLabel = "NAME", description = "A value or a rating.")
    @SuppressWarnings("NullAway.Init")
    String name;

    @Option(names = "--format", paramLabel = "FORMAT", description = "text, json or markdown (default: text).")
    String format = "text";

    @Option(names = "--depth", paramLabel = "N", description = "How many steps down (default: all).")
    int depth = 1000;

    @Override
    public Integer call() throws IOException {
        if (!List.of("text", "json", "markdown").contains(format)) {
            throw new ParameterException(
                    spec.commandLine(), "There is no format `" + format + "`; it is text, json or markdown");
        }
        PrintWriter out = spec.commandLine().getOut();
        PrintWriter err = spec.commandLine().getErr();
        Path path = file.toAbsolutePath().normalize();
        Loader.Loaded read = DiskLoader.read(path);
        if (!(read instanceof Loader.Loaded.Text)) {
            err.println("backcone: `" + file + "` "
                    + (read instanceof Loader.Loaded.Unreadable u ? "can't be read: " + u.reason() : "does not exist")
                    + ".");
            return 2;
        }
        DiskLoader loader = new DiskLoader(FileSet.root(List.of(path)));
        Analysis analysis = BackconeEngine.create(loader, LocalDate.now(java.time.ZoneId.systemDefault()))
                .analyse(loader.id(path));
        Optional<List<Explanation>> rating = analysis.explainRating(name);
        if (rating.isPresent()) {
            rating(rating.get(), out);
            return 0;
        }
        Optional<Explanation> one = analysis.explain(name);
        if (one.isPresent()) {
            value(one.get(), out);
            return 0;
        }
        String near = nearest(analysis.names());
        err.println("backcone: nothing in `" + file + "` is called `" + name + "`."
                + (near == null ? "" : " Did you mean `" + near + "`?"));
        return 2;
    }

    /** Names behind the same dot come first: what was mistyped is most often the last word. */
    private @org.jspecify.annotations.Nullable String nearest(List<String> names) {
        int dot = name.lastIndexOf('.');
        String before = name.substring(0, dot + 1);
        List<String> last = new java.util.ArrayList<>();
        for (String n : names) {
            if (n.startsWith(before) && n.indexOf('.', before.length()) < 0) {
                last.add(n.substring(before.length()));
            }
        }
        String near = Suggest.nearest(name.substring(dot + 1), last);
        return near != null ? before + near : Suggest.nearest(name, names);
    }

    private void value(Explanation e, PrintWriter out) throws IOException {
        if (format.equals("json")) {
            JsonGenerator g = JsonReport.generator(out);
            json(g, e, depth);
            g.flush();
            out.println();
        } else {
            boolean markdown = format.equals("markdown");
            tree(e, 0, out, markdown);
            out.println();
            out.println(markdown ? "> " + Caution.TEXT : Terminal.Ink.DIM.paint(Caution.TEXT, Terminal.colour()));
        }
    }

    private void rating(List<Explanation> steps, PrintWriter out) throws IOException {
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
        out.println((markdown ? "# " : "") + "Rating " + name + " of "
                + FileSet.shown(file.toAbsolutePath().normalize()));
        boolean given = false;
        boolean computed = false;
        for (Explanation e : steps) {
            boolean isGiven = e.equation() != null && e.numbers() == null;
            if (isGiven && !given) {
                heading("Given", out, markdown);
                given = true;
            } else if (!isGiven && !computed) {
                heading("Computed, in order", out, markdown);
                computed = true;
            }
            lines(e, 1, out, markdown);
        }
        out.println();
        out.println(markdown ? "> " + Caution.TEXT : Caution.TEXT);
    }

    private static void heading(String text, PrintWriter out, boolean markdown) {
        out.println();
        out.println(markdown ? "## " + text : text);
        if (markdown) {
            out.println();
        }
    }

    private void tree(Explanation e, int level, PrintWriter out, boolean markdown) {
        lines(e, level, out, markdown);
        if (level < depth) {
            for (Explanation x : e.from()) {
                tree(x, level + 1, out, markdown);
            }
        }
    }

    /** Name and value on one line, then equation, numbers and source, each only where there is something to tell. */
    private static void lines(Explanation e, int level, PrintWriter out, boolean markdown) {
        String indent = "  ".repeat(level);
        boolean colour = Terminal.colour();
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
        if (equation != null && e.numbers() != null) {
            wrapped(
                    more,
                    (e.symbol() == null || e.status() == Explanation.Status.SOLVED ? "" : e.symbol() + " = ")
                            + equation,
                    out,
                    markdown);
            if (!equation.equals(e.numbers()) && !e.numbers().isEmpty()) {
                wrapped(more, "= " + e.numbers(), out, markdown);
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
        g.writeEndObject();
    }
}
