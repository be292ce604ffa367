package backcone.engine;

import backcone.engine.text.FileId;

/** Where texts come from. The engine does no input or output of its own. */
@FunctionalInterface
public interface Loader {

    /** The text of a file, or why there is none. Paths are relative to the opened folder, with forward slashes. */
    Loaded load(FileId file);

    sealed interface Loaded {
        record Text(String text) implements Loaded {}

        record Missing() implements Loaded {}

        /** It exists and cannot be read: a folder, no permission, not UTF-8, too large. */
        record Unreadable(String reason) implements Loaded {}
    }
}
