package backcone.engine.editing;

import backcone.engine.BackconeEngine;
import backcone.engine.Loader;
import backcone.engine.text.FileId;
import java.io.IOException;
import java.io.UncheckedIOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.LocalDate;
import java.util.List;
import java.util.stream.Stream;

/** The samples, as an engine sees them. */
final class SamplesOnDisk {
    static final Path FOLDER = Path.of("..", "samples").toAbsolutePath().normalize();
    static final LocalDate TODAY = LocalDate.of(2026, 11, 1);

    private SamplesOnDisk() {}

    static BackconeEngine engine() {
        return BackconeEngine.create(SamplesOnDisk::load, TODAY);
    }

    private static Loader.Loaded load(FileId id) {
        Path p = FOLDER.resolve(id.path());
        return Files.isRegularFile(p) ? new Loader.Loaded.Text(text(id)) : new Loader.Loaded.Missing();
    }

    static String text(FileId id) {
        try {
            return Files.readString(FOLDER.resolve(id.path()));
        } catch (IOException e) {
            throw new UncheckedIOException(e);
        }
    }

    /** Specs at the top of the folder and in its library. */
    static List<FileId> files() {
        try (Stream<Path> a = Files.list(FOLDER);
                Stream<Path> b = Files.list(FOLDER.resolve("library"))) {
            return Stream.concat(a, b)
                    .filter(p -> p.toString().endsWith(".drive"))
                    .map(p -> new FileId(FOLDER.relativize(p).toString().replace('\\', '/')))
                    .sorted()
                    .toList();
        } catch (IOException e) {
            throw new UncheckedIOException(e);
        }
    }
}
