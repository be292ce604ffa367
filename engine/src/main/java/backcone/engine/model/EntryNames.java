package backcone.engine.model;

import backcone.engine.syntax.Entry;
import org.jspecify.annotations.Nullable;

/** What entries are called in messages. */
public final class EntryNames {
    private EntryNames() {}

    /** The word of an entry that only method files hold, null for any other. */
    public static @Nullable String ofHandbook(Entry e) {
        if (e instanceof Entry.Table) {
            return "table";
        } else if (e instanceof Entry.Method) {
            return "method";
        } else if (e instanceof Entry.Chapter) {
            return "chapter";
        } else if (e instanceof Entry.Kind) {
            return "kind";
        } else if (e instanceof Entry.Function) {
            return "function";
        } else if (e instanceof Entry.Quantity) {
            return "quantity";
        } else if (e instanceof Entry.Choice) {
            return "choice";
        } else if (e instanceof Entry.Source) {
            return "source";
        } else if (e instanceof Entry.Relation) {
            return "relation";
        } else if (e instanceof Entry.Check) {
            return "check";
        } else if (e instanceof Entry.Limit) {
            return "limit";
        } else if (e instanceof Entry.Example) {
            return "example";
        } else if (e instanceof Entry.Declaration) {
            return "declaration";
        }
        return null;
    }

    /** Why an entry that belongs in a method file can't stand in a spec, null for any other entry. */
    public static @Nullable String misplaced(Entry e) {
        String what = ofHandbook(e);
        return what == null
                ? null
                : English.capital(English.a("`" + what + "`").replace("an `", "a `"))
                        + " belongs in a method file (`.method`), not in a spec.";
    }
}
