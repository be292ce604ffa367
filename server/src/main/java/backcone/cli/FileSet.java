package backcone.cli;

import java.io.IOException;
import java.nio.file.FileVisitResult;
import java.nio.file.Files;
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
    private final List<String> missing = new ArrayList<>();

    private FileSet() {}

    static FileSet of(List<Path> paths, boolean methods) {
        FileSet set = new FileSet();
        Set<Path> all = new LinkedHashSet<>();
        for (Path p : paths) {
            if (Files.isDirectory(p)) {
                all.addAll(set.below(p, methods));
            } else if (Files.exists(p, LinkOption.NOFOLLOW_LINKS)) {
                all.add(p.toAbsolutePath().normalize());
            } else {
                set.missing.add(p.toString());
            }
        }
        set.files.addAll(all);
        return set;
    }

    List<Path> files() {
        return files;
    }

    List<String> missing() {
        return missing;
    }

    /** Hidden folders, build folders and folders marked with {@code .backcone-skip} are left out; links are not followed, so there are no loops. */
    private List<Path> below(Path folder, boolean methods) {
        List<Path> found = new ArrayList<>();
        Path start = folder.toAbsolutePath().normalize();
        try {
            Files.walkFileTree(start, new SimpleFileVisitor<>() {
                @Override
                public FileVisitResult preVisitDirectory(Path dir, BasicFileAttributes a) {
                    String name =
                            dir.getFileName() == null ? "" : dir.getFileName().toString();
                    boolean skip = !dir.equals(start)
                            && (name.startsWith(".")
                                    || name.equals("target")
                                    || name.equals("node_modules")
                                    || Files.exists(dir.resolve(SKIP)));
                    return skip ? FileVisitResult.SKIP_SUBTREE : FileVisitResult.CONTINUE;
                }

                @Override
                public FileVisitResult visitFile(Path file, BasicFileAttributes a) {
                    String name = file.getFileName().toString();
                    if (a.isRegularFile() && (name.endsWith(".drive") || (methods && name.endsWith(".method")))) {
                        found.add(file);
                    }
                    return FileVisitResult.CONTINUE;
                }

                @Override
                public FileVisitResult visitFileFailed(Path file, IOException e) {
                    missing.add(file.toString());
                    return FileVisitResult.CONTINUE;
                }
            });
        } catch (IOException e) {
            missing.add(folder.toString());
        }
        Collections.sort(found);
        return found;
    }

    /** The opened folder: where the command runs if the files lie below it, else the folder that holds them. */
    static Path root(List<Path> files) {
        Path here = Path.of("").toAbsolutePath().normalize();
        if (files.stream().allMatch(f -> f.startsWith(here))) {
            return here;
        }
        Path root = files.get(0).getParent();
        while (root != null) {
            Path r = root;
            if (files.stream().allMatch(f -> f.startsWith(r))) {
                return r;
            }
            root = root.getParent();
        }
        return here;
    }

    /** A path as a person here would write it. */
    static String shown(Path file) {
        Path here = Path.of("").toAbsolutePath().normalize();
        return file.startsWith(here) ? here.relativize(file).toString() : file.toString();
    }
}
