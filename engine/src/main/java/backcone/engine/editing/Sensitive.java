package backcone.engine.editing;

import backcone.engine.answers.Sensitivities;
import backcone.engine.answers.Sensitivity;
import backcone.engine.eval.Run;
import backcone.engine.graph.DriveGraph;
import backcone.engine.graph.Slot;
import java.util.ArrayList;
import java.util.List;
import org.jspecify.annotations.Nullable;

/** What a value depends on most, in one line. */
final class Sensitive {
    private static final int MOST = 3;

    private Sensitive() {}

    static String line(@Nullable DriveGraph graph, @Nullable String path, Scene scene) {
        if (graph == null || path == null) {
            return "";
        }
        List<String> out = new ArrayList<>();
        synchronized (scene) {
            Slot s = graph.find(path);
            if (s == null || s.fact() != null) {
                return "";
            }
            graph.demand(s);
            if (s.register() < 0) {
                return "";
            }
            for (Sensitivity x : Sensitivities.of(new Run(graph), s.register(), MOST)) {
                out.add("`" + x.name() + "` " + Labels.percent(x.relative() / 100));
            }
        }
        return out.isEmpty() ? "" : "\n1 % more of these moves it by: " + String.join(", ", out) + "\n\n";
    }
}
