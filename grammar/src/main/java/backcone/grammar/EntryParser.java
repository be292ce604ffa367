package backcone.grammar;

import backcone.grammar.gen.BackconeLexer;
import backcone.grammar.gen.BackconeParser;
import org.antlr.v4.runtime.Parser;
import org.antlr.v4.runtime.ParserRuleContext;
import org.antlr.v4.runtime.Token;
import org.antlr.v4.runtime.TokenStream;
import org.jspecify.annotations.Nullable;

/**
 * The part of the parser that is not grammar. What an entry could not use gets token types of its own once the entry is
 * over. Were it told from the entry's own tokens by look-ahead, that would run to the end of the entry, body included,
 * and stumble over the errors inside.
 */
public abstract class EntryParser extends Parser {

    private @Nullable Builder builder;

    protected EntryParser(TokenStream input) {
        super(input);
    }

    /** Who builds the tree of an entry as soon as it has been read; the parser's own is dropped then. */
    public interface Builder {
        Object build(ParserRuleContext entry);
    }

    public final void setBuilder(Builder builder) {
        this.builder = builder;
    }

    /** Called by the grammar at the end of each entry. Keeps the parser's tree as small as the deepest entry. */
    protected final void built(BackconeParser.EntryContext entry) {
        if (builder != null) {
            entry.stop = _input.LT(-1);
            entry.tree = builder.build(entry);
            entry.children = null;
        }
    }

    /** Marks all tokens from here to the end of the entry, row, arm or word as lost; those inside braces stay. */
    protected final void loseRest() {
        int depth = 0;
        for (int i = _input.index(); ; i++) {
            Token t = _input.get(i);
            int type = t.getType();
            boolean opens = opens(type);
            if (depth == 0) {
                if (ends(type)) {
                    return;
                }
                ((Tok) t).lose(opens ? lostBrace(type) : BackconeLexer.LOST);
            }
            if (opens) {
                depth++;
            } else if (type == BackconeLexer.RBRACE) {
                depth--;
            }
        }
    }

    private static boolean ends(int type) {
        return type == BackconeLexer.NL
                || type == BackconeLexer.SEMI
                || type == BackconeLexer.RBRACE
                || type == BackconeLexer.WORD_COMMA
                || type == Token.EOF;
    }

    private static boolean opens(int type) {
        return type == BackconeLexer.LBRACE
                || type == BackconeLexer.ROWS_OPEN
                || type == BackconeLexer.ARMS_OPEN
                || type == BackconeLexer.WORDS_OPEN;
    }

    private static int lostBrace(int type) {
        return switch (type) {
            case BackconeLexer.ROWS_OPEN -> BackconeLexer.LOST_ROWS;
            case BackconeLexer.ARMS_OPEN -> BackconeLexer.LOST_ARMS;
            case BackconeLexer.WORDS_OPEN -> BackconeLexer.LOST_WORDS;
            default -> BackconeLexer.LOST_BODY;
        };
    }
}
