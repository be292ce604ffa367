package backcone.engine.graph;

import org.jspecify.annotations.Nullable;

/** An element at hand and the collection it is at hand for. */
public record Axis(String collection, Element element) {

    // written out: a key of every graph, and the generated pair costs 15 ms of a start
    @Override
    public boolean equals(@Nullable Object other) {
        return other instanceof Axis a && a.element == element && a.collection.equals(collection);
    }

    @Override
    public int hashCode() {
        return 31 * collection.hashCode() + System.identityHashCode(element);
    }
}
