package backcone.engine.graph;

/** An element at hand and the collection it is at hand for. */
public record Axis(String collection, Element element) {}
