package backcone.engine.fixes;

import backcone.engine.answers.DriveAnswer;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.graph.DriveGraph;
import backcone.engine.graph.DriveSource;
import backcone.engine.graph.Shapes;
import backcone.engine.syntax.FileSyntax;
import backcone.engine.text.FileId;
import java.time.LocalDate;
import java.util.List;
import java.util.Map;
import org.jspecify.annotations.Nullable;

/** A text with all the engine says of it, and the way to the same for an edited text. */
public interface Subject {
    FileId file();

    String text();

    FileSyntax syntax();

    List<Diagnostic> diagnostics();

    List<DriveAnswer> drives();

    /** The drives by name, variants and rows of families included. */
    Map<String, DriveSource> sources();

    Shapes shapes();

    DriveGraph.Top top();

    LocalDate today();

    /** Files that this one rests on, with their trees; itself excluded. */
    Map<FileId, FileSyntax> used();

    @Nullable
    String textOf(FileId file);

    /** The whole engine over the text as it would be after these edits. */
    Subject edited(List<TextEdit> edits);
}
