package backcone.engine.fixes;

import backcone.engine.syntax.Entry;
import backcone.engine.syntax.Expr;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import backcone.engine.units.Numbers;
import java.util.List;
import org.jspecify.annotations.Nullable;

/** Small edits that leave the lines around them as they are. */
final class Edits {
    private Edits() {}

    /** Another text at a place; the blanks before what stands further right on the line keep it in its column. */
    static TextEdit inPlace(FileId file, String text, Span at, String other) {
        int end = lineEnd(text, at.end());
        int gap = at.end();
        // what belongs to the value, such as its unit, moves with it
        while (gap < end && !(text.charAt(gap) == ' ' && gap + 1 < end && text.charAt(gap + 1) == ' ')) {
            gap++;
        }
        int after = gap;
        while (after < end && text.charAt(after) == ' ') {
            after++;
        }
        int grown = other.length() - at.length();
        if (gap >= end || after >= end || grown == 0) {
            return new TextEdit(file, at, other);
        }
        int blanks = Math.max(2, after - gap - grown);
        return new TextEdit(
                file, new Span(at.start(), after), other + text.substring(at.end(), gap) + " ".repeat(blanks));
    }

    /** Another number in the unit as written. */
    static TextEdit number(FileId file, String text, Expr.Num old, Expr value, double now) {
        Expr.Num n = old;
        Span digits = new Span(n.span().start(), n.span().start() + n.text().length());
        if (value instanceof Expr.Neg neg) {
            if (now > 0) {
                return inPlace(file, text, new Span(neg.span().start(), digits.end()), Numbers.exact(now));
            }
            return inPlace(file, text, digits, Numbers.exact(-now));
        }
        return inPlace(file, text, digits, Numbers.exact(now));
    }

    static int lineStart(String text, int at) {
        return text.lastIndexOf('\n', at - 1) + 1;
    }

    static int lineEnd(String text, int at) {
        int i = text.indexOf('\n', at);
        int end = i < 0 ? text.length() : i;
        return end > at && text.charAt(end - 1) == '\r' ? end - 1 : end;
    }

    /** The blanks in front of the line that holds a place. */
    static String indent(String text, int at) {
        int from = lineStart(text, at);
        int to = from;
        while (to < text.length() && (text.charAt(to) == ' ' || text.charAt(to) == '\t')) {
            to++;
        }
        return text.substring(from, to);
    }

    /** Facts behind the last fact of a body, in its column; null where that doesn't end its line, or there is none. */
    static @Nullable TextEdit afterFacts(FileId file, String text, List<Entry> body, List<String[]> facts) {
        Entry.Fact last = null;
        for (Entry e : body) {
            last = e instanceof Entry.Fact f ? f : last;
        }
        if (last == null) {
            return null;
        }
        int from = lineStart(text, last.span().start());
        int end = text.indexOf('\n', last.span().end());
        if (end < 0
                || !text.substring(from, last.span().start()).isBlank()
                || text.substring(last.span().end(), end).indexOf('}') >= 0) {
            return null;
        }
        int sign = text.indexOf('=', last.path().span().end());
        int width = Math.max(0, sign - 1 - last.span().start());
        String in = indent(text, from);
        StringBuilder b = new StringBuilder();
        for (String[] f : facts) {
            b.append(in)
                    .append(f[0])
                    .append(" ".repeat(Math.max(0, width - f[0].length())))
                    .append(f[1])
                    .append(newline(text));
        }
        return new TextEdit(file, new Span(end + 1, end + 1), b.toString());
    }

    /** The line end of this text. */
    static String newline(String text) {
        int i = text.indexOf('\n');
        return i > 0 && text.charAt(i - 1) == '\r' ? "\r\n" : "\n";
    }

    /** Lines at the end of a block, in front of its closing brace. {@code block} ends behind the brace. */
    static TextEdit atEndOf(FileId file, String text, Span block, List<String> lines) {
        String nl = newline(text);
        int brace = text.lastIndexOf('}', block.end() - 1);
        if (brace < block.start()) {
            int end = block.end();
            String in = indent(text, block.start());
            StringBuilder b = new StringBuilder(" {");
            lines.forEach(l -> b.append(nl).append(in).append("  ").append(l));
            return new TextEdit(
                    file,
                    new Span(end, end),
                    b.append(nl).append(in).append('}').toString());
        }
        String in = indent(text, block.start());
        int start = lineStart(text, brace);
        StringBuilder b = new StringBuilder();
        if (text.substring(start, brace).isBlank()) {
            lines.forEach(l -> b.append(l.isEmpty() ? "" : in + "  " + l).append(nl));
            return new TextEdit(file, new Span(start, start), b.toString());
        }
        // a block on one line: what stands in front of the brace keeps its line
        int from = brace;
        while (from > start && text.charAt(from - 1) == ' ') {
            from--;
        }
        lines.forEach(l -> b.append(nl).append(in).append("  ").append(l));
        return new TextEdit(file, new Span(from, brace), b.append(nl).append(in).toString());
    }
}
