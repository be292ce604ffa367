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

/** Texts below one folder. A link may not lead out of it. */
public final class DiskLoader implements Loader {
    private static final long LARGEST = 16L << 20;
    private final Path root;

    public DiskLoader(Path root) {
        this.root = root;
    }

    public FileId id(Path file) {
        return new FileId(
                root.relativize(file.toAbsolutePath().normalize()).toString().replace('\\', '/'));
    }

    public Path path(FileId file) {
        return root.resolve(file.path());
    }

    @Override
    public Loaded load(FileId file) {
        Path path = path(file);
        try {
            if (Files.exists(path) && !path.toRealPath().startsWith(root.toRealPath())) {
                return new Loaded.Unreadable("it is a link that leads out of the opened folder");
            }
        } catch (IOException e) {
            return new Loaded.Unreadable(reason(e));
        }
        return read(path);
    }

    /** Reads a file whole, or says why it can't be read. */
    public static Loaded read(Path file) {
        try {
            if (!Files.exists(file)) {
                return new Loaded.Missing();
            }
            if (Files.isDirectory(file)) {
                return new Loaded.Unreadable("it is a folder");
            }
            if (!Files.isRegularFile(file)) {
                return new Loaded.Unreadable("it is no plain file"); // reading a pipe could wait for ever
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
        } catch (IOException e) {
            return new Loaded.Unreadable(reason(e));
        }
    }

    private static String reason(IOException e) {
        if (e instanceof AccessDeniedException) {
            return "permission denied";
        }
        return e.getMessage() == null ? "it can't be read" : e.getMessage();
    }
}
