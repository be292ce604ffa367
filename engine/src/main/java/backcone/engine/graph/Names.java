package backcone.engine.graph;

import backcone.engine.model.ChoiceKind;
import backcone.engine.model.Decl;
import backcone.engine.model.TableDef;
import backcone.engine.model.ValueKind;
import backcone.engine.syntax.Entry;
import backcone.engine.syntax.Expr;
import backcone.engine.syntax.Name;
import backcone.engine.text.Span;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import org.jspecify.annotations.Nullable;

/** What the names in the text of one drive mean: the same look-up as when the drive is built, for editors. */
public final class Names {
    private final DriveGraph graph;

    public Names(DriveGraph graph) {
        this.graph = graph;
    }

    /** What a name stands for. */
    public sealed interface Meaning {
        record Value(Decl decl, @Nullable Slot slot) implements Meaning {}

        record Block(Element element) implements Meaning {}

        record Lookup(TableDef table) implements Meaning {}

        record Choice(ChoiceKind kind, String word) implements Meaning {}

        record Top(DriveGraph.TopEntry entry) implements Meaning {}
    }

    /** The element that a block makes in the element around it; null where it made none. */
    public @Nullable Element block(Element around, Entry.Block b) {
        String head = b.head().text();
        Object own = around.named.get(head);
        if (own instanceof Element part && b.name() == null) {
            return part;
        }
        if (around.own(head) instanceof Slot s && b.name() == null) {
            return s.inline;
        }
        String name = b.name() != null ? b.name().text() : head.equals("duty") ? "rated" : null;
        if (name != null) {
            return around.named.get(name) instanceof Element e ? e : null;
        }
        for (Object x : around.named.values()) {
            if (x instanceof Element e && e.span.equals(b.span())) {
                return e;
            }
        }
        return null;
    }

    /** A block at the top of a file. */
    public @Nullable Element top(String name) {
        return graph.top(name) instanceof Element e ? e : null;
    }

    /** The space that a rating made; null where its method is not known or its case is another. */
    public @Nullable Element space(Entry.Rate r) {
        for (DriveGraph.RateUse u : graph.rates()) {
            if (u.syntax() == r) {
                return u.space();
            }
        }
        return null;
    }

    /** What the names of a dotted path up to and with number {@code upTo} mean, read in this element. */
    public @Nullable Meaning path(List<Name> names, int upTo, Element at) {
        return path(names, upTo, Ctx.of(at), null);
    }

    /** The same for the left side of a fact, whose value picks among names that are spoken alike. */
    public @Nullable Meaning given(List<Name> names, int upTo, Element at, Expr value) {
        return path(names, upTo, Ctx.of(at), value);
    }

    private @Nullable Meaning path(List<Name> names, int upTo, Ctx ctx, @Nullable Expr value) {
        List<Name> some = names.subList(0, upTo + 1);
        for (Name n : some) {
            if (n.isHole()) {
                return null;
            }
        }
        Element[] holder = new Element[1];
        Object x = graph.scopes.path(new Expr.Path(some, Span.NONE), ctx, holder, new int[1]);
        if (x instanceof Shape.Spoken sp && holder[0] != null) {
            Slot s = null;
            if (value != null) {
                for (Shape.Member m : sp.members()) {
                    Slot t = holder[0].slot(m);
                    if (t.fact() != null && t.fact().value().equals(value)) {
                        s = t;
                    }
                }
            }
            if (s == null) {
                s = graph.compiler.spoken(sp, holder[0]);
            }
            return new Meaning.Value(
                    s != null ? s.decl : sp.members().get(0).decl(),
                    s != null ? s : holder[0].slot(sp.members().get(0)));
        }
        if (x instanceof Slot s) {
            return new Meaning.Value(s.decl, s);
        } else if (x instanceof Element e) {
            return new Meaning.Block(e);
        } else if (x instanceof Val.Ref r) {
            return new Meaning.Block(r.element());
        } else if (x instanceof TableDef t) {
            return new Meaning.Lookup(t);
        }
        if (upTo == 0) {
            DriveGraph.TopEntry t = graph.top.find(names.get(0).text());
            if (t != null) {
                return new Meaning.Top(t);
            }
        } else if (upTo == 1) {
            DriveGraph.TopEntry t = graph.top.find(names.get(0).text());
            DriveGraph.TopEntry inner =
                    t == null ? null : t.inside().get(names.get(1).text());
            return inner == null ? null : new Meaning.Top(inner);
        }
        return null;
    }

    /** A check of the method of this space, for the pair or for each member; the member's own where the path names one. */
    public @Nullable Meaning check(Element space, List<Name> names, int upTo) {
        Meaning plain = path(names, upTo, Ctx.of(space), null);
        if (plain != null) {
            return plain;
        }
        String name = names.get(upTo).text();
        for (Slot s : DriveBuilder.checks(graph, space)) {
            if (s.decl.name.equals(name)) {
                return new Meaning.Value(s.decl, s);
            }
        }
        return null;
    }

    /** What can be asked of an element by name: properties, equations, parts, collections. */
    public Map<String, Meaning> members(Element e) {
        Map<String, Meaning> out = new LinkedHashMap<>();
        for (Decl d : e.shape.decls) {
            out.putIfAbsent(d.name, new Meaning.Value(d, null));
        }
        for (Map.Entry<String, Object> x : e.named.entrySet()) {
            if (x.getValue() instanceof Element el) {
                out.put(x.getKey(), new Meaning.Block(el));
            } else if (x.getValue() instanceof Slot s) {
                out.put(x.getKey(), new Meaning.Value(s.decl, s));
            }
        }
        return out;
    }

    /** What a bare name may be here, outward: own names first. */
    public Map<String, Meaning> visible(Element at) {
        Map<String, Meaning> out = new LinkedHashMap<>();
        Element e = at;
        while (e != null) {
            members(e).forEach(out::putIfAbsent);
            e = e.parent;
        }
        for (String n : graph.topNames()) {
            DriveGraph.TopEntry t = graph.top.find(n);
            if (t != null) {
                out.putIfAbsent(n, new Meaning.Top(t));
            }
        }
        return out;
    }

    /** Whether a value is written for this declaration in this element. */
    public static boolean isGiven(Element e, Decl d) {
        for (Slot s : e.touched()) {
            if (s.decl == d) {
                return s.isGiven() || s.isOverridden();
            }
        }
        return false;
    }

    /** Every declaration of an element of this kind, its parts left out. */
    public static List<Decl> declarations(Element e) {
        return e.shape.decls;
    }

    /** The kinds of block that may stand in an element, with the names of its fixed parts first. */
    public List<String> blocks(Element e) {
        List<String> out = new ArrayList<>();
        for (Entry.Parts p : e.shape.parts) {
            if (Shape.fixed(p)) {
                p.names().forEach(n -> out.add(n.text()));
            } else {
                String kind = p.kind().text();
                boolean special = false;
                for (String k : graph.shapes.library.kinds.keySet()) {
                    if (!k.equals(kind) && graph.shapes.library.isKind(k, kind)) {
                        out.add(k);
                        special = true;
                    }
                }
                if (!special) {
                    out.add(p.names().get(0).text());
                }
            }
        }
        e.shape.part.forEach(p -> out.add(p.name().text()));
        for (Decl d : e.shape.decls) {
            if (d.kind instanceof ValueKind.Reference r
                    && !out.contains(d.name)
                    && r.kind().equals(d.name)) {
                out.add(d.name);
            }
        }
        return out;
    }

    /** Elements of the drive that a reference to this kind may name. */
    public List<String> elementsOf(String kind) {
        List<String> out = new ArrayList<>();
        for (Element e : graph.allOfKind(kind)) {
            if (e.parent != null && e.parent.kind().equals("drive")) {
                out.add(e.name);
            }
        }
        return out;
    }

    /** Top-level names of the files in reach that are blocks of this kind. */
    public List<String> topOf(String kind) {
        List<String> out = new ArrayList<>();
        for (String n : graph.topNames()) {
            DriveGraph.TopEntry t = graph.top.find(n);
            if (t == null) {
                continue;
            }
            if (t.entry() instanceof Entry.Block b
                    && graph.shapes.library.isKind(b.head().text(), kind)) {
                out.add(n);
            }
            for (Map.Entry<String, DriveGraph.TopEntry> x : t.inside().entrySet()) {
                if (x.getValue().entry() instanceof Entry.Block b
                        && graph.shapes.library.isKind(b.head().text(), kind)) {
                    out.add(n + "." + x.getKey());
                }
            }
        }
        return out;
    }

    /** The checks of a rating by name, with what they mean; those of the members once. */
    public Map<String, Decl> checksOf(Element space) {
        Map<String, Decl> out = new LinkedHashMap<>();
        for (Slot s : DriveBuilder.checks(graph, space)) {
            out.putIfAbsent(s.decl.name, s.decl);
        }
        return out;
    }

    /** The checks of the ratings of a mesh, or of a member of one. */
    public Map<String, Decl> checksIn(Element e) {
        Map<String, Decl> out = new LinkedHashMap<>();
        Element mesh = e.fixed && e.parent != null ? e.parent : e;
        if (e.isSpace()) {
            return checksOf(e);
        }
        for (Element r : mesh.ratings) {
            out.putAll(checksOf(r));
        }
        return out;
    }

    /** The block that a reference names; null where it names none yet. */
    public @Nullable Element referred(Slot s) {
        return s.inline != null ? s.inline : graph.compiler.value(s) instanceof Val.Ref r ? r.element() : null;
    }

    /** Whether a block of that name is always there, so that it takes no name. */
    public static boolean isPart(Element e, String name) {
        return e.named.get(name) instanceof Element || e.own(name) instanceof Slot;
    }
}
