package backcone.engine.text;

/** Names one text: a path with forward slashes, or {@code handbook:NAME} for a shipped method file. */
public record FileId(String path) implements Comparable<FileId> {
    public static final String HANDBOOK = "handbook:";

    public boolean isHandbook() {
        return path.startsWith(HANDBOOK);
    }

    public boolean isMethodFile() {
        return path.endsWith(".method");
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
