package backcone.grammar;

import java.util.List;
import org.antlr.v4.runtime.RuleContext;
import org.antlr.v4.runtime.Token;
import org.antlr.v4.runtime.TokenSource;
import org.antlr.v4.runtime.TokenStream;
import org.antlr.v4.runtime.misc.Interval;

/** A finished token list as the parser reads it: one array, no channels, no look back into a lexer. */
public final class TokenList implements TokenStream {
    private final Tok[] tokens;
    private int at;

    /** Expects the end-of-file token at the end. */
    public TokenList(List<Tok> list) {
        tokens = list.toArray(new Tok[0]);
        for (int i = 0; i < tokens.length; i++) {
            tokens[i].setTokenIndex(i);
        }
    }

    @Override
    public Token LT(int offset) {
        int index = offset > 0 ? at + offset - 1 : at + offset;
        return tokens[Math.max(0, Math.min(index, tokens.length - 1))];
    }

    @Override
    public int LA(int offset) {
        return LT(offset).getType();
    }

    @Override
    public Token get(int index) {
        return tokens[index];
    }

    @Override
    public void consume() {
        if (at == tokens.length - 1) {
            throw new IllegalStateException("cannot consume the end of the text");
        }
        at++;
    }

    @Override
    public int mark() {
        return 0;
    }

    @Override
    public void release(int marker) {
        // all tokens are at hand: marks need no book-keeping
    }

    @Override
    public int index() {
        return at;
    }

    @Override
    public void seek(int index) {
        at = Math.min(index, tokens.length - 1);
    }

    @Override
    public int size() {
        return tokens.length;
    }

    @Override
    public String getSourceName() {
        return UNKNOWN_SOURCE_NAME;
    }

    @Override
    public TokenSource getTokenSource() {
        return tokens[tokens.length - 1].getTokenSource();
    }

    @Override
    public String getText(Interval interval) {
        StringBuilder b = new StringBuilder();
        for (int i = interval.a; i <= interval.b && i < tokens.length; i++) {
            b.append(tokens[i].getText());
        }
        return b.toString();
    }

    @Override
    public String getText() {
        return getText(Interval.of(0, tokens.length - 1));
    }

    @Override
    public String getText(RuleContext context) {
        return getText(context.getSourceInterval());
    }

    @Override
    public String getText(Token start, Token stop) {
        return getText(Interval.of(start.getTokenIndex(), stop.getTokenIndex()));
    }
}
