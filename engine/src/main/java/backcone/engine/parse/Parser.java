package backcone.engine.parse;

import backcone.engine.diagnostics.Code;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.syntax.Entry;
import backcone.engine.syntax.FileSyntax;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import backcone.grammar.Tok;
import backcone.grammar.TokenList;
import backcone.grammar.Tokens;
import backcone.grammar.gen.BackconeParser;
import java.util.ArrayList;
import java.util.List;
import org.antlr.v4.runtime.atn.PredictionMode;

/** Text to tree. Total: any text gives a tree, with findings beside it. */
public final class Parser {
    /** Longer texts are not read. */
    public static final int MOST_CHARACTERS = 16_000_000;

    /** What one text holds. */
    public record Parsed(FileSyntax tree, List<Diagnostic> problems) {}

    private Parser() {}

    /** Loads the tables of the grammar, which takes a while in a new process. */
    public static void prepare() {
        new BackconeParser(new TokenList(Tokens.of("").list()));
    }

    public static Parsed parse(FileId file, String text) {
        if (text.length() > MOST_CHARACTERS) {
            Span start = new Span(0, 0);
            Diagnostic tooLong = Diagnostic.of(
                    Code.TOO_LONG,
                    file,
                    start,
                    "this text holds " + text.length() + " characters; more than " + MOST_CHARACTERS
                            + " are not read: split it and join the parts with `use`");
            return new Parsed(new FileSyntax(List.of(), List.of(), new Span(0, text.length())), List.of(tooLong));
        }
        Tokens tokens = Tokens.of(text);
        Recovery recovery = new Recovery();
        Problems problems = new Problems(file, text, tokens, recovery);
        TreeBuilder builder = new TreeBuilder(new Places(tokens.list()), problems);
        List<Entry> entries = builder.entries(read(tokens, recovery, builder).entries());
        List<FileSyntax.Comment> comments = new ArrayList<>(tokens.comments().size());
        for (Tok c : tokens.comments()) {
            comments.add(new FileSyntax.Comment(c.getText(), Places.of(c)));
        }
        FileSyntax syntax = new FileSyntax(entries, List.copyOf(comments), new Span(0, text.length()));
        return new Parsed(syntax, problems.all());
    }

    private static BackconeParser.FileContext read(Tokens tokens, Recovery recovery, TreeBuilder builder) {
        BackconeParser parser = new BackconeParser(new TokenList(tokens.list()));
        parser.removeErrorListeners();
        parser.setErrorHandler(recovery);
        parser.setBuilder(entry -> builder.entry((BackconeParser.EntryContext) entry));
        // every choice is made on one or two tokens, so the cheap mode gives the same tree as the full one
        parser.getInterpreter().setPredictionMode(PredictionMode.SLL);
        return parser.file();
    }
}
