package backcone.lsp;

import backcone.engine.Handbook;
import backcone.engine.diagnostics.Code;
import backcone.engine.diagnostics.Pages;
import backcone.engine.text.FileId;
import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.nio.file.StandardCopyOption;
import java.util.Map;
import java.util.concurrent.ConcurrentHashMap;
import org.jspecify.annotations.Nullable;

/**
 * The shipped texts as files that an editor can open: copies below the user's cache, written when something first leads there
 * and not to be written by anybody.
 */
final class HandbookFiles {
    private final Path home;
    private final Map<String, String> known = new ConcurrentHashMap<>();

    HandbookFiles() {
        this(cache());
    }

    HandbookFiles(Path home) {
        this.home = home.toAbsolutePath().normalize();
    }

    private static Path cache() {
        String xdg = System.getenv("XDG_CACHE_HOME");
        Path base =
                xdg != null && !xdg.isBlank() ? Path.of(xdg) : Path.of(System.getProperty("user.home", "."), ".cache");
        return base.resolve("backcone").resolve("texts");
    }

    /** The shipped text that a path is the copy of; null for any other path. */
    @Nullable
    FileId id(Path path) {
        return path.startsWith(home) && path.toString().endsWith(".method")
                ? new FileId(FileId.HANDBOOK + path.getFileName())
                : null;
    }

    String uri(FileId book) {
        return known.computeIfAbsent(book.path(), k -> {
            String text = Handbook.text(book);
            return write(k.substring(FileId.HANDBOOK.length()), text == null ? "" : text);
        });
    }

    String uri(Code code) {
        return known.computeIfAbsent(code.id(), k -> write(k + ".md", Pages.of(code)));
    }

    private String write(String name, String text) {
        Path file = home.resolve(name);
        try {
            byte[] bytes = text.getBytes(StandardCharsets.UTF_8);
            if (!Files.exists(file) || !java.util.Arrays.equals(Files.readAllBytes(file), bytes)) {
                Files.createDirectories(home);
                Path part = Files.createTempFile(home, name, ".part");
                Files.write(part, bytes);
                Files.move(part, file, StandardCopyOption.REPLACE_EXISTING);
                file.toFile().setReadOnly();
            }
        } catch (IOException | RuntimeException e) {
            // a cache that can't be written: the place is told all the same
        }
        return Uris.uri(file);
    }
}
