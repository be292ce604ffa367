package backcone.engine.graph;

import backcone.engine.model.Decl;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;

/** The checks of a method: by name, with the collections they are made for (none for the pair, member for each). */
final class Checks {
    private Checks() {}

    record At(Decl decl, List<String> collections) {}

    static Map<String, At> of(Shape s) {
        Map<String, At> out = new LinkedHashMap<>();
        collect(s, List.of(), out);
        return out;
    }

    private static void collect(Shape s, List<String> under, Map<String, At> out) {
        for (Decl d : s.decls) {
            if (d.role == Decl.Role.CHECK) {
                out.put(d.name, new At(d, under));
            }
        }
        for (Map.Entry<String, Shape> e : s.each.entrySet()) {
            List<String> inner = new java.util.ArrayList<>(under);
            inner.add(e.getKey());
            collect(e.getValue(), inner, out);
        }
    }
}
