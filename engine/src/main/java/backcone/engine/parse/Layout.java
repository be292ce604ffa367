package backcone.engine.parse;

import backcone.grammar.Tok;
import backcone.grammar.Tokens;
import backcone.grammar.gen.BackconeLexer;
import java.util.ArrayList;
import java.util.List;
import org.antlr.v4.runtime.Token;

/**
 * Token list to lines. Breaks every entry, row and arm onto a line of its own, keeps the author's breaks inside an
 * entry, and keeps comments where they are: on their own line before the same entry, or behind the same token.
 */
final class Layout {
    private static final int STEP = 2;
    private static final int CONTINUED = 4;

    private final String text;
    private final List<Tok> tokens;
    private final List<Tok> comments;
    private final List<Line> lines = new ArrayList<>();
    private int next;
    private int nextComment;

    /** Where the last token or comment that was written ends in the old text. */
    private int written;

    private int lastRun;

    private Layout(String text, Tokens tokens) {
        this.text = text;
        this.tokens = tokens.list();
        this.comments = tokens.comments();
    }

    /** Expects a text without syntax errors. */
    static List<Line> of(String text, Tokens tokens) {
        Layout layout = new Layout(text, tokens);
        layout.items(0);
        layout.comments(text.length(), 0, false);
        Columns.align(layout.lines);
        return layout.lines;
    }

    private Tok token() {
        return tokens.get(next);
    }

    private Line line() {
        return lines.get(lines.size() - 1);
    }

    // ---- entries, rows, arms, words

    /** Writes all up to the closing brace or the end of the text. */
    private void items(int indent) {
        boolean first = true;
        int run = newRun();
        while (true) {
            while (isSeparator(token().getType())) {
                next++;
            }
            Tok t = token();
            int before = lines.size();
            comments(t.start(), indent, first);
            boolean commented = lines.size() > before;
            if (t.getType() == BackconeLexer.RBRACE || t.getType() == Token.EOF) {
                return;
            }
            boolean blank = !(first && !commented) && newlines(written, t.start()) > 1;
            if (blank || commented) {
                run = newRun();
            }
            int from = lines.size();
            item(indent);
            lines.get(from).blankBefore = blank;
            if (lines.size() == from + 1) {
                lines.get(from).run = run;
            } else {
                run = newRun();
            }
            first = false;
        }
    }

    private int newRun() {
        lastRun++;
        return lastRun;
    }

    static boolean isSeparator(int type) {
        return type == BackconeLexer.NL || type == BackconeLexer.SEMI || type == BackconeLexer.WORD_COMMA;
    }

    private void item(int indent) {
        int kind = token().getType();
        lines.add(new Line(indent, kind));
        ItemLayout layout = new ItemLayout(kind);
        while (true) {
            Tok t = token();
            switch (t.getType()) {
                case BackconeLexer.NL,
                        BackconeLexer.SEMI,
                        BackconeLexer.WORD_COMMA,
                        BackconeLexer.RBRACE,
                        Token.EOF -> {
                    return;
                }
                case BackconeLexer.LBRACE, BackconeLexer.ROWS_OPEN -> body(t, layout, indent);
                case BackconeLexer.WORDS_OPEN -> {
                    if (kind == BackconeLexer.CASES && !holdsComment()) {
                        wordsOnOneLine(t, layout, indent);
                    } else {
                        body(t, layout, indent);
                    }
                }
                case BackconeLexer.ARMS_OPEN -> arms(t, layout, indent);
                default -> {
                    if (!t.isInserted()) {
                        write(t, layout, indent);
                    }
                    next++;
                }
            }
        }
    }

    private void write(Tok t, ItemLayout layout, int indent) {
        int before = lines.size();
        boolean broken = !layout.isFirst() && newlines(written, t.start()) > 0;
        comments(t.start(), indent + CONTINUED, true);
        if (lines.size() > before || broken) {
            lines.add(new Line(indent + CONTINUED, line().kind));
            layout.startLine();
        }
        layout.write(t, line());
        written = t.end();
    }

    /** An opening brace never starts a line, unless a comment stands before it. */
    private void open(Tok brace, ItemLayout layout, int indent) {
        int before = lines.size();
        comments(brace.start(), indent + CONTINUED, true);
        if (lines.size() > before) {
            lines.add(new Line(indent + CONTINUED, line().kind));
            layout.startLine();
        }
        layout.write(brace, line());
        written = brace.end();
        next++;
    }

    private void close(int indent, ItemLayout layout) {
        Tok brace = token();
        lines.add(new Line(indent, 0));
        layout.startLine();
        layout.write(brace, line());
        written = brace.end();
        next++;
    }

    private void body(Tok brace, ItemLayout layout, int indent) {
        if (isOneLine(brace)) {
            layout.oneLineBody(line());
            open(brace, layout, indent);
            while (token().getType() != BackconeLexer.RBRACE) {
                if (!token().isInserted()) {
                    layout.writePlain(token(), line());
                }
                next++;
            }
            layout.writePlain(token(), line());
            written = token().end();
            next++;
            return;
        }
        open(brace, layout, indent);
        items(indent + STEP);
        close(indent, layout);
    }

    /** Arms stand four deeper than the line their choice is on, its closing brace two deeper. */
    private void arms(Tok brace, ItemLayout layout, int indent) {
        open(brace, layout, indent);
        int base = line().indent;
        items(base + CONTINUED);
        close(base + STEP, layout);
    }

    private void wordsOnOneLine(Tok brace, ItemLayout layout, int indent) {
        open(brace, layout, indent);
        boolean first = true;
        while (token().getType() != BackconeLexer.RBRACE) {
            Tok t = token();
            if (t.getType() == BackconeLexer.WORD) {
                if (!first) {
                    line().append(",");
                }
                first = false;
            } else if (!isSeparator(t.getType()) && !t.isInserted()) {
                layout.writePlain(t, line());
            }
            next++;
        }
        layout.writePlain(token(), line());
        written = token().end();
        next++;
    }

    /** A body stays on its line when it was written on one and holds nothing, or a single entry without a body. */
    private boolean isOneLine(Tok brace) {
        int separators = 0;
        int k = next + 1;
        while (tokens.get(k).getType() != BackconeLexer.RBRACE) {
            switch (tokens.get(k).getType()) {
                case BackconeLexer.LBRACE,
                        BackconeLexer.ROWS_OPEN,
                        BackconeLexer.ARMS_OPEN,
                        BackconeLexer.WORDS_OPEN,
                        BackconeLexer.ROW,
                        Token.EOF -> {
                    return false;
                }
                case BackconeLexer.NL, BackconeLexer.SEMI, BackconeLexer.WORD_COMMA -> separators++;
                default -> {}
            }
            k++;
        }
        boolean empty = k == next + 1;
        boolean single = separators == 0
                || (separators == 1 && isSeparator(tokens.get(k - 1).getType()));
        return single
                && !holdsComment()
                && (empty || newlines(brace.end(), tokens.get(k).start()) == 0);
    }

    /** A comment stands before the brace that closes the one at hand. */
    private boolean holdsComment() {
        int depth = 0;
        int k = next;
        do {
            int type = tokens.get(k).getType();
            if (type == BackconeLexer.RBRACE) {
                depth--;
            } else if (type == BackconeLexer.LBRACE
                    || type == BackconeLexer.ROWS_OPEN
                    || type == BackconeLexer.ARMS_OPEN
                    || type == BackconeLexer.WORDS_OPEN) {
                depth++;
            }
            k++;
        } while (depth > 0);
        int end = tokens.get(k - 1).start();
        return nextComment < comments.size() && comments.get(nextComment).start() < end;
    }

    // ---- comments

    /** Writes the comments before this place: behind the last line, or on lines of their own. */
    private void comments(int before, int indent, boolean first) {
        boolean nothingYet = first;
        while (nextComment < comments.size() && comments.get(nextComment).start() < before) {
            Tok c = comments.get(nextComment);
            nextComment++;
            String content = c.getText().stripTrailing();
            int newlines = newlines(written, c.start());
            if (newlines == 0 && !lines.isEmpty() && written > 0) {
                line().comment(content);
            } else {
                Line own = new Line(indent, 0);
                own.append(content);
                own.blankBefore = newlines > 1 && !nothingYet && !lines.isEmpty();
                lines.add(own);
            }
            written = c.end();
            nothingYet = false;
        }
    }

    private int newlines(int from, int to) {
        int count = 0;
        for (int k = from; k < to; k++) {
            char c = text.charAt(k);
            if (c == '\n' || (c == '\r' && (k + 1 >= text.length() || text.charAt(k + 1) != '\n'))) {
                count++;
            }
        }
        return count;
    }
}
