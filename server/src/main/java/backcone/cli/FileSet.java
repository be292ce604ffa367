package backcone.cli;

import java.io.IOException;
import java.nio.file.FileVisitResult;
import java.nio.file.Files;
import java.nio.file.InvalidPathException;
import java.nio.file.LinkOption;
import java.nio.file.Path;
import java.nio.file.SimpleFileVisitor;
import java.nio.file.attribute.BasicFileAttributes;
import java.util.ArrayList;
import java.util.Collections;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Set;

/** The specs that paths of a command line mean: files as named, folders with every spec below them. */
final class FileSet {
    /** A folder that holds this file is left out unless it is named itself. */
    private static final String SKIP = ".backcone-skip";

    private final List<Path> files = new ArrayList<>();
    private final List<String> unreachable = new ArrayList<>();

    private FileSet() {}

    /** {@code paths} as typed; none means this folder. {@code methods} takes method files of folders, too. */
    static FileSet of(List<String> paths, boolean methods) {
        FileSet set = new FileSet();
        Set<Path> all = new LinkedHashSet<>();
        for (String typed : paths.isEmpty() ? List.of(".") : paths) {
            Path p = path(typed);
            if (p != null && Files.isDirectory(p)) {
                all.addAll(set.below(p, methods));
            } else if (p != null && Files.exists(p, LinkOption.NOFOLLOW_LINKS)) {
                all.add(p.toAbsolutePath().normalize());
            } else {
                set.unreachable.add("there is no file or folder `" + typed + "`");
            }
        }
        set.files.addAll(all);
        return set;
    }

    static @org.jspecify.annotations.Nullable Path path(String typed) {
        try {
            return Path.of(typed);
        } catch (InvalidPathException e) {
            return null; // a word no file system takes as a name
        }
    }

    List<Path> files() {
        return files;
    }

    /** What was asked for and can't be reached, each as the end of a sentence. */
    List<String> unreachable() {
        return unreachable;
    }

    /** Hidden folders, build folders and marked ones are left out; links are not followed, so there are no loops. */
    private List<Path> below(Path folder, boolean methods) {
        List<Path> found = new ArrayList<>();
        Path start = folder.toAbsolutePath().normalize();
        try {
            Files.walkFileTree(start, new SimpleFileVisitor<>() {
                @Override
                public FileVisitResult preVisitDirectory(Path dir, BasicFileAttributes a) {
                    return !dir.equals(start) && leftOut(dir) ? FileVisitResult.SKIP_SUBTREE : FileVisitResult.CONTINUE;
                }

                @Override
                public FileVisitResult visitFile(Path file, BasicFileAttributes a) {
                    String name = file.getFileName().toString();
                    boolean wanted = name.endsWith(".drive") || (methods && name.endsWith(".method"));
                    // a link to a file is as good as the file; a link to a folder is no file
                    if (wanted && !name.startsWith(".") && (a.isRegularFile() || Files.isRegularFile(file))) {
                        found.add(file);
                    }
                    return FileVisitResult.CONTINUE;
                }

                @Override
                public FileVisitResult visitFileFailed(Path file, IOException e) {
                    unreachable.add("`" + shown(file) + "` can't be read");
                    return FileVisitResult.CONTINUE;
                }
            });
        } catch (IOException e) {
            unreachable.add("`" + shown(folder) + "` can't be read");
        }
        Collections.sort(found);
        return found;
    }

    private static boolean leftOut(Path dir) {
        String name = dir.getFileName() == null ? "" : dir.getFileName().toString();
        return name.startsWith(".")
                || name.equals("target")
                || name.equals("node_modules")
                || Files.exists(dir.resolve(SKIP));
    }

    /**
     * The opened folder, which {@code use} may not leave: the repository that holds the files; without one, this folder
     * if they lie below it, else the folder that holds them all.
     */
    static Path root(List<Path> files) {
        Path here = Path.of("").toAbsolutePath().normalize();
        Path common = holds(here, files) ? here : files.get(0).getParent();
        while (common != null && !holds(common, files)) {
            common = common.getParent();
        }
        if (common == null) {
            return here;
        }
        for (Path p = common; p != null; p = p.getParent()) {
            if (Files.exists(p.resolve(".git"))) {
                return p;
            }
        }
        return common;
    }

    private static boolean holds(Path folder, List<Path> files) {
        for (Path f : files) {
            if (!f.startsWith(folder)) {
                return false;
            }
        }
        return true;
    }

    /** A path as a person here would write it. */
    static String shown(Path file) {
        Path here = Path.of("").toAbsolutePath().normalize();
        Path whole = file.toAbsolutePath().normalize();
        return whole.startsWith(here) && !whole.equals(here)
                ? here.relativize(whole).toString()
                : whole.toString();
    }
}
