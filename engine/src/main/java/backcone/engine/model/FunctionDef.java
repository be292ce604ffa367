package backcone.engine.model;

import backcone.engine.syntax.Entry;
import backcone.engine.text.FileId;
import java.util.List;

/** A function of the handbook; it is expanded where it is called. */
public record FunctionDef(
        String name, List<ValueKind> parameters, ValueKind kind, FileId file, Entry.Function syntax) {}
