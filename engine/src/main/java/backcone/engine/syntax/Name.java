package backcone.engine.syntax;

import backcone.engine.text.Span;

/** One written name. An empty text is a hole: a name was expected here. */
public record Name(String text, Span span) implements Node {
    public boolean isHole() {
        return text.isEmpty();
    }

    @Override
    public String toString() {
        return text;
    }
}
