package backcone.engine.model;

import backcone.engine.syntax.Entry;
import backcone.engine.text.FileId;
import backcone.engine.units.Unit;
import java.util.Set;

/** A quantity kind: a dimension, the unit to show it in, and the kinds it must not be mixed with. */
public record QuantityKind(
        String name,
        Unit shown,
        String meaning,
        boolean whole,
        Set<String> unlike,
        FileId file,
        Entry.Quantity syntax) {}
