package backcone.git;

import java.io.ByteArrayOutputStream;
import java.io.DataInputStream;
import java.io.IOException;
import java.io.InputStream;
import java.io.OutputStream;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import org.jspecify.annotations.Nullable;

/**
 * One repository, read through the user's own git. Only commands that read objects are run (rev-parse, ls-tree, cat-file, log,
 * merge-base), with hooks, pagers, external diffs, file-system monitors, optional locks and fetching switched off.
 */
public final class Git {
    /** No text is larger; anything beyond is not read. */
    public static final int LARGEST = 16 << 20;

    private final Path root;

    private Git(Path root) {
        this.root = root;
    }

    /** A file of a revision. {@code mode} as git writes it; a link or a submodule is no text. */
    public record Blob(String id, boolean plain) {}

    /** One commit that touched a file; {@code path} is the name it had then. */
    public record Commit(String id, String day, String author, String subject, String path) {}

    /** The repository that holds {@code place}. */
    public static Git at(Path place) throws GitException, IOException, InterruptedException {
        Path folder = Files.isDirectory(place) ? place : place.toAbsolutePath().getParent();
        if (folder == null) {
            folder = Path.of("").toAbsolutePath();
        }
        Answer a = run(folder, List.of("rev-parse", "--show-toplevel"));
        if (a.status != 0) {
            throw new GitException(
                    a.error.contains("dubious ownership")
                            ? "git does not trust the repository at `" + folder
                                    + "`, which belongs to somebody else; `git status` there tells what to do"
                            : "`" + folder
                                    + "` lies in no git repository; two files or two folders can be compared without one");
        }
        return new Git(Path.of(a.text().stripTrailing()));
    }

    /** The folder of the work tree. */
    public Path root() {
        return root;
    }

    /** The commit that a revision names. */
    public String commit(String revision) throws GitException, IOException, InterruptedException {
        if (revision.isEmpty() || revision.startsWith("-") || revision.indexOf('\0') >= 0) {
            throw new GitException("`" + revision + "` names no revision");
        }
        Answer a = run(root, List.of("rev-parse", "--verify", "--quiet", "--end-of-options", revision + "^{commit}"));
        if (a.status != 0) {
            boolean shallow = run(root, List.of("rev-parse", "--is-shallow-repository"))
                    .text()
                    .strip()
                    .equals("true");
            throw new GitException("there is no revision `" + revision + "` here"
                    + (shallow ? "; this clone is shallow, `git fetch --unshallow` brings the rest" : ""));
        }
        return a.text().strip();
    }

    /** Where two lines of commits parted. */
    public String mergeBase(String a, String b) throws GitException, IOException, InterruptedException {
        Answer x = run(root, List.of("merge-base", commit(a), commit(b)));
        if (x.status != 0) {
            throw new GitException("`" + a + "` and `" + b + "` have no commit in common");
        }
        return x.text().strip();
    }

    /** Files of a commit by their paths from the root, with slashes. */
    public Map<String, Blob> files(String commit) throws GitException, IOException, InterruptedException {
        Answer a = run(root, List.of("ls-tree", "-r", "-z", "--full-tree", commit));
        if (a.status != 0) {
            throw new GitException("git can't list the files of `" + commit + "`: " + first(a.error));
        }
        Map<String, Blob> out = new LinkedHashMap<>();
        for (String line : a.text().split("\0", -1)) {
            int tab = line.indexOf('\t');
            if (tab > 0) {
                String[] head = line.substring(0, tab).split(" ", -1);
                out.put(line.substring(tab + 1), new Blob(head[2], head[0].startsWith("100")));
            }
        }
        return out;
    }

    /** Commits that touched a file, newest first, followed over renames. {@code path} from the root, with slashes. */
    public List<Commit> log(String path, int most) throws GitException, IOException, InterruptedException {
        Answer a = run(
                root,
                List.of(
                        "log",
                        "--follow",
                        "--no-ext-diff",
                        "--no-textconv",
                        "--name-only",
                        "-z",
                        "--format=%x01%H%x02%ad%x02%an%x02%s%x02",
                        "--date=short",
                        "-n",
                        Integer.toString(most),
                        "--",
                        path));
        if (a.status != 0) {
            throw new GitException("git can't tell the history of `" + path + "`: " + first(a.error));
        }
        List<Commit> out = new ArrayList<>();
        for (String c : a.text().split("\u0001", -1)) {
            String[] part = c.split("\u0002", -1);
            if (part.length == 5) {
                String name = part[4].replace("\0", "").strip();
                out.add(new Commit(part[0], part[1], part[2], part[3], name.isEmpty() ? path : name));
            }
        }
        return out;
    }

    /**
     * Commits that touched the file of {@code own} or one of the {@code also} paths, newest first; each with the name that the
     * file had then.
     */
    public List<Commit> order(List<Commit> own, java.util.Set<String> also, int most)
            throws GitException, IOException, InterruptedException {
        List<String> arguments = new ArrayList<>(List.of(
                "log",
                "--no-ext-diff",
                "--no-textconv",
                "-z",
                "--format=%x01%H%x02%ad%x02%an%x02%s",
                "--date=short",
                "--topo-order",
                "-n",
                Integer.toString(most),
                "--"));
        java.util.Set<String> paths = new java.util.LinkedHashSet<>(also);
        own.forEach(c -> paths.add(c.path()));
        arguments.addAll(paths);
        Answer a = run(root, arguments);
        if (a.status != 0) {
            throw new GitException("git can't tell the history: " + first(a.error));
        }
        Map<String, Commit> mine = new LinkedHashMap<>();
        own.forEach(c -> mine.put(c.id(), c));
        List<Commit> out = new ArrayList<>();
        String path = own.get(0).path();
        for (String c : a.text().split("\u0001", -1)) {
            String[] part = c.split("\u0002", -1);
            if (part.length == 4) {
                Commit known = mine.get(part[0]);
                path = known == null ? path : known.path();
                out.add(new Commit(
                        part[0], part[1], part[2], part[3].replace("\0", "").strip(), path));
            }
        }
        // what lies before the first commit of the file itself tells nothing about it
        String eldest = own.get(own.size() - 1).id();
        while (!out.isEmpty()
                && !out.get(out.size() - 1).id().equals(eldest)
                && mine.containsKey(eldest)
                && out.stream().anyMatch(x -> x.id().equals(eldest))) {
            out.remove(out.size() - 1);
        }
        return out;
    }

    /** Reads texts of objects, one process for all of them. */
    public Reader reader() throws IOException {
        return new Reader(start(root, List.of("cat-file", "--batch")));
    }

    /** Contents by object name. */
    public static final class Reader implements AutoCloseable {
        private final Process process;
        private final DataInputStream in;
        private final OutputStream out;

        private Reader(Process process) {
            this.process = process;
            this.in = new DataInputStream(new java.io.BufferedInputStream(process.getInputStream()));
            this.out = process.getOutputStream();
        }

        /** The bytes of an object, null where it is missing or larger than {@link #LARGEST}. */
        public synchronized byte @Nullable [] read(String id) throws IOException {
            out.write((id + "\n").getBytes(StandardCharsets.US_ASCII));
            out.flush();
            String[] head = line().split(" ", -1);
            if (head.length < 3) {
                return null; // "ID missing"
            }
            long size = Long.parseLong(head[2]);
            if (size > LARGEST) {
                in.skipNBytes(size + 1);
                return null;
            }
            byte[] bytes = new byte[(int) size];
            in.readFully(bytes);
            in.skipNBytes(1);
            return bytes;
        }

        private String line() throws IOException {
            ByteArrayOutputStream b = new ByteArrayOutputStream();
            int c = in.read();
            while (c >= 0 && c != '\n') {
                b.write(c);
                c = in.read();
            }
            return b.toString(StandardCharsets.UTF_8);
        }

        @Override
        public void close() throws IOException {
            out.close();
            process.destroy();
        }
    }

    // ---- running

    private record Answer(int status, byte[] out, String error) {
        String text() {
            return new String(out, StandardCharsets.UTF_8);
        }
    }

    private static String first(String error) {
        return error.lines().findFirst().orElse("no reason given");
    }

    private static Answer run(Path folder, List<String> arguments)
            throws GitException, IOException, InterruptedException {
        Process p = start(folder, arguments);
        p.getOutputStream().close();
        ByteArrayOutputStream error = new ByteArrayOutputStream();
        Thread t = new Thread(() -> {
            try (InputStream e = p.getErrorStream()) {
                e.transferTo(error);
            } catch (IOException gone) {
                // what it wrote so far is enough
            }
        });
        t.setDaemon(true);
        t.start();
        byte[] out = p.getInputStream().readAllBytes();
        int status = p.waitFor();
        t.join(1000);
        return new Answer(status, out, error.toString(StandardCharsets.UTF_8));
    }

    private static Process start(Path folder, List<String> arguments) throws IOException {
        List<String> command = new ArrayList<>(Arrays.asList(
                "git",
                "--no-pager",
                "--no-optional-locks",
                "--literal-pathspecs",
                "-c",
                "core.hooksPath=/dev/null",
                "-c",
                "core.fsmonitor=false",
                "-c",
                "core.quotePath=false",
                "-c",
                "log.showSignature=false",
                "-c",
                "log.mailmap=false",
                "-c",
                "diff.renames=true"));
        command.addAll(arguments);
        ProcessBuilder b = new ProcessBuilder(command);
        b.directory(folder.toFile());
        Map<String, String> env = b.environment();
        env.keySet().removeIf(k -> k.startsWith("GIT_"));
        env.put("GIT_OPTIONAL_LOCKS", "0");
        env.put("GIT_TERMINAL_PROMPT", "0");
        env.put("GIT_NO_LAZY_FETCH", "1");
        env.put("GIT_PAGER", "cat");
        env.put("LC_ALL", "C.UTF-8");
        try {
            return b.start();
        } catch (IOException e) {
            throw new IOException("git can't be started; comparing revisions needs it (" + e.getMessage() + ")", e);
        }
    }
}
