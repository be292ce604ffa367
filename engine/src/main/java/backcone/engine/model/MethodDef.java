package backcone.engine.model;

import backcone.engine.syntax.Entry;
import backcone.engine.text.FileId;
import org.jspecify.annotations.Nullable;

/** A method or a chapter for a kind of block. */
public record MethodDef(String name, String kind, @Nullable String meaning, BodyDef body, FileId file, Entry syntax) {

    // a definition is the same only as itself; comparing its whole text would be slow wherever it is a key
    @Override
    public boolean equals(@Nullable Object other) {
        return this == other;
    }

    @Override
    public int hashCode() {
        return System.identityHashCode(this);
    }
}
