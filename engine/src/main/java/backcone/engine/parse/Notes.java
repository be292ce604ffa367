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
            if (c instanceof BackconeParser.ReadingNoteContext) {
                // what stands behind a reading, up to the next one, belongs to it
                int end = i + 1;
                while (end < contexts.size() && !(contexts.get(end) instanceof BackconeParser.ReadingNoteContext)) {
                    end++;
                }
                notes.add(reading((BackconeParser.ReadingNoteContext) c, of(contexts.subList(i + 1, end))));
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
        if (note instanceof BackconeParser.PerNoteContext) {
            return per((BackconeParser.PerNoteContext) note, span);
        }
        if (note instanceof BackconeParser.MeasuredNoteContext) {
            return new Note.Measured(Exprs.textOrNull(((BackconeParser.MeasuredNoteContext) note).text()), span);
        }
        if (note instanceof BackconeParser.AssumedNoteContext) {
            return new Note.Assumed(Exprs.textOrNull(((BackconeParser.AssumedNoteContext) note).text()), span);
        }
        if (note instanceof BackconeParser.BecauseNoteContext) {
            return new Note.Because(textOrEmpty(((BackconeParser.BecauseNoteContext) note).text()), span);
        }
        if (note instanceof BackconeParser.UntilNoteContext) {
            return new Note.Until(dayOrNull(((BackconeParser.UntilNoteContext) note).DATE()), span);
        }
        if (note instanceof BackconeParser.ByNoteContext) {
            return new Note.By(textOrEmpty(((BackconeParser.ByNoteContext) note).text()), span);
        }
        if (note instanceof BackconeParser.ElseNoteContext) {
            return new Note.Otherwise(textOrEmpty(((BackconeParser.ElseNoteContext) note).text()), span);
        }
        if (note instanceof BackconeParser.TakingNoteContext) {
            return taking((BackconeParser.TakingNoteContext) note, span);
        }
        if (note instanceof BackconeParser.RangeNoteContext) {
            BackconeParser.RangeNoteContext r = (BackconeParser.RangeNoteContext) note;
            return new Note.InRange(exprs.sum(r.low, r), exprs.sum(r.high, r), span);
        }
        if (note instanceof BackconeParser.RowsNoteContext) {
            return rows((BackconeParser.RowsNoteContext) note, span);
        }
        if (note instanceof BackconeParser.WorstNoteContext) {
            TerminalNode end = ((BackconeParser.WorstNoteContext) note).NAME();
            return new Note.Worst(places.name(symbol(end), note), span);
        }
        if (note instanceof BackconeParser.IsNoteContext) {
            TerminalNode what = ((BackconeParser.IsNoteContext) note).NAME();
            return new Note.Is(places.name(symbol(what), note), span);
        }
        if (note instanceof BackconeParser.NeededNoteContext) {
            return new Note.Needed(Exprs.textOrNull(((BackconeParser.NeededNoteContext) note).text()), span);
        }
        if (note instanceof BackconeParser.OfferNoteContext) {
            return new Note.Offer(exprs.expr(((BackconeParser.OfferNoteContext) note).expr(), note), span);
        }
        if (note instanceof BackconeParser.WithinNoteContext) {
            return new Note.Within(exprs.sum(((BackconeParser.WithinNoteContext) note).sum(), note), span);
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
