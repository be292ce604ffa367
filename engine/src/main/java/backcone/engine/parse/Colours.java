package backcone.engine.parse;

import backcone.grammar.Tok;
import backcone.grammar.Tokens;
import backcone.grammar.Words;
import backcone.grammar.gen.BackconeLexer;
import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;
import java.util.Set;

/** The words of a text by what they are to the eye: keyword, number, unit, string, comment, name. Any text. */
public final class Colours {
    /** What a piece of text is. */
    public enum Sort {
        KEYWORD,
        NUMBER,
        UNIT,
        STRING,
        COMMENT,
        NAME,
        SIGN,
        BRACE_OPEN,
        BRACE_CLOSE
    }

    public record Piece(int start, int end, Sort sort) {}

    private Colours() {}

    public static List<Piece> of(String text) {
        Tokens tokens = Tokens.of(text);
        List<Piece> out = new ArrayList<>(tokens.list().size());
        for (Tok t : tokens.list()) {
            if (!t.isInserted() && t.getType() != BackconeLexer.EOF && t.getType() != BackconeLexer.NL) {
                out.add(new Piece(t.start(), t.end(), sort(t)));
            }
        }
        for (Tok t : tokens.comments()) {
            out.add(new Piece(t.start(), t.end(), Sort.COMMENT));
        }
        out.sort(Comparator.comparingInt(Piece::start));
        return out;
    }

    private static Sort sort(Tok t) {
        int kind = t.kind();
        if (kind == BackconeLexer.STRING || kind == BackconeLexer.OPENSTRING) {
            return Sort.STRING;
        } else if (kind == BackconeLexer.NUMBER || kind == BackconeLexer.DATE) {
            return Sort.NUMBER;
        } else if (kind == BackconeLexer.UNIT || kind == BackconeLexer.PERCENT || kind == BackconeLexer.DEGREE) {
            return Sort.UNIT;
        } else if (kind == BackconeLexer.NAME) {
            return Sort.NAME;
        }
        String text = t.getText();
        if (text.equals("{")) {
            return Sort.BRACE_OPEN;
        } else if (text.equals("}")) {
            return Sort.BRACE_CLOSE;
        }
        return !text.isEmpty() && Character.isLetter(text.charAt(0)) ? Sort.KEYWORD : Sort.SIGN;
    }

    /** Words that can never be names. */
    public static Set<String> reserved() {
        return Words.reserved();
    }

    /** Every keyword. */
    public static Set<String> keywords() {
        return Words.all();
    }
}
