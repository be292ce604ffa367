package backcone.engine.fixes;

import backcone.engine.text.FileId;
import backcone.engine.text.Span;

/** Replaces a span of a text; an empty span inserts. Edits of one fix don't overlap and count in the text as it was. */
public record TextEdit(FileId file, Span span, String text) {}
