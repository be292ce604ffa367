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
import java.util.List;

/** {@code backcone format}: the canonical layout. Files are written whole or not at all. */
final class FormatCommand implements Command {
    private static final Usage USAGE = new Usage(
            "format",
            "Puts specs and method files into the canonical layout; meaning and digits stay as they are.",
            List.of(new Usage.Operand(
                    "PATH",
                    "files, or folders with every .drive and .method below them; this folder if none is named",
                    false,
                    true)),
            List.of(Usage.Option.flag("--check", "change nothing; tell which files are not in canonical layout")),
            List.of(
                    "A file that can't be read as a spec is left as it is. Every file is written whole or not at all.",
                    "Exit status: 0 done; 1 with --check, some file would change; 2 some file was left as it is because it is"
                            + " wrong or can't be read or written."),
            List.of(
                    "backcone format                  every spec below this folder",
                    "backcone format --check drives   for CI: changes nothing"));

    @Override
    public Usage usage() {
        return USAGE;
    }

    @Override
    public int run(Arguments arguments, PrintWriter out, PrintWriter err) {
        boolean check = arguments.has("--check");
        FileSet set = FileSet.of(arguments.operands(), true);
        for (String u : set.unreachable()) {
            err.println("backcone: " + u + ".");
        }
        int left = 0;
        int changed = 0;
        Progress progress = new Progress("formatting", set.files().size(), !Terminal.out() && Terminal.err());
        for (Path f : set.files()) {
            String shown = FileSet.shown(f);
            Loader.Loaded read = DiskLoader.read(f);
            if (!(read instanceof Loader.Loaded.Text t)) {
                err.println("backcone: `" + shown + "` "
                        + (read instanceof Loader.Loaded.Unreadable u ? "can't be read: " + u.reason() : "is gone")
                        + ".");
                left++;
                continue;
            }
            Formatter.Result r = Formatter.format(new FileId(f.getFileName().toString()), t.text());
            String formatted = r.text();
            progress.step();
            if (formatted == null) {
                Diagnostic d = r.problems().get(0);
                err.println(shown + ":" + new Places(t.text()).at(d.span().start()) + " " + d.message() + " ["
                        + d.code().id() + "] The file is left as it is.");
                left++;
            } else if (!formatted.equals(t.text())) {
                if (check) {
                    out.println("not in canonical layout: " + shown);
                    changed++;
                } else if (write(f, shown, formatted, err)) {
                    out.println("formatted " + shown);
                    changed++;
                } else {
                    left++;
                }
            }
        }
        progress.done();
        out.println(summary(set.files().size(), changed, left, check));
        return left > 0 || !set.unreachable().isEmpty()
                ? Status.WRONG_TEXT
                : check && changed > 0 ? Status.NOT_MET : Status.FINE;
    }

    private static String summary(int all, int changed, int left, boolean check) {
        int fine = all - changed - left;
        return all + (all == 1 ? " file: " : " files: ") + fine + " in canonical layout"
                + (changed == 0 ? "" : ", " + changed + (check ? " would change" : " changed"))
                + (left == 0 ? "" : ", " + left + " left as " + (left == 1 ? "it is" : "they are"));
    }

    private static boolean write(Path file, String shown, String text, PrintWriter err) {
        try {
            if (!Files.isWritable(file)) {
                err.println("backcone: `" + shown + "` is write-protected. The file is left as it is.");
                return false;
            }
            replace(file, text);
            return true;
        } catch (IOException e) {
            err.println(
                    "backcone: `" + shown + "` can't be written (" + e.getMessage() + "). The file is left as it is.");
            return false;
        }
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
