package backcone.engine.model;

import backcone.engine.units.Dimension;
import backcone.engine.units.Units;
import java.util.ArrayList;
import java.util.HashMap;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import org.jspecify.annotations.Nullable;

/** All symbols of the handbook and of a user's own method files. Immutable once built. */
public final class Library {
    public final Map<String, QuantityKind> quantities = new LinkedHashMap<>();
    public final Map<String, ChoiceKind> choices = new LinkedHashMap<>();
    public final Map<String, KindDef> kinds = new LinkedHashMap<>();
    public final Map<String, List<MethodDef>> chapters = new LinkedHashMap<>();
    public final Map<String, List<MethodDef>> methods = new LinkedHashMap<>();
    public final Map<String, FunctionDef> functions = new LinkedHashMap<>();
    public final Map<String, TableDef> tables = new LinkedHashMap<>();
    public final Map<String, SourceDef> sources = new LinkedHashMap<>();
    private final Map<Dimension, String> kindOfDimension = new HashMap<>();

    /** A named source of equations. */
    public record SourceDef(
            String name, String text, backcone.engine.text.FileId file, backcone.engine.text.Span span) {}

    /** Whether a block of kind {@code kind} may stand where {@code wanted} is asked for. */
    public boolean isKind(@Nullable String kind, String wanted) {
        int guard = 0;
        String k = kind;
        while (k != null && guard++ < 50) {
            if (k.equals(wanted)) {
                return true;
            }
            KindDef def = kinds.get(k);
            k = def == null ? null : def.parent();
        }
        return false;
    }

    /** The kind and its parents, the most general first. */
    public List<KindDef> lineage(String kind) {
        List<KindDef> out = new ArrayList<>();
        String k = kind;
        while (k != null && out.size() < 50) {
            KindDef def = kinds.get(k);
            if (def == null) {
                break;
            }
            out.add(0, def);
            k = def.parent();
        }
        return out;
    }

    /** The method of that name for blocks of that kind. */
    public @Nullable MethodDef method(String name, @Nullable String kind) {
        for (MethodDef m : methods.getOrDefault(name, List.of())) {
            if (isKind(kind, m.kind())) {
                return m;
            }
        }
        return null;
    }

    void indexDimensions() {
        for (QuantityKind q : quantities.values()) {
            kindOfDimension.putIfAbsent(q.shown().dimension(), q.name());
        }
    }

    /** The first quantity kind of that dimension, whose unit is used to show values of unnamed kind. */
    public @Nullable QuantityKind quantityOf(Dimension d) {
        String name = kindOfDimension.get(d);
        return name == null ? null : quantities.get(name);
    }

    public Units units() {
        return Units.standard();
    }
}
