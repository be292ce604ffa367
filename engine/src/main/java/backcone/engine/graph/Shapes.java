package backcone.engine.graph;

import backcone.engine.model.BodyDef;
import backcone.engine.model.KindDef;
import backcone.engine.model.Library;
import backcone.engine.model.MethodDef;
import backcone.engine.syntax.Entry;
import backcone.engine.syntax.Name;
import java.util.LinkedHashSet;
import java.util.Map;
import java.util.Set;
import java.util.concurrent.ConcurrentHashMap;

/** Shapes of a library, merged once per kind. Safe for use by several threads. */
public final class Shapes {
    final Library library;
    private final Map<String, Shape> byKind = new ConcurrentHashMap<>();
    private final Map<String, Shape> byPart = new ConcurrentHashMap<>();
    private final Map<MethodDef, Shape> byMethod = new ConcurrentHashMap<>();
    static final Shape WORD = new Shape("");

    public Shapes(Library library) {
        this.library = library;
    }

    public Library library() {
        return library;
    }

    Shape of(String kind) {
        Shape s = byKind.get(kind);
        if (s == null) {
            s = merge(kind, null);
            byKind.put(kind, s);
        }
        return s;
    }

    /** The shape of a fixed part: its kind, and what the owner's kind and chapters say for each of the collection. */
    Shape part(Shape owner, Entry.Parts p) {
        String collection = Shape.collection(p);
        String key = owner.kind + "/" + collection;
        Shape s = byPart.get(key);
        if (s == null) {
            s = merge(p.kind().text(), owner.eachBodies.get(collection));
            byPart.put(key, s);
        }
        return s;
    }

    private Shape merge(String kind, java.util.@org.jspecify.annotations.Nullable List<BodyDef> more) {
        Shape s = new Shape(kind);
        for (KindDef k : library.lineage(kind)) {
            s.add(k.body());
        }
        for (KindDef k : library.lineage(kind)) {
            for (MethodDef c : library.chapters.getOrDefault(k.name(), java.util.List.of())) {
                s.add(c.body());
            }
        }
        if (more != null) {
            for (BodyDef b : more) {
                s.add(b);
            }
        }
        s.finish();
        return s;
    }

    /** A method with everything it includes. */
    Shape method(MethodDef m) {
        Shape s = byMethod.get(m);
        if (s == null) {
            s = new Shape(m.kind());
            Set<MethodDef> all = new LinkedHashSet<>();
            include(m, all);
            for (MethodDef x : all) {
                s.add(x.body());
            }
            s.finish();
            byMethod.put(m, s);
        }
        return s;
    }

    /** A method that others take in; it is not rated by itself. */
    boolean isBuildingBlock(MethodDef m) {
        for (java.util.List<MethodDef> all : library.methods.values()) {
            for (MethodDef other : all) {
                for (Entry.Include i : other.body().includes) {
                    for (Name n : i.methods()) {
                        if (library.method(n.text(), other.kind()) == m) {
                            return true;
                        }
                    }
                }
            }
        }
        return false;
    }

    private void include(MethodDef m, Set<MethodDef> all) {
        if (all.contains(m) || all.size() > 100) {
            return;
        }
        for (Entry.Include i : m.body().includes) {
            for (Name n : i.methods()) {
                MethodDef other = library.method(n.text(), m.kind());
                if (other != null && other != m) {
                    include(other, all);
                }
            }
        }
        all.add(m);
    }
}
