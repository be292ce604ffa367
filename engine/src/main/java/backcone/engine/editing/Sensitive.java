package backcone.engine.editing;

import backcone.engine.graph.DriveGraph;
import org.jspecify.annotations.Nullable;

/** What a value depends on most, in one line. */
final class Sensitive {
    private Sensitive() {}

    static String line(@Nullable DriveGraph graph, @Nullable String path, Scene scene) {
        return "";
    }
}
