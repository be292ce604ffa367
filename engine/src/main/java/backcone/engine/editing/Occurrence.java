package backcone.engine.editing;

import backcone.engine.text.Span;

/** A name in a text. {@code declares}: it is declared here; {@code writes}: a value is given for it here. */
public record Occurrence(Span span, Target target, boolean declares, boolean writes) {}
