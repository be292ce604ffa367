package backcone.cli;

import backcone.engine.text.Span;
import java.util.Arrays;

/** Lines and columns of one text, both from 1; columns count characters as a person sees them in most editors. */
final class Places {
    private final String text;
    private final int[] starts;

    Places(String text) {
        this.text = text;
        int[] at = new int[16];
        int n = 1;
        for (int i = 0; i < text.length(); i++) {
            if (text.charAt(i) == '\n') {
                if (n == at.length) {
                    at = Arrays.copyOf(at, n * 2);
                }
                at[n++] = i + 1;
            }
        }
        starts = Arrays.copyOf(at, n);
    }

    int line(int offset) {
        int i = Arrays.binarySearch(starts, Math.min(offset, text.length()));
        return i >= 0 ? i + 1 : -i - 1;
    }

    int column(int offset) {
        int start = starts[line(offset) - 1];
        return text.codePointCount(start, Math.min(offset, text.length())) + 1;
    }

    String lineText(int line) {
        int from = starts[line - 1];
        int to = line < starts.length ? starts[line] : text.length();
        String s = text.substring(from, to);
        return s.stripTrailing();
    }

    /** The part of a span that lies on its first line, as a length in characters. */
    int width(Span s) {
        int line = line(s.start());
        int end = line < starts.length ? Math.min(s.end(), starts[line] - 1) : s.end();
        return Math.max(1, text.codePointCount(s.start(), Math.min(Math.max(end, s.start()), text.length())));
    }
}
