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
        switch (t.getType()) {
            case BackconeLexer.ASSIGN:
                return alignsEquals() && !line.has(Line.Stop.EQUALS) ? Line.Stop.EQUALS : null;
            case BackconeLexer.ARROW:
                return Line.Stop.ARROW;
            case BackconeLexer.PIPE:
                return Line.Stop.BAR;
            case BackconeLexer.COLON:
                pastColon = true;
                return null;
            case BackconeLexer.NAME:
                names++;
                return kind == BackconeLexer.DECLARATION && names == 2 && !pastColon ? Line.Stop.SYMBOL : null;
            case BackconeLexer.STRING:
                return hasMeaning() && !pastColon && !line.has(Line.Stop.MEANING) ? Line.Stop.MEANING : null;
            case BackconeLexer.IN:
                return kind == BackconeLexer.QUANTITY ? Line.Stop.SYMBOL : null;
            case BackconeLexer.WITHIN:
                return kind == BackconeLexer.GIVES ? Line.Stop.WITHIN : null;
            case BackconeLexer.BECAUSE:
                return last != null && last.getType() == BackconeLexer.ASSUMED ? null : note(line);
            case BackconeLexer.IS:
                return kind == BackconeLexer.DECLARATION ? note(line) : null;
            case BackconeLexer.PER:
            case BackconeLexer.MEASURED:
            case BackconeLexer.ASSUMED:
            case BackconeLexer.ELSE:
            case BackconeLexer.TAKING:
            case BackconeLexer.READING:
            case BackconeLexer.RANGE:
            case BackconeLexer.WORST:
            case BackconeLexer.NEEDED:
            case BackconeLexer.OFFER:
            case BackconeLexer.ROWS:
                return kind == BackconeLexer.EXAMPLE ? null : note(line);
            default:
                return null;
        }
    }

    private static Line.@Nullable Stop note(Line line) {
        return line.has(Line.Stop.NOTE) ? null : Line.Stop.NOTE;
    }

    private boolean alignsEquals() {
        switch (kind) {
            case BackconeLexer.FACT:
            case BackconeLexer.FACT_FOR:
            case BackconeLexer.LET:
            case BackconeLexer.OVERRIDE:
            case BackconeLexer.ROLE:
            case BackconeLexer.GIVES:
                return true;
            default:
                return false;
        }
    }

    private boolean hasMeaning() {
        return kind == BackconeLexer.DECLARATION
                || kind == BackconeLexer.QUANTITY
                || kind == BackconeLexer.SOURCE
                || kind == BackconeLexer.WORD;
    }

    /** Blanks around operators, none inside brackets, paths, powers and after a sign. */
    private boolean blankBetween(Tok a, Tok b) {
        switch (b.getType()) {
            case BackconeLexer.COMMA:
            case BackconeLexer.RPAREN:
            case BackconeLexer.DOT:
                return false;
            case BackconeLexer.LPAREN:
                return a.getType() != BackconeLexer.NAME && a.getType() != BackconeLexer.LPAREN && !isTight(a);
            case BackconeLexer.CARET:
                // behind a unit, a power that touches would become part of it
                return a.getType() == BackconeLexer.UNIT;
            case BackconeLexer.UNIT:
                return b.getText().charAt(0) != '\u00B0';
            default:
                return a.getType() != BackconeLexer.LPAREN && !isTight(a);
        }
    }

    private boolean isTight(Tok a) {
        return a.getType() == BackconeLexer.DOT || a.getType() == BackconeLexer.CARET || lastIsUnary;
    }

    private static boolean isSign(int type) {
        return type == BackconeLexer.MINUS || type == BackconeLexer.PLUS;
    }

    private static boolean endsOperand(@Nullable Tok t) {
        if (t == null) {
            return false;
        }
        switch (t.getType()) {
            case BackconeLexer.NAME:
            case BackconeLexer.NUMBER:
            case BackconeLexer.UNIT:
            case BackconeLexer.STRING:
            case BackconeLexer.DATE:
            case BackconeLexer.RPAREN:
            case BackconeLexer.RBRACE:
                return true;
            default:
                return false;
        }
    }
}
