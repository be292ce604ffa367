package backcone.cli;

import backcone.engine.BackconeEngine;
import backcone.engine.Loader;
import backcone.engine.review.Comparison;
import backcone.engine.review.TreeDiff;
import backcone.engine.text.FileId;
import java.time.LocalDate;
import java.util.ArrayDeque;
import java.util.ArrayList;
import java.util.Deque;
import java.util.HashMap;
import java.util.LinkedHashMap;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;
import java.util.TreeMap;
import java.util.TreeSet;
import java.util.function.Predicate;
import org.jspecify.annotations.Nullable;

/** Two states of a folder, spec by spec: those whose text changed, and those that use a text that changed. */
final class Compared {
    final String before;
    final String after;
    final List<Comparison> specs;
    /** Libraries and method files that changed and that no compared spec uses. */
    final List<String> unused;

    private Compared(String before, String after, List<Comparison> specs, List<String> unused) {
        this.before = before;
        this.after = after;
        this.specs = specs;
        this.unused = unused;
    }

    /** {@code wanted} picks specs by their paths in either state. */
    static Compared of(Snapshot before, Snapshot after, Predicate<String> wanted, LocalDate today) {
        Set<String> all = new TreeSet<>(before.files());
        all.addAll(after.files());
        Set<String> changed = new TreeSet<>();
        for (String f : all) {
            if (!before.files().contains(f)
                    || !after.files().contains(f)
                    || !before.version(f).equals(after.version(f))) {
                changed.add(f);
            }
        }
        Map<String, String> former = renames(before, after, changed);
        BackconeEngine old = BackconeEngine.create(before, today);
        BackconeEngine now = BackconeEngine.create(after, today);
        Set<String> specs = new TreeSet<>();
        if (!changed.isEmpty()) {
            specs.addAll(dependents(after, changed));
            for (String f : dependents(before, changed)) {
                if (!after.files().contains(f) && !former.containsValue(f)) {
                    specs.add(f);
                } else if (after.files().contains(f)) {
                    specs.add(f);
                }
            }
        }
        List<Comparison> out = new ArrayList<>();
        Set<String> seen = new LinkedHashSet<>();
        for (String f : specs) {
            if (f.endsWith(".method") || former.containsValue(f)) {
                continue;
            }
            String was = former.getOrDefault(f, f);
            if (!wanted.test(f) && !wanted.test(was)) {
                continue;
            }
            FileId oldId = before.files().contains(was) ? new FileId(was) : null;
            FileId newId = after.files().contains(f) ? new FileId(f) : null;
            Comparison c = now.compare(old, oldId, newId);
            if (!c.drives().isEmpty() || !c.remarks().isEmpty()) {
                out.add(c);
                c.edits().forEach(e -> seen.add(e.file().path()));
            }
            seen.add(f);
            if (!c.drives().isEmpty()) {
                now.forget(new FileId(f));
                old.forget(new FileId(was));
            }
        }
        List<String> unused = new ArrayList<>();
        for (String f : changed) {
            boolean told = out.stream()
                    .anyMatch(c -> (c.after() != null && c.after().path().equals(f))
                            || (c.before() != null && c.before().path().equals(f))
                            || c.edits().stream().anyMatch(e -> e.file().path().equals(f)));
            if (!told && wanted.test(f) && !former.containsValue(f)) {
                unused.add(f);
            }
        }
        return new Compared(before.label(), after.label(), out, unused);
    }

    /** Two files, each with what it uses beside it. */
    static Compared pair(java.nio.file.Path a, java.nio.file.Path b, String oldName, String newName, LocalDate today) {
        DiskLoader left = new DiskLoader(FileSet.root(List.of(a.toAbsolutePath().normalize())));
        DiskLoader right =
                new DiskLoader(FileSet.root(List.of(b.toAbsolutePath().normalize())));
        Comparison c = BackconeEngine.create(right, today)
                .compare(BackconeEngine.create(left, today), left.id(a), right.id(b));
        return new Compared(oldName, newName, List.of(c), List.of());
    }

    /** Former path by present path. The same bytes first, then texts of which half the lines are the same. */
    private static Map<String, String> renames(Snapshot before, Snapshot after, Set<String> changed) {
        List<String> gone = new ArrayList<>();
        List<String> come = new ArrayList<>();
        for (String f : changed) {
            if (!after.files().contains(f)) {
                gone.add(f);
            } else if (!before.files().contains(f)) {
                come.add(f);
            }
        }
        Map<String, String> out = new LinkedHashMap<>();
        if (gone.isEmpty() || come.isEmpty() || (long) gone.size() * come.size() > 40_000) {
            return out;
        }
        Map<String, List<String>> lines = new HashMap<>();
        for (String g : gone) {
            lines.put(g, lines(before, g));
        }
        for (String c : come) {
            List<String> mine = lines(after, c);
            String best = null;
            double most = 0.5;
            for (String g : gone) {
                if (out.containsValue(g) || !ending(g).equals(ending(c))) {
                    continue;
                }
                double s = before.version(g).equals(after.version(c))
                        ? 2
                        : TreeDiff.alike(java.util.Objects.requireNonNull(lines.get(g)), mine);
                if (s > most) {
                    most = s;
                    best = g;
                }
            }
            if (best != null) {
                out.put(c, best);
            }
        }
        return out;
    }

    private static String ending(String path) {
        return path.substring(path.lastIndexOf('.'));
    }

    private static List<String> lines(Snapshot s, String file) {
        return text(s, file)
                .lines()
                .map(String::strip)
                .filter(l -> !l.isEmpty())
                .toList();
    }

    private static String text(Snapshot s, String file) {
        return s.load(new FileId(file)) instanceof Loader.Loaded.Text t ? t.text() : "";
    }

    /** The changed files and all that use them, directly or through others. */
    private static Set<String> dependents(Snapshot s, Set<String> changed) {
        Map<String, List<String>> users = new TreeMap<>();
        for (String f : s.files()) {
            for (String u : uses(f, text(s, f))) {
                users.computeIfAbsent(u, k -> new ArrayList<>()).add(f);
            }
        }
        Set<String> out = new LinkedHashSet<>();
        Deque<String> todo = new ArrayDeque<>(changed);
        while (!todo.isEmpty()) {
            String f = todo.remove();
            if (s.files().contains(f) && out.add(f) || !s.files().contains(f)) {
                for (String u : users.getOrDefault(f, List.of())) {
                    if (!out.contains(u)) {
                        todo.add(u);
                    }
                }
            }
        }
        return out;
    }

    /** Paths that a text uses, from the root; found by its lines, since a text that does not parse counts, too. */
    private static List<String> uses(String file, String text) {
        List<String> out = new ArrayList<>();
        int at = text.indexOf("use");
        while (at >= 0) {
            int q = text.indexOf('"', at);
            int end = q < 0 ? -1 : text.indexOf('"', q + 1);
            if (q > 0 && end > 0 && text.substring(at + 3, q).isBlank()) {
                String path = resolve(file, text.substring(q + 1, end));
                if (path != null) {
                    out.add(path);
                }
            }
            at = text.indexOf("use", at + 3);
        }
        return out;
    }

    private static @Nullable String resolve(String file, String path) {
        List<String> parts = new ArrayList<>(List.of(file.split("/", -1)));
        parts.remove(parts.size() - 1);
        for (String p : path.split("/", -1)) {
            if (p.equals("..")) {
                if (parts.isEmpty()) {
                    return null;
                }
                parts.remove(parts.size() - 1);
            } else if (!p.equals(".") && !p.isEmpty()) {
                parts.add(p);
            }
        }
        return String.join("/", parts);
    }
}
