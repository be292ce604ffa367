package backcone.engine.parse;

import backcone.engine.diagnostics.Code;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.text.FileId;
import backcone.grammar.Finding;
import backcone.grammar.Tokens;
import backcone.grammar.gen.BackconeParser;
import java.util.ArrayList;
import java.util.List;
import org.antlr.v4.runtime.ParserRuleContext;
import org.antlr.v4.runtime.Token;
import org.jspecify.annotations.Nullable;

/** Puts findings into words, at most one for each entry, row or arm. */
final class Problems implements Exprs.ItemCheck {
    private final FileId file;
    private final List<Diagnostic> list = new ArrayList<>();
    private final Recovery recovery;

    Problems(FileId file, String text, Tokens tokens, Recovery recovery) {
        this.file = file;
        this.recovery = recovery;
        for (Finding f : tokens.findings()) {
            list.add(Diagnostic.of(
                    Code.SYNTAX, file, new backcone.engine.text.Span(f.start(), f.end()), f.kind() + " " + f.text()));
        }
    }

    List<Diagnostic> all() {
        return List.copyOf(list);
    }

    @Override
    public void check(ParserRuleContext item, BackconeParser.@Nullable RestContext rest) {
        if (Recovery.isFaulty(item.getStart())) {
            return;
        }
        Recovery.Failure failure = recovery.in(item);
        Token found = failure != null ? failure.found() : rest != null ? rest.getStart() : null;
        if (found != null) {
            list.add(Diagnostic.of(Code.SYNTAX, file, Places.of(found), "cannot read `" + found.getText() + "` here"));
        }
    }
}
