package backcone.engine.answers;

import backcone.engine.graph.Shapes;
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
import backcone.engine.syntax.Note;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import backcone.engine.units.Units;
import java.util.ArrayList;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;
import java.util.function.Function;
import org.jspecify.annotations.Nullable;

/** The handbook as pages of text: an overview, and a page for every kind, method, choice, quantity, table and property. */
public final class HandbookPages {
    private final Library library;
    private final Function<FileId, @Nullable String> texts;

    public HandbookPages(Shapes shapes, Function<FileId, @Nullable String> texts) {
        this.library = shapes.library();
        this.texts = texts;
    }

    public List<String> names() {
        Set<String> out = new LinkedHashSet<>(library.kinds.keySet());
        out.addAll(library.methods.keySet());
        out.addAll(library.choices.keySet());
        out.addAll(library.quantities.keySet());
        out.addAll(library.tables.keySet());
        out.addAll(library.functions.keySet());
        for (KindDef k : library.kinds.values()) {
            k.body().decls.forEach(d -> out.add(d.name));
        }
        out.add("units");
        return List.copyOf(out);
    }

    public List<String> overview() {
        List<String> out = new ArrayList<>();
        out.add("Blocks");
        for (KindDef k : library.kinds.values()) {
            out.add(pair("  ", k.name(), k.meaning()));
        }
        out.add("");
        out.add("Methods");
        for (List<MethodDef> ms : library.methods.values()) {
            for (MethodDef m : ms) {
                String editions =
                        m.body().editions.isEmpty() ? "" : " (editions " + String.join(", ", m.body().editions) + ")";
                out.add(pair(
                        "  ",
                        m.name(),
                        "for " + m.kind() + ": " + (m.meaning() == null ? "" : m.meaning()) + editions));
            }
        }
        out.add("");
        out.add("Choices:    " + String.join(" ", library.choices.keySet()));
        out.add("Quantities: " + String.join(" ", library.quantities.keySet()));
        out.add("Tables:     " + String.join(" ", library.tables.keySet()));
        out.add("");
        out.add("`backcone handbook NAME` shows one of them, `backcone handbook units` the units.");
        return out;
    }

    public List<String> page(String name) {
        List<String> out = new ArrayList<>();
        if (name.equals("units")) {
            return units();
        }
        KindDef k = library.kinds.get(name);
        if (k != null) {
            kind(k, out);
        }
        for (MethodDef m : library.methods.getOrDefault(name, List.of())) {
            method(m, out);
        }
        ChoiceKind c = library.choices.get(name);
        if (c != null) {
            choice(c, out);
        }
        QuantityKind q = library.quantities.get(name);
        if (q != null) {
            out.add(q.name() + ": " + q.meaning() + ", shown in " + q.shown().text()
                    + (q.unlike().isEmpty() ? "" : ", not to be mixed with " + String.join(", ", q.unlike())));
            out.add("  units: "
                    + String.join(" ", library.units().unitsOf(q.shown().dimension())));
        }
        TableDef t = library.tables.get(name);
        if (t != null) {
            table(t, "", out);
        }
        FunctionDef f = library.functions.get(name);
        if (f != null) {
            out.add("function " + f.name() + ": "
                    + (f.syntax().meaning() == null ? "" : f.syntax().meaning()));
            out.add("  = " + text(f.file(), f.syntax().value().span()));
        }
        if (out.isEmpty()) {
            property(name, out);
        }
        return out;
    }

    private List<String> units() {
        List<String> out = new ArrayList<>();
        for (String u : library.units().words()) {
            if (library.units().parse(u) instanceof Units.Parse.Ok ok) {
                String also = library.units().nameOf(ok.unit().dimension());
                out.add(pair(
                        "  ", u, library.units().describe(u) + (also.startsWith("quantity") ? "" : " (" + also + ")")));
            }
        }
        out.add("");
        out.add("Products are written without blanks: N/mm^2, kg/(m*s), 8 1/in.");
        return out;
    }

    private void kind(KindDef k, List<String> out) {
        out.add(k.name() + ": " + (k.meaning() == null ? "" : k.meaning()));
        for (KindDef x : library.lineage(k.name())) {
            body(x.body(), "  ", out);
        }
        boolean head = false;
        for (KindDef x : library.lineage(k.name())) {
            for (MethodDef c : library.chapters.getOrDefault(x.name(), List.of())) {
                if (!head) {
                    out.add("");
                    out.add("  Always computed:");
                    head = true;
                }
                out.add("  " + c.name() + ": " + (c.meaning() == null ? "" : c.meaning()));
                body(c.body(), "    ", out);
            }
        }
    }

    private void method(MethodDef m, List<String> out) {
        if (!out.isEmpty()) {
            out.add("");
        }
        out.add("Method " + m.name() + " for " + m.kind() + ": " + (m.meaning() == null ? "" : m.meaning()));
        if (!m.body().editions.isEmpty()) {
            out.add("  editions: " + String.join(", ", m.body().editions));
        }
        for (Entry.Include i : m.body().includes) {
            i.methods().forEach(n -> out.add("  includes " + n + " (`backcone handbook " + n + "`)"));
        }
        for (Entry.Applies a : m.body().applies) {
            out.add("  applies when " + text(m.file(), a.condition().span())
                    + (a.otherwise() == null ? "" : "; else: " + a.otherwise()));
        }
        body(m.body(), "  ", out);
        for (Entry.Example x : m.body().examples) {
            out.add("  example: " + x.title());
        }
    }

    private void body(BodyDef b, String indent, List<String> out) {
        for (Entry.Part p : b.part) {
            out.add(pair(indent, p.name().text() + " { }", p.meaning() == null ? "one " + p.kind() : p.meaning()));
        }
        for (Entry.Parts p : b.parts) {
            List<String> names = new ArrayList<>();
            p.names().forEach(n -> names.add(n.text()));
            out.add(pair(indent, String.join(", ", names) + " { }", "of kind " + p.kind()));
        }
        for (Decl d : b.decls) {
            decl(d, indent, out);
        }
        for (TableDef t : b.tables.values()) {
            table(t, indent, out);
        }
        for (BodyDef.LimitDef l : b.limits) {
            out.add(indent + "limit " + l.syntax().name() + ": "
                    + text(l.file(), l.syntax().condition().span())
                    + (l.syntax().otherwise() == null
                            ? ""
                            : "; else: " + l.syntax().otherwise()));
        }
        for (Map.Entry<String, List<BodyDef>> e : b.each.entrySet()) {
            out.add(indent + "for each " + e.getKey() + ":");
            e.getValue().forEach(x -> body(x, indent + "  ", out));
        }
    }

    private void decl(Decl d, String indent, List<String> out) {
        String symbol = d.symbol == null || d.symbol.equals(d.name) ? "" : " " + d.symbol;
        String what = (d.meaning == null ? "" : d.meaning) + kindOf(d);
        out.add(pair(indent, (d.role == Decl.Role.CHECK ? "check " : "") + d.name + symbol, what));
        String more = indent + "    ";
        if (d.value != null) {
            out.add(more
                    + (d.how == Entry.Given.DEFAULT ? "default " : "= ")
                    + text(d.file, d.value.span())
                    + (d.resultUnit == null ? "" : "   in " + d.resultUnit.text()));
        }
        if (!d.taking.isEmpty()) {
            StringBuilder t = new StringBuilder("taking ");
            for (int i = 0; i < d.taking.size(); i++) {
                t.append(i == 0 ? "" : ", ")
                        .append(d.taking.get(i).path().text())
                        .append(" in ")
                        .append(d.taking.get(i).unit());
            }
            out.add(more + t);
        }
        for (Note.Reading r : d.readings) {
            out.add(more + "reading " + r.name() + " = "
                    + text(d.file, r.value().span()));
        }
        Note.InRange range = d.range;
        if (range != null) {
            out.add(more + "from " + text(d.file, range.low().span()) + " to "
                    + text(d.file, range.high().span()));
        }
        if (d.needed) {
            out.add(more + "never assumed" + (d.neededBecause == null ? "" : ": " + d.neededBecause));
        }
        if (d.per != null && d.value != null) {
            out.add(more + source(d.per) + ", " + d.trust().word());
        }
    }

    private String source(Note.Per p) {
        String name = p.source() == null ? "" : p.source().text();
        Library.SourceDef def = library.sources.get(name);
        return (def == null ? name : def.text()) + (p.text() == null ? "" : ", " + p.text());
    }

    private static String kindOf(Decl d) {
        if (d.kind instanceof ValueKind.Quantity q) {
            String u = q.kind().shown().text();
            return u.equals("1") ? "" : " [" + u + "]";
        } else if (d.kind instanceof ValueKind.Choice c) {
            return ": " + String.join(", ", c.kind().words().keySet());
        } else if (d.kind instanceof ValueKind.Reference r) {
            return " (a " + r.kind() + ")";
        } else if (d.kind instanceof ValueKind.Text) {
            return " (text)";
        }
        return "";
    }

    private void choice(ChoiceKind c, List<String> out) {
        out.add(c.name() + ": " + (c.meaning() == null ? "" : c.meaning()));
        c.words().forEach((w, m) -> out.add(pair("  ", w, m)));
    }

    private void table(TableDef t, String indent, List<String> out) {
        out.add(indent + "table " + t.name() + ": " + (t.syntax.meaning() == null ? "" : t.syntax.meaning())
                + (t.per == null ? "" : " (" + source(t.per) + ", " + t.trust().word() + ")"));
        for (Entry.Row r : t.syntax.rows()) {
            StringBuilder b = new StringBuilder(indent + "    ");
            for (int i = 0; i < r.cells().size(); i++) {
                b.append(i == 0 ? "" : " | ")
                        .append(text(t.file, r.cells().get(i).span()));
            }
            out.add(b.toString());
        }
    }

    private void property(String name, List<String> out) {
        for (KindDef k : library.kinds.values()) {
            for (Decl d : k.body().decls) {
                if (d.name.equals(name) || name.equals(d.symbol)) {
                    out.add("in " + k.name() + ":");
                    decl(d, "  ", out);
                }
            }
        }
        for (List<MethodDef> cs : library.chapters.values()) {
            for (MethodDef c : cs) {
                properties(name, c.body(), "always computed for " + c.kind(), out);
            }
        }
        for (List<MethodDef> ms : library.methods.values()) {
            for (MethodDef m : ms) {
                properties(name, m.body(), "in method " + m.name() + " for " + m.kind(), out);
            }
        }
    }

    private void properties(String name, BodyDef b, String where, List<String> out) {
        for (Decl d : b.decls) {
            if (d.name.equals(name) || name.equals(d.symbol)) {
                out.add(where + ":");
                decl(d, "  ", out);
            }
        }
        b.each.values().forEach(l -> l.forEach(x -> properties(name, x, where, out)));
    }

    private static String pair(String indent, String name, @Nullable String meaning) {
        return meaning == null || meaning.isEmpty()
                ? indent + name
                : String.format(java.util.Locale.ROOT, "%s%-28s %s", indent, name, meaning);
    }

    private String text(FileId file, Span span) {
        String t = texts.apply(file);
        if (t == null || span.end() > t.length()) {
            return "…";
        }
        StringBuilder b = new StringBuilder();
        for (String line : t.substring(span.start(), span.end()).split("\n")) {
            int hash = line.indexOf('#');
            b.append(b.length() == 0 ? "" : " ").append((hash >= 0 ? line.substring(0, hash) : line).strip());
        }
        return b.toString().replaceAll("\\s+", " ");
    }
}
