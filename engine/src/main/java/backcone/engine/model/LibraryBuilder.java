package backcone.engine.model;

import backcone.engine.diagnostics.Code;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.syntax.Entry;
import backcone.engine.syntax.Expr;
import backcone.engine.syntax.FileSyntax;
import backcone.engine.syntax.Name;
import backcone.engine.syntax.Note;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import backcone.engine.units.Unit;
import backcone.engine.units.Units;
import java.util.ArrayList;
import java.util.HashMap;
import java.util.LinkedHashMap;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Map;
import org.jspecify.annotations.Nullable;

/** Turns the trees of method files into a {@link Library}. Findings are collected, never thrown. */
public final class LibraryBuilder {
    private final Library library = new Library();
    private final List<Diagnostic> problems = new ArrayList<>();
    private final List<Pending> pending = new ArrayList<>();

    private record Pending(Entry entry, FileId file) {}

    /** The library with what was wrong in its texts. */
    public record Built(Library library, List<Diagnostic> problems) {}

    public LibraryBuilder() {}

    /** Starts from the symbols of another library; its bodies are shared. */
    public LibraryBuilder(Library base) {
        library.quantities.putAll(base.quantities);
        library.choices.putAll(base.choices);
        library.kinds.putAll(base.kinds);
        base.chapters.forEach((k, v) -> library.chapters.put(k, new ArrayList<>(v)));
        base.methods.forEach((k, v) -> library.methods.put(k, new ArrayList<>(v)));
        library.functions.putAll(base.functions);
        library.tables.putAll(base.tables);
        library.sources.putAll(base.sources);
    }

    public LibraryBuilder add(FileId file, FileSyntax tree) {
        for (Entry e : tree.entries()) {
            addName(file, e);
            pending.add(new Pending(e, file));
        }
        return this;
    }

    private void addName(FileId file, Entry e) {
        if (e instanceof Entry.Quantity q) {
            addQuantity(file, q);
        } else if (e instanceof Entry.Choice c) {
            LinkedHashMap<String, @Nullable String> words = new LinkedHashMap<>();
            for (Entry.Word w : c.words()) {
                words.put(w.name().text(), w.meaning());
            }
            duplicate(
                    library.choices.put(c.name().text(), new ChoiceKind(c.name().text(), c.meaning(), words, file, c)),
                    c.name(),
                    file);
        } else if (e instanceof Entry.Source s) {
            // several files may cite the same source under one name
            library.sources.putIfAbsent(
                    s.name().text(),
                    new Library.SourceDef(
                            s.name().text(), s.text(), file, s.name().span()));
        }
    }

    private void duplicate(@Nullable Object before, Name name, FileId file) {
        if (before != null) {
            problem(
                    Code.DUPLICATE_NAME,
                    file,
                    name.span(),
                    "`" + name + "` is declared twice; give one of the two another name.");
        }
    }

    private void addQuantity(FileId file, Entry.Quantity q) {
        Unit unit = unit(file, q.unit());
        if (unit == null) {
            return;
        }
        LinkedHashSet<String> unlike = new LinkedHashSet<>();
        for (Name n : q.unlike()) {
            unlike.add(n.text());
        }
        String meaning = q.meaning() == null ? q.name().text() : q.meaning();
        duplicate(
                library.quantities.put(
                        q.name().text(), new QuantityKind(q.name().text(), unit, meaning, q.whole(), unlike, file, q)),
                q.name(),
                file);
    }

    public Built build() {
        // names of kinds first: any declaration may refer to them
        Map<String, BodyDef> bodies = new HashMap<>();
        for (Pending p : pending) {
            if (p.entry instanceof Entry.Kind k) {
                BodyDef body = new BodyDef(k.name().text(), p.file);
                bodies.put(k.name().text(), body);
                duplicate(
                        library.kinds.put(
                                k.name().text(),
                                new KindDef(
                                        k.name().text(),
                                        k.parent() == null ? null : k.parent().text(),
                                        k.meaning(),
                                        body,
                                        p.file,
                                        k.span())),
                        k.name(),
                        p.file);
            }
        }
        for (Pending p : pending) {
            if (p.entry instanceof Entry.Kind k) {
                BodyDef body = bodies.get(k.name().text());
                if (body != null) {
                    fill(body, k.body(), false);
                }
                if (k.parent() != null && !library.kinds.containsKey(k.parent().text())) {
                    problem(Code.UNKNOWN_KIND, p.file, k.parent().span(), "There is no kind `" + k.parent() + "`.");
                }
            } else if (p.entry instanceof Entry.Chapter c) {
                BodyDef body = new BodyDef(c.name().text(), p.file);
                fill(body, c.body(), false);
                checkKind(c.kind(), p.file);
                library.chapters
                        .computeIfAbsent(c.kind().text(), k -> new ArrayList<>())
                        .add(new MethodDef(c.name().text(), c.kind().text(), c.meaning(), body, p.file, c));
            } else if (p.entry instanceof Entry.Method m) {
                BodyDef body = new BodyDef(m.name().text(), p.file);
                fill(body, m.body(), true);
                checkKind(m.kind(), p.file);
                List<MethodDef> same = library.methods.computeIfAbsent(m.name().text(), k -> new ArrayList<>());
                for (MethodDef other : same) {
                    if (other.kind().equals(m.kind().text())) {
                        duplicate(other, m.name(), p.file);
                    }
                }
                same.add(new MethodDef(m.name().text(), m.kind().text(), m.meaning(), body, p.file, m));
            } else if (p.entry instanceof Entry.Function f) {
                List<ValueKind> parameters = new ArrayList<>();
                for (Entry.Parameter q : f.parameters()) {
                    parameters.add(valueKind(q.kind(), p.file));
                }
                duplicate(
                        library.functions.put(
                                f.name().text(),
                                new FunctionDef(f.name().text(), parameters, valueKind(f.kind(), p.file), p.file, f)),
                        f.name(),
                        p.file);
            } else if (p.entry instanceof Entry.Table t) {
                TableDef table = table(t, p.file, "");
                duplicate(library.tables.put(t.name().text(), table), t.name(), p.file);
            } else if (!(p.entry instanceof Entry.Quantity)
                    && !(p.entry instanceof Entry.Choice)
                    && !(p.entry instanceof Entry.Source)
                    && !(p.entry instanceof Entry.Use)
                    && !(p.entry instanceof Entry.Bad)) {
                problem(
                        Code.WRONG_PLACE,
                        p.file,
                        p.entry.span(),
                        "This does not belong at the top of a method file; a method file holds kinds, chapters, methods,"
                                + " tables, functions, choices, quantities and sources.");
            }
        }
        library.indexDimensions();
        return new Built(library, List.copyOf(problems));
    }

    private void checkKind(Name kind, FileId file) {
        if (!library.kinds.containsKey(kind.text())) {
            problem(
                    Code.UNKNOWN_KIND,
                    file,
                    kind.span(),
                    "There is no kind of block `" + kind + "`."
                            + Suggest.sentence(kind.text(), library.kinds.keySet()));
        }
    }

    private void fill(BodyDef body, List<Entry> entries, boolean ofMethod) {
        for (Entry e : entries) {
            if (e instanceof Entry.Declaration d) {
                ValueKind kind = valueKind(d.kind(), body.file);
                Unit unit = d.unit() == null ? null : unit(body.file, d.unit());
                if (d.how() == Entry.Given.RELATION) {
                    body.decls.add(new Decl(
                            d.name(),
                            d.symbol(),
                            d.meaning(),
                            kind,
                            unit,
                            Entry.Given.INPUT,
                            null,
                            Decl.Role.QUANTITY,
                            d.notes(),
                            body.file,
                            d.span(),
                            body.owner));
                    Expr equation = d.value() == null ? new Expr.Hole(d.span()) : d.value();
                    body.relations.add(new BodyDef.RelationDef(
                            new Entry.Relation(d.meaning(), null, equation, d.notes(), d.span()),
                            body.file,
                            body.owner));
                } else {
                    body.decls.add(new Decl(
                            d.name(),
                            d.symbol(),
                            d.meaning(),
                            kind,
                            unit,
                            d.how(),
                            d.value(),
                            Decl.Role.QUANTITY,
                            d.notes(),
                            body.file,
                            d.span(),
                            body.owner));
                }
            } else if (e instanceof Entry.Let l) {
                body.decls.add(new Decl(
                        l.name(),
                        null,
                        null,
                        new ValueKind.Inferred(),
                        null,
                        Entry.Given.EQUALS,
                        l.value(),
                        Decl.Role.LET,
                        l.notes(),
                        body.file,
                        l.span(),
                        body.owner));
            } else if (e instanceof Entry.Check c) {
                ValueKind kind = c.kind() == null ? ratio() : valueKind(c.kind(), body.file);
                body.decls.add(new Decl(
                        c.name(),
                        null,
                        c.meaning(),
                        kind,
                        null,
                        Entry.Given.EQUALS,
                        c.value(),
                        Decl.Role.CHECK,
                        c.notes(),
                        body.file,
                        c.span(),
                        body.owner));
            } else if (e instanceof Entry.Relation r) {
                body.relations.add(new BodyDef.RelationDef(r, body.file, body.owner));
            } else if (e instanceof Entry.Limit l) {
                body.limits.add(new BodyDef.LimitDef(l, body.file, body.owner, ofMethod));
            } else if (e instanceof Entry.Applies a) {
                body.applies.add(a);
            } else if (e instanceof Entry.Table t) {
                body.tables.put(t.name().text(), table(t, body.file, body.owner));
            } else if (e instanceof Entry.Parts p) {
                body.parts.add(p);
                checkKind(p.kind(), body.file);
            } else if (e instanceof Entry.Part p) {
                body.part.add(p);
                checkKind(p.kind(), body.file);
            } else if (e instanceof Entry.Role r) {
                body.roles.add(r);
            } else if (e instanceof Entry.Collect c) {
                body.collects.add(c);
            } else if (e instanceof Entry.Cases c) {
                body.cases.add(c);
            } else if (e instanceof Entry.Each x) {
                BodyDef inner = new BodyDef(body.owner, body.file);
                fill(inner, x.body(), ofMethod);
                body.each
                        .computeIfAbsent(x.collection().text(), k -> new ArrayList<>())
                        .add(inner);
            } else if (e instanceof Entry.Example x) {
                body.examples.add(x);
            } else if (e instanceof Entry.Edition d) {
                for (Expr.Num n : d.editions()) {
                    body.editions.add(n.text());
                }
            } else if (e instanceof Entry.Include i) {
                body.includes.add(i);
            } else if (!(e instanceof Entry.Bad)) {
                problem(Code.WRONG_PLACE, body.file, e.span(), "This entry does not belong in `" + body.owner + "`.");
            }
        }
    }

    private ValueKind ratio() {
        QuantityKind q = library.quantities.get("Ratio");
        return q == null ? new ValueKind.Unknown() : new ValueKind.Quantity(q);
    }

    private ValueKind valueKind(Name name, FileId file) {
        String n = name.text();
        if (n.equals("Text")) {
            return new ValueKind.Text();
        }
        if (n.equals("Date") || n.equals("Calendar")) {
            return new ValueKind.Day();
        }
        QuantityKind q = library.quantities.get(n);
        if (q != null) {
            return new ValueKind.Quantity(q);
        }
        ChoiceKind c = library.choices.get(n);
        if (c != null) {
            return new ValueKind.Choice(c);
        }
        if (library.kinds.containsKey(n)) {
            return new ValueKind.Reference(n);
        }
        if (!name.isHole()) {
            List<String> all = new ArrayList<>(library.quantities.keySet());
            all.addAll(library.choices.keySet());
            all.addAll(library.kinds.keySet());
            problem(
                    Code.UNKNOWN_KIND,
                    file,
                    name.span(),
                    "There is no quantity kind, choice or block kind `" + n + "`." + Suggest.sentence(n, all));
        }
        return new ValueKind.Unknown();
    }

    private @Nullable Unit unit(FileId file, Name text) {
        Units.Parse p = library.units().parse(text.text());
        if (p instanceof Units.Parse.Ok ok) {
            return ok.unit();
        }
        if (p instanceof Units.Parse.Bad bad) {
            problem(Code.UNKNOWN_UNIT, file, text.span(), bad.message());
        }
        return null;
    }

    private TableDef table(Entry.Table t, FileId file, String owner) {
        int keys = t.keys().size();
        List<Entry.Row> rows = t.rows();
        int headerCells = rows.isEmpty() ? 0 : rows.get(0).cells().size();
        // a value table by two keys spells the second key's values in its header; with exactly one more column than
        // keys
        // both keys are columns
        int keyColumns = t.kind() != null && keys == 2 && headerCells != 3 ? 1 : keys;
        if (t.kind() != null && keys == 2 && headerCells == 3 && secondIsHeader(t)) {
            keyColumns = 1;
        }
        TableDef def = new TableDef(t, file, owner, keyColumns);
        if (rows.isEmpty()) {
            problem(Code.BAD_TABLE, file, t.name().span(), "The table `" + t.name() + "` has no rows.");
            return def;
        }
        for (Entry.Cell c : rows.get(0).cells()) {
            header(def, c, file);
        }
        for (int i = 1; i < rows.size(); i++) {
            if (rows.get(i).cells().size() != headerCells) {
                problem(
                        Code.BAD_TABLE,
                        file,
                        rows.get(i).span(),
                        "This row has " + rows.get(i).cells().size() + " cells, the header of `" + t.name() + "` has "
                                + headerCells + ".");
            } else {
                def.rows.add(rows.get(i).cells());
            }
        }
        for (Note n : t.notes()) {
            if (n instanceof Note.Rows r) {
                words(def, r, file);
            } else if (n instanceof Note.Per p) {
                def.per = p;
            }
        }
        return def;
    }

    private static boolean secondIsHeader(Entry.Table t) {
        Entry.Row header = t.rows().get(0);
        Expr second = header.cells().get(1).values().isEmpty()
                ? new Expr.Hole(Span.NONE)
                : header.cells().get(1).values().get(0);
        return !(second instanceof Expr.Path p
                && p.text().equals(t.keys().get(1).text()));
    }

    private void header(TableDef def, Entry.Cell c, FileId file) {
        Expr e = c.values().isEmpty() ? new Expr.Hole(c.span()) : c.values().get(0);
        Unit unit = null;
        String name = "";
        double number = Double.NaN;
        if (e instanceof Expr.In in) {
            unit = unit(file, in.unit());
            e = in.operand();
        }
        if (e instanceof Expr.Path p) {
            name = p.text();
        } else if (e instanceof Expr.Num n) {
            number = n.value();
            name = n.text();
            if (n.unit() != null) {
                Unit u = unit(file, n.unit());
                if (u != null) {
                    number = u.toBase(number);
                }
            }
        } else {
            problem(Code.BAD_TABLE, file, c.span(), "A header cell names a column, with its unit: `module in mm`.");
        }
        def.columnIndex.put(name, def.columns.size());
        def.columns.add(name);
        def.units.add(unit);
        def.headerNumbers.add(number);
    }

    private void words(TableDef def, Note.Rows r, FileId file) {
        for (int i = 0; i < r.words().size(); i++) {
            String w = r.words().get(i).text();
            if ((w.equals("below") || w.equals("above")) && i + 1 < r.words().size()) {
                TableDef.Beyond b = beyond(r.words().get(i + 1).text());
                if (b != null) {
                    if (w.equals("below")) {
                        def.below = b;
                    } else {
                        def.above = b;
                    }
                    i++;
                    continue;
                }
            }
            TableDef.Between between = between(w);
            if (between == null) {
                problem(
                        Code.BAD_TABLE,
                        file,
                        r.words().get(i).span(),
                        "`" + w
                                + "` is no way to read rows; write exact, linear, inverse, loglog or step, then `below` or `above` with hold, extend or refuse.");
            } else {
                def.between = between;
            }
        }
    }

    private static TableDef.@Nullable Between between(String w) {
        for (TableDef.Between b : TableDef.Between.values()) {
            if (b.name().equalsIgnoreCase(w)) {
                return b;
            }
        }
        return null;
    }

    private static TableDef.@Nullable Beyond beyond(String w) {
        for (TableDef.Beyond b : TableDef.Beyond.values()) {
            if (b.name().equalsIgnoreCase(w)) {
                return b;
            }
        }
        return null;
    }

    private void problem(Code code, FileId file, Span span, String message) {
        problems.add(Diagnostic.of(code, file, span, message));
    }
}
