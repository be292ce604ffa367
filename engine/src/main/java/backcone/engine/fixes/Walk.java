package backcone.engine.fixes;

import backcone.engine.syntax.Entry;
import backcone.engine.syntax.Node;
import backcone.engine.text.Span;
import java.lang.reflect.RecordComponent;
import java.util.ArrayList;
import java.util.List;
import java.util.function.Consumer;
import org.jspecify.annotations.Nullable;

/** Goes through a tree. Nodes are records, so what is below one are its components. */
final class Walk {
    private Walk() {}

    static void all(Node n, Consumer<Node> visit) {
        visit.accept(n);
        for (RecordComponent c : n.getClass().getRecordComponents()) {
            if (Node.class.isAssignableFrom(c.getType()) || List.class.isAssignableFrom(c.getType())) {
                below(value(n, c), visit);
            }
        }
    }

    private static void below(@Nullable Object x, Consumer<Node> visit) {
        if (x instanceof Node n) {
            all(n, visit);
        } else if (x instanceof List<?> list) {
            list.forEach(y -> below(y, visit));
        }
    }

    private static @Nullable Object value(Node n, RecordComponent c) {
        try {
            return c.getAccessor().invoke(n);
        } catch (ReflectiveOperationException e) {
            throw new IllegalStateException(e);
        }
    }

    /** The nodes around a place, the outermost first. */
    static List<Node> around(List<Entry> entries, Span at) {
        List<Node> out = new ArrayList<>();
        for (Entry e : entries) {
            if (Fixes.touches(e.span(), at)) {
                all(e, n -> {
                    if (n.span().start() <= at.start() && at.end() <= n.span().end()) {
                        out.add(n);
                    }
                });
            }
        }
        return out;
    }

    static <T> @Nullable T last(List<Node> nodes, Class<T> type) {
        for (int i = nodes.size() - 1; i >= 0; i--) {
            if (type.isInstance(nodes.get(i))) {
                return type.cast(nodes.get(i));
            }
        }
        return null;
    }

    static <T> @Nullable T first(List<Node> nodes, Class<T> type) {
        for (Node n : nodes) {
            if (type.isInstance(n)) {
                return type.cast(n);
            }
        }
        return null;
    }
}
