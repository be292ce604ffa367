package backcone.cli;

import backcone.engine.Loader;
import backcone.engine.text.FileId;
import backcone.git.Git;
import backcone.git.GitException;
import java.io.IOException;
import java.nio.ByteBuffer;
import java.nio.charset.CharacterCodingException;
import java.nio.charset.CodingErrorAction;
import java.nio.charset.StandardCharsets;
import java.nio.file.FileVisitResult;
import java.nio.file.Files;
import java.nio.file.Path;
import java.nio.file.SimpleFileVisitor;
import java.nio.file.attribute.BasicFileAttributes;
import java.util.Map;
import java.util.Set;
import java.util.TreeMap;
import java.util.TreeSet;

/** One state of a folder: a revision, or the files as they are. Paths are from its root, with slashes. */
interface Snapshot extends Loader {
    /** Specs, libraries and method files. */
    Set<String> files();

    /** What tells one content from another. */
    String version(String file);

    /** How the state is called in answers. */
    String label();

    static boolean isOurs(String path) {
        return path.endsWith(".drive") || path.endsWith(".method");
    }

    static Snapshot revision(Git git, String revision, Git.Reader reader)
            throws GitException, IOException, InterruptedException {
        String commit = git.commit(revision);
        Map<String, Git.Blob> files = new TreeMap<>(git.files(commit));
        files.keySet().removeIf(p -> !isOurs(p));
        return new Snapshot() {
            @Override
            public Set<String> files() {
                return files.keySet();
            }

            @Override
            public String version(String file) {
                Git.Blob b = files.get(file);
                return b == null ? "" : b.id();
            }

            @Override
            public String label() {
                return revision;
            }

            @Override
            public Loaded load(FileId file) {
                Git.Blob b = files.get(file.path());
                if (b == null) {
                    return new Loaded.Missing();
                }
                if (!b.plain()) {
                    return new Loaded.Unreadable("it is a link or a submodule in this revision");
                }
                try {
                    byte[] bytes = reader.read(b.id());
                    return bytes == null
                            ? new Loaded.Unreadable("git does not have it, or it is larger than 16 MB")
                            : text(bytes);
                } catch (IOException e) {
                    return new Loaded.Unreadable("git can't read it");
                }
            }
        };
    }

    /** The files below a folder as they are. */
    static Snapshot folder(Path root, String label) throws IOException {
        Set<String> files = new TreeSet<>();
        Path start = root.toAbsolutePath().normalize();
        Files.walkFileTree(start, new SimpleFileVisitor<>() {
            @Override
            public FileVisitResult preVisitDirectory(Path dir, BasicFileAttributes a) {
                String name = dir.getFileName() == null ? "" : dir.getFileName().toString();
                return !dir.equals(start)
                                && (name.startsWith(".") || name.equals("target") || name.equals("node_modules"))
                        ? FileVisitResult.SKIP_SUBTREE
                        : FileVisitResult.CONTINUE;
            }

            @Override
            public FileVisitResult visitFile(Path file, BasicFileAttributes a) {
                if (a.isRegularFile() && isOurs(file.toString())) {
                    files.add(start.relativize(file).toString().replace('\\', '/'));
                }
                return FileVisitResult.CONTINUE;
            }

            @Override
            public FileVisitResult visitFileFailed(Path file, IOException e) {
                return FileVisitResult.CONTINUE;
            }
        });
        DiskLoader loader = new DiskLoader(start);
        return new Snapshot() {
            @Override
            public Set<String> files() {
                return files;
            }

            @Override
            public String version(String file) {
                return load(new FileId(file)) instanceof Loaded.Text t ? t.text() : "";
            }

            @Override
            public String label() {
                return label;
            }

            @Override
            public Loaded load(FileId file) {
                return loader.load(file);
            }
        };
    }

    private static Loader.Loaded text(byte[] bytes) {
        try {
            return new Loader.Loaded.Text(StandardCharsets.UTF_8
                    .newDecoder()
                    .onMalformedInput(CodingErrorAction.REPORT)
                    .onUnmappableCharacter(CodingErrorAction.REPORT)
                    .decode(ByteBuffer.wrap(bytes))
                    .toString());
        } catch (CharacterCodingException e) {
            return new Loader.Loaded.Unreadable("it is not UTF-8 text");
        }
    }
}
