package backcone.engine.parse;

import backcone.engine.syntax.Entry;
import backcone.engine.syntax.Expr;
import backcone.engine.syntax.FileSyntax;
import backcone.engine.syntax.Name;
import backcone.engine.syntax.Note;
import backcone.engine.text.Span;
import java.nio.charset.StandardCharsets;
import java.util.ArrayList;
import java.util.Collections;
import java.util.List;
import java.util.function.Supplier;
import org.jspecify.annotations.Nullable;

/** Reads what {@link TreeWriter} has written. */
final class TreeReader {
    private final byte[] data;
    private int at;
    private String[] strings = new String[0];
    private int lastStart;

    private TreeReader(byte[] data, int at) {
        this.data = data;
        this.at = at;
    }

    static FileSyntax read(byte[] data, int from) {
        TreeReader r = new TreeReader(data, from);
        r.pool();
        Span span = r.span();
        List<Entry> entries = r.list(r::entry);
        List<FileSyntax.Comment> comments = r.list(r::comment);
        return new FileSyntax(entries, comments, span);
    }

    private void pool() {
        strings = new String[varint()];
        for (int i = 0; i < strings.length; i++) {
            int length = varint();
            strings[i] = new String(data, at, length, StandardCharsets.UTF_8);
            at += length;
        }
    }

    // ---- entries

    private Entry entry() {
        int form = small();
        Span span = span();
        if (form < 10) {
            return entry1(form, span);
        }
        if (form < 20) {
            return entry2(form, span);
        }
        if (form < 30) {
            return entry3(form, span);
        }
        return entry4(form, span);
    }

    private Entry entry1(int form, Span span) {
        return switch (form) {
            case 0 -> new Entry.Fact(path(), expr(), list(this::note), span);
            case 1 -> new Entry.Requirement(path(), Expr.Cmp.valueOf(text()), expr(), list(this::note), span);
            case 2 -> new Entry.Block(name(), nameOrNull(), nameOrNull(), textOrNull(), bodyOrNull(), span);
            case 3 ->
                new Entry.Declaration(
                        name(),
                        nameOrNull(),
                        textOrNull(),
                        name(),
                        nameOrNull(),
                        Entry.Given.valueOf(text()),
                        exprOrNull(),
                        list(this::note),
                        span);
            case 4 -> new Entry.Drive(name(), textOrNull(), list(this::entry), span);
            case 5 -> new Entry.Use(text(), nameOrNull(), span(), span);
            case 6 -> new Entry.Let(name(), expr(), list(this::note), span);
            case 7 -> new Entry.Rate(path(), name(), numOrNull(), nameOrNull(), nameOrNull(), list(this::entry), span);
            case 8 -> new Entry.UseReading(name(), path(), list(this::note), span);
            case 9 ->
                new Entry.Require(
                        expr(), exprOrNull(), exprOrNull(), exprOrNull(), exprOrNull(), list(this::note), span);
            default -> throw unknown(form);
        };
    }

    private Entry entry2(int form, Span span) {
        return switch (form) {
            case 10 -> new Entry.Assert(expr(), list(this::note), span);
            case 11 -> new Entry.Override(path(), expr(), list(this::note), span);
            case 12 -> new Entry.Accept(path(), Expr.Cmp.valueOf(text()), expr(), list(this::note), span);
            case 13 -> new Entry.Waive(path(), list(this::note), span);
            case 14 -> new Entry.Variant(name(), name(), textOrNull(), list(this::entry), span);
            case 15 -> new Entry.Family(name(), name(), textOrNull(), list(this::row), span);
            case 16 -> new Entry.FactFor(name(), name(), expr(), list(this::note), span);
            case 17 -> new Entry.Quantity(name(), name(), textOrNull(), flag(), list(this::name), span);
            case 18 -> new Entry.Source(name(), text(), span);
            case 19 -> new Entry.Choice(name(), textOrNull(), list(this::word), span);
            default -> throw unknown(form);
        };
    }

    private Entry entry3(int form, Span span) {
        return switch (form) {
            case 20 -> new Entry.Kind(name(), nameOrNull(), textOrNull(), list(this::entry), span);
            case 21 -> new Entry.Chapter(name(), name(), textOrNull(), list(this::entry), span);
            case 22 -> new Entry.Method(name(), name(), textOrNull(), list(this::entry), span);
            case 23 -> new Entry.Include(list(this::name), span);
            case 24 ->
                new Entry.Function(name(), list(this::parameter), textOrNull(), name(), expr(), list(this::note), span);
            case 25 ->
                new Entry.Table(
                        name(),
                        textOrNull(),
                        list(this::name),
                        nameOrNull(),
                        nameOrNull(),
                        list(this::note),
                        list(this::row),
                        span);
            case 26 -> new Entry.Parts(list(this::name), name(), nameOrNull(), span);
            case 27 -> new Entry.Part(name(), name(), textOrNull(), span);
            case 28 -> new Entry.Role(name(), expr(), span);
            case 29 -> new Entry.Collect(name(), name(), expr(), span);
            default -> throw unknown(form);
        };
    }

    private Entry entry4(int form, Span span) {
        return switch (form) {
            case 30 -> new Entry.Cases(name(), list(this::name), span);
            case 31 -> new Entry.Each(name(), list(this::entry), span);
            case 32 -> new Entry.Edition(list(this::num), span);
            case 33 -> new Entry.Relation(textOrNull(), exprOrNull(), expr(), list(this::note), span);
            case 34 -> new Entry.Check(name(), textOrNull(), nameOrNull(), expr(), list(this::note), span);
            case 35 ->
                new Entry.Limit(
                        name(),
                        textOrNull(),
                        nameOrNull(),
                        list(this::name),
                        expr(),
                        textOrNull(),
                        list(this::note),
                        span);
            case 36 -> new Entry.Applies(expr(), textOrNull(), span);
            case 37 -> new Entry.Example(text(), list(this::note), list(this::entry), span);
            case 38 -> new Entry.Gives(path(), expr(), exprOrNull(), span);
            case 39 -> new Entry.Bad(span);
            default -> throw unknown(form);
        };
    }

    private Entry.Parameter parameter() {
        Span span = span();
        return new Entry.Parameter(name(), name(), span);
    }

    private Entry.Word word() {
        Span span = span();
        return new Entry.Word(name(), textOrNull(), span);
    }

    private Entry.Row row() {
        Span span = span();
        return new Entry.Row(list(this::cell), span);
    }

    private Entry.Cell cell() {
        Span span = span();
        return new Entry.Cell(list(this::expr), span);
    }

    private @Nullable List<Entry> bodyOrNull() {
        return flag() ? list(this::entry) : null;
    }

    private FileSyntax.Comment comment() {
        Span span = span();
        return new FileSyntax.Comment(text(), span);
    }

    // ---- notes

    private Note note() {
        int form = small();
        Span span = span();
        return switch (form) {
            case 0 -> new Note.Per(nameOrNull(), textOrNull(), dayOrNull(), nameOrNull(), textOrNull(), span);
            case 1 -> new Note.Measured(textOrNull(), span);
            case 2 -> new Note.Assumed(textOrNull(), span);
            case 3 -> new Note.Because(text(), span);
            case 4 -> new Note.Until(dayOrNull(), span);
            case 5 -> new Note.By(text(), span);
            case 6 -> new Note.Otherwise(text(), span);
            case 7 -> new Note.Taking(list(this::taken), span);
            case 8 -> new Note.Reading(name(), expr(), list(this::note), span);
            case 9 -> new Note.InRange(expr(), expr(), span);
            case 10 -> new Note.Rows(list(this::name), span);
            case 11 -> new Note.Worst(name(), span);
            case 12 -> new Note.Is(name(), span);
            case 13 -> new Note.Needed(textOrNull(), span);
            case 14 -> new Note.Offer(expr(), span);
            case 15 -> new Note.Within(expr(), span);
            default -> throw unknown(form);
        };
    }

    private Note.Taken taken() {
        Span span = span();
        return new Note.Taken(path(), nameOrNull(), name(), span);
    }

    // ---- expressions

    private Expr expr() {
        int form = small();
        Span span = span();
        return switch (form) {
            case 0 -> new Expr.Num(text(), number(), nameOrNull(), span);
            case 1 -> new Expr.Str(text(), span);
            case 2 -> new Expr.Day(text(), span);
            case 3 -> new Expr.Path(list(this::name), span);
            case 4 -> new Expr.Neg(expr(), span);
            case 5 -> new Expr.Not(expr(), span);
            case 6 -> new Expr.Binary(Expr.Op.valueOf(text()), expr(), expr(), span);
            case 7 -> new Expr.Compare(list(this::expr), list(() -> Expr.Cmp.valueOf(text())), span);
            case 8 -> new Expr.Given(path(), span);
            case 9 -> new Expr.Call(path(), list(this::expr), span);
            case 10 -> new Expr.Each(name(), exprOrNull(), span);
            case 11 -> new Expr.Column(expr(), name(), span);
            case 12 -> new Expr.Choose(exprOrNull(), list(this::arm), span);
            case 13 -> new Expr.Root(expr(), expr(), expr(), expr(), textOrNull(), span);
            case 14 -> new Expr.Settle(expr(), expr(), expr(), expr(), textOrNull(), span);
            case 15 -> new Expr.In(expr(), name(), span);
            case 16 -> new Expr.Range(expr(), expr(), span);
            case 17 -> new Expr.Toleranced(expr(), expr(), expr(), span);
            case 18 -> new Expr.Dated(expr(), day(), span);
            case 19 -> new Expr.BlockRef(name(), name(), span);
            case 20 -> new Expr.Hole(span);
            default -> throw unknown(form);
        };
    }

    private Expr.Arm arm() {
        Span span = span();
        return new Expr.Arm(exprOrNull(), expr(), span);
    }

    private @Nullable Expr exprOrNull() {
        return flag() ? expr() : null;
    }

    private Expr.Path path() {
        return (Expr.Path) expr();
    }

    private Expr.Num num() {
        return (Expr.Num) expr();
    }

    private Expr.@Nullable Num numOrNull() {
        return (Expr.Num) exprOrNull();
    }

    private Expr.Day day() {
        return (Expr.Day) expr();
    }

    private Expr.@Nullable Day dayOrNull() {
        return (Expr.Day) exprOrNull();
    }

    // ---- small things

    private Name name() {
        Span span = span();
        return new Name(text(), span);
    }

    private @Nullable Name nameOrNull() {
        return flag() ? name() : null;
    }

    private <T> List<T> list(Supplier<T> reader) {
        int size = varint();
        if (size == 0) {
            return List.of();
        }
        if (size == 1) {
            return List.of(reader.get());
        }
        List<T> list = new ArrayList<>(size);
        for (int i = 0; i < size; i++) {
            list.add(reader.get());
        }
        return Collections.unmodifiableList(list);
    }

    private String text() {
        return strings[varint() - 1];
    }

    private @Nullable String textOrNull() {
        int index = varint();
        return index == 0 ? null : strings[index - 1];
    }

    private Span span() {
        int distance = varint();
        lastStart += distance >>> 1 ^ -(distance & 1);
        return new Span(lastStart, lastStart + varint());
    }

    private double number() {
        long bits = 0;
        for (int i = 0; i < 8; i++) {
            bits = bits << 8 | (data[at] & 0xFF);
            at++;
        }
        return Double.longBitsToDouble(bits);
    }

    private boolean flag() {
        return small() != 0;
    }

    private int small() {
        int value = data[at] & 0xFF;
        at++;
        return value;
    }

    private int varint() {
        int value = 0;
        int shift = 0;
        while (true) {
            int b = data[at];
            at++;
            value |= (b & 0x7F) << shift;
            if (b >= 0) {
                return value;
            }
            shift += 7;
        }
    }

    private static IllegalArgumentException unknown(int form) {
        return new IllegalArgumentException("no form has the number " + form);
    }
}
