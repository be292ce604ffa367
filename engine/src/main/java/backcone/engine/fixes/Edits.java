package backcone.engine.fixes;

import backcone.engine.syntax.Expr;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import backcone.engine.units.Numbers;

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

    /** The line end of this text. */
    static String newline(String text) {
        int i = text.indexOf('\n');
        return i > 0 && text.charAt(i - 1) == '\r' ? "\r\n" : "\n";
    }

    /** Lines at the end of a block, in front of its closing brace. {@code block} ends behind the brace. */
    static TextEdit atEndOf(FileId file, String text, Span block, java.util.List<String> lines) {
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
