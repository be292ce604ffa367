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
import backcone.engine.parse.Colours;
import backcone.engine.syntax.FileSyntax;
import backcone.engine.text.FileId;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Set;
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
    private static final int KEPT = 4;
    private final Map<String, DriveGraph> traced = new LinkedHashMap<>(8, 0.75f, true) {
        private static final long serialVersionUID = 1L;

        @Override
        protected boolean removeEldestEntry(Map.Entry<String, DriveGraph> e) {
            return size() > KEPT;
        }
    };
    private final Occurrences occurrences;
    private @Nullable List<Colours.Piece> pieces;

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
        this.occurrences = new Occurrences(this);
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
        String key = drive + "/" + caseName;
        DriveGraph g = traced.get(key);
        if (g == null) {
            g = DriveBuilder.build(shapes, around, s.source(), caseName, new Problems(), true);
            traced.put(key, g);
        }
        return g;
    }

    /** The same without the trace, made anew; null for the case that the drive as a whole is read in. */
    @Nullable
    DriveGraph plainGraph(String drive, @Nullable String caseName) {
        Shown s = drive(drive);
        DriveGraph.Top around = top;
        return s == null || around == null
                ? null
                : DriveBuilder.build(
                        shapes,
                        around,
                        s.source(),
                        caseName == null ? DriveBuilder.casesInUse(s.source()).get(0) : caseName,
                        new Problems(),
                        false);
    }

    /** The graph under the case that the drive as a whole is read in. */
    @Nullable
    DriveGraph graph(String drive) {
        Shown s = drive(drive);
        return s == null
                ? null
                : graph(drive, DriveBuilder.casesInUse(s.source()).get(0));
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
    public Occurrences occurrences() {
        return occurrences;
    }

    /** The words of the text as they look. */
    synchronized List<Colours.Piece> pieces() {
        List<Colours.Piece> p = pieces;
        if (p == null) {
            p = Colours.of(text);
            pieces = p;
        }
        return p;
    }

    /** Takes over what is known of an earlier text of the same file; {@code changed}: the entries that differ. */
    public void take(Scene before, Set<Integer> changed) {
        occurrences.take(before.occurrences, changed);
    }
}
