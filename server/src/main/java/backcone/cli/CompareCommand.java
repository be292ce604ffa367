package backcone.cli;

import backcone.engine.answers.State;
import backcone.engine.review.Comparison;
import backcone.engine.review.Comparison.DriveChange;
import backcone.engine.review.Comparison.Fate;
import backcone.git.Git;
import backcone.git.GitException;
import java.io.IOException;
import java.io.PrintWriter;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.LocalDate;
import java.time.format.DateTimeParseException;
import java.util.ArrayList;
import java.util.List;
import java.util.function.Predicate;
import org.jspecify.annotations.Nullable;

/** {@code backcone compare}: which margins moved between two states, and which edit moved each. */
final class CompareCommand implements Command {
    private static final Usage USAGE = new Usage(
            "compare",
            "Compares two states: what changed, which margins moved, and which edit moved each of them.",
            List.of(
                    new Usage.Operand(
                            "OLD..NEW",
                            "two git revisions; OLD alone means OLD against the files as they are; or two files, or two folders",
                            true,
                            false),
                    new Usage.Operand("PATH", "only these specs or folders", false, true)),
            List.of(
                    Usage.Option.oneOf(
                            "--format",
                            "FORMAT",
                            "text, markdown or json; text unless said",
                            "text",
                            "markdown",
                            "json"),
                    Usage.Option.oneOf(
                            "--fail-on",
                            "WHAT",
                            "exit status 1 when something became short, outside or open (short), when some margin became"
                                    + " smaller (worse), or when some bar was lowered (weakened)",
                            "short",
                            "worse",
                            "weakened"),
                    Usage.Option.value("--on", "DATE", "judge acceptances as of this day; today unless said")),
            List.of(
                    "OLD...NEW starts from where the two parted. A move is shared out among edits by the average over all"
                            + " orders in which they could have been made, so the shares add up to the move.",
                    "Nothing of the repository is run and nothing in it is changed.",
                    "Exit status: 0 compared; 1 with --fail-on, it is so; 2 something can't be read; 64 wrong usage."),
            List.of(
                    "backcone compare main..HEAD                      what a branch does to margins",
                    "backcone compare HEAD                            what is not committed yet",
                    "backcone compare old.drive new.drive             two files",
                    "backcone compare --format markdown main...HEAD   for a review page"));

    @Override
    public Usage usage() {
        return USAGE;
    }

    @Override
    public int run(Arguments arguments, PrintWriter out, PrintWriter err)
            throws WrongUsage, IOException, InterruptedException {
        LocalDate day = day(arguments.value("--on"));
        Compared c;
        try {
            c = compared(arguments.operands(), day);
        } catch (GitException e) {
            err.println("backcone: " + e.getMessage() + ".");
            return Status.WRONG_TEXT;
        }
        switch (arguments.value("--format", "text")) {
            case "json" -> new CompareJson(out).write(c);
            case "markdown" -> new CompareReport(c, out, true).write();
            default -> new CompareReport(c, out, false).write();
        }
        String fail = arguments.value("--fail-on");
        return fail != null && fails(c, fail) ? Status.NOT_MET : Status.FINE;
    }

    static LocalDate day(@Nullable String text) throws WrongUsage {
        if (text == null) {
            return Today.day();
        }
        try {
            return LocalDate.parse(text);
        } catch (DateTimeParseException e) {
            throw new WrongUsage(USAGE, "`" + text + "` is no date; write it as 2027-06-30.");
        }
    }

    private static Compared compared(List<String> words, LocalDate day)
            throws GitException, IOException, InterruptedException {
        String first = words.get(0);
        Path a = FileSet.path(first);
        Path b = words.size() == 2 ? FileSet.path(words.get(1)) : null;
        if (a != null && b != null && Files.isDirectory(a) && Files.isDirectory(b)) {
            return Compared.of(Snapshot.folder(a, first), Snapshot.folder(b, words.get(1)), f -> true, day);
        }
        if (a != null && b != null && Files.isRegularFile(a) && Files.isRegularFile(b)) {
            return Compared.pair(a, b, first, words.get(1), day);
        }
        Git git = Git.at(Path.of("").toAbsolutePath());
        try (Git.Reader old = git.reader();
                Git.Reader now = git.reader()) {
            String from = first;
            String to = null;
            int dots = first.indexOf("..");
            if (dots >= 0) {
                boolean parted = first.startsWith("...", dots);
                from = first.substring(0, dots);
                to = first.substring(dots + (parted ? 3 : 2));
                from = from.isEmpty() ? "HEAD" : from;
                to = to.isEmpty() ? "HEAD" : to;
                if (parted) {
                    from = git.mergeBase(from, to);
                }
            }
            Snapshot before = Snapshot.revision(git, from, old);
            Snapshot after =
                    to == null ? Snapshot.folder(git.root(), "the files as they are") : Snapshot.revision(git, to, now);
            return Compared.of(before, after, wanted(git.root(), words.subList(1, words.size())), day);
        }
    }

    private static Predicate<String> wanted(Path root, List<String> paths) throws GitException {
        if (paths.isEmpty()) {
            return f -> true;
        }
        List<String> prefixes = new ArrayList<>();
        Path here = Path.of("").toAbsolutePath().normalize();
        Path top = real(root);
        for (String p : paths) {
            Path typed = FileSet.path(p);
            if (typed == null) {
                throw new GitException("`" + p + "` is no path");
            }
            Path whole = real(here).resolve(typed).normalize();
            if (!whole.startsWith(top)) {
                throw new GitException("`" + p + "` lies outside the repository `" + root + "`");
            }
            prefixes.add(top.relativize(whole).toString().replace('\\', '/'));
        }
        return f -> prefixes.stream().anyMatch(p -> p.isEmpty() || f.equals(p) || f.startsWith(p + "/"));
    }

    private static Path real(Path p) {
        try {
            return p.toRealPath();
        } catch (IOException e) {
            return p.toAbsolutePath().normalize();
        }
    }

    static boolean fails(Compared c, String what) {
        for (Comparison s : c.specs) {
            for (DriveChange d : s.drives()) {
                boolean yes = switch (what) {
                    case "short" ->
                        d.fate() != Fate.REMOVED
                                && d.states().stream().anyMatch(x -> unmet(x.after()) && !unmet(x.before()));
                    case "worse" ->
                        d.moved().stream().anyMatch(m -> m.after() < m.before() - 1e-9)
                                || d.states().stream().anyMatch(x -> unmet(x.after()) && !unmet(x.before()));
                    default -> !d.lowered().isEmpty();
                };
                if (yes) {
                    return true;
                }
            }
        }
        return false;
    }

    private static boolean unmet(@Nullable State s) {
        return s != null && !s.isMet();
    }
}
