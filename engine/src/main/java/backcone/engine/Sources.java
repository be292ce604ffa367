package backcone.engine;

import backcone.engine.diagnostics.Code;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.graph.DriveGraph;
import backcone.engine.syntax.Entry;
import backcone.engine.syntax.Name;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import java.util.ArrayList;
import java.util.Collection;
import java.util.HashMap;
import java.util.LinkedHashMap;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;
import java.util.function.Function;
import org.jspecify.annotations.Nullable;

/** The texts around one file: what it uses, and what its top-level names mean. */
final class Sources implements DriveGraph.Top {
    private final SourceText main;
    private final Function<FileId, Object> load;
    private final Map<FileId, SourceText> used = new LinkedHashMap<>();
    private final Map<String, DriveGraph.TopEntry> names = new LinkedHashMap<>();
    private final Map<String, DriveGraph.TopEntry> further = new HashMap<>();
    private final List<Diagnostic> problems = new ArrayList<>();
    private final List<SourceText> methodFiles = new ArrayList<>();

    /** {@code load} gives a {@link SourceText} or a {@link Loader.Loaded} that tells why there is none. */
    Sources(SourceText main, Function<FileId, Object> load) {
        this.main = main;
        this.load = load;
        own(main);
        for (Entry e : main.tree().entries()) {
            if (e instanceof Entry.Use u) {
                use(u);
            }
        }
    }

    private void own(SourceText t) {
        for (Entry e : t.tree().entries()) {
            Name n = nameOf(e);
            if (n == null || n.isHole()) {
                continue;
            }
            DriveGraph.TopEntry old = names.putIfAbsent(n.text(), new DriveGraph.TopEntry(t.file(), e, Map.of()));
            if (old != null) {
                problems.add(Diagnostic.of(
                                Code.DUPLICATE_NAME,
                                t.file(),
                                n.span(),
                                "`" + n + "` is there already; give one of the two another name.")
                        .withRelated(old.file(), old.entry().span(), "the other `" + n + "`"));
            }
        }
    }

    static @Nullable Name nameOf(Entry e) {
        if (e instanceof Entry.Block b) {
            return b.name();
        } else if (e instanceof Entry.Let l) {
            return l.name();
        } else if (e instanceof Entry.Drive d) {
            return d.name();
        } else if (e instanceof Entry.Variant v) {
            return v.name();
        } else if (e instanceof Entry.Family f) {
            return f.name();
        }
        return null;
    }

    private void use(Entry.Use u) {
        FileId id = resolve(main.file(), u, problems);
        if (id == null) {
            return;
        }
        if (id.equals(main.file())) {
            problems.add(Diagnostic.of(Code.USE_CYCLE, main.file(), u.pathSpan(), "This file uses itself."));
            return;
        }
        SourceText t = fetch(id, u);
        if (t == null) {
            return;
        }
        cycle(t, u, new ArrayList<>(List.of(main.file())));
        if (id.isMethodFile()) {
            methodFiles.add(t);
            return;
        }
        Map<String, DriveGraph.TopEntry> inside = new LinkedHashMap<>();
        for (Entry e : t.tree().entries()) {
            Name n = nameOf(e);
            if (n != null && !n.isHole()) {
                inside.putIfAbsent(n.text(), new DriveGraph.TopEntry(id, e, Map.of()));
            }
        }
        Name alias = u.alias();
        if (alias != null && !alias.isHole()) {
            put(alias.text(), new DriveGraph.TopEntry(id, u, inside), u, alias.span());
        } else {
            inside.forEach((k, v) -> put(k, v, u, u.pathSpan()));
        }
        // what the used file itself uses is visible to its own entries
        reach(t, new LinkedHashSet<>(Set.of(main.file(), id)));
    }

    private void put(String name, DriveGraph.TopEntry entry, Entry.Use u, Span at) {
        DriveGraph.TopEntry old = names.putIfAbsent(name, entry);
        if (old != null && !old.entry().equals(entry.entry())) {
            problems.add(Diagnostic.of(
                            Code.DUPLICATE_NAME,
                            main.file(),
                            at,
                            "`" + name
                                    + "` of this file is there already; put the file behind a name of its own: `use \""
                                    + u.path() + "\" as lib`.")
                    .withRelated(old.file(), old.entry().span(), "the other `" + name + "`"));
        }
    }

    private void reach(SourceText t, Set<FileId> seen) {
        for (Entry e : t.tree().entries()) {
            if (e instanceof Entry.Use u) {
                FileId id = resolve(t.file(), u, new ArrayList<>());
                if (id == null || !seen.add(id) || seen.size() > 200) {
                    continue;
                }
                Object o = load.apply(id);
                if (o instanceof SourceText next) {
                    used.putIfAbsent(id, next);
                    for (Entry x : next.tree().entries()) {
                        Name n = nameOf(x);
                        if (n != null && !n.isHole()) {
                            further.putIfAbsent(n.text(), new DriveGraph.TopEntry(id, x, Map.of()));
                        }
                    }
                    reach(next, seen);
                }
            }
        }
    }

    private @Nullable SourceText fetch(FileId id, Entry.Use u) {
        Object o = load.apply(id);
        if (o instanceof SourceText t) {
            used.put(id, t);
            return t;
        }
        if (o instanceof Loader.Loaded.Unreadable r) {
            problems.add(Diagnostic.of(
                    Code.FILE_UNREADABLE,
                    main.file(),
                    u.pathSpan(),
                    "`" + u.path() + "` can't be read: " + r.reason() + "."));
        } else {
            problems.add(Diagnostic.of(
                    Code.FILE_NOT_FOUND,
                    main.file(),
                    u.pathSpan(),
                    "There is no file `" + id.path() + "`; the path is taken from the folder of this file."));
        }
        return null;
    }

    private void cycle(SourceText t, Entry.Use u, List<FileId> chain) {
        if (chain.size() > 100) {
            return;
        }
        for (Entry e : t.tree().entries()) {
            if (e instanceof Entry.Use next) {
                FileId id = resolve(t.file(), next, new ArrayList<>());
                if (id == null) {
                    continue;
                }
                if (id.equals(main.file())) {
                    StringBuilder b = new StringBuilder();
                    for (FileId f : chain) {
                        b.append('`').append(f.path()).append("` -> ");
                    }
                    b.append('`')
                            .append(t.file().path())
                            .append("` -> `")
                            .append(main.file().path())
                            .append('`');
                    problems.add(Diagnostic.of(
                            Code.USE_CYCLE,
                            main.file(),
                            u.pathSpan(),
                            "These files use each other: " + b + ". Move what they share to a file of its own."));
                    return;
                }
                if (!chain.contains(id) && !id.equals(t.file()) && load.apply(id) instanceof SourceText n) {
                    List<FileId> longer = new ArrayList<>(chain);
                    longer.add(t.file());
                    cycle(n, u, longer);
                }
            }
        }
    }

    /** A path relative to the folder of {@code from}; null (with a finding) when it leaves the opened folder. */
    static @Nullable FileId resolve(FileId from, Entry.Use u, List<Diagnostic> problems) {
        String path = u.path().replace('\\', '/');
        if (path.isBlank()) {
            problems.add(
                    Diagnostic.of(Code.FILE_NOT_FOUND, from, u.pathSpan(), "The path of the used file is missing."));
            return null;
        }
        List<String> parts = new ArrayList<>();
        if (path.startsWith("/") || path.matches("[A-Za-z]:.*")) {
            problems.add(Diagnostic.of(
                    Code.FILE_OUTSIDE,
                    from,
                    u.pathSpan(),
                    "A path is relative to the folder of this file; `" + u.path() + "` is not."));
            return null;
        }
        String[] base = from.path().split("/");
        for (int i = 0; i < base.length - 1; i++) {
            parts.add(base[i]);
        }
        for (String p : path.split("/")) {
            if (p.isEmpty() || p.equals(".")) {
                continue;
            }
            if (p.equals("..")) {
                if (parts.isEmpty()) {
                    problems.add(
                            Diagnostic.of(
                                    Code.FILE_OUTSIDE,
                                    from,
                                    u.pathSpan(),
                                    "`" + u.path()
                                            + "` lies outside the opened folder; copy the file into it, or open a folder that holds both."));
                    return null;
                }
                parts.remove(parts.size() - 1);
            } else {
                parts.add(p);
            }
        }
        return new FileId(String.join("/", parts));
    }

    List<Diagnostic> problems() {
        return problems;
    }

    List<SourceText> methodFiles() {
        return methodFiles;
    }

    SourceText main() {
        return main;
    }

    /** The drive, variant or family of that name, here or in a used file. */
    DriveGraph.@Nullable TopEntry entry(String name) {
        DriveGraph.TopEntry e = names.get(name);
        return e != null ? e : further.get(name);
    }

    @Override
    public DriveGraph.@Nullable TopEntry find(String name) {
        return entry(name);
    }

    @Override
    public Collection<String> names() {
        return names.keySet();
    }

    @Override
    public String text(FileId file, Span span) {
        String t = textOf(file);
        return t == null || span.end() > t.length() ? "…" : t.substring(span.start(), span.end());
    }

    @Nullable
    String textOf(FileId file) {
        if (file.equals(main.file())) {
            return main.text();
        }
        SourceText t = used.get(file);
        return t != null ? t.text() : Handbook.text(file);
    }
}
