package backcone.engine.parse;

import backcone.engine.diagnostics.Code;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.text.FileId;
import backcone.grammar.Finding;
import backcone.grammar.Tokens;
import backcone.grammar.gen.BackconeParser;
import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;
import org.antlr.v4.runtime.ParserRuleContext;
import org.antlr.v4.runtime.Token;
import org.jspecify.annotations.Nullable;

/** Collects the findings of a text, at most one for each entry, row or arm, in the order of the text. */
final class Problems implements Exprs.ItemCheck {
    /** More findings than this help nobody. */
    private static final int MOST = 1000;

    private final FileId file;
    private final List<Diagnostic> list = new ArrayList<>();
    private final Recovery recovery;
    private final Misreadings misreadings;

    Problems(FileId file, String text, Tokens tokens, Recovery recovery) {
        this.file = file;
        this.recovery = recovery;
        this.misreadings = new Misreadings(file, tokens.list());
        Findings findings = new Findings(file);
        Finding last = null;
        for (Finding f : tokens.findings()) {
            if (last == null || !isOneCause(last, f, text)) {
                list.add(findings.say(f));
            }
            last = f;
        }
    }

    /** Unknown characters of one line, such as a pair of quotes, are said once. */
    private static boolean isOneCause(Finding a, Finding b, String text) {
        return a.kind() == Finding.Kind.BAD_CHARACTER
                && b.kind() == Finding.Kind.BAD_CHARACTER
                && text.substring(a.end(), b.start()).indexOf('\n') < 0;
    }

    List<Diagnostic> all() {
        for (Diagnostic d : list) {
            if (d.code() == Code.TOO_DEEP) {
                // what else is found in such a text comes from the cut
                return List.of(d);
            }
        }
        list.sort(Comparator.comparingInt(d -> d.span().start()));
        if (list.size() <= MOST) {
            return List.copyOf(list);
        }
        List<Diagnostic> shown = new ArrayList<>(list.subList(0, MOST));
        shown.add(Diagnostic.of(
                Code.TOO_MANY,
                file,
                list.get(MOST).span(),
                "this text holds " + list.size()
                        + " findings; those from here on are not listed: mend the first ones"));
        return List.copyOf(shown);
    }

    @Override
    public void check(ParserRuleContext item, BackconeParser.@Nullable RestContext rest) {
        if (Recovery.isFaulty(item.getStart())) {
            // the token list has said what is wrong; the rest are consequences
            return;
        }
        Recovery.Failure failure = recovery.in(item);
        Token found = failure != null ? failure.found() : rest != null ? rest.getStart() : null;
        if (found != null) {
            list.add(misreadings.say(item, failure, found));
        }
    }
}
