package backcone.grammar;

import backcone.grammar.gen.BackconeLexer;
import java.util.ArrayList;
import java.util.List;

/**
 * Second pass: cuts what is nested deeper than any text an engineer writes. The parser, the tree and all that walks it
 * are recursive, so their depth is bounded here, before any of them starts.
 */
final class Nesting {
    /** Open brackets and braces. */
    static final int MOST_OPEN = 100;

    /** Operators of one expression, all brackets around included; each may be one level of the tree. */
    static final int MOST_OPERATORS = 500;

    private final List<Tok> out;
    private final List<Finding> findings;
    private boolean[] isBrace = new boolean[64];
    private int[] operators = new int[64];
    private int open;
    private int total;
    private boolean cutLine;
    private boolean afterCall;
    private boolean found;

    private Nesting(int size, List<Finding> findings) {
        this.out = new ArrayList<>(size);
        this.findings = findings;
    }

    static List<Tok> cut(List<Tok> tokens, List<Finding> findings) {
        Nesting pass = new Nesting(tokens.size(), findings);
        for (int i = 0; i < tokens.size(); i++) {
            pass.take(tokens, i);
        }
        return pass.found ? pass.out : tokens;
    }

    private void take(List<Tok> tokens, int i) {
        Tok t = tokens.get(i);
        switch (t.getType()) {
            case BackconeLexer.NL -> {
                lineEnd(i + 1 < tokens.size() ? tokens.get(i + 1).getType() : BackconeLexer.EOF);
                keep(t, open <= MOST_OPEN);
            }
            case BackconeLexer.LPAREN -> {
                push(false);
                check(t);
                keep(t, open <= MOST_OPEN && !cutLine);
            }
            case BackconeLexer.LBRACE -> {
                push(true);
                check(t);
                keep(t, open <= MOST_OPEN);
            }
            case BackconeLexer.RPAREN -> {
                keep(t, open <= MOST_OPEN && !cutLine);
                if (open > 0 && !isBrace[open]) {
                    pop();
                }
                afterCall = true;
                return;
            }
            case BackconeLexer.RBRACE -> {
                popBrackets();
                keep(t, open <= MOST_OPEN);
                if (open > 0) {
                    pop();
                }
            }
            case BackconeLexer.EOF -> keep(t, true);
            case BackconeLexer.SEMI,
                    BackconeLexer.COMMA,
                    BackconeLexer.PIPE,
                    BackconeLexer.COLON,
                    BackconeLexer.ARROW,
                    BackconeLexer.ASSIGN -> {
                keep(t, open <= MOST_OPEN && !cutLine);
                total -= operators[open];
                operators[open] = 0;
            }
            default -> {
                if (isOperator(t)) {
                    operators[open]++;
                    total++;
                    check(t);
                }
                keep(t, open <= MOST_OPEN && !cutLine);
                if (t.getType() == BackconeLexer.DOT || t.getType() == BackconeLexer.NAME) {
                    return;
                }
            }
        }
        afterCall = false;
    }

    private boolean isOperator(Tok t) {
        return switch (t.getType()) {
            case BackconeLexer.PLUS,
                    BackconeLexer.MINUS,
                    BackconeLexer.STAR,
                    BackconeLexer.SLASH,
                    BackconeLexer.CARET,
                    BackconeLexer.EQ,
                    BackconeLexer.NE,
                    BackconeLexer.LE,
                    BackconeLexer.GE,
                    BackconeLexer.LT,
                    BackconeLexer.GT,
                    BackconeLexer.IN -> true;
            case BackconeLexer.DOT -> afterCall;
            case BackconeLexer.NAME -> t.end() - t.start() <= 6 && Words.reserved(t.getText()) != null;
            default -> false;
        };
    }

    /** A line that starts with an operator goes on with the expression. Brackets cut too deep end with their line. */
    private void lineEnd(int next) {
        cutLine = false;
        if (open > MOST_OPEN) {
            popBrackets();
        }
        boolean goesOn = next == BackconeLexer.PLUS
                || next == BackconeLexer.MINUS
                || next == BackconeLexer.STAR
                || next == BackconeLexer.SLASH
                || next == BackconeLexer.CARET
                || (next >= BackconeLexer.EQ && next <= BackconeLexer.GT)
                || next == BackconeLexer.NAME;
        if (!goesOn || (isBrace[open] && next == BackconeLexer.NAME)) {
            total -= operators[open];
            operators[open] = 0;
        }
    }

    private void push(boolean brace) {
        open++;
        if (open == isBrace.length) {
            isBrace = java.util.Arrays.copyOf(isBrace, open * 2);
            operators = java.util.Arrays.copyOf(operators, open * 2);
        }
        isBrace[open] = brace;
        operators[open] = 0;
    }

    private void pop() {
        total -= operators[open];
        open--;
    }

    private void popBrackets() {
        while (open > 0 && !isBrace[open]) {
            pop();
        }
    }

    private void check(Tok t) {
        boolean tooManyOperators = total > MOST_OPERATORS;
        if (open <= MOST_OPEN && !tooManyOperators) {
            return;
        }
        cutLine |= tooManyOperators;
        t.faulty = true;
        if (!found) {
            found = true;
            findings.add(new Finding(
                    Finding.Kind.TOO_DEEP, t.start(), t.end(), tooManyOperators ? "operators" : "brackets", ""));
        }
    }

    private void keep(Tok t, boolean keep) {
        if (keep) {
            out.add(t);
        }
    }
}
