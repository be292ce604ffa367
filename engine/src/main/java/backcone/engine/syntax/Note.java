package backcone.engine.syntax;

import backcone.engine.text.Span;
import java.util.List;
import org.jspecify.annotations.Nullable;

/** A clause that follows an entry. */
public sealed interface Note extends Node {

    /** {@code per khurmi "30.5", recalled} in handbook texts, {@code per "data sheet" [on 2026-02-11]} in drives. */
    record Per(
            @Nullable Name source,
            @Nullable String text,
            Expr.@Nullable Day on,
            @Nullable Name trust,
            @Nullable String seenIn,
            Span span)
            implements Note {}

    record Measured(@Nullable String text, Span span) implements Note {}

    /** {@code assumed [because "…"]}; the reason is kept here, not as a note of its own. */
    record Assumed(@Nullable String reason, Span span) implements Note {}

    record Because(String text, Span span) implements Note {}

    record Until(Expr.@Nullable Day day, Span span) implements Note {}

    /** {@code by "R. Falk"}. */
    record By(String person, Span span) implements Note {}

    record Otherwise(String text, Span span) implements Note {}

    /** {@code taking v in m/s, material.HB as HB in HBW}. */
    record Taking(List<Taken> items, Span span) implements Note {}

    record Taken(Expr.Path path, @Nullable Name alias, Name unit, Span span) implements Node {}

    /** {@code reading khurmi = 2.8 [per …]}: the notes behind it belong to the reading. */
    record Reading(Name name, Expr value, List<Note> notes, Span span) implements Note {}

    /** {@code range 0 rpm to 100000 rpm}. */
    record InRange(Expr low, Expr high, Span span) implements Note {}

    /** {@code rows linear, below hold, above refuse}: words as written. */
    record Rows(List<Name> words, Span span) implements Note {}

    /** {@code worst low} or {@code worst high}: which end of a range value is taken. */
    record Worst(Name end, Span span) implements Note {}

    /** {@code is load}: this given value scales with the load. */
    record Is(Name what, Span span) implements Note {}

    /** {@code needed "why it is never defaulted"}. */
    record Needed(@Nullable String reason, Span span) implements Note {}

    /** {@code offer 0.3 * m_mn}: what a placeholder proposes; never used silently. */
    record Offer(Expr value, Span span) implements Note {}

    /** {@code within 0.5 %} on a relation, a requirement or {@code gives}. */
    record Within(Expr amount, Span span) implements Note {}
}
