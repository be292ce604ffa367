package backcone.grammar;

import backcone.grammar.gen.BackconeLexer;
import org.antlr.v4.runtime.CharStream;
import org.antlr.v4.runtime.Lexer;
import org.antlr.v4.runtime.Token;
import org.antlr.v4.runtime.TokenSource;
import org.antlr.v4.runtime.misc.Pair;

/**
 * The letters of {@code BackconeLexer.g4} read by hand, since the generated lexer learns its automaton anew in every process: a
 * third of a short run. A test holds that both give the same tokens on any text.
 */
final class Scanner {
    private final String text;
    private final int length;
    private final Pair<TokenSource, CharStream> source;
    private int at;
    private int line = 1;

    Scanner(String text, int start) {
        this.text = text;
        this.length = text.length();
        this.at = start;
        this.source = new Pair<>(null, new TextStream(text, start));
    }

    /** The next token, comments on the hidden channel; at the end of the text the end-of-file token, again and again. */
    Tok next() {
        while (at < length && isSpace(text.charAt(at))) {
            at++;
        }
        int start = at;
        int startLine = line;
        int type = start == length ? Token.EOF : scan(text.charAt(start));
        int channel = type == BackconeLexer.COMMENT ? Lexer.HIDDEN : Lexer.DEFAULT_TOKEN_CHANNEL;
        Tok t = new Tok(source, type, channel, start, at - 1);
        t.setLine(startLine);
        return t;
    }

    private int scan(char c) {
        at++;
        if (isLetter(c)) {
            while (at < length && (isLetter(text.charAt(at)) || isDigit(text.charAt(at)))) {
                at++;
            }
            return BackconeLexer.NAME;
        }
        if (isDigit(c)) {
            return number(at - 1);
        }
        switch (c) {
            case '\r':
                if (take('\n')) {
                    line++;
                }
                return BackconeLexer.NL;
            case '\n':
                line++;
                return BackconeLexer.NL;
            case '#':
                while (at < length && text.charAt(at) != '\r' && text.charAt(at) != '\n') {
                    at++;
                }
                return BackconeLexer.COMMENT;
            case '"':
                return string();
            case '=':
                return take('>') ? BackconeLexer.ARROW : take('=') ? BackconeLexer.EQ : BackconeLexer.ASSIGN;
            case '!':
                return take('=') ? BackconeLexer.NE : BackconeLexer.BAD;
            case '<':
                return take('=') ? BackconeLexer.LE : BackconeLexer.LT;
            case '>':
                return take('=') ? BackconeLexer.GE : BackconeLexer.GT;
            case '.':
                return take('.') ? BackconeLexer.DOTDOT : BackconeLexer.DOT;
            case '\u00B0':
                if (at < length && text.charAt(at) >= 'A' && text.charAt(at) <= 'Z') {
                    at++;
                }
                return BackconeLexer.DEGREE;
            case '+':
                return BackconeLexer.PLUS;
            case '-':
                return BackconeLexer.MINUS;
            case '*':
                return BackconeLexer.STAR;
            case '/':
                return BackconeLexer.SLASH;
            case '^':
                return BackconeLexer.CARET;
            case ',':
                return BackconeLexer.COMMA;
            case ':':
                return BackconeLexer.COLON;
            case ';':
                return BackconeLexer.SEMI;
            case '|':
                return BackconeLexer.PIPE;
            case '%':
                return BackconeLexer.PERCENT;
            case '(':
                return BackconeLexer.LPAREN;
            case ')':
                return BackconeLexer.RPAREN;
            case '{':
                return BackconeLexer.LBRACE;
            case '}':
                return BackconeLexer.RBRACE;
            default:
                return BackconeLexer.BAD;
        }
    }

    private boolean take(char c) {
        if (at < length && text.charAt(at) == c) {
            at++;
            return true;
        }
        return false;
    }

    private int number(int start) {
        at = digits(start);
        if (at == start + 4 && is(at, '-') && digits(at + 1) >= at + 3 && is(at + 3, '-') && digits(at + 4) >= at + 6) {
            at += 6;
            return BackconeLexer.DATE;
        }
        if (is(at, '.') && digits(at + 1) > at + 1) {
            at = digits(at + 1);
        }
        if (is(at, 'e') || is(at, 'E')) {
            int power = is(at + 1, '+') || is(at + 1, '-') ? at + 2 : at + 1;
            if (digits(power) > power) {
                at = digits(power);
            }
        }
        return BackconeLexer.NUMBER;
    }

    private boolean is(int i, char c) {
        return i < length && text.charAt(i) == c;
    }

    private int digits(int from) {
        int i = from;
        while (i < length && isDigit(text.charAt(i))) {
            i++;
        }
        return i;
    }

    private int string() {
        while (at < length) {
            char c = text.charAt(at);
            if (c == '\r' || c == '\n') {
                break;
            }
            at++;
            if (c == '"') {
                return BackconeLexer.STRING;
            }
            if (c == '\\' && at < length && text.charAt(at) != '\r' && text.charAt(at) != '\n') {
                at++;
            }
        }
        return BackconeLexer.OPENSTRING;
    }

    private static boolean isDigit(char c) {
        return c >= '0' && c <= '9';
    }

    private static boolean isSpace(char c) {
        return c == ' ' || c == '\t' || c == '\f' || c == '\u00A0' || c == '\u2007' || c == '\u2009' || c == '\u202F';
    }

    private static boolean isLetter(char c) {
        if (c < 128) {
            return c >= 'a' && c <= 'z' || c >= 'A' && c <= 'Z' || c == '_';
        }
        return c == '\u00B5'
                || c >= '\u0391' && c <= '\u03A9' && c != '\u03A2'
                || c >= '\u03B1' && c <= '\u03C9'
                || c == '\u03D1'
                || c == '\u03D5'
                || c == '\u03F0'
                || c == '\u03F1'
                || c == '\u03F5';
    }
}
