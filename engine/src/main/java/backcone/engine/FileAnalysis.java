package backcone.engine;

import backcone.engine.answers.DriveAnswer;
import backcone.engine.answers.Examples;
import backcone.engine.answers.Explanation;
import backcone.engine.diagnostics.Code;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.editing.Scene;
import backcone.engine.explain.Explainer;
import backcone.engine.graph.Checker;
import backcone.engine.graph.DriveBuilder;
import backcone.engine.graph.DriveGraph;
import backcone.engine.graph.DriveSource;
import backcone.engine.graph.Problems;
import backcone.engine.graph.Shapes;
import backcone.engine.model.EntryNames;
import backcone.engine.model.LibraryBuilder;
import backcone.engine.review.DriveReview;
import backcone.engine.review.Reviewer;
import backcone.engine.syntax.Entry;
import backcone.engine.syntax.FileSyntax;
import backcone.engine.syntax.Name;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import backcone.engine.units.Numbers;
import java.time.LocalDate;
import java.util.ArrayList;
import java.util.Comparator;
import java.util.LinkedHashMap;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.Set;
import java.util.function.Function;
import org.jspecify.annotations.Nullable;

/** The analysis of one file. Findings and drives are computed when it is made; explanations when asked for. */
final class FileAnalysis implements Analysis {
    private final SourceText main;
    private final @Nullable Sources sources;
    private final Shapes shapes;
    private final List<Diagnostic> diagnostics;
    private final List<DriveAnswer> drives;
    private final Map<String, DriveSource> byName;
    private final Map<String, Built> built;
    private final List<Diagnostic> ofBlocks;
    private @Nullable Scene scene;

    /** The analysis of the text before, as long as its scene may be wanted, and the entries that differ. */
    private @Nullable FileAnalysis earlier;

    private @Nullable Set<Integer> since;

    private FileAnalysis(
            SourceText main,
            @Nullable Sources sources,
            Shapes shapes,
            List<Diagnostic> diagnostics,
            List<DriveAnswer> drives,
            Map<String, DriveSource> byName,
            Map<String, Built> built,
            List<Diagnostic> ofBlocks) {
        this.main = main;
        this.sources = sources;
        this.shapes = shapes;
        this.diagnostics = diagnostics;
        this.drives = drives;
        this.byName = byName;
        this.built = built;
        this.ofBlocks = ofBlocks;
    }

    static FileAnalysis unreadable(FileId file, Loader.Loaded why) {
        Diagnostic d = why instanceof Loader.Loaded.Unreadable u
                ? Diagnostic.of(
                        Code.FILE_UNREADABLE,
                        file,
                        Span.NONE,
                        "`" + file.path() + "` can't be read: " + u.reason() + ".")
                : Diagnostic.of(Code.FILE_NOT_FOUND, file, Span.NONE, "There is no file `" + file.path() + "`.");
        SourceText none = new SourceText(file, "", BackconeEngine.empty(), List.of());
        return new FileAnalysis(
                none,
                null,
                Handbook.forMethods(Set.of()).shapes(),
                List.of(d),
                List.of(),
                Map.of(),
                Map.of(),
                List.of());
    }

    /** With as much of the handbook as this text asks for. */
    static FileAnalysis of(SourceText main, Function<FileId, Object> load, LocalDate today) {
        return of(main, load, null, today, null, false);
    }

    static FileAnalysis of(SourceText main, Function<FileId, Object> load, Handbook handbook, LocalDate today) {
        return of(main, load, handbook, today, null, false);
    }

    /**
     * {@code before}: what was found out about an earlier text of this file; what still holds is taken from there. {@code
     * editing}: what editors show beside the text is computed too.
     */
    static FileAnalysis of(
            SourceText main,
            Function<FileId, Object> load,
            @Nullable Handbook handbook,
            LocalDate today,
            @Nullable FileAnalysis before,
            boolean editing) {
        if (main.file().isMethodFile()) {
            return methodFile(main, handbook == null ? Handbook.standard() : handbook);
        }
        Sources sources = new Sources(main, load);
        List<Diagnostic> found = new ArrayList<>(main.problems());
        found.addAll(sources.problems());
        boolean sameFiles =
                before != null && before.sources != null && sameTexts(before.sources.used(), sources.used());
        Shapes shapes = sameFiles
                ? java.util.Objects.requireNonNull(before).shapes
                : shapes(sources, handbook == null ? handbook(sources) : handbook);
        Set<Integer> changed = sameFiles ? changed(java.util.Objects.requireNonNull(before).main, main) : null;
        FileAnalysis kept = changed == null ? null : before;
        Problems own = new Problems();
        misplaced(main, own);
        Map<String, DriveSource> byName = new LinkedHashMap<>();
        driveSources(sources, main, own, byName);
        List<Diagnostic> ofBlocks = blocks(main, sources, shapes, kept);
        ofBlocks.forEach(own::add);
        Map<String, Built> built = new LinkedHashMap<>();
        List<DriveAnswer> answers = new ArrayList<>();
        for (DriveSource s : byName.values()) {
            Built b = kept == null ? null : kept.again(s, main, java.util.Objects.requireNonNull(changed), today);
            if (b == null) {
                b = Built.of(s, main, sources, shapes, today, editing);
            }
            built.put(s.name(), b);
            Moved moved = b.moved(main);
            answers.add(moved.answer(b.answer));
            boolean derived = s.layers().size() > 1;
            for (Diagnostic d : moved.diagnostics(b.found)) {
                own.add(
                        derived
                                ? new Diagnostic(
                                        d.code(),
                                        d.severity(),
                                        d.file(),
                                        d.span(),
                                        "In `" + s.name() + "`: " + d.message(),
                                        d.related(),
                                        d.fixes())
                                : d);
            }
        }
        found.addAll(own.all());
        FileAnalysis a = new FileAnalysis(main, sources, shapes, sorted(found, main), answers, byName, built, ofBlocks);
        if (kept != null) {
            a.follow(kept, java.util.Objects.requireNonNull(changed));
        }
        return a;
    }

    private static boolean sameTexts(Map<FileId, SourceText> a, Map<FileId, SourceText> b) {
        if (!a.keySet().equals(b.keySet())) {
            return false;
        }
        for (Map.Entry<FileId, SourceText> e : a.entrySet()) {
            if (b.get(e.getKey()) != e.getValue()) {
                return false;
            }
        }
        return true;
    }

    /**
     * The drives, variants and families at the top of the file whose text has changed; null where more has changed than the
     * insides of those.
     */
    private static @Nullable Set<Integer> changed(SourceText before, SourceText now) {
        List<Entry> a = before.tree().entries();
        List<Entry> b = now.tree().entries();
        if (a.size() != b.size()) {
            return null;
        }
        Set<Integer> out = new java.util.HashSet<>();
        for (int i = 0; i < a.size(); i++) {
            Entry x = a.get(i);
            Entry y = b.get(i);
            Name n = Sources.nameOf(x);
            Name m = Sources.nameOf(y);
            if (x.getClass() != y.getClass()
                    || !(n == null ? m == null : m != null && n.text().equals(m.text()))) {
                return null;
            }
            if (x.span().length() == y.span().length()
                    && before.text()
                            .regionMatches(
                                    x.span().start(),
                                    now.text(),
                                    y.span().start(),
                                    x.span().length())) {
                continue;
            }
            if (!(x instanceof Entry.Drive || x instanceof Entry.Variant || x instanceof Entry.Family)) {
                return null;
            }
            out.add(i);
        }
        return out;
    }

    /** Remembers the text before, or what that one remembers where nobody has asked it anything. */
    private void follow(FileAnalysis before, Set<Integer> changed) {
        synchronized (before) {
            if (before.scene != null) {
                earlier = before;
                since = changed;
            } else if (before.earlier != null && before.since != null) {
                earlier = before.earlier;
                Set<Integer> both = new java.util.HashSet<>(before.since);
                both.addAll(changed);
                since = both;
            }
            before.earlier = null;
        }
    }

    /** What is built of a drive already, if it still holds or holds with another number. */
    private @Nullable Built again(DriveSource s, SourceText now, Set<Integer> changed, LocalDate today) {
        Built b = built.get(s.name());
        if (b == null || b.source.layers().size() != s.layers().size()) {
            return null;
        }
        List<Entry> entries = now.tree().entries();
        int touched = -1;
        for (int i : changed) {
            Entry e = entries.get(i);
            Name n = Sources.nameOf(e);
            boolean concerned =
                    n != null && (s.name().equals(n.text()) || s.name().startsWith(n.text() + "."));
            for (DriveSource.Layer l : s.layers()) {
                List<Entry> body =
                        e instanceof Entry.Drive d ? d.body() : e instanceof Entry.Variant v ? v.body() : null;
                concerned |= body != null && l.body() == body;
            }
            if (concerned) {
                if (touched >= 0) {
                    return null;
                }
                touched = i;
            }
        }
        if (touched < 0) {
            return b;
        }
        return entries.get(touched) instanceof Entry.Drive ? b.withNumber(touched, now, today) : null;
    }

    /** Findings about the blocks and names at the top of the file. */
    private static List<Diagnostic> blocks(
            SourceText main, Sources sources, Shapes shapes, @Nullable FileAnalysis kept) {
        if (kept != null) {
            List<Diagnostic> moved = new Moved(
                            main.file(), kept.main.tree().entries(), main.tree().entries(), null, 0)
                    .diagnostics(kept.ofBlocks);
            return moved;
        }
        Problems own = new Problems();
        List<String> blocks = new ArrayList<>();
        for (Entry e : main.tree().entries()) {
            if (e instanceof Entry.Block b) {
                if (b.name() == null || b.name().isHole()) {
                    own.add(
                            Code.WRONG_PLACE,
                            main.file(),
                            b.head().span(),
                            "A block at the top of a file has a name: `" + b.head() + " NAME { … }`.");
                } else if (!shapes.library().kinds.containsKey(b.head().text())) {
                    own.add(
                            Code.UNKNOWN_KIND,
                            main.file(),
                            b.head().span(),
                            "There is no kind of block `" + b.head() + "`."
                                    + backcone.engine.model.Suggest.sentence(
                                            b.head().text(),
                                            shapes.library().kinds.keySet()));
                } else {
                    blocks.add(b.name().text());
                }
            } else if (e instanceof Entry.Let l && !l.name().isHole()) {
                blocks.add(l.name().text());
            }
        }
        if (!blocks.isEmpty()) {
            DriveBuilder.library(shapes, sources, main.file(), blocks, own);
        }
        return List.copyOf(own.all());
    }

    /** The part of the handbook that these texts speak of. */
    private static Handbook handbook(Sources sources) {
        if (!sources.methodFiles().isEmpty()) {
            return Handbook.standard(); // they may build on any method
        }
        Set<String> methods = new java.util.TreeSet<>();
        methods(sources.main().tree().entries(), methods);
        for (SourceText t : sources.used().values()) {
            methods(t.tree().entries(), methods);
        }
        return Handbook.forMethods(methods);
    }

    private static void methods(List<Entry> entries, Set<String> out) {
        for (Entry e : entries) {
            if (e instanceof Entry.Rate r) {
                out.add(r.method().text());
            } else if (e instanceof Entry.Drive d) {
                methods(d.body(), out);
            } else if (e instanceof Entry.Variant v) {
                methods(v.body(), out);
            }
        }
    }

    /** The handbook with the method files that a spec uses. */
    static Shapes shapes(Sources sources, Handbook handbook) {
        Shapes shapes = handbook.shapes();
        if (!sources.methodFiles().isEmpty()) {
            LibraryBuilder b = new LibraryBuilder(shapes.library());
            for (SourceText t : sources.methodFiles()) {
                b.add(t.file(), t.tree());
            }
            shapes = new Shapes(b.build().library());
        }
        return shapes;
    }

    @Override
    public List<DriveReview> reviews() {
        Sources src = sources;
        List<DriveReview> out = new ArrayList<>();
        if (src == null) {
            return out;
        }
        for (DriveAnswer d : drives) {
            DriveSource s = java.util.Objects.requireNonNull(byName.get(d.name()));
            List<DriveGraph> graphs = new ArrayList<>();
            for (String c : DriveBuilder.casesInUse(s)) {
                graphs.add(DriveBuilder.build(shapes, src, s, c, new Problems(), false));
            }
            out.add(Reviewer.review(d, graphs, src::textOf));
        }
        return out;
    }

    /** The drives, variants and families that a drive is laid over, by name; empty where there is no such drive. */
    List<String> layersOf(String name) {
        List<String> out = new ArrayList<>();
        DriveSource s = byName.get(name);
        Sources src = sources;
        if (s == null || src == null) {
            return out;
        }
        for (DriveSource.Layer l : s.layers()) {
            for (Entry e : java.util.Objects.requireNonNull(texts().get(l.file()))
                    .tree()
                    .entries()) {
                List<Entry> body =
                        e instanceof Entry.Drive d ? d.body() : e instanceof Entry.Variant v ? v.body() : null;
                Name n = Sources.nameOf(e);
                if (body == l.body() && n != null) {
                    out.add(n.text());
                }
            }
        }
        return out;
    }

    /** The text of a drive with all that it is laid over. */
    String textOfDrive(String name) {
        StringBuilder b = new StringBuilder();
        for (SourceText t : texts().values()) {
            for (Entry e : t.tree().entries()) {
                Name n = Sources.nameOf(e);
                if (n != null && n.text().equals(name)) {
                    b.append(t.text(), e.span().start(), e.span().end()).append('\n');
                }
            }
        }
        return b.toString();
    }

    /** The value of a fact directly in a drive, as written; null when it is not given. */
    @Nullable
    String factText(String drive, String fact) {
        DriveSource s = byName.get(drive);
        Sources src = sources;
        if (s == null || src == null) {
            return null;
        }
        String out = null;
        for (DriveSource.Layer l : s.layers()) {
            for (Entry e : l.body()) {
                if (e instanceof Entry.Fact f && f.path().text().equals(fact)) {
                    out = src.text(l.file(), f.value().span());
                }
            }
        }
        return out;
    }

    /** The texts this one rests on, itself included, by name. */
    Map<FileId, SourceText> texts() {
        Map<FileId, SourceText> out = new LinkedHashMap<>();
        out.put(main.file(), main);
        Sources src = sources;
        if (src != null) {
            out.putAll(src.used());
        }
        return out;
    }

    /** Findings of this file by place; those in used files are said there. */
    private static List<Diagnostic> sorted(List<Diagnostic> found, SourceText main) {
        List<Diagnostic> out = new ArrayList<>();
        List<Span> syntax = new ArrayList<>();
        for (Diagnostic d : main.problems()) {
            syntax.add(d.span());
        }
        for (Diagnostic d : found) {
            if (d.file().equals(main.file())) {
                out.add(d);
            }
        }
        out.sort(Comparator.comparingInt((Diagnostic d) -> d.span().start())
                .thenComparingInt(d -> d.span().end())
                .thenComparing(d -> d.code().id()));
        return List.copyOf(out);
    }

    private static void misplaced(SourceText main, Problems own) {
        for (Entry e : main.tree().entries()) {
            if (e instanceof Entry.Drive
                    || e instanceof Entry.Variant
                    || e instanceof Entry.Family
                    || e instanceof Entry.Block
                    || e instanceof Entry.Let
                    || e instanceof Entry.Use
                    || e instanceof Entry.Bad) {
                continue;
            }
            Span at =
                    new Span(e.span().start(), Math.min(e.span().end(), e.span().start() + 20));
            String why = EntryNames.misplaced(e);
            own.add(
                    Code.WRONG_PLACE,
                    main.file(),
                    at,
                    why != null ? why : "This stands outside any drive; put it inside `drive NAME { … }`.");
        }
    }

    // ---- drives, variants, families

    static void driveSources(Sources sources, SourceText main, Problems own, Map<String, DriveSource> byName) {
        for (Entry e : main.tree().entries()) {
            if (e instanceof Entry.Drive d && !d.name().isHole()) {
                byName.putIfAbsent(
                        d.name().text(),
                        new DriveSource(
                                d.name().text(),
                                d.title(),
                                main.file(),
                                d.span(),
                                List.of(new DriveSource.Layer(main.file(), d.body()))));
            } else if (e instanceof Entry.Variant v && !v.name().isHole()) {
                List<DriveSource.Layer> layers = layers(
                        sources,
                        v.base(),
                        main,
                        own,
                        new LinkedHashSet<>(Set.of(v.name().text())));
                if (layers != null) {
                    layers.add(new DriveSource.Layer(main.file(), v.body()));
                    byName.putIfAbsent(
                            v.name().text(),
                            new DriveSource(v.name().text(), v.title(), main.file(), v.span(), layers));
                }
            } else if (e instanceof Entry.Family f && !f.name().isHole()) {
                family(sources, f, main, own, byName);
            }
        }
    }

    private static @Nullable List<DriveSource.Layer> layers(
            Sources sources, Name base, SourceText main, Problems own, Set<String> seen) {
        if (base.isHole()) {
            return null;
        }
        DriveGraph.TopEntry t = sources.entry(base.text());
        if (t != null && t.entry() instanceof Entry.Drive d) {
            return new ArrayList<>(List.of(new DriveSource.Layer(t.file(), d.body())));
        }
        if (t != null && t.entry() instanceof Entry.Variant v && seen.add(base.text())) {
            List<DriveSource.Layer> below = layers(sources, v.base(), main, own, seen);
            if (below != null) {
                below.add(new DriveSource.Layer(t.file(), v.body()));
            }
            return below;
        }
        own.add(
                Code.UNKNOWN_NAME,
                main.file(),
                base.span(),
                t != null && t.entry() instanceof Entry.Variant
                        ? "These variants are each other's base; one of them must start from a drive."
                        : "There is no drive `" + base + "`."
                                + backcone.engine.model.Suggest.sentence(base.text(), sources.names()));
        return null;
    }

    private static void family(
            Sources sources, Entry.Family f, SourceText main, Problems own, Map<String, DriveSource> byName) {
        List<DriveSource.Layer> base = layers(sources, f.base(), main, own, new LinkedHashSet<>());
        if (base == null || f.rows().isEmpty()) {
            return;
        }
        Entry.Row header = f.rows().get(0);
        for (int r = 1; r < f.rows().size(); r++) {
            Entry.Row row = f.rows().get(r);
            if (row.cells().size() != header.cells().size()) {
                own.add(
                        Code.BAD_TABLE,
                        main.file(),
                        row.span(),
                        "This row has " + row.cells().size() + " cells, the header has "
                                + header.cells().size() + ".");
                continue;
            }
            List<Entry> facts = new ArrayList<>();
            String name = "";
            for (int c = 0; c < row.cells().size(); c++) {
                backcone.engine.syntax.Expr head = first(header.cells().get(c));
                backcone.engine.syntax.Expr cell = first(row.cells().get(c));
                if (c == 0) {
                    name = sources.text(main.file(), cell.span());
                } else if (head instanceof backcone.engine.syntax.Expr.Path p) {
                    facts.add(new Entry.Fact(p, cell, List.of(), cell.span()));
                } else {
                    own.add(
                            Code.BAD_TABLE,
                            main.file(),
                            head.span(),
                            "A column of a family is the path of a fact, for example `head.outer_module`.");
                }
            }
            List<DriveSource.Layer> layers = new ArrayList<>(base);
            layers.add(new DriveSource.Layer(main.file(), facts));
            String full = f.name().text() + "." + name;
            byName.putIfAbsent(full, new DriveSource(full, f.title(), main.file(), row.span(), layers));
        }
    }

    private static backcone.engine.syntax.Expr first(Entry.Cell c) {
        return c.values().isEmpty()
                ? new backcone.engine.syntax.Expr.Hole(c.span())
                : c.values().get(0);
    }

    // ---- method files

    static FileAnalysis handbook(FileId file, String text) {
        SourceText t = new SourceText(
                file, text, backcone.engine.parse.Parser.parse(file, text).tree(), List.of());
        return new FileAnalysis(
                t, null, Handbook.standard().shapes(), List.of(), List.of(), Map.of(), Map.of(), List.of());
    }

    private static FileAnalysis methodFile(SourceText main, Handbook handbook) {
        List<Diagnostic> found = new ArrayList<>(main.problems());
        LibraryBuilder b = new LibraryBuilder(handbook.shapes().library());
        b.add(main.file(), main.tree());
        LibraryBuilder.Built built = b.build();
        found.addAll(built.problems());
        Shapes shapes = new Shapes(built.library());
        found.addAll(Checker.check(shapes));
        Examples.Report report = Examples.run(shapes, main.file()::equals);
        found.addAll(report.problems());
        for (Examples.Outcome o : report.outcomes()) {
            if (!o.met()) {
                found.add(Diagnostic.of(
                        Code.EXAMPLE_FAILED,
                        main.file(),
                        o.syntax().span(),
                        "`" + o.path() + "` comes to "
                                + (Double.isNaN(o.got())
                                        ? o.why()
                                        : Numbers.format(o.got(), 7) + (o.unit().isEmpty() ? "" : " " + o.unit()))
                                + ", the example says " + Numbers.format(o.expected(), 7)
                                + (o.unit().isEmpty() ? "" : " " + o.unit()) + "."));
            }
        }
        Problems once = new Problems();
        found.forEach(once::add);
        return new FileAnalysis(main, null, shapes, sorted(once.all(), main), List.of(), Map.of(), Map.of(), List.of());
    }

    // ---- questions

    @Override
    public FileId file() {
        return main.file();
    }

    @Override
    public String text() {
        return main.text();
    }

    @Override
    public FileSyntax syntax() {
        return main.tree();
    }

    @Override
    public Set<FileId> uses() {
        Set<FileId> out = new LinkedHashSet<>(texts().keySet());
        out.remove(main.file());
        return out;
    }

    @Override
    public List<Diagnostic> diagnostics() {
        return diagnostics;
    }

    @Override
    public List<DriveAnswer> drives() {
        return drives;
    }

    @Override
    public synchronized Scene scene() {
        Scene s = scene;
        if (s == null) {
            List<Scene.Shown> shown = new ArrayList<>();
            for (DriveAnswer d : drives) {
                DriveSource source = byName.get(d.name());
                Built b = built.get(d.name());
                if (source != null) {
                    shown.add(new Scene.Shown(source, d, b == null ? List.of() : b.runs));
                }
            }
            Sources src = sources;
            Function<FileId, @Nullable String> texts =
                    src != null ? src::textOf : f -> f.equals(main.file()) ? main.text() : Handbook.text(f);
            s = new Scene(main.file(), main.text(), main.tree(), shapes, diagnostics, shown, texts, src);
            FileAnalysis known = earlier;
            if (known != null && since != null) {
                Scene old = known.sceneIfAny();
                if (old != null) {
                    s.take(old, since);
                }
                earlier = null;
            }
            scene = s;
        }
        return s;
    }

    private synchronized @Nullable Scene sceneIfAny() {
        return scene;
    }

    private record Asked(DriveSource source, String name) {}

    /** The drives in which to look for a name: the one named in front, else all. */
    private List<Asked> asked(String name) {
        List<Asked> out = new ArrayList<>();
        for (DriveSource s : byName.values()) {
            if (name.startsWith(s.name() + ".")) {
                out.add(new Asked(s, name.substring(s.name().length() + 1)));
            }
        }
        for (DriveSource s : byName.values()) {
            out.add(new Asked(s, name));
        }
        return out;
    }

    @Override
    public Optional<Explanation> explain(String name) {
        Sources src = sources;
        if (src == null) {
            return Optional.empty();
        }
        for (Asked a : asked(name)) {
            for (String c : DriveBuilder.casesInUse(a.source)) {
                DriveGraph g = DriveBuilder.build(shapes, src, a.source, c, new Problems(), true);
                Optional<Explanation> e = new Explainer(g, src::textOf).explain(a.name);
                if (e.isPresent()) {
                    return e;
                }
            }
        }
        return Optional.empty();
    }

    @Override
    public Optional<List<Explanation>> explainRating(String name) {
        Sources src = sources;
        if (src == null) {
            return Optional.empty();
        }
        for (Asked a : asked(name)) {
            for (String c : DriveBuilder.casesInUse(a.source)) {
                DriveGraph g = DriveBuilder.build(shapes, src, a.source, c, new Problems(), true);
                Optional<List<Explanation>> e = new Explainer(g, src::textOf).rating(a.name);
                if (e.isPresent()) {
                    return e;
                }
            }
        }
        return Optional.empty();
    }

    @Override
    public List<String> names() {
        Sources src = sources;
        Set<String> out = new LinkedHashSet<>();
        if (src == null) {
            return List.of();
        }
        for (DriveSource s : byName.values()) {
            for (String c : DriveBuilder.casesInUse(s)) {
                out.addAll(new Explainer(DriveBuilder.build(shapes, src, s, c, new Problems(), false), src::textOf)
                        .names());
            }
        }
        return List.copyOf(out);
    }
}
