package backcone.engine.model;

import backcone.engine.syntax.Entry;
import backcone.engine.syntax.Expr;
import backcone.engine.syntax.Name;
import backcone.engine.syntax.Note;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import backcone.engine.units.Unit;
import java.util.ArrayList;
import java.util.List;
import org.jspecify.annotations.Nullable;

/** A declared name of a kind, chapter, method or drive: an input, an equation, a check or a {@code let}. */
public final class Decl {
    public enum Role {
        QUANTITY,
        CHECK,
        LET
    }

    public final String name;
    public final @Nullable String symbol;
    public final @Nullable String meaning;
    public final ValueKind kind;

    /** The unit that a pure right side regains ({@code Force in N}). */
    public final @Nullable Unit resultUnit;

    public final Entry.Given how;
    public final @Nullable Expr value;
    public final Role role;
    public final List<Note> notes;
    public final FileId file;
    public final Span span;
    public final Name nameNode;

    /** Name of the kind, chapter or method that declares it. */
    public final String owner;

    public final List<Note.Taken> taking = new ArrayList<>();
    public final List<Note.Reading> readings = new ArrayList<>();
    public Note.@Nullable InRange range;
    public Note.@Nullable Per per;
    public @Nullable String worst;
    public boolean load;
    public boolean needed;
    public @Nullable Expr offer;
    public @Nullable String neededBecause;

    public Decl(
            Name nameNode,
            @Nullable Name symbol,
            @Nullable String meaning,
            ValueKind kind,
            @Nullable Unit resultUnit,
            Entry.Given how,
            @Nullable Expr value,
            Role role,
            List<Note> notes,
            FileId file,
            Span span,
            String owner) {
        this.nameNode = nameNode;
        this.name = nameNode.text();
        this.symbol = symbol == null ? null : symbol.text();
        this.meaning = meaning;
        this.kind = kind;
        this.resultUnit = resultUnit;
        this.how = how;
        this.value = value;
        this.role = role;
        this.notes = notes;
        this.file = file;
        this.span = span;
        this.owner = owner;
        for (Note n : notes) {
            if (n instanceof Note.Taking t) {
                taking.addAll(t.items());
            } else if (n instanceof Note.Reading r) {
                readings.add(r);
            } else if (n instanceof Note.InRange r) {
                range = r;
            } else if (n instanceof Note.Per p) {
                per = p;
            } else if (n instanceof Note.Worst w) {
                worst = w.end().text();
            } else if (n instanceof Note.Is is && is.what().text().equals("load")) {
                load = true;
            } else if (n instanceof Note.Needed r) {
                needed = true;
                neededBecause = r.reason();
            } else if (n instanceof Note.Offer o) {
                offer = o.value();
            }
        }
    }

    /** What formulas call it. */
    public String symbolOrName() {
        return symbol != null ? symbol : name;
    }

    public Trust trust() {
        Note.Per p = per;
        if (p == null || p.trust() == null) {
            return Trust.RECALLED;
        }
        Trust t = Trust.of(p.trust().text());
        return t == null ? Trust.RECALLED : t;
    }

    @Override
    public String toString() {
        return owner + "." + name;
    }
}
