package backcone.engine.syntax;

import backcone.engine.text.Span;

/** Anything with a place in the text. Nodes are values: no parent, no types, no symbols. */
public interface Node {
    Span span();
}
