package backcone.engine.graph;

import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import org.jspecify.annotations.Nullable;

/** Where an expression is read: the space around it, the elements at hand (outermost first) and local names. */
public final class Ctx {
    final Element space;
    final List<Axis> axes;
    final @Nullable Map<String, Val> locals;

    Ctx(Element space, List<Axis> axes, @Nullable Map<String, Val> locals) {
        this.space = space;
        this.axes = axes;
        this.locals = locals;
    }

    static Ctx of(Element e) {
        return e.context();
    }

    Ctx with(Axis axis) {
        List<Axis> all = new ArrayList<>(axes.size() + 1);
        for (Axis x : axes) {
            if (!x.collection().equals(axis.collection())) {
                all.add(x);
            }
        }
        all.add(axis);
        return new Ctx(space, all, locals);
    }

    Ctx withLocals(Map<String, Val> names) {
        return new Ctx(space, axes, names);
    }

    /** The innermost element at hand, or the space. */
    Element self() {
        return axes.isEmpty() ? space : axes.get(axes.size() - 1).element();
    }
}
