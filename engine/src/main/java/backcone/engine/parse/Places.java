package backcone.engine.parse;

import backcone.engine.syntax.Name;
import backcone.engine.text.Span;
import backcone.grammar.Tok;
import java.util.List;
import org.antlr.v4.runtime.ParserRuleContext;
import org.antlr.v4.runtime.Token;
import org.jspecify.annotations.Nullable;

/** Where things stand in the text, and the names that stand there. */
final class Places {
    private final List<Tok> tokens;

    Places(List<Tok> tokens) {
        this.tokens = tokens;
    }

    static Span of(Token token) {
        return new Span(token.getStartIndex(), Math.max(token.getStartIndex(), token.getStopIndex() + 1));
    }

    /** From the first to the last token of a rule; a place without length where the rule found nothing. */
    Span of(ParserRuleContext rule) {
        Token first = rule.getStart();
        Token last = rule.getStop();
        if (first == null) {
            return Span.NONE;
        }
        if (last == null || last.getTokenIndex() < first.getTokenIndex()) {
            return before(first);
        }
        return new Span(first.getStartIndex(), Math.max(first.getStartIndex(), last.getStopIndex() + 1));
    }

    /** The place right behind the token that comes before this one: there something is missing. */
    Span before(Token token) {
        int index = token.getTokenIndex();
        int at = index <= 0 ? 0 : tokens.get(index - 1).end();
        return new Span(at, at);
    }

    /** The place right behind what the rule did hold. */
    Span behind(ParserRuleContext rule) {
        int end = of(rule).end();
        return new Span(end, end);
    }

    Name name(@Nullable Token token, ParserRuleContext owner) {
        return token == null ? new Name("", behind(owner)) : new Name(token.getText(), of(token));
    }

    @Nullable
    Name nameOrNull(@Nullable Token token) {
        return token == null ? null : new Name(token.getText(), of(token));
    }
}
