package backcone.engine.graph;

import backcone.engine.diagnostics.Code;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.model.Decl;
import backcone.engine.model.English;
import backcone.engine.model.MethodDef;
import backcone.engine.model.Suggest;
import backcone.engine.model.ValueKind;
import backcone.engine.syntax.Entry;
import backcone.engine.syntax.Expr;
import backcone.engine.syntax.Name;
import backcone.engine.syntax.Note;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import backcone.engine.units.Dimension;
import backcone.engine.units.Units;
import java.util.ArrayList;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;
import org.jspecify.annotations.Nullable;

/** Puts what a text says into elements and slots. Nothing is computed here. */
final class Elaborator {
    private final DriveGraph graph;
    private final List<Pending> pending = new ArrayList<>();

    /** While a variant or a family row is laid over its base, later facts replace earlier ones. */
    private boolean overlay;

    /** In worked examples computed names may be given too. */
    private boolean example;

    /** The space of the method whose example this is. */
    @Nullable
    Element exampleSpace;

    private record Pending(Element element, List<Entry> body, FileId file, boolean overlay) {}

    Elaborator(DriveGraph graph) {
        this.graph = graph;
    }

    Elaborator forExample() {
        example = true;
        return this;
    }

    Elaborator overlaid() {
        overlay = true;
        return this;
    }

    // ---- elements

    Element create(String name, Shape shape, @Nullable Element parent, String collection, FileId file, Span span) {
        Element e = new Element(graph.nextId[0]++, name, shape, parent, collection);
        e.file = file;
        e.span = span;
        furnish(e);
        graph.elements.add(e);
        return e;
    }

    /** Gives an element its fixed parts, its empty collections and its own cases. */
    void furnish(Element e) {
        for (Entry.Parts p : e.shape.parts) {
            String collection = Shape.collection(p);
            if (Shape.fixed(p)) {
                List<Element> all = new ArrayList<>();
                for (Name n : p.names()) {
                    Element x = new Element(graph.nextId[0]++, n.text(), graph.shapes.part(e.shape, p), e, collection);
                    x.fixed = true;
                    x.span = e.span;
                    furnish(x);
                    graph.elements.add(x);
                    e.named.put(n.text(), x);
                    all.add(x);
                }
                e.named.put(
                        "group " + collection,
                        new Val.Group(all, collection, p.kind().text()));
            } else {
                e.named.put(
                        "group " + collection,
                        new Val.Group(new ArrayList<>(), collection, p.kind().text()));
            }
        }
        for (Entry.Part p : e.shape.part) {
            Element x = new Element(
                    graph.nextId[0]++, p.name().text(), graph.shapes.of(p.kind().text()), e, "");
            x.span = e.span;
            furnish(x);
            graph.elements.add(x);
            e.named.put(p.name().text(), x);
        }
        cases(e);
    }

    private void cases(Element e) {
        for (Entry.Cases c : e.shape.cases) {
            List<Element> all = new ArrayList<>();
            for (Name w : c.words()) {
                Element x = new Element(
                        graph.nextId[0]++, w.text(), Shapes.WORD, e, c.name().text());
                e.named.put(w.text(), x);
                all.add(x);
            }
            e.named.put("group " + c.name().text(), new Val.Group(all, c.name().text(), ""));
        }
    }

    @Nullable
    Object topLevel(String name, DriveGraph.TopEntry t) {
        if (!t.inside().isEmpty()) {
            Element space = new Element(graph.nextId[0]++, name, Shapes.WORD, null, "");
            graph.topElements.put(name, space);
            for (Map.Entry<String, DriveGraph.TopEntry> x : t.inside().entrySet()) {
                Object o = topLevel(name + "." + x.getKey(), x.getValue());
                if (o != null) {
                    space.named.put(x.getKey(), o);
                }
            }
            return space;
        }
        if (t.entry() instanceof Entry.Block b) {
            String kind = b.head().text();
            if (!graph.shapes.library.kinds.containsKey(kind)) {
                return null;
            }
            Element e = create(
                    b.name() == null ? kind : b.name().text(), graph.shapes.of(kind), null, "", t.file(), b.span());
            e.title = b.title();
            e.headSpan = head(b);
            graph.topElements.put(name, e);
            queue(e, b.body(), t.file());
            drain();
            return e;
        }
        if (t.entry() instanceof Entry.Let l) {
            Object known = graph.drive.named.get(name);
            if (known != null) {
                return known;
            }
            Element at = new Element(graph.nextId[0]++, "", Shapes.WORD, null, "");
            at.file = t.file();
            Slot s = let(at, l, t.file());
            graph.drive.named.put(name, s);
            return s;
        }
        return null;
    }

    private Slot let(Element at, Entry.Let l, FileId file) {
        Decl d = new Decl(
                l.name(),
                null,
                null,
                new ValueKind.Inferred(),
                null,
                Entry.Given.EQUALS,
                l.value(),
                Decl.Role.LET,
                l.notes(),
                file,
                l.span(),
                "let");
        return new Slot(at, d);
    }

    // ---- bodies

    /** Blocks first, so that facts may speak of anything; the facts when {@link #drain} is called. */
    void queue(Element e, @Nullable List<Entry> body, FileId file) {
        if (body == null) {
            return;
        }
        pending.add(new Pending(e, body, file, overlay));
        for (Entry x : body) {
            if (x instanceof Entry.Block b) {
                block(e, b, file);
            }
        }
    }

    void drain() {
        while (!pending.isEmpty()) {
            List<Pending> now = new ArrayList<>(pending);
            pending.clear();
            for (Pending p : now) {
                boolean before = overlay;
                overlay = p.overlay;
                for (Entry x : p.body) {
                    entry(p.element, x, p.file);
                }
                overlay = before;
            }
        }
    }

    private void block(Element e, Entry.Block b, FileId file) {
        String head = b.head().text();
        Object own = e.named.get(head);
        if (own instanceof Element part && b.name() == null) {
            part.file = file;
            part.span = b.span();
            part.headSpan = head(b);
            onShaft(part, b, file);
            queue(part, b.body(), file);
            return;
        }
        Entry.Parts into = collectionFor(e, head);
        if (into != null) {
            added(e, b, head, into, file);
            return;
        }
        Object slot = e.own(head);
        if (slot instanceof Slot s && s.decl.kind instanceof ValueKind.Reference r && b.name() == null) {
            Element inline = create(
                    e.path().isEmpty() ? head : e.path() + "." + head,
                    graph.shapes.of(r.kind()),
                    null,
                    "",
                    file,
                    b.span());
            s.inline = inline;
            queue(inline, b.body(), file);
            return;
        }
        if (b.head().isHole()) {
            return;
        }
        if (example && e != graph.drive) {
            // the example of a method or a mesh may speak of the drive around it
            block(e.isSpace() && e.parent != null ? e.parent : graph.drive, b, file);
            return;
        }
        Set<String> may = new LinkedHashSet<>();
        for (Entry.Parts p : e.shape.parts) {
            if (Shape.fixed(p)) {
                p.names().forEach(n -> may.add(n.text()));
            } else {
                may.add(p.names().get(0).text());
                graph.shapes.library.kinds.keySet().stream()
                        .filter(k -> graph.shapes.library.isKind(k, p.kind().text()))
                        .forEach(may::add);
            }
        }
        e.shape.part.forEach(p -> may.add(p.name().text()));
        if (graph.shapes.library.kinds.containsKey(head)) {
            graph.problems.add(
                    Code.WRONG_PLACE,
                    file,
                    b.head().span(),
                    "A block `" + head + "` does not belong in " + where(e) + "; it holds " + Compiler.list(may) + ".");
        } else {
            graph.problems.add(
                    Code.UNKNOWN_KIND,
                    file,
                    b.head().span(),
                    "There is no block `" + head + "` in " + where(e) + "." + Suggest.sentence(head, may));
        }
    }

    private static Span head(Entry.Block b) {
        return b.name() == null ? b.head().span() : b.head().span().to(b.name().span());
    }

    private static String where(Element e) {
        return e.kind().equals("drive") ? "a drive" : "`" + e.path() + "`";
    }

    private Entry.@Nullable Parts collectionFor(Element e, String head) {
        for (Entry.Parts p : e.shape.parts) {
            if (Shape.fixed(p)) {
                continue;
            }
            if (p.names().get(0).text().equals(head)
                    || (graph.shapes.library.kinds.containsKey(head)
                            && graph.shapes.library.isKind(head, p.kind().text()))) {
                return p;
            }
        }
        if (head.equals("duty") && e.kind().equals("drive")) {
            return collectionFor(e, "case");
        }
        return null;
    }

    private void added(Element e, Entry.Block b, String head, Entry.Parts p, FileId file) {
        String kind =
                graph.shapes.library.kinds.containsKey(head) ? head : p.kind().text();
        String collection = p.names().get(0).text();
        Val.Group g = (Val.Group) java.util.Objects.requireNonNull(e.named.get("group " + collection));
        String name = b.name() != null
                ? b.name().text()
                : head.equals("duty") ? "rated" : head + "_" + (g.elements().size() + 1);
        Object old = e.named.get(name);
        if (old != null && !overlay) {
            Diagnostic d = Diagnostic.of(
                    Code.DUPLICATE_NAME,
                    file,
                    b.name() == null ? b.head().span() : b.name().span(),
                    "`" + name + "` is there already; give one of the two another name.");
            graph.problems.add(old instanceof Element x ? d.withRelated(file, x.span, "the other `" + name + "`") : d);
            return;
        }
        if (old instanceof Element x) {
            g.elements().remove(x);
            graph.elements.remove(x);
        }
        Element x = create(name, graph.shapes.of(kind), e, collection, file, b.span());
        x.title = b.title();
        x.headSpan = head(b);
        g.elements().add(x);
        e.named.put(name, x);
        onShaft(x, b, file);
        queue(x, b.body(), file);
    }

    private void onShaft(Element e, Entry.Block b, FileId file) {
        Name on = b.on();
        if (on == null || on.isHole()) {
            return;
        }
        if (e.own("on") instanceof Slot s) {
            s.given = new Slot.Fact(
                    new Expr.Path(List.of(on), on.span()), Ctx.of(graph.drive), List.of(), file, on.span(), on.span());
        } else {
            graph.problems.add(Code.WRONG_PLACE, file, on.span(), "`" + b.head() + "` sits on no shaft.");
        }
    }

    private void entry(Element e, Entry x, FileId file) {
        if (x instanceof Entry.Fact f) {
            fact(e, f, file);
        } else if (x instanceof Entry.Let l) {
            Slot s = let(e, l, file);
            Object old = e.named.put(l.name().text(), s);
            if (old != null && !overlay) {
                graph.problems.add(
                        Code.DUPLICATE_NAME,
                        file,
                        l.name().span(),
                        "`" + l.name() + "` is there already; give one of the two another name.");
            } else if (e.shape.names.containsKey(l.name().text())) {
                graph.problems.add(
                        Code.HIDDEN_NAME,
                        file,
                        l.name().span(),
                        "`" + l.name() + "` is a property of " + where(e) + "; call this value something else.");
            }
        } else if (x instanceof Entry.Override o) {
            override(e, o, file);
        } else if (x instanceof Entry.FactFor t) {
            graph.tightLimits.put(
                    t.target().text(),
                    new Slot.Fact(
                            t.value(),
                            Ctx.of(e),
                            t.notes(),
                            file,
                            t.span(),
                            t.name().span()));
        } else if (x instanceof Entry.Each each && example) {
            if (e.named.get("group " + each.collection().text()) instanceof Val.Group g) {
                for (Element el : g.elements()) {
                    for (Entry inner : each.body()) {
                        if (inner instanceof Entry.Block b) {
                            block(el, b, file);
                        }
                        entry(el, inner, file);
                    }
                }
            } else if (e.isSpace() && e.parent != null) {
                entry(e.parent, x, file);
            }
        } else if (x instanceof Entry.Requirement r) {
            boolean inRate = e.isSpace();
            if (!inRate) {
                graph.problems.add(
                        Code.WRONG_PLACE,
                        file,
                        r.span(),
                        "A requirement of a check stands in a `rate` block; here write `require "
                                + r.path().text() + " " + r.cmp().sign + " …`.");
            }
        } else if (!allowed(e, x)) {
            String why = backcone.engine.model.EntryNames.misplaced(x);
            graph.problems.add(
                    Code.WRONG_PLACE,
                    file,
                    firstWord(x),
                    why != null ? why : "This entry does not belong in " + where(e) + ".");
        }
    }

    private static Span firstWord(Entry x) {
        return new Span(x.span().start(), Math.min(x.span().end(), x.span().start() + 12));
    }

    private boolean allowed(Element e, Entry x) {
        if (x instanceof Entry.Block || x instanceof Entry.Bad || example) {
            return true;
        }
        boolean drive = e.kind().equals("drive");
        if (x instanceof Entry.UseReading) {
            return e.isSpace();
        }
        return drive
                && (x instanceof Entry.Rate
                        || x instanceof Entry.Require
                        || x instanceof Entry.Assert
                        || x instanceof Entry.Accept
                        || x instanceof Entry.Waive);
    }

    // ---- facts

    private void fact(Element e, Entry.Fact f, FileId file) {
        Element[] at = {e};
        Object target = target(e, f.path(), f.value(), at, file);
        if (target == null) {
            return;
        }
        if (target instanceof Element part) {
            shared(part, f, file);
            return;
        }
        Slot s = (Slot) target;
        if (s.decl.how == Entry.Given.EQUALS && f.value() instanceof Expr.Hole) {
            return; // half typed: perhaps no fact at all, and the parser has said what is missing
        }
        if (s.decl.how == Entry.Given.EQUALS && s.decl.role != Decl.Role.LET && !example) {
            Diagnostic d = Diagnostic.of(
                    Code.COMPUTED_GIVEN,
                    file,
                    f.span(),
                    "`" + s.decl.name + "` is computed here; to put a value of your own in its place write `override "
                            + f.path().text() + " = … because \"…\"`.");
            graph.problems.add(d.withRelated(s.decl.file, s.decl.span, "its equation"));
            return;
        }
        Ctx scope = Ctx.of(e.isSpace() || e.shape == Shapes.WORD ? e : e);
        Slot.Fact given = new Slot.Fact(
                f.value(), scope, f.notes(), file, f.span(), f.path().span());
        if (s.given != null && !overlay) {
            Diagnostic d = Diagnostic.of(
                    Code.DUPLICATE_NAME, file, f.path().span(), "`" + f.path().text() + "` is given twice; keep one.");
            graph.problems.add(d.withRelated(s.given.file(), s.given.span(), "given here"));
            return;
        }
        notes(f.notes(), file, f.span());
        s.given = given;
    }

    private void notes(List<Note> notes, FileId file, Span span) {
        for (Note n : notes) {
            if (n instanceof Note.Assumed a && a.reason() == null) {
                graph.problems.add(
                        Code.NEEDS_REASON, file, n.span(), "An assumption says why: `assumed because \"…\"`.");
            }
        }
    }

    private void override(Element e, Entry.Override o, FileId file) {
        Element[] at = {e};
        Object target = target(e, o.path(), o.value(), at, file);
        if (!(target instanceof Slot s)) {
            return;
        }
        boolean reason = false;
        for (Note n : o.notes()) {
            reason |= n instanceof Note.Because;
        }
        if (!reason) {
            graph.problems.add(
                    Code.NEEDS_REASON,
                    file,
                    o.span(),
                    "An override says why: `override " + o.path().text() + " = … because \"…\"`.");
        }
        s.override = new Slot.Fact(
                o.value(), Ctx.of(e), o.notes(), file, o.span(), o.path().span());
    }

    /** What the left side of a fact means; only names of this block and of what it holds. */
    private @Nullable Object target(Element e, Expr.Path p, Expr value, Element[] at, FileId file) {
        List<Name> names = p.names();
        Element holder = e;
        for (int i = 0; i < names.size(); i++) {
            Name n = names.get(i);
            if (n.isHole()) {
                return null;
            }
            Object x = i == 0 && e.isSpace() && e.parent != null ? spaceName(e, n.text()) : own(holder, n.text());
            if (x instanceof Shape.Spoken sp) {
                x = bySpoken(holder, sp, value);
            }
            boolean last = i == names.size() - 1;
            if (x instanceof Slot s && !last) {
                x = s.inline != null ? s.inline : s.isGiven() ? graph.compiler.value(s) : x;
                if (x instanceof Val.Ref r) {
                    x = r.element();
                }
                if (x instanceof Slot open && example && open.decl.kind instanceof ValueKind.Reference r) {
                    Element inline = create(open.path(), graph.shapes.of(r.kind()), null, "", file, p.span());
                    open.inline = inline;
                    x = inline;
                }
            }
            if (last && (x instanceof Slot || x instanceof Element)) {
                at[0] = holder;
                return x;
            }
            if (x instanceof Element next) {
                // within the space of a method a member means what the method says of it
                Element combo = e.isSpace() && i == 0 && !next.collection.isEmpty()
                        ? e.combo(List.of(new Axis(next.collection, next)), graph.nextId)
                        : null;
                if (combo != null && names.size() == 2 && combo.own(names.get(1).text()) != null) {
                    holder = combo;
                } else {
                    holder = next;
                }
                continue;
            }
            unknown(holder, n, file, i > 0 || e != holder);
            return null;
        }
        return null;
    }

    private @Nullable Object spaceName(Element space, String n) {
        Object x = own(space, n);
        if (x == null && space.parent != null) {
            x = own(space.parent, n);
            if (x instanceof Slot && !example) {
                return null;
            }
        }
        if (x == null && example) {
            // an example may speak of the drive around: duty, shafts
            x = graph.drive.own(n);
        }
        return x;
    }

    private @Nullable Object own(Element e, String n) {
        Object x = e.own(n);
        if (x == null && e.space != null && !e.axes.isEmpty()) {
            x = e.axes.get(e.axes.size() - 1).element().own(n);
        }
        Element at = exampleSpace;
        if (x == null && at != null && e.fixed && e.parent == at.parent) {
            Element combo = at.combo(List.of(new Axis(e.collection, e)), graph.nextId);
            x = combo == null ? null : combo.own(n);
        }
        if (x == null && n.equals("duty") && graph.activeCase != null) {
            return graph.activeCase;
        }
        return x;
    }

    private void unknown(Element holder, Name n, FileId file, boolean behind) {
        Set<String> may = new LinkedHashSet<>(holder.shape.names.keySet());
        for (String k : holder.named.keySet()) {
            if (k.indexOf(' ') < 0) {
                may.add(k);
            }
        }
        String near = Suggest.nearest(n.text(), may);
        String kind = holder.kind().isEmpty() ? holder.name : holder.kind();
        Diagnostic d = Diagnostic.of(
                Code.UNKNOWN_PROPERTY,
                file,
                n.span(),
                "A " + (holder.isSpace() && holder.method != null ? "rating by " + holder.method.name() : kind)
                        + " has no property `" + n + "`."
                        + (near == null
                                ? " `backcone handbook " + kind + "` lists what it has."
                                : " Did you mean `" + near + "`?"));
        graph.problems.add(near == null ? d : d.withFix("write " + near, n.span(), near));
    }

    /** One spoken name for several scales: the unit of the value picks. */
    private Object bySpoken(Element holder, Shape.Spoken sp, Expr value) {
        Dimension d = dimension(value);
        if (d != null) {
            for (Shape.Member m : sp.members()) {
                if (m.decl().kind instanceof ValueKind.Quantity q
                        && q.kind().shown().dimension() == d) {
                    return holder.slot(m);
                }
            }
        }
        return holder.slot(sp.members().get(0));
    }

    private static @Nullable Dimension dimension(Expr e) {
        if (e instanceof Expr.Num n) {
            if (n.unit() == null) {
                return null;
            }
            return Units.standard().parse(n.unit().text()) instanceof Units.Parse.Ok ok
                    ? ok.unit().dimension()
                    : null;
        }
        if (e instanceof Expr.Range r) {
            Dimension d = dimension(r.low());
            return d != null ? d : dimension(r.high());
        }
        if (e instanceof Expr.Toleranced t) {
            return dimension(t.nominal());
        }
        return null;
    }

    /** {@code pinion = gear sun}: the member takes the facts and the shaft of a shared block. */
    private void shared(Element part, Entry.Fact f, FileId file) {
        String name = f.value() instanceof Expr.BlockRef b
                ? b.name().text()
                : f.value() instanceof Expr.Path p ? p.text() : "";
        Object x = graph.drive.named.get(name);
        if (!(x instanceof Element block) || !graph.shapes.library.isKind(part.kind(), block.kind())) {
            graph.problems.add(
                    Code.NOT_A_BLOCK,
                    file,
                    f.value().span(),
                    "`" + f.path().text() + "` is a block of its own or a shared one: `"
                            + f.path().text() + " = gear NAME` with `gear NAME on SHAFT { … }` in the drive.");
            return;
        }
        DriveGraph.TopEntry source = graph.sharedBlocks.get(name);
        if (source != null && source.entry() instanceof Entry.Block b) {
            onShaft(part, b, source.file());
            queue(part, b.body(), source.file());
        }
        if (part.own("shared") instanceof Slot s) {
            s.given = new Slot.Fact(
                    new Expr.Path(
                            List.of(new Name(name, f.value().span())), f.value().span()),
                    Ctx.of(graph.drive),
                    f.notes(),
                    file,
                    f.span(),
                    f.path().span());
        }
        part.span = f.span();
        part.file = file;
    }

    // ---- ratings

    void rate(Entry.Rate r, FileId file, boolean replace) {
        Element[] holder = new Element[1];
        Object x = graph.scopes.path(r.mesh(), Ctx.of(graph.drive), holder, new int[1]);
        if (!(x instanceof Element mesh) || !isRated(mesh)) {
            if (!r.mesh().names().get(0).isHole()) {
                List<String> meshes = new ArrayList<>();
                graph.allOfKind("mesh").forEach(m -> meshes.add(m.name));
                graph.problems.add(
                        Code.UNKNOWN_NAME,
                        file,
                        r.mesh().span(),
                        "There is no mesh `" + r.mesh().text() + "` to rate."
                                + Suggest.sentence(r.mesh().text(), meshes));
            }
            return;
        }
        if (r.method().isHole()) {
            return;
        }
        String method = r.method().text();
        String name = r.as() != null && !r.as().isHole() ? r.as().text() : method;
        MethodDef def = graph.shapes.library.method(method, mesh.kind());
        if (def == null) {
            noMethod(r, file, mesh, method);
            graph.rates.add(new DriveGraph.RateUse(
                    r, file, mesh, null, null, name, "the method `" + method + "` is not in this handbook"));
            return;
        }
        String edition = edition(r, file, def);
        if (edition == null && !def.body().editions.isEmpty()) {
            // no edition is assumed, so there is nothing to rate by
            graph.rates.add(new DriveGraph.RateUse(
                    r, file, mesh, null, def, name, "the edition of `" + method + "` is not written"));
            return;
        }
        if (mesh.named.containsKey(name) && !replace) {
            graph.problems.add(
                    Code.DUPLICATE_NAME,
                    file,
                    (r.as() == null ? r.method() : r.as()).span(),
                    "`" + mesh.name + "` has a rating `" + name + "` already; give this one a name of its own: `rate "
                            + mesh.name + " by " + method + " as NAME`.");
            return;
        }
        if (replace) {
            graph.rates.removeIf(u -> u.mesh() == mesh && u.name().equals(name));
            mesh.ratings.removeIf(m -> m.name.equals(name));
        }
        Element space = space(mesh, def, name, edition, file, r.span());
        graph.rates.add(new DriveGraph.RateUse(r, file, mesh, space, def, name, ""));
        queue(space, r.body(), file);
        for (Entry e : r.body()) {
            if (e instanceof Entry.UseReading u) {
                reading(space, u, file);
            }
        }
    }

    Element space(Element mesh, MethodDef def, String name, @Nullable String edition, FileId file, Span span) {
        Element space = new Element(graph.nextId[0]++, name, graph.shapes.method(def), mesh, "");
        space.method = def;
        space.edition = edition;
        space.file = file;
        space.span = span;
        cases(space);
        graph.elements.add(space);
        mesh.named.put(name, space);
        mesh.ratings.add(space);
        return space;
    }

    /** Meshes are; of the other blocks, those that some method is for. */
    private boolean isRated(Element e) {
        return graph.shapes.library.isKind(e.kind(), "mesh")
                || !e.isSpace()
                        && graph.shapes.library.methods.values().stream()
                                .anyMatch(v -> v.stream()
                                        .anyMatch(
                                                m -> graph.shapes.library.isKind(e.kind(), m.kind()) && hasChecks(m)));
    }

    private void noMethod(Entry.Rate r, FileId file, Element mesh, String method) {
        List<MethodDef> other = graph.shapes.library.methods.get(method);
        if (other != null && !other.isEmpty()) {
            graph.problems.add(
                    Code.UNKNOWN_METHOD,
                    file,
                    r.method().span(),
                    "`" + method + "` rates " + English.a(other.get(0).kind()) + "; `" + mesh.name + "` is "
                            + English.a(mesh.kind()) + ".");
            return;
        }
        List<String> fit = new ArrayList<>();
        graph.shapes.library.methods.forEach((k, v) -> {
            if (v.stream()
                    .anyMatch(m -> graph.shapes.library.isKind(mesh.kind(), m.kind())
                            && hasChecks(m)
                            && !graph.shapes.isBuildingBlock(m))) {
                fit.add(k);
            }
        });
        String near = Suggest.nearest(method, fit);
        if (near != null) {
            graph.problems.add(Diagnostic.of(
                            Code.UNKNOWN_METHOD,
                            file,
                            r.method().span(),
                            "There is no method `" + method + "`. Did you mean `" + near + "`?")
                    .withFix("write " + near, r.method().span(), near));
        } else {
            graph.problems.add(
                    Code.METHOD_NOT_HERE,
                    file,
                    r.method().span(),
                    "The method `" + method + "` is not in this handbook; what it would rate stays open. For "
                            + English.a(mesh.kind()) + " it holds " + Compiler.list(fit) + ".");
        }
    }

    private boolean hasChecks(MethodDef m) {
        Shape s = graph.shapes.method(m);
        return !Checks.of(s).isEmpty();
    }

    private @Nullable String edition(Entry.Rate r, FileId file, MethodDef def) {
        List<String> editions = def.body().editions;
        Expr.Num said = r.edition();
        if (said == null) {
            if (editions.size() == 1) {
                return editions.get(0);
            }
            if (editions.size() > 1) {
                graph.problems.add(Diagnostic.of(
                                Code.MISSING_EDITION,
                                file,
                                r.method().span(),
                                "`" + def.name()
                                        + "` has several editions and none is assumed; write `" + def.name()
                                        + " edition " + editions.get(0) + "` (it knows "
                                        + Compiler.list(editions) + ").")
                        .withFix(
                                "add edition " + editions.get(0),
                                new Span(
                                        r.method().span().end(),
                                        r.method().span().end()),
                                " edition " + editions.get(0)));
                return null;
            }
            return null;
        }
        if (!editions.contains(said.text())) {
            graph.problems.add(
                    Code.UNKNOWN_EDITION,
                    file,
                    said.span(),
                    editions.isEmpty()
                            ? "`" + def.name() + "` has no editions; leave `edition " + said.text() + "` out."
                            : "`" + def.name() + "` has no edition " + said.text() + "; it knows "
                                    + Compiler.list(editions) + ".");
            return null;
        }
        return said.text();
    }

    void reading(Element space, Entry.UseReading u, FileId file) {
        Object x = graph.scopes.path(u.target(), Ctx.of(space), new Element[1], new int[1]);
        List<Slot> slots = new ArrayList<>();
        if (x instanceof Slot s) {
            slots.add(s);
        } else if (u.target().names().size() == 1) {
            for (Element el : graph.membersOf(space)) {
                Element combo = space.combo(List.of(new Axis(el.collection, el)), graph.nextId);
                if (combo != null && combo.own(u.target().text()) instanceof Slot s) {
                    slots.add(s);
                }
            }
            spread(space, space.shape, List.of(), u.target().text(), slots);
        }
        if (slots.isEmpty()) {
            graph.problems.add(
                    Code.UNKNOWN_NAME,
                    file,
                    u.target().span(),
                    "This method has no equation `" + u.target().text() + "`.");
            return;
        }
        for (Slot s : slots) {
            List<String> names = new ArrayList<>();
            s.decl.readings.forEach(r -> names.add(r.name().text()));
            if (!names.contains(u.reading().text())) {
                graph.problems.add(
                        Code.UNKNOWN_READING,
                        file,
                        u.reading().span(),
                        "`" + s.decl.name + "` has no reading `" + u.reading() + "`"
                                + (names.isEmpty() ? "; it has only one." : "; it has " + Compiler.list(names) + "."));
                return;
            }
            s.reading = u.reading().text();
        }
    }

    /** An equation within {@code each} stands once for every combination of elements; a reading is taken for all of them. */
    private void spread(Element space, Shape shape, List<Axis> axes, String name, List<Slot> out) {
        for (Map.Entry<String, Shape> each : shape.each.entrySet()) {
            if (graph.scopes.collection(each.getKey(), new Ctx(space, axes, null), new Element[1])
                    instanceof Val.Group group) {
                for (Element el : group.elements()) {
                    List<Axis> more = new ArrayList<>(axes);
                    more.add(new Axis(each.getKey(), el));
                    Element combo = space.combo(more, graph.nextId);
                    if (combo != null) {
                        if (combo.own(name) instanceof Slot s && !out.contains(s)) {
                            out.add(s);
                        }
                        spread(space, each.getValue(), more, name, out);
                    }
                }
            }
        }
    }
}
