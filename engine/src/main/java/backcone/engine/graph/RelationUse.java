package backcone.engine.graph;

import backcone.engine.model.BodyDef;
import java.util.ArrayList;
import java.util.List;
import org.jspecify.annotations.Nullable;

/** A relation between the values of particular elements. */
final class RelationUse {
    final BodyDef.RelationDef def;
    final Ctx ctx;
    final List<Slot> slots = new ArrayList<>();

    @Nullable
    Slot solved;

    boolean active = true;

    /** Registers of both sides where it is only checked; -1 otherwise. */
    int left = -1;

    int right = -1;

    RelationUse(BodyDef.RelationDef def, Ctx ctx) {
        this.def = def;
        this.ctx = ctx;
    }
}
