package backcone.engine.model;

import backcone.engine.syntax.Entry;
import backcone.engine.text.FileId;
import java.util.LinkedHashMap;
import org.jspecify.annotations.Nullable;

/** A closed list of words. */
public record ChoiceKind(
        String name,
        @Nullable String meaning,
        LinkedHashMap<String, @Nullable String> words,
        FileId file,
        Entry.@Nullable Choice syntax) {
    public boolean has(String word) {
        return words.containsKey(word);
    }
}
