package backcone.cli;

import backcone.engine.Analysis;
import backcone.engine.BackconeEngine;
import backcone.engine.answers.DriveAnswer;
import backcone.engine.answers.RequirementAnswer;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.diagnostics.Severity;
import java.io.IOException;
import java.io.PrintWriter;
import java.nio.file.Path;
import java.time.LocalDate;
import java.util.ArrayList;
import java.util.List;
import java.util.concurrent.Callable;
import java.util.concurrent.ExecutionException;
import java.util.concurrent.ExecutorService;
import java.util.concurrent.Executors;
import java.util.concurrent.Future;
import org.jspecify.annotations.Nullable;
import picocli.CommandLine.Command;
import picocli.CommandLine.Model.CommandSpec;
import picocli.CommandLine.Option;
import picocli.CommandLine.ParameterException;
import picocli.CommandLine.Parameters;
import picocli.CommandLine.Spec;

/** {@code backcone check}: diagnostics and requirements of files or folders. */
@Command(
        name = "check",
        mixinStandardHelpOptions = true,
        header = "Checks specs: what is wrong, what is missing, and every requirement with its margin.",
        description = {
            "",
            "Exit status: 0 nothing short, outside, open or wrong; 1 some requirement short, outside or open; 2 a text is wrong;",
            "64 wrong usage; 70 a fault of the program. Accepted deviations count as met until their date."
        },
        footer = {
            "",
            "Examples:",
            "  backcone check                          every spec below this folder",
            "  backcone check feeder.drive             one spec",
            "  backcone check --format json drives     for other programs",
            "  backcone check --on 2027-07-01 drives   as it will be on that day"
        })
final class CheckCommand implements Callable<Integer> {
    @Spec
    @SuppressWarnings("NullAway.Init")
    CommandSpec spec;

    @Parameters(paramLabel = "PATH", description = "Files or folders; this folder if none is named.")
    List<Path> paths = new ArrayList<>();

    @Option(names = "--format", paramLabel = "FORMAT", description = "text or json (default: text).")
    String format = "text";

    @Option(
            names = "--on",
            paramLabel = "DATE",
            description = "Judge acceptances and waivers as of this day (default: today).")
    @Nullable
    String on;

    @Option(names = "--quiet", description = "Only what is wrong, short, outside or open.")
    boolean quiet;

    /** An analysed file. */
    record Checked(Path file, Analysis analysis) {}

    @Override
    public Integer call() throws IOException, InterruptedException, ExecutionException {
        LocalDate today = Dates.of(on, spec);
        if (!format.equals("text") && !format.equals("json")) {
            throw new ParameterException(spec.commandLine(), "There is no format `" + format + "`; it is text or json");
        }
        FileSet set = FileSet.of(paths.isEmpty() ? List.of(Path.of(".")) : paths, false);
        PrintWriter out = spec.commandLine().getOut();
        PrintWriter err = spec.commandLine().getErr();
        if (!set.missing().isEmpty()) {
            for (String m : set.missing()) {
                err.println("backcone: there is no file or folder `" + m + "`, or it can't be read.");
            }
            return 2;
        }
        if (set.files().isEmpty()) {
            err.println(
                    "backcone: no spec (.drive) found here. `backcone start straight-bevel` prints one to begin with.");
            return 2;
        }
        List<Checked> all = analyse(set.files(), today);
        if (format.equals("json")) {
            JsonReport.write(all, out);
        } else {
            new TextReport(out, Terminal.colour(), quiet).write(all);
        }
        out.flush();
        return status(all);
    }

    private List<Checked> analyse(List<Path> files, LocalDate today) throws InterruptedException, ExecutionException {
        DiskLoader loader = new DiskLoader(FileSet.root(files));
        BackconeEngine engine = BackconeEngine.create(loader, today);
        List<Checked> out = new ArrayList<>();
        if (files.size() == 1) {
            out.add(new Checked(files.get(0), engine.analyse(loader.id(files.get(0)))));
            return out;
        }
        ExecutorService pool =
                Executors.newFixedThreadPool(Math.max(1, Runtime.getRuntime().availableProcessors()));
        try {
            List<Future<Checked>> work = new ArrayList<>();
            for (Path f : files) {
                work.add(pool.submit(() -> new Checked(f, engine.analyse(loader.id(f)))));
            }
            Progress progress = new Progress("checking", files.size());
            for (Future<Checked> w : work) {
                out.add(w.get());
                progress.step();
            }
            progress.done();
        } finally {
            pool.shutdownNow();
        }
        return out;
    }

    /** 2 when a text is wrong, 1 when some requirement is not met, else 0. */
    static int status(List<Checked> all) {
        boolean wrong = false;
        boolean unmet = false;
        for (Checked c : all) {
            for (Diagnostic d : c.analysis().diagnostics()) {
                wrong |= d.severity() == Severity.ERROR && !aboutStates(d);
            }
            for (DriveAnswer d : c.analysis().drives()) {
                for (RequirementAnswer r : d.requirements()) {
                    unmet |= !r.state().isMet();
                }
            }
        }
        return wrong ? 2 : unmet ? 1 : 0;
    }

    /** Findings that repeat the state of a requirement: the text itself is right. */
    static boolean aboutStates(Diagnostic d) {
        switch (d.code()) {
            case SHORT:
            case OUTSIDE:
            case ASSERT_FAILED:
            case ACCEPTANCE_EXPIRED:
            case WAIVER_EXPIRED:
                return true;
            default:
                return false;
        }
    }
}
