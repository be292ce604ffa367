package backcone.engine.model;

import backcone.engine.syntax.Entry;
import backcone.engine.syntax.Expr;
import backcone.engine.syntax.Note;
import backcone.engine.text.FileId;
import backcone.engine.units.Unit;
import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import org.jspecify.annotations.Nullable;

/** A table: key columns first, then value columns. */
public final class TableDef {
    public enum Between {
        EXACT,
        LINEAR,
        INVERSE,
        LOGLOG,
        STEP
    }

    public enum Beyond {
        HOLD,
        EXTEND,
        REFUSE
    }

    public final Entry.Table syntax;
    public final FileId file;
    public final String owner;

    /** Number of leading columns that are keys; the second key of a value table may be the header itself. */
    public final int keyColumns;

    public final List<String> columns = new ArrayList<>();
    public final List<@Nullable Unit> units = new ArrayList<>();

    /** Header cells as numbers where the header spells a second numeric key, else NaN. */
    public final List<Double> headerNumbers = new ArrayList<>();

    public final List<List<Entry.Cell>> rows = new ArrayList<>();
    public Between between = Between.EXACT;
    public Beyond below = Beyond.REFUSE;
    public Beyond above = Beyond.REFUSE;
    public Note.@Nullable Per per;

    /** Words of the columns by name. */
    public final Map<String, Integer> columnIndex = new java.util.HashMap<>();

    public TableDef(Entry.Table syntax, FileId file, String owner, int keyColumns) {
        this.syntax = syntax;
        this.file = file;
        this.owner = owner;
        this.keyColumns = keyColumns;
    }

    public String name() {
        return syntax.name().text();
    }

    /** Whether the second key picks a column. */
    public boolean columnKey() {
        return syntax.keys().size() > keyColumns;
    }

    public Expr cell(int row, int column) {
        return rows.get(row).get(column).values().get(0);
    }

    public Trust trust() {
        Note.Per p = per;
        Trust t = p == null || p.trust() == null ? null : Trust.of(p.trust().text());
        return t == null ? Trust.RECALLED : t;
    }
}
