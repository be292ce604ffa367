package backcone.engine.graph;

import backcone.engine.model.TableDef;
import backcone.engine.syntax.Entry;
import backcone.engine.syntax.Expr;
import backcone.engine.syntax.Name;
import java.util.ArrayList;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Set;
import org.jspecify.annotations.Nullable;

/**
 * Finds what a name means. A bare name is looked up outward: what the space declares for the elements at hand, the
 * elements themselves, the space, what is around it, the top level. Behind a dot only what belongs to the element counts.
 */
final class Scopes {
    private final DriveGraph graph;

    Scopes(DriveGraph graph) {
        this.graph = graph;
    }

    /** An element found on the way along a path: at hand in a space, or simply itself. */
    private record At(Ctx ctx, List<Axis> bound, Element element) {}

    /**
     * A bare name: a {@link Slot}, {@link Element}, {@link Val}, {@link Shape.Spoken}, {@link TableDef}, role or collect;
     * null if nothing declares it. {@code holder} receives the element that owns a role or collect.
     */
    @Nullable
    Object bare(String name, Ctx ctx, Element[] holder) {
        if (ctx.locals != null && ctx.locals.containsKey(name)) {
            return ctx.locals.get(name);
        }
        List<Axis> axes = ctx.axes;
        Element s = ctx.space;
        boolean first = true;
        while (s != null) {
            if (!axes.isEmpty()) {
                Object found = inCombos(s, axes, List.of(), name, holder);
                if (found != null) {
                    return found;
                }
            }
            if (first) {
                for (int i = axes.size() - 1; i >= 0; i--) {
                    Element e = axes.get(i).element();
                    Object found = e.own(name);
                    if (found != null) {
                        holder[0] = e;
                        return found;
                    }
                }
                first = false;
            }
            Object found = s.own(name);
            if (found != null) {
                holder[0] = s;
                return found;
            }
            s = s.parent;
        }
        for (int i = axes.size() - 1; i >= 0; i--) {
            if (axes.get(i).collection().equals(name)) {
                return axes.get(i).element();
            }
        }
        return graph.top(name);
    }

    /** A name that a space declares for some of these elements, the most of them first. */
    private @Nullable Object inCombos(Element space, List<Axis> axes, List<Axis> must, String name, Element[] holder) {
        int n = axes.size();
        for (int size = n; size >= 1; size--) {
            for (int mask = (1 << n) - 1; mask > 0; mask--) {
                if (Integer.bitCount(mask) != size) {
                    continue;
                }
                List<Axis> subset = new ArrayList<>(size);
                for (int i = 0; i < n; i++) {
                    if ((mask & (1 << i)) != 0) {
                        subset.add(axes.get(i));
                    }
                }
                if (!subset.containsAll(must)) {
                    continue;
                }
                Element combo = space.combo(subset, graph.nextId);
                if (combo != null) {
                    Object found = combo.own(name);
                    if (found != null) {
                        holder[0] = combo;
                        return found;
                    }
                }
            }
        }
        return null;
    }

    /** A dotted name. Null if something on the way does not exist; {@link Val.Open} where a reference is not given. */
    @Nullable
    Object path(Expr.Path path, Ctx ctx, Element[] holder, int[] failedAt) {
        List<Name> names = path.names();
        Object x = first(names.get(0).text(), ctx, holder);
        failedAt[0] = 0;
        if (x == null) {
            return null;
        }
        if (names.size() == 1) {
            return x;
        }
        At at = null;
        for (int i = 1; i < names.size(); i++) {
            failedAt[0] = i;
            if (x instanceof Element e) {
                at = arrive(at, e, ctx);
            } else {
                Val v = asValue(x, holder[0], ctx);
                if (v instanceof Val.Ref r) {
                    at = new At(Ctx.of(r.element()), List.of(), r.element());
                } else if (v instanceof Val.Row || v instanceof Val.RowOf) {
                    return i == names.size() - 1 ? new RowColumn(v, names.get(i)) : null;
                } else if (v instanceof Val.Open || v instanceof Val.Bad) {
                    return v;
                } else {
                    return null;
                }
            }
            x = member(at, names.get(i).text(), holder);
            if (x == null) {
                return null;
            }
        }
        return x;
    }

    record RowColumn(Val row, Name column) {}

    /** A collection by name: a group of a space around, a collect, or of an element at hand. */
    @Nullable
    Object collection(String name, Ctx ctx, Element[] holder) {
        for (int i = ctx.axes.size() - 1; i >= 0; i--) {
            Element e = ctx.axes.get(i).element();
            Object x = group(e, name);
            if (x != null) {
                holder[0] = e;
                return x;
            }
        }
        Element s = ctx.space;
        while (s != null) {
            Object x = group(s, name);
            if (x != null) {
                holder[0] = s;
                return x;
            }
            s = s.parent;
        }
        // the bins of the case at hand
        Element k = graph.activeCase;
        if (k != null) {
            holder[0] = k;
            return group(k, name);
        }
        return null;
    }

    private static @Nullable Object group(Element e, String name) {
        Object x = e.named.get(name);
        if (x instanceof Val.Group) {
            return x;
        }
        x = e.named.get("group " + name);
        if (x instanceof Val.Group) {
            return x;
        }
        x = e.shape.names.get(name);
        return x instanceof Entry.Collect ? x : null;
    }

    private @Nullable Object first(String name, Ctx ctx, Element[] holder) {
        Object x = bare(name, ctx, holder);
        if (x == null && name.equals("self")) {
            return ctx.self();
        }
        if (x == null && name.equals("mate")) {
            return mate(ctx);
        }
        return x;
    }

    private @Nullable Element mate(Ctx ctx) {
        for (int i = ctx.axes.size() - 1; i >= 0; i--) {
            Element e = ctx.axes.get(i).element();
            Element p = e.parent;
            if (p != null
                    && group(p, e.collection) instanceof Val.Group g
                    && g.elements().size() == 2) {
                return g.elements().get(0) == e
                        ? g.elements().get(1)
                        : g.elements().get(0);
            }
        }
        return null;
    }

    private At arrive(@Nullable At before, Element e, Ctx ctx) {
        if (!e.collection.isEmpty() && !e.isSpace()) {
            Axis axis = new Axis(e.collection, e);
            if (before == null) {
                return new At(ctx, List.of(axis), e);
            }
            if (before.bound.isEmpty() || e.parent == before.element) {
                return new At(Ctx.of(before.element), List.of(axis), e);
            }
            List<Axis> bound = new ArrayList<>(before.bound);
            bound.add(axis);
            return new At(before.ctx, bound, e);
        }
        return new At(Ctx.of(e), List.of(), e);
    }

    private @Nullable Object member(At at, String name, Element[] holder) {
        if (!at.bound.isEmpty()) {
            Ctx merged = at.ctx;
            for (Axis x : at.bound) {
                merged = merged.with(x);
            }
            Element s = merged.space;
            while (s != null) {
                Object found = inCombos(s, merged.axes, at.bound, name, holder);
                if (found != null) {
                    return found;
                }
                s = s.parent;
            }
        }
        Object own = at.element.own(name);
        if (own != null) {
            holder[0] = at.element;
            return own;
        }
        if (at.element.isSpace() && at.element.parent != null) {
            Object x = at.element.parent.own(name);
            if (x instanceof Element e && !e.collection.isEmpty()) {
                holder[0] = at.element.parent;
                return x;
            }
        }
        if (!at.bound.isEmpty()) {
            // flank.middle: an element of another collection of the same space
            Object x = bare(name, at.ctx, holder);
            if (x instanceof Element e && !e.collection.isEmpty()) {
                return x;
            }
        }
        return shortened(at, name, holder);
    }

    /** {@code head.wheel.bending} where only one rating of the mesh has it. */
    private @Nullable Object shortened(At at, String name, Element[] holder) {
        Element mesh = at.bound.isEmpty() ? at.element : at.element.parent;
        if (mesh == null) {
            return null;
        }
        Object only = null;
        for (Element m : mesh.ratings) {
            Object x = at.bound.isEmpty() ? m.own(name) : inCombos(m, at.bound, at.bound, name, holder);
            if (x != null) {
                if (only != null) {
                    return null;
                }
                only = x;
                if (at.bound.isEmpty()) {
                    holder[0] = m;
                }
            }
        }
        return only;
    }

    private Val asValue(Object x, Element holder, Ctx ctx) {
        if (x instanceof Slot s) {
            return graph.compiler.value(s);
        }
        if (x instanceof Entry.Role r) {
            return graph.compiler.role(r, holder);
        }
        if (x instanceof Val v) {
            return v;
        }
        if (x instanceof Shape.Spoken sp) {
            Slot s = graph.compiler.spoken(sp, holder);
            return s == null ? new Val.Bad() : graph.compiler.value(s);
        }
        return new Val.Bad();
    }

    /** All names that can be said here, for suggestions. */
    Set<String> visible(Ctx ctx) {
        Set<String> out = new LinkedHashSet<>();
        for (Axis x : ctx.axes) {
            out.addAll(x.element().shape.names.keySet());
            out.add(x.collection());
        }
        Element s = ctx.space;
        while (s != null) {
            out.addAll(s.shape.names.keySet());
            out.addAll(s.named.keySet());
            for (Shape each : s.shape.each.values()) {
                out.addAll(each.names.keySet());
            }
            s = s.parent;
        }
        out.addAll(graph.topNames());
        return out;
    }
}
