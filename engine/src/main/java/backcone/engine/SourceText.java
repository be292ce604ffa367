package backcone.engine;

import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.syntax.FileSyntax;
import backcone.engine.text.FileId;
import java.util.List;

/** A text with its tree. */
record SourceText(FileId file, String text, FileSyntax tree, List<Diagnostic> problems) {}
