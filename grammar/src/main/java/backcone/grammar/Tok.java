package backcone.grammar;

import org.antlr.v4.runtime.CharStream;
import org.antlr.v4.runtime.CommonToken;
import org.antlr.v4.runtime.TokenSource;
import org.antlr.v4.runtime.misc.Pair;

/** A token with its place in UTF-16 units and what the token list found out about it. */
public final class Tok extends CommonToken {
    private static final long serialVersionUID = 1L;

    /** A finding was made in the entry that starts with this token; what else goes wrong in it is a consequence. */
    boolean faulty;

    /** What it was before its entry could not use it; 0 when it could. */
    private int typeBefore;

    /** A number that has no readable value. */
    boolean unreadable;

    Tok(Pair<TokenSource, CharStream> source, int type, int channel, int start, int stop) {
        super(source, type, channel, start, stop);
    }

    /** A token of no text, put before the character at {@code at}. */
    static Tok inserted(Tok near, int type, int at) {
        Tok t = new Tok(near.source, type, DEFAULT_CHANNEL, at, at - 1);
        t.line = near.line;
        return t;
    }

    public int start() {
        return start;
    }

    /** The offset behind the last character. */
    public int end() {
        return stop + 1;
    }

    /** True for markers and for brackets and operators that the author did not write. */
    public boolean isInserted() {
        return stop < start && type != EOF;
    }

    /** What the token list took it for, also when its entry could not use it. */
    public int kind() {
        return typeBefore == 0 ? type : typeBefore;
    }

    void lose(int lostType) {
        typeBefore = type;
        type = lostType;
    }

    public boolean isFaulty() {
        return faulty;
    }

    public boolean isUnreadable() {
        return unreadable;
    }

    Pair<TokenSource, CharStream> pair() {
        return source;
    }

    boolean touches(Tok next) {
        return end() == next.start;
    }

    boolean is(String word) {
        int length = word.length();
        if (stop - start + 1 != length) {
            return false;
        }
        CharStream text = source.b;
        return text != null && word.equals(getText());
    }
}
