package backcone.engine.graph;

import backcone.engine.model.BodyDef;
import backcone.engine.model.Decl;
import backcone.engine.model.TableDef;
import backcone.engine.syntax.Entry;
import java.util.ArrayList;
import java.util.HashMap;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import org.jspecify.annotations.Nullable;

/** What every element of one sort has: the merged bodies of its kind, its parents and the chapters for them. */
final class Shape {
    final String kind;
    final List<Decl> decls = new ArrayList<>();

    /** Name or symbol to {@link Member}, {@link Spoken}, {@link TableDef}, Entry.Role, Entry.Collect. */
    final Map<String, Object> names = new HashMap<>();

    final List<BodyDef.RelationDef> relations = new ArrayList<>();
    final List<BodyDef.LimitDef> limits = new ArrayList<>();
    final List<Applies> applies = new ArrayList<>();
    final List<Entry.Parts> parts = new ArrayList<>();
    final List<Entry.Part> part = new ArrayList<>();
    final List<Entry.Cases> cases = new ArrayList<>();
    final Map<String, List<BodyDef>> eachBodies = new LinkedHashMap<>();
    final Map<String, Shape> each = new LinkedHashMap<>();
    final Map<String, @Nullable Shape> partShapes = new HashMap<>();

    /** The files that roles and collections stand in. */
    final Map<Entry, backcone.engine.text.FileId> homes = new java.util.IdentityHashMap<>();

    /** Names declared twice, for the check of handbook texts. */
    final List<Decl> clashes = new ArrayList<>();

    record Member(Decl decl, int index) {}

    /** One spoken name for several kinds; the unit of the given value picks. */
    record Spoken(List<Member> members) {}

    record Applies(Entry.Applies syntax, BodyDef body) {}

    Shape(String kind) {
        this.kind = kind;
    }

    void add(BodyDef body) {
        for (Decl d : body.decls) {
            Member m = new Member(d, decls.size());
            decls.add(d);
            put(d.name, m, d.symbol != null);
            if (d.symbol != null && !d.symbol.equals(d.name)) {
                put(d.symbol, m, false);
            }
        }
        relations.addAll(body.relations);
        limits.addAll(body.limits);
        for (Entry.Applies a : body.applies) {
            applies.add(new Applies(a, body));
        }
        for (TableDef t : body.tables.values()) {
            names.put(t.name(), t);
        }
        for (Entry.Parts p : body.parts) {
            // a special kind narrows the members of its parent
            parts.removeIf(q -> collection(q).equals(collection(p)));
            parts.add(p);
        }
        part.addAll(body.part);
        cases.addAll(body.cases);
        for (Entry.Role r : body.roles) {
            homes.put(r, body.file);
            names.put(r.name().text(), r);
        }
        for (Entry.Collect c : body.collects) {
            homes.put(c, body.file);
            names.put(c.name().text(), c);
        }
        body.each.forEach(
                (k, v) -> eachBodies.computeIfAbsent(k, x -> new ArrayList<>()).addAll(v));
    }

    void finish() {
        for (Map.Entry<String, List<BodyDef>> e : eachBodies.entrySet()) {
            Shape s = new Shape("");
            for (BodyDef b : e.getValue()) {
                s.add(b);
            }
            s.finish();
            each.put(e.getKey(), s);
        }
    }

    static String collection(Entry.Parts p) {
        return p.as() != null ? p.as().text() : p.names().get(0).text();
    }

    /** Fixed elements, as opposed to a collection that the drive fills. */
    static boolean fixed(Entry.Parts p) {
        return p.as() != null || p.names().size() > 1;
    }

    private void put(String name, Member m, boolean hasSymbol) {
        Object old = names.get(name);
        if (old instanceof Member other
                && hasSymbol
                && other.decl().symbol != null
                && other.decl().name.equals(name)) {
            List<Member> both = new ArrayList<>(List.of(other, m));
            names.put(name, new Spoken(both));
        } else if (old instanceof Spoken s && hasSymbol) {
            s.members().add(m);
        } else {
            if (old instanceof Member) {
                clashes.add(m.decl());
            }
            names.put(name, m);
        }
    }
}
