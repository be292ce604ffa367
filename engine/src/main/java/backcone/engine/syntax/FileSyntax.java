package backcone.engine.syntax;

import backcone.engine.text.Span;
import java.util.List;

/** The tree of one text. Comments are kept apart for the formatter and for editors. */
public record FileSyntax(List<Entry> entries, List<Comment> comments, Span span) implements Node {

    /** {@code # …} up to the end of its line. */
    public record Comment(String text, Span span) implements Node {}
}
