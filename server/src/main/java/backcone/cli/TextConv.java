package backcone.cli;

import backcone.engine.Analysis;
import backcone.engine.BackconeEngine;
import backcone.engine.Loader;
import backcone.engine.diagnostics.Severity;
import backcone.engine.review.TreeDiff;
import backcone.engine.text.FileId;
import java.io.IOException;
import java.io.PrintWriter;
import java.nio.file.FileVisitResult;
import java.nio.file.Files;
import java.nio.file.Path;
import java.nio.file.SimpleFileVisitor;
import java.nio.file.attribute.BasicFileAttributes;
import java.util.ArrayList;
import java.util.List;
import org.jspecify.annotations.Nullable;

/**
 * A spec with its margins behind it, for {@code git log -p}. Git hands over an old text in a file of its own, with the name but
 * without the folder; what it uses is looked for where a spec of that name lies now.
 */
final class TextConv {
    private TextConv() {}

    static void print(String typed, PrintWriter out) throws IOException {
        Path file = FileSet.path(typed);
        if (file == null || !(DiskLoader.read(file) instanceof Loader.Loaded.Text t)) {
            return; // git shows what it has
        }
        out.print(t.text());
        if (!t.text().endsWith("\n")) {
            out.println();
        }
        String name = String.valueOf(file.getFileName());
        if (!name.endsWith(".drive")) {
            return;
        }
        Path here = Path.of("").toAbsolutePath().normalize();
        Path lies = place(here, file.toAbsolutePath().normalize(), t.text());
        DiskLoader disk = new DiskLoader(here);
        FileId id = lies == null ? new FileId(name) : disk.id(lies);
        BackconeEngine engine = BackconeEngine.create(f -> f.equals(id) ? t : disk.load(f), LedgerCommand.NO_DATE);
        Analysis a = engine.analyse(id);
        boolean wrong =
                a.diagnostics().stream().anyMatch(d -> d.severity() == Severity.ERROR && !Checked.aboutStates(d));
        if (!wrong && !a.drives().isEmpty()) {
            out.println();
            out.print(Ledger.of(name, a.reviews()));
        }
    }

    /** The spec below {@code here} that the text is most like, among those of its name. */
    private static @Nullable Path place(Path here, Path file, String text) throws IOException {
        if (file.startsWith(here)) {
            return file;
        }
        List<Path> all = new ArrayList<>();
        Path name = file.getFileName();
        Files.walkFileTree(here, new SimpleFileVisitor<>() {
            @Override
            public FileVisitResult preVisitDirectory(Path dir, BasicFileAttributes a) {
                Path n = dir.getFileName();
                return n != null && n.toString().startsWith(".") && !dir.equals(here)
                        ? FileVisitResult.SKIP_SUBTREE
                        : FileVisitResult.CONTINUE;
            }

            @Override
            public FileVisitResult visitFile(Path f, BasicFileAttributes a) {
                if (f.getFileName().equals(name) && a.isRegularFile()) {
                    all.add(f);
                }
                return FileVisitResult.CONTINUE;
            }

            @Override
            public FileVisitResult visitFileFailed(Path f, IOException e) {
                return FileVisitResult.CONTINUE;
            }
        });
        Path best = null;
        double most = -1;
        List<String> mine = text.lines().map(String::strip).toList();
        for (Path p : all) {
            double alike = DiskLoader.read(p) instanceof Loader.Loaded.Text t
                    ? TreeDiff.alike(t.text().lines().map(String::strip).toList(), mine)
                    : 0;
            if (alike > most) {
                most = alike;
                best = p;
            }
        }
        return best;
    }
}
