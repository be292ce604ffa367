package backcone.engine;

import backcone.engine.eval.Run;
import backcone.engine.graph.DriveGraph;
import backcone.engine.graph.Slot;
import java.util.Map;
import java.util.TreeMap;
import org.jspecify.annotations.Nullable;

/** One drive as a function of its numbers: named ones are put in, named ones are read, all in mm, N, s, rad. */
final class Varied {
    private final DriveGraph graph;
    private final Map<String, Integer> inputs = new TreeMap<>();
    private final Map<String, Slot> slots = new TreeMap<>();

    /** What is asked for is compiled at once, so that every design runs the same tape. */
    Varied(String text, String... read) {
        graph = SampleGraphs.only(text);
        for (String name : read) {
            Slot s = graph.find(name);
            if (s == null) {
                throw new AssertionError(
                        "nothing is called " + name + "\n" + Specs.of(text).messages());
            }
            graph.demand(s);
            slots.put(name, s);
        }
        for (DriveGraph.Input i : graph.inputs()) {
            if (i.slot() != null && i.literal() != null) {
                inputs.put(i.slot().path(), graph.tape().b(i.register()));
            }
        }
    }

    Design design() {
        return new Design();
    }

    final class Design {
        private final double[] numbers = graph.inputValues();
        private @Nullable Run run;

        Design set(String path, double value) {
            Integer i = inputs.get(path);
            if (i == null) {
                throw new AssertionError("no number is written at " + path + "; there are " + inputs.keySet());
            }
            numbers[i] = value;
            run = null;
            return this;
        }

        /** The number that stands at a name now. */
        double written(String path) {
            Integer i = inputs.get(path);
            if (i == null) {
                throw new AssertionError("no number is written at " + path);
            }
            return numbers[i];
        }

        double at(String name) {
            Run r = run;
            if (r == null) {
                r = new Run(graph, numbers);
                run = r;
            }
            Slot s = slots.get(name);
            if (s == null) {
                throw new AssertionError(name + " is not among what is read");
            }
            return r.at(s.register());
        }

        @Override
        public String toString() {
            StringBuilder b = new StringBuilder();
            inputs.forEach(
                    (k, i) -> b.append(k).append(" = ").append(numbers[i]).append(", "));
            return b.toString();
        }
    }
}
