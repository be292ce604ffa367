package backcone.engine.parse;

import backcone.grammar.Tok;
import backcone.grammar.gen.BackconeParser;
import java.util.IdentityHashMap;
import org.antlr.v4.runtime.DefaultErrorStrategy;
import org.antlr.v4.runtime.InputMismatchException;
import org.antlr.v4.runtime.Parser;
import org.antlr.v4.runtime.ParserRuleContext;
import org.antlr.v4.runtime.RecognitionException;
import org.antlr.v4.runtime.RuleContext;
import org.antlr.v4.runtime.Token;
import org.antlr.v4.runtime.misc.IntervalSet;
import org.jspecify.annotations.Nullable;

/**
 * Never deletes, inserts or skips a token: a rule that fails returns, its callers go on as far as they can, and the
 * entry's {@code rest} takes what is left. So an error stays inside its entry. Remembers the first failure of each
 * entry, row and arm.
 */
final class Recovery extends DefaultErrorStrategy {
    /** The first thing that went wrong in an entry: in which rule, at which token, what could have stood there. */
    record Failure(RuleContext rule, Token found, IntervalSet expected) {}

    private final IdentityHashMap<RuleContext, Failure> failures = new IdentityHashMap<>();

    /** The first failure directly in this entry, row or arm, not in those it holds. */
    @Nullable
    Failure in(ParserRuleContext item) {
        return failures.get(item);
    }

    @Override
    public void reportError(Parser parser, RecognitionException e) {
        ParserRuleContext rule = parser.getContext();
        RuleContext item = rule;
        while (item != null && !isItem(item.getRuleIndex())) {
            item = item.getParent();
        }
        if (item == null || failures.containsKey(item)) {
            return;
        }
        Token found = e.getOffendingToken() == null ? parser.getCurrentToken() : e.getOffendingToken();
        IntervalSet expected = e.getExpectedTokens() == null ? new IntervalSet() : e.getExpectedTokens();
        failures.put(item, new Failure(rule, found, expected));
    }

    private static boolean isItem(int rule) {
        return rule == BackconeParser.RULE_entry
                || rule == BackconeParser.RULE_row
                || rule == BackconeParser.RULE_arm
                || rule == BackconeParser.RULE_word;
    }

    @Override
    public void recover(Parser parser, RecognitionException e) {
        // nothing is skipped: see the class comment
    }

    @Override
    public Token recoverInline(Parser parser) {
        throw new InputMismatchException(parser);
    }

    @Override
    public void sync(Parser parser) {
        // no look for a better place: see the class comment
    }

    @Override
    public boolean inErrorRecoveryMode(Parser parser) {
        return false;
    }

    static boolean isFaulty(Token start) {
        return start instanceof Tok tok && tok.isFaulty();
    }
}
