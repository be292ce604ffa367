package backcone.lsp;

import backcone.cli.DiskLoader;
import backcone.engine.Analysis;
import backcone.engine.BackconeEngine;
import backcone.engine.Loader;
import backcone.engine.diagnostics.House;
import backcone.engine.text.FileId;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.LocalDate;
import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import java.util.concurrent.ConcurrentHashMap;
import java.util.stream.Stream;
import org.jspecify.annotations.Nullable;

/** An opened folder: its texts, those open in the editor before those on disk. */
final class Folder {
    static final int MOST_FILES = 20_000;
    private static final String SKIP = ".backcone-skip";
    final Path root;
    private final DiskLoader disk;
    private final BackconeEngine engine;
    private final Map<FileId, Doc> open = new ConcurrentHashMap<>();
    private final Map<FileId, String> lone = new ConcurrentHashMap<>();

    /** Raised whenever a file has changed that others may use. */
    volatile int stamp;

    volatile House house = House.NONE;

    Folder(Path root, LocalDate today) {
        this.root = root;
        this.disk = new DiskLoader(root);
        this.engine = BackconeEngine.create(this::load, today);
        readHouse();
    }

    private Loader.Loaded load(FileId id) {
        Doc d = open.get(id);
        if (d != null) {
            return new Loader.Loaded.Text(d.now.text());
        }
        String text = lone.get(id);
        return text != null ? new Loader.Loaded.Text(text) : disk.load(id);
    }

    void readHouse() {
        house = disk.load(new FileId(House.NAME)) instanceof Loader.Loaded.Text t ? House.read(t.text()) : House.NONE;
    }

    FileId id(Path file) {
        return disk.id(file);
    }

    Path path(FileId id) {
        return disk.path(id);
    }

    boolean holds(Path file) {
        return file.startsWith(root);
    }

    void opened(Doc d) {
        open.put(d.id, d);
        forget(d.id);
    }

    void closed(Doc d) {
        open.remove(d.id);
        forget(d.id);
    }

    boolean isOpen(FileId id) {
        return open.containsKey(id);
    }

    @Nullable
    Doc doc(FileId id) {
        return open.get(id);
    }

    /** The file has changed, on disk or by being opened or closed. */
    void forget(FileId id) {
        engine.forget(id);
        stamp++;
    }

    Analysis analyse(FileId id, String text, @Nullable Analysis before, boolean newest) {
        return id.isHandbook() ? engine.handbook(id) : engine.analyse(id, text, before, newest);
    }

    /** What can be done at a place of a text that was analysed here. */
    List<backcone.engine.fixes.Fix> fixes(Analysis analysis, backcone.engine.text.Span range) {
        return engine.fixes(analysis, range);
    }

    /** A file that is not open. */
    Analysis analyse(FileId id) {
        return engine.analyse(id);
    }

    /** The text of any file in reach, as it stands in the editor or on disk. */
    @Nullable
    String text(FileId id) {
        if (id.isHandbook()) {
            return backcone.engine.Handbook.text(id);
        }
        return load(id) instanceof Loader.Loaded.Text t ? t.text() : null;
    }

    /** Specs and method files below the folder, sorted; folders that say so are left out. */
    List<FileId> files() {
        List<FileId> out = new ArrayList<>();
        walk(root, out, 0);
        return out;
    }

    private void walk(Path folder, List<FileId> out, int depth) {
        if (depth > 30 || out.size() >= MOST_FILES || Files.exists(folder.resolve(SKIP))) {
            return;
        }
        List<Path> all;
        try (Stream<Path> s = Files.list(folder)) {
            all = s.sorted().toList();
        } catch (IOException | RuntimeException e) {
            return;
        }
        for (Path p : all) {
            String name = p.getFileName().toString();
            if (name.startsWith(".") || name.equals("node_modules") || name.equals("target")) {
                continue;
            }
            if (Files.isDirectory(p, java.nio.file.LinkOption.NOFOLLOW_LINKS)) {
                walk(p, out, depth + 1);
            } else if ((name.endsWith(".drive") || name.endsWith(".method")) && Files.isRegularFile(p)) {
                out.add(id(p));
            }
        }
    }
}
