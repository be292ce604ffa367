package backcone.cli;

import backcone.engine.Loader;
import backcone.engine.text.FileId;
import java.io.IOException;
import java.nio.ByteBuffer;
import java.nio.charset.CharacterCodingException;
import java.nio.charset.CodingErrorAction;
import java.nio.charset.StandardCharsets;
import java.nio.file.AccessDeniedException;
import java.nio.file.Files;
import java.nio.file.NoSuchFileException;
import java.nio.file.Path;

/** Texts below one folder. */
final class DiskLoader implements Loader {
    private static final long LARGEST = 16L << 20;
    private final Path root;

    DiskLoader(Path root) {
        this.root = root;
    }

    Path root() {
        return root;
    }

    FileId id(Path file) {
        return new FileId(
                root.relativize(file.toAbsolutePath().normalize()).toString().replace('\\', '/'));
    }

    @Override
    public Loaded load(FileId file) {
        return read(root.resolve(file.path()));
    }

    /** Reads a file whole, or says why it can't be read. */
    static Loaded read(Path file) {
        try {
            if (Files.isDirectory(file)) {
                return new Loaded.Unreadable("it is a folder");
            }
            if (!Files.exists(file)) {
                return new Loaded.Missing();
            }
            if (Files.size(file) > LARGEST) {
                return new Loaded.Unreadable("it is larger than 16 MB");
            }
            byte[] bytes = Files.readAllBytes(file);
            return new Loaded.Text(StandardCharsets.UTF_8
                    .newDecoder()
                    .onMalformedInput(CodingErrorAction.REPORT)
                    .onUnmappableCharacter(CodingErrorAction.REPORT)
                    .decode(ByteBuffer.wrap(bytes))
                    .toString());
        } catch (CharacterCodingException e) {
            return new Loaded.Unreadable("it is not UTF-8 text; save it as UTF-8");
        } catch (NoSuchFileException e) {
            return new Loaded.Missing();
        } catch (AccessDeniedException e) {
            return new Loaded.Unreadable("permission denied");
        } catch (IOException e) {
            return new Loaded.Unreadable(e.getMessage() == null ? "it can't be read" : e.getMessage());
        }
    }
}
