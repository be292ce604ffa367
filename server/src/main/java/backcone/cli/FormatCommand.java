package backcone.cli;

import backcone.engine.Loader;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.parse.Formatter;
import backcone.engine.text.FileId;
import java.io.IOException;
import java.io.PrintWriter;
import java.nio.charset.StandardCharsets;
import java.nio.file.AtomicMoveNotSupportedException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.nio.file.StandardCopyOption;
import java.util.ArrayList;
import java.util.List;
import java.util.concurrent.Callable;
import picocli.CommandLine.Command;
import picocli.CommandLine.Model.CommandSpec;
import picocli.CommandLine.Option;
import picocli.CommandLine.Parameters;
import picocli.CommandLine.Spec;

/** {@code backcone format}: the canonical layout. Files are written whole or not at all. */
@Command(
        name = "format",
        mixinStandardHelpOptions = true,
        header = "Puts specs and method files into the canonical layout; meaning and digits stay as they are.",
        description = {
            "",
            "A file with syntax errors is left alone. Exit status: 0 done; 1 with --check, some file would change; 2 some file could not be formatted."
        },
        footer = {
            "",
            "Examples:",
            "  backcone format                  every spec below this folder",
            "  backcone format --check drives   for CI: changes nothing"
        })
final class FormatCommand implements Callable<Integer> {
    @Spec
    @SuppressWarnings("NullAway.Init")
    CommandSpec spec;

    @Parameters(paramLabel = "PATH", description = "Files or folders; this folder if none is named.")
    List<Path> paths = new ArrayList<>();

    @Option(names = "--check", description = "Change nothing; tell which files are not in canonical layout.")
    boolean check;

    @Override
    public Integer call() throws IOException {
        PrintWriter out = spec.commandLine().getOut();
        PrintWriter err = spec.commandLine().getErr();
        FileSet set = FileSet.of(paths.isEmpty() ? List.of(Path.of(".")) : paths, true);
        boolean failed = false;
        for (String m : set.missing()) {
            err.println("backcone: there is no file or folder `" + m + "`, or it can't be read.");
            failed = true;
        }
        int changed = 0;
        for (Path f : set.files()) {
            Loader.Loaded read = DiskLoader.read(f);
            String shown = FileSet.shown(f);
            if (!(read instanceof Loader.Loaded.Text t)) {
                err.println("backcone: `" + shown + "` "
                        + (read instanceof Loader.Loaded.Unreadable u ? "can't be read: " + u.reason() : "is gone")
                        + ".");
                failed = true;
                continue;
            }
            Formatter.Result r = Formatter.format(new FileId(f.getFileName().toString()), t.text());
            String formatted = r.text();
            if (formatted == null) {
                Places places = new Places(t.text());
                Diagnostic d = r.problems().get(0);
                err.println(shown + ":" + places.line(d.span().start()) + ":"
                        + places.column(d.span().start()) + " " + d.message() + " Left as it is.");
                failed = true;
            } else if (!formatted.equals(t.text())) {
                changed++;
                out.println((check ? "not in canonical layout: " : "formatted ") + shown);
                if (!check) {
                    replace(f, formatted);
                }
            }
        }
        out.println(
                changed == 0
                        ? "All " + set.files().size() + " files are in canonical layout."
                        : changed + " of " + set.files().size() + " files " + (check ? "would change." : "changed."));
        return failed ? 2 : check && changed > 0 ? 1 : 0;
    }

    /** Writes beside the file and moves into place, so that a reader never sees half a file. */
    private static void replace(Path file, String text) throws IOException {
        Path target = file.toRealPath();
        Path beside = Files.createTempFile(target.getParent(), ".backcone", ".tmp");
        try {
            Files.writeString(beside, text, StandardCharsets.UTF_8);
            try {
                Files.setPosixFilePermissions(beside, Files.getPosixFilePermissions(target));
            } catch (UnsupportedOperationException e) {
                beside.toFile().setWritable(true);
            }
            try {
                Files.move(beside, target, StandardCopyOption.ATOMIC_MOVE, StandardCopyOption.REPLACE_EXISTING);
            } catch (AtomicMoveNotSupportedException e) {
                Files.move(beside, target, StandardCopyOption.REPLACE_EXISTING);
            }
        } finally {
            Files.deleteIfExists(beside);
        }
    }
}
