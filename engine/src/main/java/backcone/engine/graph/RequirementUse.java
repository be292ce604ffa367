package backcone.engine.graph;

import backcone.engine.syntax.Entry;
import backcone.engine.syntax.Expr;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import backcone.engine.units.Dimension;
import backcone.engine.units.Unit;
import org.jspecify.annotations.Nullable;

/** A requirement with its registers; −1 where there is none. */
public final class RequirementUse {
    public enum Form {
        AT_LEAST,
        AT_MOST,
        BETWEEN,
        EQUAL,
        CONDITION
    }

    public final Entry entry;
    public final FileId file;
    public final String id;
    public final Form form;
    public final boolean asserted;
    public DriveGraph.@Nullable RateUse rate;
    public @Nullable Slot slot;
    public String meaning = "";
    public int value = -1;
    public int required = -1;
    public int upper = -1;
    public boolean holds;
    public @Nullable Dimension dimension;
    public @Nullable Unit unit;
    public @Nullable Expr subject;

    /** Limit between tight and clear, or −1 for the usual 10 %. */
    public int tight = -1;

    public @Nullable Acceptance acceptance;

    RequirementUse(Entry entry, FileId file, String id, Form form, boolean asserted) {
        this.entry = entry;
        this.file = file;
        this.id = id;
        this.form = form;
        this.asserted = asserted;
    }

    public Span span() {
        return entry.span();
    }

    /** An {@code accept} that covers this requirement; {@code bound} is a register. */
    public record Acceptance(Entry.Accept syntax, FileId file, int bound) {}
}
