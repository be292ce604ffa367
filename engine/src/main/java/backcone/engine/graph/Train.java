package backcone.engine.graph;

import backcone.engine.diagnostics.Code;
import java.util.ArrayDeque;
import java.util.ArrayList;
import java.util.HashMap;
import java.util.HashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;
import org.jspecify.annotations.Nullable;

/** The tree of shafts: which of two shafts in mesh is nearer to where power enters. */
final class Train {
    private final Map<Element, Integer> distance = new HashMap<>();

    Train(DriveGraph graph) {
        Map<Element, List<Element>> next = new HashMap<>();
        Set<Set<Element>> edges = new HashSet<>();
        for (Element mesh : graph.allOfKind("mesh")) {
            Element a = shaftOf(graph, mesh, "pinion");
            Element b = shaftOf(graph, mesh, "wheel");
            if (a == null || b == null) {
                continue;
            }
            if (a == b) {
                graph.problems.add(
                        Code.SPLIT_TRAIN,
                        graph.fileOf(mesh),
                        mesh.headSpan(),
                        "Both members of `" + mesh.name + "` sit on the shaft `" + a.name
                                + "`; put one of them on another shaft.");
                continue;
            }
            next.computeIfAbsent(a, k -> new ArrayList<>()).add(b);
            next.computeIfAbsent(b, k -> new ArrayList<>()).add(a);
            if (!edges.add(Set.of(a, b))) {
                graph.problems.add(
                        Code.SPLIT_TRAIN,
                        graph.fileOf(mesh),
                        mesh.headSpan(),
                        "`" + mesh.name + "` joins `" + a.name + "` and `" + b.name
                                + "`, which are in mesh already; a train of shafts is a tree, split power paths are not covered.");
            }
        }
        Element source = source(graph);
        if (source == null) {
            return;
        }
        ArrayDeque<Element> queue = new ArrayDeque<>();
        queue.add(source);
        distance.put(source, 0);
        Map<Element, Element> cameFrom = new HashMap<>();
        while (!queue.isEmpty()) {
            Element s = queue.remove();
            for (Element t : next.getOrDefault(s, List.of())) {
                if (!distance.containsKey(t)) {
                    distance.put(t, distance.getOrDefault(s, 0) + 1);
                    cameFrom.put(t, s);
                    queue.add(t);
                } else if (t != cameFrom.get(s) && cameFrom.get(t) != s) {
                    graph.problems.add(
                            Code.SPLIT_TRAIN,
                            graph.fileOf(t),
                            t.headSpan(),
                            "The shaft `" + t.name + "` is reached by two ways from `" + source.name
                                    + "`; a train of shafts is a tree, split power paths are not covered.");
                }
            }
        }
    }

    private static @Nullable Element source(DriveGraph graph) {
        if (graph.drive.own("power_from") instanceof Slot s
                && s.isGiven()
                && graph.compiler.value(s) instanceof Val.Ref r) {
            return r.element();
        }
        Element k = graph.activeCase;
        if (k != null && k.own("at") instanceof Slot s && s.isGiven() && graph.compiler.value(s) instanceof Val.Ref r) {
            return r.element();
        }
        return null;
    }

    static @Nullable Element shaftOf(DriveGraph graph, Element mesh, String member) {
        if (mesh.own(member) instanceof Element gear
                && gear.own("on") instanceof Slot s
                && s.isGiven()
                && graph.compiler.value(s) instanceof Val.Ref r) {
            return r.element();
        }
        return null;
    }

    /** Whether {@code a} is nearer to the source than {@code b}; the first where nothing is known. */
    boolean isNearer(Element a, Element b) {
        return distance.getOrDefault(a, Integer.MAX_VALUE) <= distance.getOrDefault(b, Integer.MAX_VALUE);
    }
}
