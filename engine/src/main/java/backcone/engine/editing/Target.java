package backcone.engine.editing;

import backcone.engine.model.Decl;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import org.jspecify.annotations.Nullable;

/**
 * What a name means. {@code file} and {@code span} are the name where it is declared; {@link Span#NONE} in a file without a
 * path for what is declared nowhere, such as a unit. {@code path} names the value in its drive. {@code givenIn} and {@code givenAt} are where a drive gives it a value.
 */
public record Target(
        Sort sort,
        String name,
        FileId file,
        Span span,
        @Nullable Decl decl,
        @Nullable String path,
        @Nullable String meaning,
        @Nullable FileId givenIn,
        Span givenAt) {

    static final FileId NOWHERE = new FileId("");

    public enum Sort {
        PROPERTY,
        LET,
        CHECK,
        BLOCK,
        MATERIAL,
        DRIVE,
        KIND,
        METHOD,
        FUNCTION,
        TABLE,
        QUANTITY,
        CHOICE,
        WORD,
        SOURCE,
        UNIT,
        FILE,
        READING
    }

    static Target of(Sort sort, String name, FileId file, Span span, @Nullable String meaning) {
        return new Target(sort, name, file, span, null, null, meaning, null, Span.NONE);
    }

    public boolean isSomewhere() {
        return !file.path().isEmpty();
    }

    /** Whether both are the same thing, wherever they were met. */
    public boolean same(Target other) {
        return isSomewhere()
                ? file.equals(other.file) && span.equals(other.span)
                : !other.isSomewhere() && sort == other.sort && name.equals(other.name);
    }

    /** Whether its name may be changed: what an author has named, not what the handbook has. */
    public boolean isNamedByAuthor() {
        return isSomewhere()
                && !file.isHandbook()
                && (sort == Sort.LET
                        || sort == Sort.BLOCK
                        || sort == Sort.MATERIAL
                        || sort == Sort.DRIVE
                        || (file.isMethodFile() && sort != Sort.WORD && sort != Sort.FILE));
    }
}
