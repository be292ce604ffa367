package backcone.engine.graph;

import backcone.engine.model.Decl;
import backcone.engine.syntax.Expr;
import backcone.engine.syntax.Note;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import java.util.ArrayList;
import java.util.IdentityHashMap;
import java.util.List;
import java.util.Map;
import org.jspecify.annotations.Nullable;

/** One value of one element: its declaration, what the drive gives for it, and what became of it. */
public final class Slot {
    public final Element owner;
    public final Decl decl;

    @Nullable
    Fact given;

    @Nullable
    Fact override;

    @Nullable
    String reading;

    @Nullable
    Element inline;

    /** The relation that is solved for this name. */
    @Nullable
    RelationUse solvedBy;

    List<RelationUse> relations = new ArrayList<>();

    /** Compiled value; null until asked for. */
    @Nullable
    Val value;

    boolean compiling;

    /** -1 not known to be available in this epoch, 0 never asked, 1 available. */
    int available;

    int epoch;
    boolean probing;

    /** Values of sub-expressions, for explanations; only when traced. */
    @Nullable
    Map<Expr, Val> trace;

    List<Reach> reached = List.of();

    Slot(Element owner, Decl decl) {
        this.owner = owner;
        this.decl = decl;
    }

    /** A value or an override written in a drive. */
    public record Fact(Expr value, Ctx scope, List<Note> notes, FileId file, Span span, Span nameSpan) {}

    /** A name met in this slot's equation. */
    public record Reach(Expr where, Slot slot) {}

    void tracing() {
        trace = new IdentityHashMap<>();
        reached = new ArrayList<>();
    }

    /** The register of its value; −1 when it is no number. */
    public int register() {
        return value instanceof Val.Num n ? n.register() : -1;
    }

    public @Nullable Val value() {
        return value;
    }

    /** Whether relations could give it. */
    public boolean hasRelations() {
        return !relations.isEmpty();
    }

    boolean isWhole() {
        return decl.kind instanceof backcone.engine.model.ValueKind.Quantity q
                && q.kind().whole();
    }

    public boolean isOverridden() {
        return override != null;
    }

    /** The equation of the relation that was solved for this name, null when there is none. */
    public @Nullable Expr relationText() {
        return solvedBy == null || fact() != null ? null : solvedBy.def.syntax().equation();
    }

    public @Nullable FileId relationFile() {
        return solvedBy == null ? null : solvedBy.def.file();
    }

    public @Nullable Span relationSpan() {
        return solvedBy == null ? null : solvedBy.def.syntax().equation().span();
    }

    public Note.@Nullable Per relationPer() {
        if (solvedBy != null) {
            for (Note n : solvedBy.def.syntax().notes()) {
                if (n instanceof Note.Per p) {
                    return p;
                }
            }
        }
        return null;
    }

    /** Names met while its value was compiled; empty unless traced. */
    public List<Reach> reachedOrNone() {
        return reached;
    }

    /** What a part of its equation gave; null unless traced. */
    public @Nullable Val traced(Expr e) {
        Map<Expr, Val> t = trace;
        return t == null ? null : t.get(e);
    }

    /** The reason of an assumption, null when it is none. */
    public @Nullable String assumed() {
        Fact f = fact();
        if (f != null) {
            for (Note n : f.notes()) {
                if (n instanceof Note.Assumed a) {
                    return a.reason() == null ? "" : a.reason();
                }
            }
        }
        return null;
    }

    public @Nullable FileId factFile() {
        Fact f = fact();
        return f == null ? null : f.file();
    }

    public @Nullable Span factSpan() {
        Fact f = fact();
        return f == null ? null : f.span();
    }

    public @Nullable Fact fact() {
        return override != null ? override : given;
    }

    public boolean isGiven() {
        return given != null || inline != null;
    }

    /** As a drive writes it: {@code head.pinion.teeth}. */
    public String path() {
        String p = owner.path();
        return p.isEmpty() ? decl.name : p + "." + decl.name;
    }

    @Override
    public String toString() {
        return path();
    }
}
