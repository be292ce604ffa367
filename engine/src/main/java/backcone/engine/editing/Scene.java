package backcone.engine.editing;

import backcone.engine.answers.DriveAnswer;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.eval.Run;
import backcone.engine.graph.DriveBuilder;
import backcone.engine.graph.DriveGraph;
import backcone.engine.graph.DriveSource;
import backcone.engine.graph.Problems;
import backcone.engine.graph.Shapes;
import backcone.engine.model.Library;
import backcone.engine.syntax.FileSyntax;
import backcone.engine.text.FileId;
import java.util.HashMap;
import java.util.List;
import java.util.Map;
import java.util.function.Function;
import org.jspecify.annotations.Nullable;

/**
 * A text with everything that answers to editors are drawn from. Immutable, but for what it remembers of earlier questions;
 * safe for several threads.
 */
public final class Scene {
    public final FileId file;
    public final String text;
    public final FileSyntax tree;
    public final Shapes shapes;
    public final List<Diagnostic> diagnostics;
    public final List<Shown> drives;
    final Function<FileId, @Nullable String> texts;
    final DriveGraph.@Nullable Top top;
    private final Map<String, DriveGraph> traced = new HashMap<>();
    private @Nullable Occurrences occurrences;
    private @Nullable Map<String, Integer> uses;

    /** A drive with its results; the graphs of its runs may have been built for an earlier text. */
    public record Shown(DriveSource source, DriveAnswer answer, List<Run> runs) {}

    public Scene(
            FileId file,
            String text,
            FileSyntax tree,
            Shapes shapes,
            List<Diagnostic> diagnostics,
            List<Shown> drives,
            Function<FileId, @Nullable String> texts,
            DriveGraph.@Nullable Top top) {
        this.file = file;
        this.text = text;
        this.tree = tree;
        this.shapes = shapes;
        this.diagnostics = diagnostics;
        this.drives = drives;
        this.texts = texts;
        this.top = top;
    }

    Library library() {
        return shapes.library();
    }

    @Nullable
    Shown drive(String name) {
        for (Shown s : drives) {
            if (s.source().name().equals(name)) {
                return s;
            }
        }
        return null;
    }

    /** The graph of a drive in this very text, with the trace of its equations. */
    synchronized @Nullable DriveGraph graph(String drive, @Nullable String caseName) {
        Shown s = drive(drive);
        DriveGraph.Top around = top;
        if (s == null || around == null) {
            return null;
        }
        return traced.computeIfAbsent(
                drive + "/" + caseName,
                k -> DriveBuilder.build(shapes, around, s.source(), caseName, new Problems(), true));
    }

    /** The graph under the case that the drive as a whole is read in. */
    @Nullable
    DriveGraph graph(String drive) {
        Shown s = drive(drive);
        return s == null ? null : graph(drive, DriveBuilder.casesInUse(s.source()).get(0));
    }

    private @Nullable DriveGraph loose;

    /** A graph that holds the blocks at the top of the file, without a drive. */
    synchronized @Nullable DriveGraph blocks() {
        DriveGraph.Top around = top;
        if (loose == null && around != null) {
            loose = DriveBuilder.library(shapes, around, file, List.of(), new Problems());
        }
        return loose;
    }

    /** Every name in the text with what it means. */
    public synchronized Occurrences occurrences() {
        Occurrences o = occurrences;
        if (o == null) {
            o = Occurrences.of(this);
            occurrences = o;
        }
        return o;
    }
}
