package backcone.grammar;

import backcone.grammar.gen.BackconeLexer;
import java.util.ArrayList;
import java.util.List;
import org.jspecify.annotations.Nullable;

/**
 * Third pass: after it every brace has its partner.
 *
 * <p>When one is missing, brackets alone can't say where; the author's indentation can. So a text that does not balance
 * is read once more with it, as long as the text is indented at all. A text that balances is never judged by its
 * layout.
 */
final class Braces {
    private final List<Tok> in;
    private final List<Finding> findings;
    private final EntryStarts starts;
    private final List<Open> open = new ArrayList<>();
    private final List<Patch> patches = new ArrayList<>();
    private final List<Line> topHeadless = new ArrayList<>();
    private int missing;
    private int extra;

    /** An open brace, and the lines in its body that look as if their own brace were missing. */
    private static final class Open {
        final Tok brace;
        final int indent;
        final boolean choice;
        final List<Line> headless = new ArrayList<>();

        Open(Tok brace, int indent, boolean choice) {
            this.brace = brace;
            this.indent = indent;
            this.choice = choice;
        }
    }

    /** The tokens {@code first} to before {@code end}, where the line end stands. */
    private record Line(int first, int end, int indent) {}

    /** Something to put in before the token at {@code index}, or that token to be left out. */
    private record Patch(int index, @Nullable Tok insert) {}

    private Braces(List<Tok> in, List<Finding> findings) {
        this.in = in;
        this.starts = new EntryStarts(in);
        this.findings = findings;
    }

    /** With {@code quiet} nothing is reported: a deeper cause has been. */
    static List<Tok> balance(List<Tok> tokens, List<Finding> findings, boolean quiet) {
        List<Finding> sink = quiet ? new ArrayList<>() : findings;
        Braces pass = new Braces(tokens, sink);
        pass.count();
        if (pass.missing == 0 && pass.extra == 0) {
            return tokens;
        }
        pass.match(pass.isIndented());
        return pass.patched();
    }

    private void count() {
        int depth = 0;
        for (Tok t : in) {
            if (t.getType() == BackconeLexer.LBRACE) {
                depth++;
            } else if (t.getType() == BackconeLexer.RBRACE) {
                if (depth == 0) {
                    extra++;
                } else {
                    depth--;
                }
            }
        }
        missing = depth;
    }

    /** True when most bodies are indented deeper than the line that opens them. */
    private boolean isIndented() {
        int deeper = 0;
        int flat = 0;
        Line before = null;
        for (Line line : lines()) {
            if (before != null && type(before.end() - 1) == BackconeLexer.LBRACE) {
                if (line.indent() > before.indent()) {
                    deeper++;
                } else if (type(line.first()) != BackconeLexer.RBRACE) {
                    flat++;
                }
            }
            before = line;
        }
        return deeper >= flat;
    }

    private int type(int index) {
        return in.get(index).getType();
    }

    /** Lines that hold something; a line that goes on with the entry above counts as part of that one. */
    private List<Line> lines() {
        List<Line> lines = new ArrayList<>();
        int lineStart = in.get(0).start();
        int k = 0;
        while (k < in.size()) {
            int first = k;
            while (k < in.size() && type(k) != BackconeLexer.NL && type(k) != BackconeLexer.EOF) {
                k++;
            }
            if (k > first) {
                Line line = new Line(first, k, first == 0 ? 0 : in.get(first).start() - lineStart);
                Line before = lines.isEmpty() ? null : lines.get(lines.size() - 1);
                if (before != null && line.indent() > before.indent() && goesOn(line) && !endsWithBrace(before)) {
                    lines.set(lines.size() - 1, new Line(before.first(), k, before.indent()));
                } else {
                    lines.add(line);
                }
            }
            if (k < in.size()) {
                lineStart = in.get(k).end();
            }
            k++;
        }
        return lines;
    }

    private boolean endsWithBrace(Line line) {
        int last = type(line.end() - 1);
        return last == BackconeLexer.LBRACE || last == BackconeLexer.RBRACE;
    }

    // ---- matching

    private void match(boolean indented) {
        Line before = null;
        for (Line line : lines()) {
            if (indented) {
                startLine(line, before);
            }
            for (int k = line.first(); k < line.end(); k++) {
                if (type(k) == BackconeLexer.LBRACE) {
                    boolean choice = behindChoose(k, line.first());
                    open.add(new Open(in.get(k), choice ? indentAt(k, line) : line.indent(), choice));
                } else if (type(k) == BackconeLexer.RBRACE) {
                    close(k, line, indented);
                }
            }
            before = line;
        }
        if (!open.isEmpty()) {
            unclosed(open.get(open.size() - 1));
            Tok end = in.get(in.size() - 1);
            for (int k = open.size(); k > 0; k--) {
                patches.add(new Patch(in.size() - 1, Tok.inserted(end, BackconeLexer.RBRACE, end.start())));
            }
        }
    }

    private @Nullable Open top() {
        return open.isEmpty() ? null : open.get(open.size() - 1);
    }

    /** How deep the very line of a token stands, be it the first of its entry or not. */
    private int indentAt(int index, Line line) {
        int first = index;
        while (first > line.first() && type(first - 1) != BackconeLexer.NL) {
            first--;
        }
        return first == line.first()
                ? line.indent()
                : in.get(first).start() - in.get(first - 1).end();
    }

    private boolean behindChoose(int index, int from) {
        for (int k = index - 1; k >= from && type(k) != BackconeLexer.LBRACE; k--) {
            if (type(k) == BackconeLexer.NAME && in.get(k).is("choose")) {
                return true;
            }
        }
        return false;
    }

    private void startLine(Line line, @Nullable Line before) {
        boolean closes = type(line.first()) == BackconeLexer.RBRACE;
        Open top = top();
        while (missing > 0 && top != null && (closes ? top.indent > line.indent() : top.indent >= line.indent())) {
            // what is written here stands outside of that block
            unclosed(top);
            int at = before == null ? line.first() : before.end();
            Tok near = in.get(at - 1);
            patches.add(new Patch(at, Tok.inserted(near, BackconeLexer.RBRACE, near.end())));
            open.remove(open.size() - 1);
            missing--;
            top = top();
        }
        if (extra > 0 && before != null && line.indent() > before.indent() && !goesOn(line) && opensNothing(before)) {
            Open here = top();
            if (here == null || before.indent() > here.indent) {
                headless(here).add(before);
            }
        }
    }

    private List<Line> headless(@Nullable Open here) {
        return here == null ? topHeadless : here.headless;
    }

    /** The last line in question that stands as deep as the closing brace, or else the last that stands less deep. */
    private static @Nullable Line headlessFor(List<Line> lines, int indent, boolean startsLine) {
        Line found = null;
        for (Line line : lines) {
            boolean better = found == null || line.indent() == indent || found.indent() != indent;
            if (line.indent() <= indent && (better || !startsLine)) {
                found = line;
            }
        }
        return found;
    }

    private boolean opensNothing(Line line) {
        int depth = 0;
        for (int k = line.first(); k < line.end(); k++) {
            if (type(k) == BackconeLexer.LBRACE) {
                depth++;
            } else if (type(k) == BackconeLexer.RBRACE && depth > 0) {
                depth--;
            }
        }
        return depth == 0;
    }

    /** An operator or a clause: the line belongs to the entry above, so it may be indented without a brace. */
    private boolean goesOn(Line line) {
        Tok first = in.get(line.first());
        for (int k = line.first(); k < line.end(); k++) {
            if (type(k) == BackconeLexer.ARROW || type(k) == BackconeLexer.PIPE) {
                return false;
            }
        }
        if (first.getType() == BackconeLexer.NAME) {
            if (starts.isEntryLike(line.first()) || starts.startsWithEntryWord(line.first())) {
                return false;
            }
            String word = first.getText();
            return Words.inside(word) != null || (Words.reserved(word) != null && !word.equals("each"));
        }
        return first.getType() != BackconeLexer.NUMBER && first.getType() != BackconeLexer.MINUS;
    }

    private void close(int index, Line line, boolean indented) {
        Tok brace = in.get(index);
        Open top = top();
        if (indented && extra > 0) {
            boolean startsLine = index == line.first();
            Line headless = headlessFor(headless(top), line.indent(), startsLine);
            boolean fitsTop =
                    top != null && (startsLine ? fits(top, line.indent()) : top.brace.getLine() == brace.getLine());
            if (headless != null && !fitsTop) {
                unopened(headless);
                headless(top).remove(headless);
                extra--;
                return;
            }
            if (top != null && startsLine && !fitsTop && top.indent < line.indent()) {
                stray(index);
                extra--;
                return;
            }
        }
        if (top == null) {
            stray(index);
            return;
        }
        open.remove(open.size() - 1);
    }

    /** A closing brace stands under the line that opened; that of a choice may be indented up to its arms. */
    private static boolean fits(Open top, int indent) {
        return top.indent == indent || (top.choice && indent > top.indent && indent <= top.indent + 4);
    }

    // ---- findings

    private void unclosed(Open top) {
        findings.add(
                new Finding(Finding.Kind.UNCLOSED_BRACE, top.brace.start(), top.brace.end(), headOf(top.brace), ""));
    }

    private void unopened(Line line) {
        Tok last = in.get(line.end() - 1);
        Tok brace = Tok.inserted(last, BackconeLexer.LBRACE, last.end());
        brace.faulty = true;
        patches.add(new Patch(line.end(), brace));
        for (int k = line.first(); k < line.end(); k++) {
            if (in.get(k).faulty) {
                // the line has its finding already: a string without its end has swallowed the brace, for example
                return;
            }
        }
        findings.add(new Finding(
                Finding.Kind.UNOPENED_BRACE,
                in.get(line.first()).start(),
                last.end(),
                text(line.first(), line.end()),
                ""));
    }

    private void stray(int index) {
        Tok brace = in.get(index);
        patches.add(new Patch(index, null));
        findings.add(new Finding(Finding.Kind.STRAY_BRACE, brace.start(), brace.end(), "}", ""));
    }

    /** What stands before a brace on its line. */
    private String headOf(Tok brace) {
        int index = in.indexOf(brace);
        int first = index;
        while (first > 0 && type(first - 1) != BackconeLexer.NL && type(first - 1) != BackconeLexer.LBRACE) {
            first--;
        }
        return text(first, index);
    }

    private String text(int first, int end) {
        StringBuilder b = new StringBuilder();
        for (int k = first; k < end; k++) {
            if (k > first && !in.get(k - 1).touches(in.get(k))) {
                b.append(' ');
            }
            b.append(in.get(k).getText());
        }
        return b.toString();
    }

    private List<Tok> patched() {
        patches.sort((a, b) -> Integer.compare(a.index(), b.index()));
        List<Tok> out = new ArrayList<>(in.size() + patches.size());
        int next = 0;
        for (int k = 0; k < in.size(); k++) {
            boolean keep = true;
            while (next < patches.size() && patches.get(next).index() == k) {
                Tok insert = patches.get(next).insert();
                if (insert == null) {
                    keep = false;
                } else {
                    out.add(insert);
                }
                next++;
            }
            if (keep) {
                out.add(in.get(k));
            }
        }
        return out;
    }
}
