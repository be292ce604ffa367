package backcone.grammar;

import org.antlr.v4.runtime.CharStream;
import org.antlr.v4.runtime.IntStream;
import org.antlr.v4.runtime.misc.Interval;

/**
 * A text as the lexer reads it, in UTF-16 units. The streams of the runtime count code points; with this one every
 * token offset is an offset into the Java string, and half a surrogate pair is just one more unknown character.
 */
final class TextStream implements CharStream {
    private final String text;
    private int at;

    TextStream(String text, int start) {
        this.text = text;
        this.at = start;
    }

    @Override
    public void consume() {
        if (at >= text.length()) {
            throw new IllegalStateException("cannot consume the end of the text");
        }
        at++;
    }

    @Override
    public int LA(int offset) {
        if (offset == 0) {
            return 0;
        }
        int i = offset > 0 ? at + offset - 1 : at + offset;
        return i < 0 || i >= text.length() ? IntStream.EOF : text.charAt(i);
    }

    @Override
    public int mark() {
        return -1;
    }

    @Override
    public void release(int marker) {
        // the whole text is at hand: marks need no book-keeping
    }

    @Override
    public int index() {
        return at;
    }

    @Override
    public void seek(int index) {
        at = Math.min(index, text.length());
    }

    @Override
    public int size() {
        return text.length();
    }

    @Override
    public String getSourceName() {
        return UNKNOWN_SOURCE_NAME;
    }

    @Override
    public String getText(Interval interval) {
        int end = Math.min(interval.b + 1, text.length());
        return interval.a >= end ? "" : text.substring(interval.a, end);
    }
}
