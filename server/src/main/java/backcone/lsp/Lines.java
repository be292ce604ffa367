package backcone.lsp;

import backcone.engine.text.Span;
import java.util.Arrays;
import org.eclipse.lsp4j.Position;
import org.eclipse.lsp4j.Range;

/** Places of a text as the protocol writes them: lines and columns in UTF-16 units or UTF-8 bytes. Immutable. */
final class Lines {
    private final String text;
    private final int[] starts;
    private final boolean utf8;

    Lines(String text, boolean utf8) {
        this.text = text;
        this.utf8 = utf8;
        int[] s = new int[Math.max(16, text.length() / 24)];
        int n = 1;
        int i = 0;
        int length = text.length();
        while (i < length) {
            char c = text.charAt(i++);
            if (c == '\n' || (c == '\r' && (i >= length || text.charAt(i) != '\n'))) {
                if (n == s.length) {
                    s = Arrays.copyOf(s, n * 2);
                }
                s[n++] = i;
            }
        }
        this.starts = Arrays.copyOf(s, n);
    }

    int count() {
        return starts.length;
    }

    int start(int line) {
        return starts[Math.max(0, Math.min(line, starts.length - 1))];
    }

    /** The end of a line without its line end. */
    int end(int line) {
        int e = line + 1 < starts.length ? starts[line + 1] : text.length();
        int s = start(line);
        while (e > s && (text.charAt(e - 1) == '\n' || text.charAt(e - 1) == '\r')) {
            e--;
        }
        return e;
    }

    int line(int offset) {
        int k = Arrays.binarySearch(starts, offset);
        return k >= 0 ? k : -k - 2;
    }

    /** The offset of a place; one beyond the end of its line or text is the end of it. */
    int offset(Position p) {
        int line = p.getLine();
        if (line < 0) {
            return 0;
        }
        if (line >= starts.length) {
            return text.length();
        }
        int s = starts[line];
        int e = end(line);
        int want = Math.max(0, p.getCharacter());
        if (!utf8) {
            return (int) Math.min((long) s + want, e);
        }
        int bytes = 0;
        int i = s;
        while (i < e && bytes < want) {
            int cp = text.codePointAt(i);
            bytes += width(cp);
            i += Character.charCount(cp);
        }
        return Math.min(i, e);
    }

    private static int width(int cp) {
        return cp < 0x80 ? 1 : cp < 0x800 ? 2 : cp < 0x10000 ? 3 : 4;
    }

    int column(int line, int offset) {
        int s = start(line);
        if (!utf8) {
            return offset - s;
        }
        int bytes = 0;
        int i = s;
        while (i < offset && i < text.length()) {
            int cp = text.codePointAt(i);
            bytes += width(cp);
            i += Character.charCount(cp);
        }
        return bytes;
    }

    Position position(int offset) {
        int o = Math.max(0, Math.min(offset, text.length()));
        int line = line(o);
        int e = end(line);
        return new Position(line, column(line, Math.min(o, e)));
    }

    Range range(Span s) {
        return new Range(position(s.start()), position(s.end()));
    }

    Range range(int start, int end) {
        return new Range(position(start), position(end));
    }
}
