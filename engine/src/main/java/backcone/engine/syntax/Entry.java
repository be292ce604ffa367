package backcone.engine.syntax;

import backcone.engine.text.Span;
import java.util.List;
import org.jspecify.annotations.Nullable;

/** One entry of a file or of a body. Which entries may stand where is checked after parsing. */
public sealed interface Entry extends Node {

    /** {@code teeth = 18 per "…"}. The value is a {@link Expr.Hole} while it is not typed yet. */
    record Fact(Expr.Path path, Expr value, List<Note> notes, Span span) implements Entry {}

    /** {@code wheel.bending >= 1.50 because "…"} in a rate body. */
    record Requirement(Expr.Path path, Expr.Cmp cmp, Expr bound, List<Note> notes, Span span) implements Entry {}

    /** {@code HEAD [NAME] [on SHAFT] ["title"] [{ … }]}: a block of some kind, or a part ({@code pinion on motor}). */
    record Block(
            Name head,
            @Nullable Name name,
            @Nullable Name on,
            @Nullable String title,
            @Nullable List<Entry> body,
            Span span)
            implements Entry {}

    /** {@code name [symbol] ["meaning"] : Kind [in unit] [= e | default e | relation e]}. */
    record Declaration(
            Name name,
            @Nullable Name symbol,
            @Nullable String meaning,
            Name kind,
            @Nullable Name unit,
            Given how,
            @Nullable Expr value,
            List<Note> notes,
            Span span)
            implements Entry {}

    enum Given {
        INPUT,
        EQUALS,
        DEFAULT,
        RELATION
    }

    // ---- drives

    record Drive(Name name, @Nullable String title, List<Entry> body, Span span) implements Entry {}

    record Use(String path, @Nullable Name alias, Span pathSpan, Span span) implements Entry {}

    record Let(Name name, Expr value, List<Note> notes, Span span) implements Entry {}

    /** {@code rate head by METHOD [edition 2014] [as NAME] [under CASE] { … }}. */
    record Rate(
            Expr.Path mesh,
            Name method,
            Expr.@Nullable Num edition,
            @Nullable Name as,
            @Nullable Name under,
            List<Entry> body,
            Span span)
            implements Entry {}

    /** {@code use READING for NAME} in a rate body. */
    record UseReading(Name reading, Expr.Path target, List<Note> notes, Span span) implements Entry {}

    /** {@code require x >= 3 mm}, or with low and high for {@code between a and b}, or with {@code within p of m}. */
    record Require(
            Expr subject,
            @Nullable Expr low,
            @Nullable Expr high,
            @Nullable Expr tolerance,
            @Nullable Expr middle,
            List<Note> notes,
            Span span)
            implements Entry {}

    record Assert(Expr condition, List<Note> notes, Span span) implements Entry {}

    record Override(Expr.Path path, Expr value, List<Note> notes, Span span) implements Entry {}

    record Accept(Expr.Path path, Expr.Cmp cmp, Expr bound, List<Note> notes, Span span) implements Entry {}

    record Waive(Expr.Path path, List<Note> notes, Span span) implements Entry {}

    record Variant(Name name, Name base, @Nullable String title, List<Entry> body, Span span) implements Entry {}

    record Family(Name name, Name base, @Nullable String title, List<Row> rows, Span span) implements Entry {}

    /** {@code tight_limit for pitting = 3 %}. */
    record FactFor(Name name, Name target, Expr value, List<Note> notes, Span span) implements Entry {}

    // ---- handbook

    record Quantity(Name name, Name unit, @Nullable String meaning, boolean whole, List<Name> unlike, Span span)
            implements Entry {}

    record Source(Name name, String text, Span span) implements Entry {}

    record Choice(Name name, @Nullable String meaning, List<Word> words, Span span) implements Entry {}

    record Word(Name name, @Nullable String meaning, Span span) implements Node {}

    record Kind(Name name, @Nullable Name parent, @Nullable String meaning, List<Entry> body, Span span)
            implements Entry {}

    record Chapter(Name name, Name kind, @Nullable String meaning, List<Entry> body, Span span) implements Entry {}

    record Method(Name name, Name kind, @Nullable String meaning, List<Entry> body, Span span) implements Entry {}

    record Include(List<Name> methods, Span span) implements Entry {}

    record Function(
            Name name,
            List<Parameter> parameters,
            @Nullable String meaning,
            Name kind,
            Expr value,
            List<Note> notes,
            Span span)
            implements Entry {}

    record Parameter(Name name, Name kind, Span span) implements Node {}

    /** A table: header cells in the first row. {@code kind} is null when a lookup gives a row. */
    record Table(
            Name name,
            @Nullable String meaning,
            List<Name> keys,
            @Nullable Name kind,
            @Nullable Name unit,
            List<Note> notes,
            List<Row> rows,
            Span span)
            implements Entry {}

    record Row(List<Cell> cells, Span span) implements Node {}

    /**
     * A cell: one or more expressions separated by commas. In a header each is a path with an optional unit
     * ({@code module in mm} is an {@link Expr.In} of a path), a number or a word.
     */
    record Cell(List<Expr> values, Span span) implements Node {}

    /** {@code parts pinion, wheel : gear as member}: named elements; {@code parts bin : duty_bin}: filled by the drive. */
    record Parts(List<Name> names, Name kind, @Nullable Name as, Span span) implements Entry {}

    /** {@code part tool : tool}: exactly one element, always there. */
    record Part(Name name, Name kind, @Nullable String meaning, Span span) implements Entry {}

    record Role(Name name, Expr value, Span span) implements Entry {}

    record Collect(Name name, Name kind, Expr where, Span span) implements Entry {}

    record Cases(Name name, List<Name> words, Span span) implements Entry {}

    record Each(Name collection, List<Entry> body, Span span) implements Entry {}

    record Edition(List<Expr.Num> editions, Span span) implements Entry {}

    record Relation(@Nullable String meaning, @Nullable Expr when, Expr equation, List<Note> notes, Span span)
            implements Entry {}

    record Check(
            Name name, @Nullable String meaning, @Nullable Name kind, Expr value, List<Note> notes, Span span)
            implements Entry {}

    /** {@code limit NAME ["…"] [as LEVEL] [for a, b] : condition else "…"}. Levels: error, warning, hint. */
    record Limit(
            Name name,
            @Nullable String meaning,
            @Nullable Name level,
            List<Name> targets,
            Expr condition,
            @Nullable String otherwise,
            List<Note> notes,
            Span span)
            implements Entry {}

    record Applies(Expr condition, @Nullable String otherwise, Span span) implements Entry {}

    record Example(String title, List<Note> notes, List<Entry> body, Span span) implements Entry {}

    /** {@code gives path = value within tolerance}. */
    record Gives(Expr.Path path, Expr value, @Nullable Expr within, Span span) implements Entry {}

    /** Text that is no entry; the parser has said why. */
    record Bad(Span span) implements Entry {}
}
