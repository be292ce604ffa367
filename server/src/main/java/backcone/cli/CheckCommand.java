package backcone.cli;

import java.io.IOException;
import java.io.PrintWriter;
import java.nio.file.Path;
import java.time.LocalDate;
import java.time.format.DateTimeParseException;
import java.util.List;
import org.jspecify.annotations.Nullable;

/** {@code backcone check}: diagnostics and requirements of files or folders. */
final class CheckCommand implements Command {
    private static final Usage USAGE = new Usage(
            "check",
            "Checks specs: what is wrong, what is missing, and every requirement with its margin.",
            List.of(new Usage.Operand(
                    "PATH",
                    "files, or folders with every .drive below them; this folder if none is named",
                    false,
                    true)),
            List.of(
                    Usage.Option.oneOf(
                            "--format",
                            "FORMAT",
                            "text, json, markdown, sarif (2.1.0) or junit; text unless said",
                            "text",
                            "json",
                            "markdown",
                            "sarif",
                            "junit"),
                    Usage.Option.value(
                            "--on",
                            "DATE",
                            "judge acceptances and waivers as of this day (2027-06-30); today unless said"),
                    Usage.Option.flag("--quiet", "only what is wrong, short, outside or open")),
            List.of(
                    "A folder is left out when it is hidden, is called target or node_modules, or holds a file"
                            + " .backcone-skip; it is checked all the same when it is named.",
                    "Exit status: 0 nothing is short, outside, open or wrong; 1 some requirement is short, outside or open;"
                            + " 2 a text is wrong or can't be read; 64 wrong usage; 70 a fault of the program. An accepted"
                            + " shortfall counts as met until its date."),
            List.of(
                    "backcone check                          every spec below this folder",
                    "backcone check feeder.drive             one spec",
                    "backcone check --format json drives     for other programs",
                    "backcone check --on 2027-07-01 drives   as it will be on that day"));

    @Override
    public Usage usage() {
        return USAGE;
    }

    @Override
    public int run(Arguments arguments, PrintWriter out, PrintWriter err)
            throws WrongUsage, IOException, InterruptedException {
        LocalDate day = day(arguments.value("--on"));
        String format = arguments.value("--format", "text");
        boolean json = !format.equals("text"); // for other programs: always a whole document
        FileSet set = FileSet.of(arguments.operands(), false);
        Warm.up(set.files());
        for (String u : set.unreachable()) {
            err.println("backcone: " + u + ".");
        }
        int status = set.unreachable().isEmpty() ? Status.FINE : Status.WRONG_TEXT;
        if (set.files().isEmpty() && !json) {
            if (status == Status.FINE) {
                err.println(
                        "backcone: no spec (.drive) here. `backcone start straight-bevel` prints one to begin with.");
            }
            return Status.WRONG_TEXT;
        }
        Report report = report(format, arguments.has("--quiet"), set.files().size() == 1, out);
        if (!set.files().isEmpty()) {
            status = Math.max(status, check(set.files(), day, report, !json && Terminal.out(), err));
        }
        report.end(set.unreachable());
        return set.files().isEmpty() ? Status.WRONG_TEXT : status;
    }

    private static Report report(String format, boolean quiet, boolean alone, PrintWriter out) throws IOException {
        return switch (format) {
            case "json" -> new JsonReport(out);
            case "markdown" -> new MarkdownReport(out);
            case "sarif" -> new SarifReport(out);
            case "junit" -> new JunitReport(out);
            default -> new TextReport(out, Terminal.colour(), quiet, alone);
        };
    }

    private static LocalDate day(@Nullable String text) throws WrongUsage {
        if (text == null) {
            return Today.day();
        }
        try {
            return LocalDate.parse(text);
        } catch (DateTimeParseException e) {
            throw new WrongUsage(USAGE, "`" + text + "` is no date; write it as 2027-06-30.");
        }
    }

    /** Analyses on all cores and reports in order; returns the gravest status. */
    private static int check(List<Path> files, LocalDate day, Report report, boolean visible, PrintWriter err)
            throws IOException, InterruptedException {
        EngineFactory engine = new EngineFactory(FileSet.root(files), day);
        engine.house().problems().forEach(err::println);
        Progress progress = new Progress("checking", files.size(), !visible && Terminal.err());
        int status = Status.FINE;
        try (Ahead<Path, Checked> ahead = new Ahead<>(files, f -> Checked.of(engine, f))) {
            while (ahead.hasNext()) {
                Checked c = ahead.next();
                progress.step();
                if (c.fault() != null) {
                    progress.done();
                    Faults.report(c.shown(), c.fault(), err);
                }
                report.file(c);
                status = Math.max(status, c.status());
                if (!c.drives().isEmpty()) {
                    engine.forget(c.file()); // libraries stay: others use them
                }
            }
        } finally {
            progress.done();
        }
        return status;
    }
}
