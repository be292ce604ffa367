package backcone.engine.graph;

import backcone.engine.model.MethodDef;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import java.util.ArrayList;
import java.util.Comparator;
import java.util.HashMap;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import org.jspecify.annotations.Nullable;

/** A block of a drive, a part of one, a word of a method's own cases, or the space of a method on a mesh. */
public final class Element {
    final int id;
    public final String name;
    final Shape shape;
    public final @Nullable Element parent;

    /** The collection it belongs to in its parent, or empty. */
    final String collection;

    /** A named element of a fixed collection (pinion, wheel), as opposed to one that a drive adds. */
    boolean fixed;

    /** For elements that carry what a space declares for a combination of elements at hand. */
    final @Nullable Element space;

    final List<Axis> axes;
    private final @Nullable Slot[] slots;
    final Map<String, Object> named = new LinkedHashMap<>();
    private @Nullable Map<List<Element>, @Nullable Element> combos;
    final List<Element> ratings = new ArrayList<>();

    @Nullable
    MethodDef method;

    @Nullable
    String edition;

    @Nullable
    FileId file;

    Span span = Span.NONE;
    Span headSpan = Span.NONE;

    @Nullable
    String title;

    @Nullable
    Ctx context;

    Element(int id, String name, Shape shape, @Nullable Element parent, String collection) {
        this(id, name, shape, parent, collection, null, List.of());
    }

    Element(
            int id,
            String name,
            Shape shape,
            @Nullable Element parent,
            String collection,
            @Nullable Element space,
            List<Axis> axes) {
        this.id = id;
        this.name = name;
        this.shape = shape;
        this.parent = parent;
        this.collection = collection;
        this.space = space;
        this.axes = axes;
        this.slots = new Slot[shape.decls.size()];
    }

    /** Everything that can be asked of it by a spoken name. */
    public List<String> declaredNames() {
        List<String> out = new ArrayList<>();
        for (backcone.engine.model.Decl d : shape.decls) {
            if (!out.contains(d.name)) {
                out.add(d.name);
            }
        }
        return out;
    }

    public boolean fixed() {
        return fixed;
    }

    /** The space for whose elements at hand this carries declarations; null for a block. */
    public @Nullable Element space() {
        return space;
    }

    public @Nullable FileId fileOrNull() {
        return file;
    }

    public Span span() {
        return span;
    }

    /** The words that open the block, for findings about the block as a whole. */
    public Span headSpan() {
        return headSpan.length() > 0 ? headSpan : new Span(span.start(), Math.min(span.end(), span.start() + 1));
    }

    public @Nullable String title() {
        return title;
    }

    public @Nullable String edition() {
        return edition;
    }

    public @Nullable MethodDef method() {
        return method;
    }

    public String kind() {
        return shape.kind;
    }

    public boolean isSpace() {
        return method != null;
    }

    /** Where expressions of this element are read. */
    Ctx context() {
        Ctx c = context;
        if (c == null) {
            if (space != null) {
                c = new Ctx(space, axes, null);
            } else if (!collection.isEmpty() && parent != null && (fixed || shape == Shapes.WORD)) {
                c = new Ctx(parent, List.of(new Axis(collection, this)), null);
            } else {
                c = new Ctx(this, List.of(), null);
            }
            context = c;
        }
        return c;
    }

    /** Own name: a {@link Slot}, an {@link Element}, a {@link Val.Group}, a {@link Shape.Spoken}, or a shape's entry. */
    @Nullable
    Object own(String n) {
        Object x = named.get(n);
        if (x != null) {
            return x;
        }
        Object m = shape.names.get(n);
        return m instanceof Shape.Member member ? slot(member) : m;
    }

    Slot slot(Shape.Member m) {
        Slot s = slots[m.index()];
        if (s == null) {
            s = new Slot(this, m.decl());
            slots[m.index()] = s;
        }
        return s;
    }

    /** Slots that exist already. */
    List<Slot> touched() {
        List<Slot> out = new ArrayList<>();
        for (Slot s : slots) {
            if (s != null) {
                out.add(s);
            }
        }
        return out;
    }

    /** What this space declares for these elements at hand (in the order of its nested {@code each}), or null. */
    @Nullable
    Element combo(List<Axis> at, int[] nextId) {
        if (at.size() == 1 && isOwnPart(at.get(0))) {
            return at.get(0).element();
        }
        if (shape.each.isEmpty() && !isOwnPart(at.get(0))) {
            return null;
        }
        Map<List<Element>, @Nullable Element> map = combos;
        if (map == null) {
            map = new HashMap<>();
            combos = map;
        }
        List<Element> key = new ArrayList<>(at.size());
        for (Axis x : at) {
            key.add(x.element());
        }
        key.sort(Comparator.comparingInt(x -> x.id)); // in whatever order they are named, it is one combination
        if (map.containsKey(key)) {
            return map.get(key);
        }
        Element found = null;
        for (List<Axis> order : orders(at)) {
            Shape s = shapeFor(order);
            if (s != null) {
                found = new Element(
                        nextId[0]++, order.get(order.size() - 1).element().name, s, this, "", this, List.copyOf(order));
                break;
            }
        }
        map.put(key, found);
        return found;
    }

    private @Nullable Shape shapeFor(List<Axis> order) {
        Shape s = shape;
        for (int i = 0; i < order.size(); i++) {
            Axis x = order.get(i);
            if (i == 0 && isOwnPart(x)) {
                s = x.element().shape;
            } else {
                Shape t = s.each.get(x.collection());
                if (t == null) {
                    return null;
                }
                s = t;
            }
        }
        return s;
    }

    private boolean isOwnPart(Axis x) {
        return x.element().fixed
                && x.element().parent == this
                && x.element().collection.equals(x.collection());
    }

    private static List<List<Axis>> orders(List<Axis> at) {
        if (at.size() == 1) {
            return List.of(at);
        }
        List<List<Axis>> out = new ArrayList<>();
        permute(at, new ArrayList<>(), out);
        return out;
    }

    private static void permute(List<Axis> rest, List<Axis> chosen, List<List<Axis>> out) {
        if (rest.isEmpty()) {
            out.add(List.copyOf(chosen));
            return;
        }
        for (int i = 0; i < rest.size(); i++) {
            List<Axis> left = new ArrayList<>(rest);
            chosen.add(left.remove(i));
            permute(left, chosen, out);
            chosen.remove(chosen.size() - 1);
        }
    }

    /** As a drive writes it: {@code head.pinion}, {@code head.main.wheel}; empty for the drive itself. */
    public String path() {
        StringBuilder b = new StringBuilder();
        if (space != null) {
            b.append(space.path());
            for (Axis x : axes) {
                dot(b, x.element().name);
            }
            return b.toString();
        }
        if (parent == null || shape.kind.equals("drive")) {
            return parent == null && !shape.kind.equals("drive") ? name : "";
        }
        b.append(parent.path());
        dot(b, name);
        return b.toString();
    }

    private static void dot(StringBuilder b, String name) {
        if (b.length() > 0) {
            b.append('.');
        }
        b.append(name);
    }

    @Override
    public String toString() {
        return shape.kind + " " + path();
    }
}
