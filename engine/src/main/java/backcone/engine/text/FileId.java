package backcone.engine.text;

import org.jspecify.annotations.Nullable;

/** Names one text: a path with forward slashes, or {@code handbook:NAME} for a shipped method file. */
public record FileId(String path) implements Comparable<FileId> {
    public static final String HANDBOOK = "handbook:";

    public boolean isHandbook() {
        return path.startsWith(HANDBOOK);
    }

    public boolean isMethodFile() {
        return path.endsWith(".method");
    }

    // written out: it is the key of every table at start, and the generated pair costs 20 ms there
    @Override
    public boolean equals(@Nullable Object other) {
        return other instanceof FileId f && f.path.equals(path);
    }

    @Override
    public int hashCode() {
        return path.hashCode();
    }

    @Override
    public int compareTo(FileId other) {
        return path.compareTo(other.path);
    }

    @Override
    public String toString() {
        return path;
    }
}
