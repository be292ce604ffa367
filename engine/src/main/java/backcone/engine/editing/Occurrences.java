package backcone.engine.editing;

import backcone.engine.graph.DriveGraph;
import backcone.engine.graph.Element;
import backcone.engine.graph.Names;
import backcone.engine.graph.Names.Meaning;
import backcone.engine.model.BodyDef;
import backcone.engine.model.ChoiceKind;
import backcone.engine.model.Decl;
import backcone.engine.model.FunctionDef;
import backcone.engine.model.KindDef;
import backcone.engine.model.Library;
import backcone.engine.model.MethodDef;
import backcone.engine.model.QuantityKind;
import backcone.engine.model.TableDef;
import backcone.engine.model.ValueKind;
import backcone.engine.syntax.Entry;
import backcone.engine.syntax.Expr;
import backcone.engine.syntax.Name;
import backcone.engine.syntax.Node;
import backcone.engine.syntax.Nodes;
import backcone.engine.syntax.Note;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import java.util.ArrayList;
import java.util.Comparator;
import java.util.HashMap;
import java.util.HashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;
import org.jspecify.annotations.Nullable;

/** Every name of a text with what it means, by place. */
public final class Occurrences {
    private final Scene scene;
    private final int[] starts;
    private final @Nullable List<Occurrence>[] parts;
    private final @Nullable Kept[] kept;

    /** What was found out about an entry at the top of an earlier text in which it was the same. */
    private record Kept(int[] starts, List<Occurrence> all) {}

    @SuppressWarnings("unchecked")
    Occurrences(Scene scene) {
        this.scene = scene;
        List<Entry> entries = scene.tree.entries();
        this.starts = new int[entries.size()];
        for (int i = 0; i < starts.length; i++) {
            starts[i] = entries.get(i).span().start();
        }
        this.parts = new List[starts.length];
        this.kept = new Kept[starts.length];
    }

    /** Takes over what holds still: all entries have their counterparts, and those not in {@code changed} their text. */
    void take(Occurrences before, Set<Integer> changed) {
        synchronized (before.scene) {
            for (int i = 0; i < starts.length && i < before.starts.length; i++) {
                Entry e = scene.tree.entries().get(i);
                boolean rests = e instanceof Entry.Variant || e instanceof Entry.Family; // on other entries
                if (changed.contains(i) || (rests && !changed.isEmpty())) {
                    continue;
                }
                List<Occurrence> known = before.parts[i];
                kept[i] = known == null ? before.kept[i] : new Kept(before.starts, known);
            }
        }
    }

    private List<Occurrence> part(int i) {
        synchronized (scene) {
            List<Occurrence> known = parts[i];
            if (known == null) {
                Kept k = kept[i];
                known = k == null ? read(i) : moved(k);
                parts[i] = known;
                kept[i] = null;
            }
            return known;
        }
    }

    private List<Occurrence> read(int i) {
        Reader r = new Reader(scene);
        r.entry(scene.tree.entries().get(i));
        r.out.sort(Comparator.comparingInt((Occurrence o) -> o.span().start())
                .thenComparingInt(o -> o.span().end()));
        List<Occurrence> once = new ArrayList<>(r.out.size());
        for (Occurrence o : r.out) {
            if (once.isEmpty() || !once.get(once.size() - 1).span().equals(o.span())) {
                once.add(o);
            }
        }
        return once;
    }

    private List<Occurrence> moved(Kept k) {
        List<Occurrence> out = new ArrayList<>(k.all.size());
        for (Occurrence o : k.all) {
            Target t = o.target();
            boolean here = t.file().equals(scene.file);
            boolean given = scene.file.equals(t.givenIn());
            if (here || given) {
                t = new Target(
                        t.sort(),
                        t.name(),
                        t.file(),
                        here ? moved(t.span(), k.starts) : t.span(),
                        t.decl(),
                        t.path(),
                        t.meaning(),
                        t.givenIn(),
                        given ? moved(t.givenAt(), k.starts) : t.givenAt());
            }
            out.add(new Occurrence(moved(o.span(), k.starts), t, o.declares(), o.writes()));
        }
        return out;
    }

    private Span moved(Span s, int[] before) {
        int k = java.util.Arrays.binarySearch(before, s.start());
        k = k >= 0 ? k : -k - 2;
        int by = k < 0 ? 0 : starts[k] - before[k];
        return by == 0 ? s : new Span(s.start() + by, s.end() + by);
    }

    public List<Occurrence> all() {
        List<Occurrence> out = new ArrayList<>();
        for (int i = 0; i < starts.length; i++) {
            out.addAll(part(i));
        }
        return out;
    }

    /** Names in entries at the top of the file that touch a range. */
    List<Occurrence> around(int from, int to) {
        List<Occurrence> out = new ArrayList<>();
        List<Entry> entries = scene.tree.entries();
        for (int i = 0; i < starts.length; i++) {
            Span s = entries.get(i).span();
            if (s.start() <= to && from <= s.end()) {
                out.addAll(part(i));
            }
        }
        return out;
    }

    /** The name at or just before an offset. */
    public @Nullable Occurrence at(int offset) {
        List<Occurrence> some = around(offset, offset);
        int lo = 0;
        int hi = some.size() - 1;
        while (lo < hi) {
            int mid = (lo + hi + 1) >>> 1;
            if (some.get(mid).span().start() <= offset) {
                lo = mid;
            } else {
                hi = mid - 1;
            }
        }
        for (int i = lo; i >= 0 && i >= lo - 1 && i < some.size(); i--) {
            if (some.get(i).span().contains(offset)) {
                return some.get(i);
            }
        }
        return null;
    }

    /** All places of a thing in this text. */
    public List<Occurrence> of(Target t) {
        List<Occurrence> out = new ArrayList<>();
        for (int i = 0; i < starts.length; i++) {
            for (Occurrence o : part(i)) {
                if (o.target().same(t)) {
                    out.add(o);
                }
            }
        }
        return out;
    }

    private static final class Reader {
        private final Scene scene;
        private final Library library;
        private final FileId file;
        final List<Occurrence> out = new ArrayList<>();

        Reader(Scene scene) {
            this.scene = scene;
            this.library = scene.library();
            this.file = scene.file;
        }

        private final Map<String, @Nullable DriveGraph> graphs = new HashMap<>();

        /** A graph for as long as an entry is read. */
        private @Nullable DriveGraph graph(String drive, @Nullable String caseName) {
            return graphs.computeIfAbsent(drive + "/" + caseName, k -> scene.plainGraph(drive, caseName));
        }

        private void put(Name n, @Nullable Target t, boolean declares, boolean writes) {
            if (t != null && !n.isHole() && n.span().length() > 0) {
                out.add(new Occurrence(n.span(), t, declares, writes));
            }
        }

        // ---- drives

        void entry(Entry e) {
            if (file.isMethodFile()) {
                methodEntry(e);
            } else {
                driveFile(e);
            }
        }

        private void driveFile(Entry e) {
            {
                if (e instanceof Entry.Use u) {
                    use(u);
                } else if (e instanceof Entry.Drive d) {
                    put(d.name(), top(d.name(), Target.Sort.DRIVE, d.title()), true, false);
                    drive(d.name().text(), d.body());
                } else if (e instanceof Entry.Variant v) {
                    put(v.name(), top(v.name(), Target.Sort.DRIVE, v.title()), true, false);
                    base(v.base());
                    drive(v.name().text(), v.body());
                } else if (e instanceof Entry.Family f) {
                    put(f.name(), top(f.name(), Target.Sort.DRIVE, f.title()), true, false);
                    base(f.base());
                    family(f);
                } else if (e instanceof Entry.Block b) {
                    DriveGraph g = scene.blocks();
                    kind(b.head());
                    if (b.name() != null) {
                        put(b.name(), block(b, file), true, false);
                    }
                    if (g != null && b.name() != null && b.body() != null) {
                        Names names = new Names(g);
                        Element el = names.top(b.name().text());
                        if (el != null) {
                            body(names, el, b.body());
                        }
                    }
                } else if (e instanceof Entry.Let l) {
                    put(l.name(), top(l.name(), Target.Sort.LET, null), true, false);
                    DriveGraph g = scene.blocks();
                    if (g != null) {
                        expr(new Names(g), g.drive(), l.value(), null);
                        units(l.notes());
                    }
                }
            }
        }

        private Target top(Name n, Target.Sort sort, @Nullable String meaning) {
            return Target.of(sort, n.text(), file, n.span(), meaning);
        }

        private static Target block(Entry.Block b, FileId where) {
            Name n = b.name();
            return Target.of(
                    b.head().text().equals("material") ? Target.Sort.MATERIAL : Target.Sort.BLOCK,
                    n == null ? b.head().text() : n.text(),
                    where,
                    n == null ? b.head().span() : n.span(),
                    b.title());
        }

        private void use(Entry.Use u) {
            if (u.alias() != null) {
                put(u.alias(), top(u.alias(), Target.Sort.FILE, "the file " + u.path()), true, false);
            }
        }

        private void base(Name n) {
            DriveGraph.Top t = scene.top;
            DriveGraph.TopEntry e = t == null ? null : t.find(n.text());
            put(n, e == null ? null : entry(e, n.text()), false, false);
        }

        private static @Nullable Target entry(DriveGraph.TopEntry e, String name) {
            Entry x = e.entry();
            Name n = Nodes.name(x);
            if (x instanceof Entry.Block b) {
                return block(b, e.file());
            } else if (x instanceof Entry.Use u && u.alias() != null) {
                return Target.of(Target.Sort.FILE, name, e.file(), u.alias().span(), "the file " + u.path());
            } else if (n != null) {
                Target.Sort sort = x instanceof Entry.Let ? Target.Sort.LET : Target.Sort.DRIVE;
                String title = x instanceof Entry.Drive d ? d.title() : x instanceof Entry.Variant v ? v.title() : null;
                return Target.of(sort, n.text(), e.file(), n.span(), title);
            }
            return null;
        }

        private void drive(String name, List<Entry> body) {
            DriveGraph g = graph(name, null);
            if (g == null) {
                return;
            }
            Names names = new Names(g);
            body(names, g.drive(), body);
            for (Entry e : body) {
                driveEntry(name, names, g, e);
            }
        }

        private void family(Entry.Family f) {
            if (f.rows().size() < 2) {
                return;
            }
            for (Scene.Shown s : scene.drives) {
                if (s.source().name().startsWith(f.name().text() + ".")) {
                    DriveGraph g = graph(s.source().name(), null);
                    if (g != null) {
                        Names names = new Names(g);
                        for (Entry.Cell c : f.rows().get(0).cells()) {
                            for (Expr x : c.values()) {
                                if (x instanceof Expr.Path p) {
                                    path(names, g.drive(), p, new Expr.Hole(p.span()), false);
                                }
                            }
                        }
                        for (Entry.Row r : f.rows()) {
                            for (Entry.Cell c : r.cells()) {
                                for (Expr x : c.values()) {
                                    units(x);
                                }
                            }
                        }
                    }
                    return;
                }
            }
        }

        private void driveEntry(String drive, Names names, DriveGraph g, Entry e) {
            if (e instanceof Entry.Rate r) {
                DriveGraph own = g;
                if (r.under() != null && !r.under().isHole()) {
                    DriveGraph other = graph(drive, r.under().text());
                    own = other == null ? g : other;
                    Meaning m = names.path(List.of(r.under()), 0, g.drive());
                    put(r.under(), target(m), false, false);
                }
                path(names, g.drive(), r.mesh(), null, false);
                Names there = new Names(own);
                Element space = there.space(r);
                MethodDef m = space != null ? space.method() : null;
                if (m == null) {
                    List<MethodDef> all =
                            library.methods.getOrDefault(r.method().text(), List.of());
                    m = all.isEmpty() ? null : all.get(0);
                }
                put(r.method(), m == null ? null : method(m), false, false);
                if (r.as() != null) {
                    put(
                            r.as(),
                            Target.of(Target.Sort.BLOCK, r.as().text(), file, r.as().span(), "a rating"),
                            true,
                            false);
                }
                if (space != null) {
                    body(there, space, r.body());
                }
            } else if (e instanceof Entry.Require r) {
                expr(names, g.drive(), r.subject(), null);
                each(names, g.drive(), r.low(), r.high(), r.tolerance(), r.middle());
            } else if (e instanceof Entry.Assert a) {
                expr(names, g.drive(), a.condition(), null);
            } else if (e instanceof Entry.Accept a) {
                path(names, g.drive(), a.path(), null, false);
                expr(names, g.drive(), a.bound(), null);
            } else if (e instanceof Entry.Waive w) {
                path(names, g.drive(), w.path(), null, false);
            }
        }

        private void each(Names names, Element at, @Nullable Expr... all) {
            for (Expr x : all) {
                if (x != null) {
                    expr(names, at, x, null);
                }
            }
        }

        private void body(Names names, Element at, @Nullable List<Entry> body) {
            if (body == null) {
                return;
            }
            for (Entry e : body) {
                if (e instanceof Entry.Fact f) {
                    Decl d = path(names, at, f.path(), f.value(), true);
                    expr(names, at, f.value(), d);
                    units(f.notes());
                } else if (e instanceof Entry.Override f) {
                    Decl d = path(names, at, f.path(), f.value(), true);
                    expr(names, at, f.value(), d);
                } else if (e instanceof Entry.Let l) {
                    put(
                            l.name(),
                            Target.of(
                                    Target.Sort.LET,
                                    l.name().text(),
                                    file,
                                    l.name().span(),
                                    null),
                            true,
                            false);
                    expr(names, at, l.value(), null);
                } else if (e instanceof Entry.FactFor f) {
                    put(f.name(), target(names.path(List.of(f.name()), 0, at)), false, true);
                    expr(names, at, f.value(), null);
                } else if (e instanceof Entry.Block b) {
                    inner(names, at, b);
                } else if (e instanceof Entry.Requirement r) {
                    List<Name> n = r.path().names();
                    for (int i = 0; i < n.size(); i++) {
                        put(n.get(i), target(names.check(at, n, i)), false, false);
                    }
                    expr(names, at, r.bound(), null);
                } else if (e instanceof Entry.UseReading u) {
                    List<Name> n = u.target().names();
                    for (int i = 0; i < n.size(); i++) {
                        Meaning m = names.check(at, n, i);
                        put(n.get(i), target(m), false, false);
                        if (i == n.size() - 1 && m instanceof Meaning.Value v) {
                            for (Note.Reading r : v.decl().readings) {
                                if (r.name().text().equals(u.reading().text())) {
                                    put(
                                            u.reading(),
                                            Target.of(
                                                    Target.Sort.READING,
                                                    r.name().text(),
                                                    v.decl().file,
                                                    r.name().span(),
                                                    "another reading of "
                                                            + v.decl().symbolOrName()),
                                            false,
                                            false);
                                }
                            }
                        }
                    }
                }
            }
        }

        private void inner(Names names, Element at, Entry.Block b) {
            Element el = names.block(at, b);
            if (el != null && el.kind().equals(b.head().text())
                    || library.kinds.containsKey(b.head().text())) {
                kind(b.head());
            } else if (el != null) {
                KindDef k = library.kinds.get(el.kind());
                put(
                        b.head(),
                        k == null
                                ? null
                                : Target.of(Target.Sort.KIND, b.head().text(), k.file(), k.span(), k.meaning()),
                        false,
                        false);
            }
            if (b.name() != null) {
                put(
                        b.name(),
                        new Target(
                                Target.Sort.BLOCK,
                                b.name().text(),
                                file,
                                b.name().span(),
                                null,
                                null,
                                b.title(),
                                null,
                                Span.NONE),
                        true,
                        false);
            }
            if (b.on() != null) {
                Element drive = at;
                while (drive.parent != null && !drive.kind().equals("drive")) {
                    drive = drive.parent;
                }
                put(b.on(), target(names.path(List.of(b.on()), 0, drive)), false, false);
            }
            if (el != null) {
                body(names, el, b.body());
            }
        }

        private void kind(Name head) {
            KindDef k = library.kinds.get(head.text().equals("duty") ? "case" : head.text());
            put(
                    head,
                    k == null ? null : Target.of(Target.Sort.KIND, k.name(), k.file(), nameIn(k), k.meaning()),
                    false,
                    false);
        }

        private static Span nameIn(KindDef k) {
            return k.span();
        }

        private static Target method(MethodDef m) {
            Name n = Nodes.name(m.syntax());
            return Target.of(
                    Target.Sort.METHOD,
                    m.name(),
                    m.file(),
                    n == null ? m.syntax().span() : n.span(),
                    m.meaning());
        }

        /** The names of a path; the declaration of the last one is returned. */
        private @Nullable Decl path(Names names, Element at, Expr.Path p, @Nullable Expr value, boolean writes) {
            Decl last = null;
            for (int i = 0; i < p.names().size(); i++) {
                boolean end = i == p.names().size() - 1;
                Meaning m = value != null && end ? names.given(p.names(), i, at, value) : names.path(p.names(), i, at);
                if (m == null && at.isSpace()) {
                    m = names.check(at, p.names(), i);
                }
                put(p.names().get(i), target(m), false, writes && end);
                last = m instanceof Meaning.Value v ? v.decl() : null;
            }
            return last;
        }

        private @Nullable Target target(@Nullable Meaning m) {
            if (m instanceof Meaning.Value v) {
                Decl d = v.decl();
                Target.Sort sort = d.role == Decl.Role.LET
                        ? Target.Sort.LET
                        : d.role == Decl.Role.CHECK ? Target.Sort.CHECK : Target.Sort.PROPERTY;
                backcone.engine.graph.Slot.Fact f =
                        v.slot() == null ? null : v.slot().fact();
                return new Target(
                        sort,
                        d.name,
                        d.file,
                        d.nameNode.span(),
                        d,
                        v.slot() == null ? null : v.slot().path(),
                        d.meaning,
                        f == null ? null : f.file(),
                        f == null ? Span.NONE : f.nameSpan());
            } else if (m instanceof Meaning.Block b) {
                return element(b.element());
            } else if (m instanceof Meaning.Lookup t) {
                return table(t.table());
            } else if (m instanceof Meaning.Choice c) {
                return word(c.kind(), c.word());
            } else if (m instanceof Meaning.Top t) {
                return entry(t.entry(), "");
            }
            return null;
        }

        private static Target table(TableDef t) {
            return Target.of(
                    Target.Sort.TABLE, t.name(), t.file, t.syntax.name().span(), t.syntax.meaning());
        }

        private @Nullable Target element(Element e) {
            FileId f = e.fileOrNull();
            if (f == null || e.headSpan().length() == 0) {
                KindDef k = library.kinds.get(e.kind());
                return k == null
                        ? null
                        : new Target(
                                Target.Sort.KIND, e.name, k.file(), k.span(), null, null, k.meaning(), null, Span.NONE);
            }
            Target.Sort sort = e.kind().equals("material") ? Target.Sort.MATERIAL : Target.Sort.BLOCK;
            // the head is `bevel head`: its last word is the name
            Span head = e.headSpan();
            int start = Math.max(head.start(), head.end() - e.name.length());
            String text = scene.texts.apply(f);
            boolean named = text != null && head.end() <= text.length() && text.startsWith(e.name, start);
            return new Target(
                    sort,
                    e.name,
                    f,
                    named ? new Span(start, head.end()) : head,
                    null,
                    null,
                    e.title(),
                    null,
                    Span.NONE);
        }

        private static Target word(ChoiceKind kind, String word) {
            Span at = Span.NONE;
            FileId where = kind.syntax() == null ? Target.NOWHERE : kind.file();
            if (kind.syntax() != null) {
                for (Entry.Word w : kind.syntax().words()) {
                    if (w.name().text().equals(word)) {
                        at = w.name().span();
                    }
                }
            }
            String meaning = kind.words().get(word);
            return Target.of(Target.Sort.WORD, word, where, at, meaning == null ? "a word of " + kind.name() : meaning);
        }

        private static Target unit(Name n) {
            return Target.of(Target.Sort.UNIT, n.text(), Target.NOWHERE, Span.NONE, null);
        }

        private void units(List<Note> notes) {
            for (Note n : notes) {
                units(n);
            }
        }

        private void units(Node n) {
            Nodes.walk(n, x -> {
                if (x instanceof Expr.Num num && num.unit() != null) {
                    put(num.unit(), unit(num.unit()), false, false);
                }
            });
        }

        private void expr(Names names, Element at, Expr e, @Nullable Decl wanted) {
            if (e instanceof Expr.Num n) {
                if (n.unit() != null) {
                    put(n.unit(), unit(n.unit()), false, false);
                }
            } else if (e instanceof Expr.Path p) {
                named(names, at, p, wanted);
            } else if (e instanceof Expr.Call c) {
                Name n = c.callee().names().get(0);
                FunctionDef f = library.functions.get(n.text());
                TableDef t = library.tables.get(n.text());
                if (f != null) {
                    put(
                            n,
                            Target.of(
                                    Target.Sort.FUNCTION,
                                    f.name(),
                                    f.file(),
                                    f.syntax().name().span(),
                                    f.syntax().meaning()),
                            false,
                            false);
                } else if (t != null) {
                    put(n, table(t), false, false);
                }
                for (Expr a : c.args()) {
                    expr(names, at, a, null);
                }
            } else if (e instanceof Expr.BlockRef b) {
                kind(b.kind());
                put(b.name(), target(names.path(List.of(b.name()), 0, at)), false, false);
            } else if (e instanceof Expr.In i) {
                expr(names, at, i.operand(), null);
                put(i.unit(), unit(i.unit()), false, false);
            } else {
                Decl w = e instanceof Expr.Compare || e instanceof Expr.Choose ? null : wanted;
                Nodes.children(e, c -> {
                    if (c instanceof Expr x) {
                        expr(names, at, x, w);
                    } else if (c instanceof Expr.Arm a) {
                        if (a.when() != null) {
                            expr(names, at, a.when(), null);
                        }
                        expr(names, at, a.value(), wanted);
                    }
                });
            }
        }

        private void named(Names names, Element at, Expr.Path p, @Nullable Decl wanted) {
            if (p.names().size() == 1 && wanted != null && wanted.kind instanceof ValueKind.Choice c) {
                String w = p.names().get(0).text();
                if (c.kind().has(w)) {
                    put(p.names().get(0), word(c.kind(), w), false, false);
                    return;
                }
            }
            for (int i = 0; i < p.names().size(); i++) {
                Target t = target(names.path(p.names(), i, at));
                if (t == null && p.names().size() == 1) {
                    t = anyWord(p.names().get(0).text());
                }
                put(p.names().get(i), t, false, false);
            }
        }

        /** A word in a comparison: of whichever list has it. */
        private @Nullable Target anyWord(String w) {
            for (ChoiceKind c : library.choices.values()) {
                if (c.has(w)) {
                    return word(c, w);
                }
            }
            return null;
        }

        // ---- method files

        private void methodEntry(Entry e) {
            {
                Map<String, Target> local = new HashMap<>();
                String kind = e instanceof Entry.Method m
                        ? m.kind().text()
                        : e instanceof Entry.Chapter c
                                ? c.kind().text()
                                : e instanceof Entry.Kind k ? k.name().text() : null;
                declared(e, local);
                Map<String, Target> around = new HashMap<>();
                if (kind != null) {
                    ofKind(kind, around, new HashSet<>(), 0);
                }
                if (e instanceof Entry.Method m) {
                    for (Entry x : m.body()) {
                        if (x instanceof Entry.Include i) {
                            for (Name n : i.methods()) {
                                MethodDef other = library.method(n.text(), kind);
                                put(n, other == null ? null : method(other), false, false);
                                if (other != null) {
                                    ofBody(other.body(), around);
                                }
                            }
                        }
                    }
                }
                around.putAll(local);
                handbook(e, around);
            }
        }

        /** Names that an entry of this file declares, at any depth. */
        private void declared(Entry top, Map<String, Target> out) {
            Nodes.walk(top, n -> {
                if (n instanceof Entry.Declaration d) {
                    Target t = Target.of(
                            Target.Sort.PROPERTY,
                            d.name().text(),
                            file,
                            d.name().span(),
                            d.meaning());
                    out.put(d.name().text(), t);
                    if (d.symbol() != null) {
                        out.put(d.symbol().text(), t);
                    }
                } else if (n instanceof Entry.Check c) {
                    out.put(
                            c.name().text(),
                            Target.of(
                                    Target.Sort.CHECK,
                                    c.name().text(),
                                    file,
                                    c.name().span(),
                                    c.meaning()));
                } else if (n instanceof Entry.Table t) {
                    out.put(
                            t.name().text(),
                            Target.of(
                                    Target.Sort.TABLE,
                                    t.name().text(),
                                    file,
                                    t.name().span(),
                                    t.meaning()));
                } else if (n instanceof Entry.Parts p) {
                    for (Name x : p.names()) {
                        out.put(x.text(), Target.of(Target.Sort.BLOCK, x.text(), file, x.span(), null));
                    }
                    if (p.as() != null) {
                        out.put(p.as().text(), Target.of(Target.Sort.BLOCK, p.as().text(), file, p.as().span(), null));
                    }
                } else if (n instanceof Entry.Part p) {
                    out.put(
                            p.name().text(),
                            Target.of(
                                    Target.Sort.BLOCK,
                                    p.name().text(),
                                    file,
                                    p.name().span(),
                                    p.meaning()));
                } else if (n instanceof Entry.Role r) {
                    out.put(
                            r.name().text(),
                            Target.of(
                                    Target.Sort.BLOCK,
                                    r.name().text(),
                                    file,
                                    r.name().span(),
                                    null));
                } else if (n instanceof Entry.Collect c) {
                    out.put(
                            c.name().text(),
                            Target.of(
                                    Target.Sort.BLOCK,
                                    c.name().text(),
                                    file,
                                    c.name().span(),
                                    null));
                } else if (n instanceof Entry.Cases c) {
                    out.put(
                            c.name().text(),
                            Target.of(
                                    Target.Sort.BLOCK,
                                    c.name().text(),
                                    file,
                                    c.name().span(),
                                    null));
                    for (Name w : c.words()) {
                        out.put(w.text(), Target.of(Target.Sort.BLOCK, w.text(), file, w.span(), null));
                    }
                }
            });
        }

        private static Target decl(Decl d) {
            return new Target(
                    d.role == Decl.Role.CHECK ? Target.Sort.CHECK : Target.Sort.PROPERTY,
                    d.name,
                    d.file,
                    d.nameNode.span(),
                    d,
                    null,
                    d.meaning,
                    null,
                    Span.NONE);
        }

        private static void ofBody(BodyDef b, Map<String, Target> out) {
            for (Decl d : b.decls) {
                out.putIfAbsent(d.name, decl(d));
                if (d.symbol != null) {
                    out.putIfAbsent(d.symbol, decl(d));
                }
            }
            b.tables.values().forEach(t -> out.putIfAbsent(t.name(), table(t)));
            b.each.values().forEach(l -> l.forEach(x -> ofBody(x, out)));
        }

        private void ofKind(String kind, Map<String, Target> out, Set<String> seen, int depth) {
            if (depth > 3 || !seen.add(kind)) {
                return;
            }
            List<BodyDef> bodies = new ArrayList<>();
            for (KindDef k : library.lineage(kind)) {
                bodies.add(k.body());
                library.chapters.getOrDefault(k.name(), List.of()).forEach(c -> bodies.add(c.body()));
            }
            for (BodyDef b : bodies) {
                ofBody(b, out);
            }
            for (BodyDef b : bodies) {
                b.parts.forEach(p -> ofKind(p.kind().text(), out, seen, depth + 1));
                b.part.forEach(p -> ofKind(p.kind().text(), out, seen, depth + 1));
                for (Decl d : b.decls) {
                    if (d.kind instanceof ValueKind.Reference r) {
                        ofKind(r.kind(), out, seen, depth + 1);
                    }
                }
            }
            if (depth == 0) {
                ofKind("case", out, seen, 1);
                ofKind("drive", out, seen, 2);
            }
        }

        private void handbook(Node e, Map<String, Target> scope) {
            Nodes.walk(e, n -> {
                if (n instanceof Entry.Declaration d) {
                    Target t = scope.get(d.name().text());
                    put(d.name(), t, true, false);
                    if (d.symbol() != null) {
                        put(d.symbol(), t, true, false);
                    }
                    put(d.kind(), quantity(d.kind().text()), false, false);
                    if (d.unit() != null) {
                        put(d.unit(), unit(d.unit()), false, false);
                    }
                } else if (n instanceof Entry.Check c) {
                    put(c.name(), scope.get(c.name().text()), true, false);
                } else if (n instanceof Entry.Table t) {
                    put(
                            t.name(),
                            Target.of(
                                    Target.Sort.TABLE,
                                    t.name().text(),
                                    file,
                                    t.name().span(),
                                    t.meaning()),
                            true,
                            false);
                    if (t.kind() != null) {
                        put(t.kind(), quantity(t.kind().text()), false, false);
                    }
                } else if (n instanceof Entry.Function f) {
                    put(
                            f.name(),
                            Target.of(
                                    Target.Sort.FUNCTION,
                                    f.name().text(),
                                    file,
                                    f.name().span(),
                                    f.meaning()),
                            true,
                            false);
                    put(f.kind(), quantity(f.kind().text()), false, false);
                } else if (n instanceof Entry.Parameter p) {
                    put(p.kind(), quantity(p.kind().text()), false, false);
                } else if (n instanceof Entry.Method m) {
                    put(
                            m.name(),
                            Target.of(
                                    Target.Sort.METHOD,
                                    m.name().text(),
                                    file,
                                    m.name().span(),
                                    m.meaning()),
                            true,
                            false);
                    kind(m.kind());
                } else if (n instanceof Entry.Chapter c) {
                    kind(c.kind());
                } else if (n instanceof Entry.Quantity q) {
                    put(
                            q.name(),
                            Target.of(
                                    Target.Sort.QUANTITY,
                                    q.name().text(),
                                    file,
                                    q.name().span(),
                                    q.meaning()),
                            true,
                            false);
                    put(q.unit(), unit(q.unit()), false, false);
                } else if (n instanceof Entry.Choice c) {
                    put(
                            c.name(),
                            Target.of(
                                    Target.Sort.CHOICE,
                                    c.name().text(),
                                    file,
                                    c.name().span(),
                                    c.meaning()),
                            true,
                            false);
                    for (Entry.Word w : c.words()) {
                        put(
                                w.name(),
                                Target.of(
                                        Target.Sort.WORD,
                                        w.name().text(),
                                        file,
                                        w.name().span(),
                                        w.meaning()),
                                true,
                                false);
                    }
                } else if (n instanceof Entry.Source s) {
                    put(
                            s.name(),
                            Target.of(
                                    Target.Sort.SOURCE,
                                    s.name().text(),
                                    file,
                                    s.name().span(),
                                    s.text()),
                            true,
                            false);
                } else if (n instanceof Note.Per p && p.source() != null) {
                    Library.SourceDef s = library.sources.get(p.source().text());
                    put(
                            p.source(),
                            s == null ? null : Target.of(Target.Sort.SOURCE, s.name(), s.file(), s.span(), s.text()),
                            false,
                            false);
                } else if (n instanceof Note.Taken t) {
                    put(t.unit(), unit(t.unit()), false, false);
                } else if (n instanceof Expr.Num x && x.unit() != null) {
                    put(x.unit(), unit(x.unit()), false, false);
                } else if (n instanceof Expr.In x) {
                    put(x.unit(), unit(x.unit()), false, false);
                } else if (n instanceof Expr.Call c) {
                    Name first = c.callee().names().get(0);
                    FunctionDef f = library.functions.get(first.text());
                    TableDef t = library.tables.get(first.text());
                    if (f != null) {
                        put(
                                first,
                                Target.of(
                                        Target.Sort.FUNCTION,
                                        f.name(),
                                        f.file(),
                                        f.syntax().name().span(),
                                        f.syntax().meaning()),
                                false,
                                false);
                    } else if (t != null) {
                        put(first, table(t), false, false);
                    } else {
                        put(first, scope.get(first.text()), false, false);
                    }
                } else if (n instanceof Expr.Path p) {
                    for (Name x : p.names()) {
                        Target t = scope.get(x.text());
                        put(x, t != null ? t : p.names().size() == 1 ? anyWord(x.text()) : null, false, false);
                    }
                }
            });
        }

        private @Nullable Target quantity(String name) {
            QuantityKind q = library.quantities.get(name);
            if (q != null) {
                return Target.of(
                        Target.Sort.QUANTITY, name, q.file(), q.syntax().name().span(), q.meaning());
            }
            ChoiceKind c = library.choices.get(name);
            if (c != null && c.syntax() != null) {
                return Target.of(
                        Target.Sort.CHOICE, name, c.file(), c.syntax().name().span(), c.meaning());
            }
            KindDef k = library.kinds.get(name);
            return k == null ? null : Target.of(Target.Sort.KIND, name, k.file(), k.span(), k.meaning());
        }
    }
}
