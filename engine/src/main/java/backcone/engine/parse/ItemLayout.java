package backcone.engine.parse;

import backcone.grammar.Tok;
import backcone.grammar.gen.BackconeLexer;
import org.jspecify.annotations.Nullable;

/** Blanks between the tokens of one entry, row or arm, and the places where it lines up with its neighbours. */
final class ItemLayout {
    private final int kind;
    private @Nullable Tok last;
    private boolean lineIsEmpty = true;
    private boolean lastIsUnary;

    /** The last token is a {@code ^} with blanks around, since it stands behind a unit. */
    private boolean looseCaret;

    private int brackets;
    private int names;
    private boolean pastColon;

    ItemLayout(int kind) {
        this.kind = kind;
    }

    boolean isFirst() {
        return last == null;
    }

    void startLine() {
        lineIsEmpty = true;
    }

    /** The body of a block that stays on this line. */
    void oneLineBody(Line line) {
        if (kind == BackconeLexer.BLOCK && !line.isEmpty()) {
            line.stop(Line.Stop.BRACE);
            lineIsEmpty = true;
        }
    }

    void write(Tok t, Line line) {
        Line.Stop stop = brackets == 0 ? stop(t, line) : null;
        if (stop != null && !lineIsEmpty) {
            line.stop(stop);
            lineIsEmpty = true;
        }
        writePlain(t, line);
    }

    void writePlain(Tok t, Line line) {
        if (!lineIsEmpty && last != null && blankBetween(last, t)) {
            line.append(" ");
        }
        line.append(t.getText());
        looseCaret = t.getType() == BackconeLexer.CARET && last != null && last.getType() == BackconeLexer.UNIT;
        lastIsUnary = isSign(t.getType()) && !endsOperand(last);
        if (t.getType() == BackconeLexer.LPAREN) {
            brackets++;
        } else if (t.getType() == BackconeLexer.RPAREN) {
            brackets--;
        }
        last = t;
        lineIsEmpty = false;
    }

    private Line.@Nullable Stop stop(Tok t, Line line) {
        return switch (t.getType()) {
            case BackconeLexer.ASSIGN -> only(alignsEquals() && !line.has(Line.Stop.EQUALS), Line.Stop.EQUALS);
            case BackconeLexer.ARROW -> Line.Stop.ARROW;
            case BackconeLexer.PIPE -> Line.Stop.BAR;
            case BackconeLexer.COLON -> {
                pastColon = true;
                yield null;
            }
            case BackconeLexer.NAME -> {
                names++;
                yield only(kind == BackconeLexer.DECLARATION && names == 2 && !pastColon, Line.Stop.SYMBOL);
            }
            case BackconeLexer.STRING ->
                only(hasMeaning() && !pastColon && !line.has(Line.Stop.MEANING), Line.Stop.MEANING);
            case BackconeLexer.IN -> only(kind == BackconeLexer.QUANTITY, Line.Stop.SYMBOL);
            case BackconeLexer.WITHIN -> only(kind == BackconeLexer.GIVES, Line.Stop.WITHIN);
            case BackconeLexer.BECAUSE -> note(line, last == null || last.getType() != BackconeLexer.ASSUMED);
            case BackconeLexer.IS -> note(line, kind == BackconeLexer.DECLARATION);
            case BackconeLexer.PER,
                    BackconeLexer.MEASURED,
                    BackconeLexer.ASSUMED,
                    BackconeLexer.ELSE,
                    BackconeLexer.TAKING,
                    BackconeLexer.READING,
                    BackconeLexer.RANGE,
                    BackconeLexer.WORST,
                    BackconeLexer.NEEDED,
                    BackconeLexer.OFFER,
                    BackconeLexer.ROWS -> note(line, kind != BackconeLexer.EXAMPLE);
            default -> null;
        };
    }

    /** Where the first of the trailing notes starts. */
    private static Line.@Nullable Stop note(Line line, boolean trails) {
        return only(trails && !line.has(Line.Stop.NOTE), Line.Stop.NOTE);
    }

    private static Line.@Nullable Stop only(boolean here, Line.Stop stop) {
        return here ? stop : null;
    }

    private boolean alignsEquals() {
        return switch (kind) {
            case BackconeLexer.FACT,
                    BackconeLexer.FACT_FOR,
                    BackconeLexer.LET,
                    BackconeLexer.OVERRIDE,
                    BackconeLexer.ROLE,
                    BackconeLexer.GIVES -> true;
            default -> false;
        };
    }

    private boolean hasMeaning() {
        return kind == BackconeLexer.DECLARATION
                || kind == BackconeLexer.QUANTITY
                || kind == BackconeLexer.SOURCE
                || kind == BackconeLexer.WORD;
    }

    /** Blanks around operators, none inside brackets, paths, powers and after a sign. */
    private boolean blankBetween(Tok a, Tok b) {
        return switch (b.getType()) {
            case BackconeLexer.COMMA, BackconeLexer.RPAREN, BackconeLexer.DOT -> false;
            case BackconeLexer.LPAREN ->
                a.getType() != BackconeLexer.NAME && a.getType() != BackconeLexer.LPAREN && !isTight(a);
            case BackconeLexer.CARET ->
                // behind a unit, a power that touches would become part of it
                a.getType() == BackconeLexer.UNIT;
            case BackconeLexer.UNIT -> b.getText().charAt(0) != '\u00B0';
            default -> a.getType() != BackconeLexer.LPAREN && !isTight(a);
        };
    }

    private boolean isTight(Tok a) {
        return a.getType() == BackconeLexer.DOT || (a.getType() == BackconeLexer.CARET && !looseCaret) || lastIsUnary;
    }

    private static boolean isSign(int type) {
        return type == BackconeLexer.MINUS || type == BackconeLexer.PLUS;
    }

    private static boolean endsOperand(@Nullable Tok t) {
        if (t == null) {
            return false;
        }
        return switch (t.getType()) {
            case BackconeLexer.NAME,
                    BackconeLexer.NUMBER,
                    BackconeLexer.UNIT,
                    BackconeLexer.STRING,
                    BackconeLexer.DATE,
                    BackconeLexer.RPAREN,
                    BackconeLexer.RBRACE -> true;
            default -> false;
        };
    }
}
