package backcone.engine.parse;

import backcone.engine.syntax.Entry;
import backcone.engine.syntax.Expr;
import backcone.engine.syntax.Name;
import backcone.engine.syntax.Note;
import backcone.engine.text.Span;
import backcone.grammar.gen.BackconeParser;
import java.util.ArrayList;
import java.util.List;
import org.antlr.v4.runtime.ParserRuleContext;
import org.antlr.v4.runtime.Token;
import org.antlr.v4.runtime.tree.ParseTree;
import org.antlr.v4.runtime.tree.TerminalNode;
import org.jspecify.annotations.Nullable;

/** Turns the parser's tree into ours, at once and completely; afterwards the former is dropped. */
final class TreeBuilder {
    private final Places places;
    private final Exprs exprs;
    private final Notes notes;
    private final Exprs.ItemCheck check;

    TreeBuilder(Places places, Exprs.ItemCheck check) {
        this.places = places;
        this.check = check;
        this.exprs = new Exprs(places, check);
        this.notes = new Notes(places, exprs);
    }

    List<Entry> entries(BackconeParser.@Nullable EntriesContext c) {
        if (c == null || c.getChildCount() == 0) {
            return List.of();
        }
        List<Entry> list = new ArrayList<>();
        for (ParseTree child : c.children) {
            if (child instanceof BackconeParser.EntryContext e) {
                list.add(e.tree instanceof Entry ? (Entry) e.tree : entry(e));
            }
        }
        return List.copyOf(list);
    }

    private List<Entry> body(BackconeParser.@Nullable BodyContext c, BackconeParser.@Nullable RestContext rest) {
        List<Entry> list = bodyOrNull(c, rest);
        return list == null ? List.of() : list;
    }

    /** The body, or the one that stands in the text the entry could not use, so that its entries are not lost. */
    private @Nullable List<Entry> bodyOrNull(
            BackconeParser.@Nullable BodyContext c, BackconeParser.@Nullable RestContext rest) {
        if (c != null && c.LBRACE() != null) {
            return entries(c.entries());
        }
        if (rest == null || rest.entries().isEmpty()) {
            return null;
        }
        List<Entry> list = new ArrayList<>();
        for (BackconeParser.EntriesContext inner : rest.entries()) {
            list.addAll(entries(inner));
        }
        return List.copyOf(list);
    }

    Entry entry(BackconeParser.EntryContext c) {
        BackconeParser.RestContext rest = c.rest();
        check.check(c, rest);
        ParseTree child = c.getChildCount() == 0 ? c : c.getChild(0);
        Span span = places.of(c);
        Entry drive = driveEntry(child, rest, span);
        if (drive != null) {
            return drive;
        }
        Entry handbook = handbookEntry(child, rest, span);
        if (handbook != null) {
            return handbook;
        }
        return new Entry.Bad(span);
    }

    // ---- blocks, facts, drives

    private @Nullable Entry driveEntry(ParseTree e, BackconeParser.@Nullable RestContext rest, Span span) {
        if (e instanceof BackconeParser.FactContext f) {
            return new Entry.Fact(exprs.path(f.path(), f), exprs.value(f.value(), f), notes.of(f.note()), span);
        }
        if (e instanceof BackconeParser.BlockContext b) {
            return new Entry.Block(
                    places.name(b.head, b),
                    places.nameOrNull(b.id),
                    b.ON() == null ? null : places.name(b.shaft, b),
                    Exprs.textOrNull(b.text()),
                    bodyOrNull(b.body(), rest),
                    span);
        }
        if (e instanceof BackconeParser.RequirementContext r) {
            return new Entry.Requirement(
                    exprs.path(r.path(), r), Exprs.sign(r.cmpSign()), exprs.sum(r.sum(), r), notes.of(r.note()), span);
        }
        if (e instanceof BackconeParser.DeclarationContext c) {
            return declaration(c, span);
        }
        if (e instanceof BackconeParser.FactForContext f) {
            return new Entry.FactFor(
                    places.name(f.id, f), places.name(f.other, f), exprs.value(f.value(), f), notes.of(f.note()), span);
        }
        if (e instanceof BackconeParser.DriveContext d) {
            return new Entry.Drive(places.name(d.id, d), Exprs.textOrNull(d.text()), body(d.body(), rest), span);
        }
        if (e instanceof BackconeParser.UseContext c) {
            return use(c, span);
        }
        if (e instanceof BackconeParser.LetContext l) {
            return new Entry.Let(places.name(l.id, l), exprs.value(l.value(), l), notes.of(l.note()), span);
        }
        if (e instanceof BackconeParser.RateContext c) {
            return rate(c, rest, span);
        }
        if (e instanceof BackconeParser.RequireContext c) {
            return require(c, span);
        }
        if (e instanceof BackconeParser.AssertionContext a) {
            return new Entry.Assert(exprs.expr(a.expr(), a), notes.of(a.note()), span);
        }
        if (e instanceof BackconeParser.OverrideContext o) {
            return new Entry.Override(exprs.path(o.path(), o), exprs.value(o.value(), o), notes.of(o.note()), span);
        }
        if (e instanceof BackconeParser.AcceptContext a) {
            return new Entry.Accept(
                    exprs.path(a.path(), a), Exprs.sign(a.cmpSign()), exprs.sum(a.sum(), a), notes.of(a.note()), span);
        }
        if (e instanceof BackconeParser.WaiveContext w) {
            return new Entry.Waive(exprs.path(w.path(), w), notes.of(w.note()), span);
        }
        if (e instanceof BackconeParser.VariantContext v) {
            return new Entry.Variant(
                    places.name(v.id, v),
                    places.name(v.base, v),
                    Exprs.textOrNull(v.text()),
                    body(v.body(), rest),
                    span);
        }
        if (e instanceof BackconeParser.FamilyContext f) {
            return new Entry.Family(
                    places.name(f.id, f),
                    places.name(f.base, f),
                    Exprs.textOrNull(f.text()),
                    rows(f.rows(), rest),
                    span);
        }
        return null;
    }

    private Entry declaration(BackconeParser.DeclarationContext d, Span span) {
        Entry.Given how = Entry.Given.INPUT;
        Expr value = null;
        BackconeParser.DefinitionContext def = d.definition();
        if (def != null) {
            if (def.DEFAULT() != null) {
                how = Entry.Given.DEFAULT;
                value = exprs.value(def.value(), def);
            } else if (def.RELATED() != null) {
                how = Entry.Given.RELATION;
                value = exprs.expr(def.expr(), def);
            } else {
                how = Entry.Given.EQUALS;
                value = exprs.value(def.value(), def);
            }
        }
        return new Entry.Declaration(
                places.name(d.id, d),
                places.nameOrNull(d.symbol),
                Exprs.textOrNull(d.text()),
                places.name(d.ofKind, d),
                unit(d.UNIT()),
                how,
                value,
                notes.of(d.note()),
                span);
    }

    private @Nullable Name unit(@Nullable TerminalNode unit) {
        return places.nameOrNull(unit == null ? null : unit.getSymbol());
    }

    private Entry use(BackconeParser.UseContext u, Span span) {
        if (u.id != null || u.text() == null) {
            return new Entry.UseReading(places.name(u.id, u), exprs.path(u.path(), u), notes.of(u.note()), span);
        }
        return new Entry.Use(Exprs.text(u.text()), places.nameOrNull(u.alias), places.of(u.text()), span);
    }

    private Entry rate(BackconeParser.RateContext r, BackconeParser.@Nullable RestContext rest, Span span) {
        Expr.Num edition = null;
        Name as = null;
        Name under = null;
        for (BackconeParser.RateWordContext w : r.rateWord()) {
            Token name = w.NAME() == null ? null : w.NAME().getSymbol();
            if (w.NUMBER() != null) {
                edition = Exprs.num(w.NUMBER().getSymbol(), null);
            } else if (w.AS() != null) {
                as = places.name(name, w);
            } else if (w.UNDER() != null) {
                under = places.name(name, w);
            }
        }
        return new Entry.Rate(
                exprs.path(r.path(), r), places.name(r.id, r), edition, as, under, body(r.body(), rest), span);
    }

    private Entry require(BackconeParser.RequireContext r, Span span) {
        List<Note> list = notes.of(r.note());
        Expr subject = exprs.expr(r.expr(), r);
        if (r.BETWEEN() != null) {
            return new Entry.Require(subject, exprs.sum(r.low, r), exprs.sum(r.high, r), null, null, list, span);
        }
        if (r.WITHIN() == null) {
            return new Entry.Require(subject, null, null, null, null, list, span);
        }
        Expr tolerance = exprs.sum(r.tolerance, r);
        if (r.OF() != null) {
            return new Entry.Require(subject, null, null, tolerance, exprs.sum(r.middle, r), list, span);
        }
        // require a == b within 1 %: a note like any other
        List<Note> all = new ArrayList<>(list.size() + 1);
        all.add(new Note.Within(tolerance, Places.of(r.WITHIN().getSymbol()).to(tolerance.span())));
        all.addAll(list);
        return new Entry.Require(subject, null, null, null, null, List.copyOf(all), span);
    }

    // ---- handbook

    private @Nullable Entry handbookEntry(ParseTree e, BackconeParser.@Nullable RestContext rest, Span span) {
        if (e instanceof BackconeParser.QuantityContext q) {
            return new Entry.Quantity(
                    places.name(q.id, q),
                    places.name(q.UNIT() == null ? null : q.UNIT().getSymbol(), q),
                    Exprs.textOrNull(q.text()),
                    q.WHOLE() != null,
                    names(q.names()),
                    span);
        }
        if (e instanceof BackconeParser.SourceContext s) {
            String text = Exprs.textOrNull(s.text());
            return new Entry.Source(places.name(s.id, s), text == null ? "" : text, span);
        }
        if (e instanceof BackconeParser.ChoiceContext c) {
            return new Entry.Choice(places.name(c.id, c), Exprs.textOrNull(c.text()), words(c.words(), rest), span);
        }
        if (e instanceof BackconeParser.KindContext k) {
            return new Entry.Kind(
                    places.name(k.id, k),
                    k.IS() == null ? null : places.name(k.base, k),
                    Exprs.textOrNull(k.text()),
                    body(k.body(), rest),
                    span);
        }
        if (e instanceof BackconeParser.ChapterContext c) {
            return new Entry.Chapter(
                    places.name(c.id, c),
                    places.name(c.ofKind, c),
                    Exprs.textOrNull(c.text()),
                    body(c.body(), rest),
                    span);
        }
        if (e instanceof BackconeParser.MethodContext m) {
            return new Entry.Method(
                    places.name(m.id, m),
                    places.name(m.ofKind, m),
                    Exprs.textOrNull(m.text()),
                    body(m.body(), rest),
                    span);
        }
        if (e instanceof BackconeParser.IncludeContext c) {
            return new Entry.Include(names(c.names()), span);
        }
        if (e instanceof BackconeParser.FunctionContext c) {
            return function(c, span);
        }
        if (e instanceof BackconeParser.TableContext t) {
            return new Entry.Table(
                    places.name(t.id, t),
                    Exprs.textOrNull(t.text()),
                    names(t.names()),
                    t.COLON() == null ? null : places.name(t.ofKind, t),
                    unit(t.UNIT()),
                    notes.of(t.note()),
                    rows(t.rows(), rest),
                    span);
        }
        if (e instanceof BackconeParser.PartsContext p) {
            return new Entry.Parts(names(p.names()), places.name(p.ofKind, p), places.nameOrNull(p.alias), span);
        }
        if (e instanceof BackconeParser.PartContext p) {
            return new Entry.Part(places.name(p.id, p), places.name(p.ofKind, p), Exprs.textOrNull(p.text()), span);
        }
        if (e instanceof BackconeParser.RoleContext r) {
            return new Entry.Role(places.name(r.id, r), exprs.expr(r.expr(), r), span);
        }
        if (e instanceof BackconeParser.CollectContext c) {
            return new Entry.Collect(places.name(c.id, c), places.name(c.ofKind, c), exprs.expr(c.expr(), c), span);
        }
        if (e instanceof BackconeParser.CasesContext c) {
            List<Name> list = new ArrayList<>();
            for (Entry.Word w : words(c.words(), rest)) {
                list.add(w.name());
            }
            return new Entry.Cases(places.name(c.id, c), List.copyOf(list), span);
        }
        if (e instanceof BackconeParser.EachBlockContext x) {
            return new Entry.Each(places.name(x.id, x), body(x.body(), rest), span);
        }
        return methodEntry(e, rest, span);
    }

    /** What stands in the body of a kind, chapter or method. */
    private @Nullable Entry methodEntry(ParseTree e, BackconeParser.@Nullable RestContext rest, Span span) {
        if (e instanceof BackconeParser.EditionsContext c) {
            List<Expr.Num> list = new ArrayList<>();
            for (TerminalNode n : c.NUMBER()) {
                list.add(Exprs.num(n.getSymbol(), null));
            }
            return new Entry.Edition(List.copyOf(list), span);
        }
        if (e instanceof BackconeParser.RelationContext r) {
            return new Entry.Relation(
                    Exprs.textOrNull(r.text()),
                    r.WHEN() == null ? null : exprs.expr(r.condition, r),
                    exprs.expr(r.equation, r),
                    notes.of(r.note()),
                    span);
        }
        if (e instanceof BackconeParser.CheckContext c) {
            return new Entry.Check(
                    places.name(c.id, c),
                    Exprs.textOrNull(c.text()),
                    places.nameOrNull(c.ofKind),
                    exprs.expr(c.expr(), c),
                    notes.of(c.note()),
                    span);
        }
        if (e instanceof BackconeParser.LimitContext l) {
            List<Note> list = new ArrayList<>(notes.of(l.note()));
            String otherwise = takeOtherwise(list);
            return new Entry.Limit(
                    places.name(l.id, l),
                    Exprs.textOrNull(l.text()),
                    l.AS() == null ? null : places.name(l.level, l),
                    names(l.names()),
                    exprs.expr(l.expr(), l),
                    otherwise,
                    List.copyOf(list),
                    span);
        }
        if (e instanceof BackconeParser.AppliesContext a) {
            List<Note> list = new ArrayList<>(notes.of(a.note()));
            return new Entry.Applies(exprs.expr(a.expr(), a), takeOtherwise(list), span);
        }
        if (e instanceof BackconeParser.ExampleContext x) {
            String title = Exprs.textOrNull(x.text());
            return new Entry.Example(title == null ? "" : title, notes.of(x.note()), body(x.body(), rest), span);
        }
        if (e instanceof BackconeParser.GivesContext g) {
            return new Entry.Gives(
                    exprs.path(g.path(), g),
                    exprs.value(g.value(), g),
                    g.WITHIN() == null ? null : exprs.sum(g.sum(), g),
                    span);
        }
        return null;
    }

    private Entry function(BackconeParser.FunctionContext f, Span span) {
        List<Entry.Parameter> parameters = new ArrayList<>();
        if (f.parameters() != null) {
            for (BackconeParser.ParameterContext p : f.parameters().parameter()) {
                parameters.add(new Entry.Parameter(places.name(p.id, p), places.name(p.ofKind, p), places.of(p)));
            }
        }
        return new Entry.Function(
                places.name(f.id, f),
                List.copyOf(parameters),
                Exprs.textOrNull(f.text()),
                places.name(f.ofKind, f),
                exprs.expr(f.expr(), f),
                notes.of(f.note()),
                span);
    }

    private static @Nullable String takeOtherwise(List<Note> list) {
        for (int i = 0; i < list.size(); i++) {
            Note n = list.get(i);
            if (n instanceof Note.Otherwise otherwise) {
                list.remove(i);
                return otherwise.text();
            }
        }
        return null;
    }

    // ---- lists

    private List<Name> names(BackconeParser.@Nullable NamesContext c) {
        if (c == null || c.NAME().isEmpty()) {
            return List.of();
        }
        List<Name> list = new ArrayList<>(c.NAME().size());
        for (TerminalNode n : c.NAME()) {
            list.add(new Name(n.getText(), Places.of(n.getSymbol())));
        }
        return List.copyOf(list);
    }

    private List<Entry.Word> words(
            BackconeParser.@Nullable WordsContext own, BackconeParser.@Nullable RestContext rest) {
        BackconeParser.WordListContext c = own == null || own.WORDS_OPEN() == null ? null : own.wordList();
        if (c == null && rest != null && !rest.wordList().isEmpty()) {
            c = rest.wordList(0);
        }
        if (c == null) {
            return List.of();
        }
        List<Entry.Word> list = new ArrayList<>();
        for (BackconeParser.WordContext w : c.word()) {
            check.check(w, w.rest());
            BackconeParser.OneWordContext word = w.oneWord();
            if (word.NAME() != null) {
                list.add(new Entry.Word(
                        places.name(word.NAME().getSymbol(), w), Exprs.textOrNull(word.text()), places.of(w)));
            }
        }
        return List.copyOf(list);
    }

    private List<Entry.Row> rows(BackconeParser.@Nullable RowsContext own, BackconeParser.@Nullable RestContext rest) {
        BackconeParser.RowListContext c = own == null || own.ROWS_OPEN() == null ? null : own.rowList();
        if (c == null && rest != null && !rest.rowList().isEmpty()) {
            c = rest.rowList(0);
        }
        if (c == null) {
            return List.of();
        }
        List<Entry.Row> list = new ArrayList<>();
        for (BackconeParser.RowContext r : c.row()) {
            check.check(r, r.rest());
            List<Entry.Cell> cells = new ArrayList<>(r.cells().cell().size());
            for (BackconeParser.CellContext cell : r.cells().cell()) {
                cells.add(cell(cell, r));
            }
            list.add(new Entry.Row(List.copyOf(cells), places.of(r)));
        }
        return List.copyOf(list);
    }

    private Entry.Cell cell(BackconeParser.CellContext c, ParserRuleContext row) {
        List<Expr> values = new ArrayList<>(c.value().size());
        for (BackconeParser.ValueContext v : c.value()) {
            values.add(exprs.value(v, c));
        }
        if (values.isEmpty()) {
            values.add(exprs.hole(row));
        }
        return new Entry.Cell(List.copyOf(values), places.of(c));
    }
}
