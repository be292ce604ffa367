package backcone.engine.review;

import backcone.engine.syntax.Node;
import backcone.engine.text.Span;
import java.util.List;

/** The words of a piece of text: no comments, single blanks, strings as they are. Equal words mean the same. */
final class Words {
    private Words() {}

    static String of(String text, Node n) {
        return of(text, n.span());
    }

    static String of(String text, Span s) {
        int from = Math.max(0, Math.min(s.start(), text.length()));
        int to = Math.max(from, Math.min(s.end(), text.length()));
        return squeezed(text.substring(from, to));
    }

    static String of(String text, List<? extends Node> nodes) {
        StringBuilder b = new StringBuilder();
        for (Node n : nodes) {
            b.append(b.length() == 0 ? "" : " ").append(of(text, n));
        }
        return b.toString();
    }

    static String squeezed(String s) {
        StringBuilder b = new StringBuilder(s.length());
        boolean gap = false;
        int i = 0;
        while (i < s.length()) {
            char c = s.charAt(i);
            if (c == '#') {
                while (i < s.length() && s.charAt(i) != '\n') {
                    i++;
                }
                gap = true;
                continue;
            }
            if (Character.isWhitespace(c) || c == '\uFEFF') {
                gap = true;
                i++;
                continue;
            }
            if (gap && b.length() > 0) {
                b.append(' ');
            }
            gap = false;
            if (c == '"') {
                int end = i + 1;
                while (end < s.length() && s.charAt(end) != '"' && s.charAt(end) != '\n') {
                    end += s.charAt(end) == '\\' ? 2 : 1;
                }
                end = Math.min(end + 1, s.length());
                b.append(s, i, end);
                i = end;
                continue;
            }
            b.append(c);
            i++;
        }
        return b.toString();
    }
}
