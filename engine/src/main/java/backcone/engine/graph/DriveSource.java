package backcone.engine.graph;

import backcone.engine.syntax.Entry;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import java.util.List;
import org.jspecify.annotations.Nullable;

/** A drive as it stands in texts: its own body, or a base with what a variant or the row of a family lays over it. */
public record DriveSource(String name, @Nullable String title, FileId file, Span span, List<Layer> layers) {

    /** One body; from the second on, facts replace those below. */
    public record Layer(FileId file, List<Entry> body) {}
}
