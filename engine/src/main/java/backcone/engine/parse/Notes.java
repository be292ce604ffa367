package backcone.engine.parse;

import backcone.engine.syntax.Expr;
import backcone.engine.syntax.Name;
import backcone.engine.syntax.Note;
import backcone.engine.text.Span;
import backcone.grammar.gen.BackconeParser;
import java.util.ArrayList;
import java.util.List;
import org.antlr.v4.runtime.Token;
import org.antlr.v4.runtime.tree.TerminalNode;
import org.jspecify.annotations.Nullable;

/** The clauses behind an entry. */
final class Notes {
    private final Places places;
    private final Exprs exprs;

    Notes(Places places, Exprs exprs) {
        this.places = places;
        this.exprs = exprs;
    }

    List<Note> of(List<BackconeParser.NoteContext> contexts) {
        if (contexts.isEmpty()) {
            return List.of();
        }
        List<Note> notes = new ArrayList<>(contexts.size());
        for (int i = 0; i < contexts.size(); i++) {
            BackconeParser.NoteContext c = contexts.get(i);
            if (c instanceof BackconeParser.ReadingNoteContext readingNoteContext) {
                // what stands behind a reading, up to the next one, belongs to it
                int end = i + 1;
                while (end < contexts.size() && !(contexts.get(end) instanceof BackconeParser.ReadingNoteContext)) {
                    end++;
                }
                notes.add(reading(readingNoteContext, of(contexts.subList(i + 1, end))));
                i = end - 1;
                continue;
            }
            Note note = note(c);
            if (note != null) {
                notes.add(note);
            }
        }
        return List.copyOf(notes);
    }

    private Note reading(BackconeParser.ReadingNoteContext c, List<Note> behind) {
        Span span = places.of(c);
        for (Note n : behind) {
            span = span.to(n.span());
        }
        return new Note.Reading(places.name(c.id, c), exprs.expr(c.expr(), c), behind, span);
    }

    /** Null for a clause so broken that nothing of it can be read; the parser has said why. */
    private @Nullable Note note(BackconeParser.NoteContext note) {
        Span span = places.of(note);
        if (note instanceof BackconeParser.PerNoteContext n) {
            return per(n, span);
        }
        if (note instanceof BackconeParser.MeasuredNoteContext n) {
            return new Note.Measured(Exprs.textOrNull(n.text()), span);
        }
        if (note instanceof BackconeParser.AssumedNoteContext n) {
            return new Note.Assumed(Exprs.textOrNull(n.text()), span);
        }
        if (note instanceof BackconeParser.BecauseNoteContext n) {
            return new Note.Because(textOrEmpty(n.text()), span);
        }
        if (note instanceof BackconeParser.UntilNoteContext n) {
            return new Note.Until(dayOrNull(n.DATE()), span);
        }
        if (note instanceof BackconeParser.ByNoteContext n) {
            return new Note.By(textOrEmpty(n.text()), span);
        }
        if (note instanceof BackconeParser.ElseNoteContext n) {
            return new Note.Otherwise(textOrEmpty(n.text()), span);
        }
        if (note instanceof BackconeParser.TakingNoteContext n) {
            return taking(n, span);
        }
        if (note instanceof BackconeParser.RangeNoteContext r) {
            return new Note.InRange(exprs.sum(r.low, r), exprs.sum(r.high, r), span);
        }
        if (note instanceof BackconeParser.RowsNoteContext n) {
            return rows(n, span);
        }
        if (note instanceof BackconeParser.WorstNoteContext n) {
            TerminalNode end = n.NAME();
            return new Note.Worst(places.name(symbol(end), note), span);
        }
        if (note instanceof BackconeParser.IsNoteContext n) {
            TerminalNode what = n.NAME();
            return new Note.Is(places.name(symbol(what), note), span);
        }
        if (note instanceof BackconeParser.NeededNoteContext n) {
            return new Note.Needed(Exprs.textOrNull(n.text()), span);
        }
        if (note instanceof BackconeParser.OfferNoteContext n) {
            return new Note.Offer(exprs.expr(n.expr(), note), span);
        }
        if (note instanceof BackconeParser.WithinNoteContext n) {
            return new Note.Within(exprs.sum(n.sum(), note), span);
        }
        return null;
    }

    private Note per(BackconeParser.PerNoteContext c, Span span) {
        return new Note.Per(
                places.nameOrNull(c.id),
                Exprs.textOrNull(c.said),
                dayOrNull(c.DATE()),
                places.nameOrNull(c.trust),
                Exprs.textOrNull(c.seen),
                span);
    }

    private Note taking(BackconeParser.TakingNoteContext c, Span span) {
        List<Note.Taken> items = new ArrayList<>();
        for (BackconeParser.TakenContext t : c.taken()) {
            items.add(new Note.Taken(
                    exprs.path(t.path(), t),
                    places.nameOrNull(t.alias),
                    places.name(symbol(t.UNIT()), t),
                    places.of(t)));
        }
        return new Note.Taking(List.copyOf(items), span);
    }

    /** Words as written, commas left out: {@code linear, below hold} is {@code linear}, {@code below}, {@code hold}. */
    private Note rows(BackconeParser.RowsNoteContext c, Span span) {
        List<Name> words = new ArrayList<>();
        for (BackconeParser.RowWordContext w : c.rowWord()) {
            for (TerminalNode n : w.NAME()) {
                words.add(new Name(n.getText(), Places.of(n.getSymbol())));
            }
        }
        return new Note.Rows(List.copyOf(words), span);
    }

    private static Expr.@Nullable Day dayOrNull(@Nullable TerminalNode date) {
        return date == null ? null : Exprs.day(date.getSymbol());
    }

    private static String textOrEmpty(BackconeParser.@Nullable TextContext c) {
        String text = Exprs.textOrNull(c);
        return text == null ? "" : text;
    }

    private static @Nullable Token symbol(@Nullable TerminalNode node) {
        return node == null ? null : node.getSymbol();
    }
}
