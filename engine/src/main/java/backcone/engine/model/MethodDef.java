package backcone.engine.model;

import backcone.engine.syntax.Entry;
import backcone.engine.text.FileId;
import org.jspecify.annotations.Nullable;

/** A method or a chapter for a kind of block. */
public record MethodDef(String name, String kind, @Nullable String meaning, BodyDef body, FileId file, Entry syntax) {}
