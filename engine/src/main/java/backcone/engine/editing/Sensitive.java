package backcone.engine.editing;

import backcone.engine.graph.DriveGraph;
import backcone.engine.graph.Slot;
import org.jspecify.annotations.Nullable;

/** What a value depends on most, in one line. */
final class Sensitive {
    private Sensitive() {}

    static String line(@Nullable DriveGraph graph, @Nullable Slot slot, Scene scene) {
        return "";
    }
}
