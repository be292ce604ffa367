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
    private static final Expr.Op[] OPS = Expr.Op.values();
    private static final Expr.Cmp[] CMPS = Expr.Cmp.values();
    private static final Entry.Given[] GIVEN = Entry.Given.values();

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
        switch (form) {
            case 0:
                return new Entry.Fact(path(), expr(), list(this::note), span);
            case 1:
                return new Entry.Requirement(path(), CMPS[small()], expr(), list(this::note), span);
            case 2:
                return new Entry.Block(name(), nameOrNull(), nameOrNull(), textOrNull(), bodyOrNull(), span);
            case 3:
                return new Entry.Declaration(
                        name(),
                        nameOrNull(),
                        textOrNull(),
                        name(),
                        nameOrNull(),
                        GIVEN[small()],
                        exprOrNull(),
                        list(this::note),
                        span);
            case 4:
                return new Entry.Drive(name(), textOrNull(), list(this::entry), span);
            case 5:
                return new Entry.Use(text(), nameOrNull(), span(), span);
            case 6:
                return new Entry.Let(name(), expr(), list(this::note), span);
            case 7:
                return new Entry.Rate(path(), name(), numOrNull(), nameOrNull(), nameOrNull(), list(this::entry), span);
            case 8:
                return new Entry.UseReading(name(), path(), list(this::note), span);
            case 9:
                return new Entry.Require(
                        expr(), exprOrNull(), exprOrNull(), exprOrNull(), exprOrNull(), list(this::note), span);
            default:
                throw unknown(form);
        }
    }

    private Entry entry2(int form, Span span) {
        switch (form) {
            case 10:
                return new Entry.Assert(expr(), list(this::note), span);
            case 11:
                return new Entry.Override(path(), expr(), list(this::note), span);
            case 12:
                return new Entry.Accept(path(), CMPS[small()], expr(), list(this::note), span);
            case 13:
                return new Entry.Waive(path(), list(this::note), span);
            case 14:
                return new Entry.Variant(name(), name(), textOrNull(), list(this::entry), span);
            case 15:
                return new Entry.Family(name(), name(), textOrNull(), list(this::row), span);
            case 16:
                return new Entry.FactFor(name(), name(), expr(), list(this::note), span);
            case 17:
                return new Entry.Quantity(name(), name(), textOrNull(), flag(), list(this::name), span);
            case 18:
                return new Entry.Source(name(), text(), span);
            case 19:
                return new Entry.Choice(name(), textOrNull(), list(this::word), span);
            default:
                throw unknown(form);
        }
    }

    private Entry entry3(int form, Span span) {
        switch (form) {
            case 20:
                return new Entry.Kind(name(), nameOrNull(), textOrNull(), list(this::entry), span);
            case 21:
                return new Entry.Chapter(name(), name(), textOrNull(), list(this::entry), span);
            case 22:
                return new Entry.Method(name(), name(), textOrNull(), list(this::entry), span);
            case 23:
                return new Entry.Include(list(this::name), span);
            case 24:
                return new Entry.Function(
                        name(), list(this::parameter), textOrNull(), name(), expr(), list(this::note), span);
            case 25:
                return new Entry.Table(
                        name(),
                        textOrNull(),
                        list(this::name),
                        nameOrNull(),
                        nameOrNull(),
                        list(this::note),
                        list(this::row),
                        span);
            case 26:
                return new Entry.Parts(list(this::name), name(), nameOrNull(), span);
            case 27:
                return new Entry.Part(name(), name(), textOrNull(), span);
            case 28:
                return new Entry.Role(name(), expr(), span);
            case 29:
                return new Entry.Collect(name(), name(), expr(), span);
            default:
                throw unknown(form);
        }
    }

    private Entry entry4(int form, Span span) {
        switch (form) {
            case 30:
                return new Entry.Cases(name(), list(this::name), span);
            case 31:
                return new Entry.Each(name(), list(this::entry), span);
            case 32:
                return new Entry.Edition(list(this::num), span);
            case 33:
                return new Entry.Relation(textOrNull(), exprOrNull(), expr(), list(this::note), span);
            case 34:
                return new Entry.Check(name(), textOrNull(), nameOrNull(), expr(), list(this::note), span);
            case 35:
                return new Entry.Limit(
                        name(),
                        textOrNull(),
                        nameOrNull(),
                        list(this::name),
                        expr(),
                        textOrNull(),
                        list(this::note),
                        span);
            case 36:
                return new Entry.Applies(expr(), textOrNull(), span);
            case 37:
                return new Entry.Example(text(), list(this::note), list(this::entry), span);
            case 38:
                return new Entry.Gives(path(), expr(), exprOrNull(), span);
            case 39:
                return new Entry.Bad(span);
            default:
                throw unknown(form);
        }
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
        switch (form) {
            case 0:
                return new Note.Per(nameOrNull(), textOrNull(), dayOrNull(), nameOrNull(), textOrNull(), span);
            case 1:
                return new Note.Measured(textOrNull(), span);
            case 2:
                return new Note.Assumed(textOrNull(), span);
            case 3:
                return new Note.Because(text(), span);
            case 4:
                return new Note.Until(dayOrNull(), span);
            case 5:
                return new Note.By(text(), span);
            case 6:
                return new Note.Otherwise(text(), span);
            case 7:
                return new Note.Taking(list(this::taken), span);
            case 8:
                return new Note.Reading(name(), expr(), list(this::note), span);
            case 9:
                return new Note.InRange(expr(), expr(), span);
            case 10:
                return new Note.Rows(list(this::name), span);
            case 11:
                return new Note.Worst(name(), span);
            case 12:
                return new Note.Is(name(), span);
            case 13:
                return new Note.Needed(textOrNull(), span);
            case 14:
                return new Note.Offer(expr(), span);
            case 15:
                return new Note.Within(expr(), span);
            default:
                throw unknown(form);
        }
    }

    private Note.Taken taken() {
        Span span = span();
        return new Note.Taken(path(), nameOrNull(), name(), span);
    }

    // ---- expressions

    private Expr expr() {
        int form = small();
        Span span = span();
        switch (form) {
            case 0:
                return new Expr.Num(text(), number(), nameOrNull(), span);
            case 1:
                return new Expr.Str(text(), span);
            case 2:
                return new Expr.Day(text(), span);
            case 3:
                return new Expr.Path(list(this::name), span);
            case 4:
                return new Expr.Neg(expr(), span);
            case 5:
                return new Expr.Not(expr(), span);
            case 6:
                return new Expr.Binary(OPS[small()], expr(), expr(), span);
            case 7:
                return new Expr.Compare(list(this::expr), list(() -> CMPS[small()]), span);
            case 8:
                return new Expr.Given(path(), span);
            case 9:
                return new Expr.Call(path(), list(this::expr), span);
            case 10:
                return new Expr.Each(name(), exprOrNull(), span);
            case 11:
                return new Expr.Column(expr(), name(), span);
            case 12:
                return new Expr.Choose(exprOrNull(), list(this::arm), span);
            case 13:
                return new Expr.Root(expr(), expr(), expr(), expr(), textOrNull(), span);
            case 14:
                return new Expr.Settle(expr(), expr(), expr(), expr(), textOrNull(), span);
            case 15:
                return new Expr.In(expr(), name(), span);
            case 16:
                return new Expr.Range(expr(), expr(), span);
            case 17:
                return new Expr.Toleranced(expr(), expr(), expr(), span);
            case 18:
                return new Expr.Dated(expr(), day(), span);
            case 19:
                return new Expr.BlockRef(name(), name(), span);
            case 20:
                return new Expr.Hole(span);
            default:
                throw unknown(form);
        }
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
            bits = bits << 8 | data[at] & 0xFF;
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
