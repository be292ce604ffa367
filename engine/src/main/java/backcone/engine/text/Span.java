package backcone.engine.text;

/** A half-open range of UTF-16 offsets in one text. */
public record Span(int start, int end) {
    public static final Span NONE = new Span(0, 0);

    public Span {
        if (start < 0 || end < start) {
            throw new IllegalArgumentException("bad span " + start + ".." + end);
        }
    }

    /** The smallest span that holds both. */
    public Span to(Span other) {
        return new Span(Math.min(start, other.start), Math.max(end, other.end));
    }

    public boolean contains(int offset) {
        return start <= offset && offset <= end;
    }

    public int length() {
        return end - start;
    }
}
