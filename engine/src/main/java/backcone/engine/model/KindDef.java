package backcone.engine.model;

import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import org.jspecify.annotations.Nullable;

/** A kind of block. */
public record KindDef(
        String name, @Nullable String parent, @Nullable String meaning, BodyDef body, FileId file, Span span) {}
