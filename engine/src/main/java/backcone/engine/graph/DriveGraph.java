package backcone.engine.graph;

import backcone.engine.model.BodyDef;
import backcone.engine.model.Decl;
import backcone.engine.model.MethodDef;
import backcone.engine.model.TableDef;
import backcone.engine.syntax.Entry;
import backcone.engine.syntax.Expr;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import backcone.engine.units.Unit;
import java.util.ArrayList;
import java.util.Collection;
import java.util.HashMap;
import java.util.HashSet;
import java.util.LinkedHashMap;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;
import org.jspecify.annotations.Nullable;

/**
 * One drive under one case: its elements, the slots of their values, and the tape that computes them. Structure (words,
 * references, what is given) is settled here; numbers are inputs of the tape.
 */
public final class DriveGraph {
    final Shapes shapes;
    final Top top;
    final Problems problems;
    final boolean traced;
    boolean checking;
    final Tape tape = new Tape();
    final int[] nextId = {1};
    final Scopes scopes = new Scopes(this);
    final Compiler compiler;
    final List<Element> elements = new ArrayList<>();
    Element drive;

    @Nullable
    Element activeCase;

    private @Nullable Train train;
    private @Nullable Checker checker;
    private int load = -1;
    int regions;
    final Map<Integer, Slot> owners = new HashMap<>();
    private final List<@Nullable Slot> origin = new ArrayList<>();
    final List<Input> inputs = new ArrayList<>();
    private @Nullable Reach reach;
    final List<OpenPoint> openPoints = new ArrayList<>();
    final List<Whole> wholes = new ArrayList<>();
    final List<InRange> ranges = new ArrayList<>();
    final Map<Integer, Unknown> unknowns = new HashMap<>();
    final Map<Integer, TableDef> tableOps = new HashMap<>();
    final List<RateUse> rates = new ArrayList<>();
    final List<LimitUse> limits = new ArrayList<>();

    /** Limits that are looked at last, when it is known which values were asked for. */
    final List<Runnable> postponed = new ArrayList<>();

    final List<AppliesUse> applies = new ArrayList<>();
    final List<RelationUse> relations = new ArrayList<>();
    final List<Agreement> agreements = new ArrayList<>();
    final List<RequirementUse> requirements = new ArrayList<>();
    final Set<Entry.Accept> ambiguous = new HashSet<>();
    final List<Uncovered> uncovered = new ArrayList<>();
    final Map<String, Element> topElements = new LinkedHashMap<>();
    final Set<Decl> usedDecls = new HashSet<>();
    final Set<TableDef> usedTables = new HashSet<>();
    final Map<String, Slot.Fact> tightLimits = new HashMap<>();
    final Map<String, TopEntry> sharedBlocks = new HashMap<>();

    /** The texts around a drive. */
    public interface Top {
        /** What a top-level name of this file or of the files it uses means. */
        @Nullable
        TopEntry find(String name);

        Collection<String> names();

        /** The text of a span, for messages. */
        String text(FileId file, Span span);
    }

    /** A top-level entry; a namespace of a {@code use … as} has several. */
    public record TopEntry(FileId file, Entry entry, Map<String, TopEntry> inside) {}

    /**
     * A number that may be replaced. {@code slot} is the value in whose text it stands, {@code file} that text; a switch
     * between readings has no literal.
     */
    public record Input(
            double value,
            Expr.@Nullable Num literal,
            @Nullable Unit unit,
            @Nullable Slot slot,
            @Nullable FileId file,
            int register) {}

    /** Another reading of an equation, switched by an input. */
    public record OpenPoint(Slot slot, String reading, int input) {}

    /** An acceptance for which nothing in this case is required. */
    public record Uncovered(Entry.Accept syntax, FileId file) {}

    public record Whole(Slot slot, int register) {}

    public record InRange(Slot slot, int register, int low, int high) {}

    public record Unknown(Slot slot, @Nullable String otherwise) {}

    /** A rating of a mesh; {@code space} is null where the method is not known. */
    public record RateUse(
            Entry.Rate syntax,
            FileId file,
            Element mesh,
            @Nullable Element space,
            @Nullable MethodDef method,
            String name,
            String why) {
        public String id() {
            return mesh.path() + "." + name;
        }
    }

    /** A limit at an element. {@code condition} is a register, or −1 where settled ({@code holds}). */
    public record LimitUse(
            BodyDef.LimitDef def,
            Element at,
            int condition,
            boolean holds,
            List<Slot> targets,
            int left,
            int right,
            Expr.@Nullable Compare compare,
            @Nullable Unit unit) {
        public String path() {
            String p = at.path();
            return (p.isEmpty() ? "" : p + ".") + "limit." + def.syntax().name().text();
        }
    }

    public record AppliesUse(Entry.Applies syntax, FileId file, Element at, int condition, boolean holds) {}

    /** A relation whose names are all known: both sides must agree. */
    public record Agreement(
            BodyDef.RelationDef def, Element at, int left, int right, double within, List<Slot> slots) {}

    public DriveGraph(Shapes shapes, Top top, Problems problems, boolean traced) {
        this.shapes = shapes;
        this.top = top;
        this.problems = problems;
        this.traced = traced;
        this.compiler = new Compiler(this);
        this.drive = new Element(0, "", shapes.of("drive"), null, "");
    }

    // ---- used while building

    boolean isDriveText(FileId file) {
        return !file.isMethodFile() && !file.isHandbook();
    }

    String textOf(FileId file, Span span) {
        return top.text(file, span);
    }

    FileId fileOf(Element e) {
        Element x = e;
        while (x != null) {
            if (x.file != null) {
                return x.file;
            }
            x = x.parent;
        }
        return new FileId("");
    }

    int addInput(
            double value, Expr.@Nullable Num literal, @Nullable Unit unit, @Nullable Slot slot, @Nullable FileId file) {
        int register = tape.emit(Op.INPUT, 0, inputs.size(), 0, value);
        inputs.add(new Input(value, literal, unit, slot, file, register));
        return register;
    }

    int load() {
        if (load < 0) {
            load = tape.emit(Op.LOAD, 0, 0, 0, 1);
        }
        return load;
    }

    void use(Slot s) {
        usedDecls.add(s.decl);
    }

    void use(TableDef t) {
        usedTables.add(t);
    }

    Train train() {
        Train t = train;
        if (t == null) {
            t = new Train(this);
            train = t;
        }
        return t;
    }

    Checker checker() {
        Checker c = checker;
        if (c == null) {
            c = new Checker(this);
            checker = c;
        }
        return c;
    }

    List<Element> allOfKind(String kind) {
        List<Element> out = new ArrayList<>();
        for (Element e : elements) {
            if (shapes.library.isKind(e.kind(), kind) && !e.isSpace()) {
                out.add(e);
            }
        }
        return out;
    }

    /** A top-level name: an element for a block, a slot for a {@code let}, made when first asked for. */
    @Nullable
    Object top(String name) {
        Element known = topElements.get(name);
        if (known != null) {
            return known;
        }
        TopEntry e = top.find(name);
        return e == null ? null : new Elaborator(this).topLevel(name, e);
    }

    Collection<String> topNames() {
        return top.names();
    }

    Collection<String> namesBehind(Expr.Path p, int failedAt, Ctx ctx) {
        Expr.Path before = new Expr.Path(p.names().subList(0, failedAt), p.span());
        Object x = scopes.path(before, ctx, new Element[1], new int[1]);
        if (x instanceof Slot s && compiler.value(s) instanceof Val.Ref r) {
            x = r.element();
        }
        Set<String> out = new LinkedHashSet<>();
        if (x instanceof Element e) {
            out.addAll(e.shape.names.keySet());
            out.addAll(e.named.keySet());
        }
        return out;
    }

    /** A block that only lends its facts to members of meshes; what a member needs around it is not there. */
    boolean isSharedBlock(Element e) {
        return e.parent == drive && sharedBlocks.containsKey(e.name);
    }

    /** The fixed members of the mesh that a method's space belongs to. */
    List<Element> membersOf(Element space) {
        Element mesh = space.isSpace() ? space.parent : space;
        List<Element> out = new ArrayList<>();
        if (mesh != null) {
            for (Object x : mesh.named.values()) {
                if (x instanceof Element e && e.fixed) {
                    out.add(e);
                }
            }
        }
        return out;
    }

    /** The slots that an expression names, sums written out. */
    void slotsIn(Expr e, Ctx ctx, List<Slot> out) {
        if (e instanceof Expr.Path p) {
            Element[] holder = new Element[1];
            Object x = scopes.path(p, ctx, holder, new int[1]);
            if (x instanceof Slot s) {
                out.add(s);
            } else if (x instanceof Shape.Spoken sp) {
                Slot s = compiler.spoken(sp, holder[0]);
                if (s != null) {
                    out.add(s);
                }
            }
        } else if (e instanceof Expr.Binary b) {
            slotsIn(b.left(), ctx, out);
            slotsIn(b.right(), ctx, out);
        } else if (e instanceof Expr.Neg n) {
            slotsIn(n.operand(), ctx, out);
        } else if (e instanceof Expr.Compare c) {
            for (Expr x : c.operands()) {
                slotsIn(x, ctx, out);
            }
        } else if (e instanceof Expr.In i) {
            slotsIn(i.operand(), ctx, out);
        } else if (e instanceof Expr.Call c) {
            for (Expr a : c.args()) {
                if (a instanceof Expr.Each x && x.body() != null) {
                    Val.Group g = new Builtins(compiler).group(x, ctx, Frame.at(new FileId(""), false));
                    if (g != null) {
                        for (Element el : g.elements()) {
                            slotsIn(x.body(), Builtins.at(ctx, g, el), out);
                        }
                    }
                } else {
                    slotsIn(a, ctx, out);
                }
            }
        } else if (e instanceof Expr.Choose c) {
            for (Expr.Arm a : c.arms()) {
                slotsIn(a.value(), ctx, out);
            }
        }
    }

    // ---- asked after building

    public Tape tape() {
        return tape;
    }

    public Element drive() {
        return drive;
    }

    public @Nullable Element activeCase() {
        return activeCase;
    }

    public Shapes shapes() {
        return shapes;
    }

    public Problems problems() {
        return problems;
    }

    public List<RateUse> rates() {
        return rates;
    }

    public List<RequirementUse> requirements() {
        return requirements;
    }

    /** Acceptances that could mean several ratings; the finding is made. */
    public Set<Entry.Accept> ambiguous() {
        return ambiguous;
    }

    public List<Uncovered> uncovered() {
        return uncovered;
    }

    public List<LimitUse> limits() {
        return limits;
    }

    public List<AppliesUse> applies() {
        return applies;
    }

    public List<Agreement> agreements() {
        return agreements;
    }

    public List<Whole> wholes() {
        return wholes;
    }

    public List<InRange> ranges() {
        return ranges;
    }

    public List<OpenPoint> openPoints() {
        return openPoints;
    }

    public List<Input> inputs() {
        return inputs;
    }

    public @Nullable Slot ownerOf(int register) {
        return owners.get(register);
    }

    public @Nullable Unknown unknown(int register) {
        return unknowns.get(register);
    }

    public @Nullable TableDef tableAt(int register) {
        return tableOps.get(register);
    }

    public Set<Decl> usedDecls() {
        return usedDecls;
    }

    public Set<TableDef> usedTables() {
        return usedTables;
    }

    public List<Element> elements() {
        return elements;
    }

    /** The register of the load factor, −1 where no given value scales with load. */
    public int loadRegister() {
        return load;
    }

    /** A value by its dotted name; null when there is none. */
    public @Nullable Slot find(String name) {
        List<backcone.engine.syntax.Name> names = new ArrayList<>();
        for (String n : name.split("\\.", -1)) {
            if (n.isEmpty()) {
                return null;
            }
            names.add(new backcone.engine.syntax.Name(n, Span.NONE));
        }
        if (names.isEmpty() || names.size() > 50) {
            return null;
        }
        Element[] holder = new Element[1];
        Object x = scopes.path(new Expr.Path(names, Span.NONE), Ctx.of(drive), holder, new int[1]);
        if (x instanceof Shape.Spoken sp && holder[0] != null) {
            Slot s = compiler.spoken(sp, holder[0]);
            return s != null ? s : holder[0].slot(sp.members().get(0));
        }
        return x instanceof Slot s ? s : null;
    }

    /** Compiles a value that nothing has asked for yet. */
    public void demand(Slot s) {
        compiler.value(s);
        tape.finish();
    }

    public void demand(Collection<Slot> all) {
        all.forEach(compiler::value);
        tape.finish();
    }

    /** The slot in whose equation a register was computed. */
    public @Nullable Slot near(int register) {
        Slot own = owners.get(register);
        return own != null ? own : register < origin.size() ? origin.get(register) : null;
    }

    /** Marks registers computed since {@code from} as belonging to a slot, unless an inner one has them. */
    void computedIn(Slot s, int from) {
        while (origin.size() < tape.size()) {
            origin.add(null);
        }
        for (int r = from; r < tape.size(); r++) {
            if (origin.get(r) == null) {
                origin.set(r, s);
            }
        }
    }

    /**
     * What to ask for when a slot is open. A value that only relations could give is traced to what starts them: the power
     * of the case, the speed of the first shaft.
     */
    public List<Slot> missingFor(Slot s) {
        if (s.relations.isEmpty()) {
            return List.of(s);
        }
        Set<Slot> all = new LinkedHashSet<>();
        List<Slot> todo = new ArrayList<>(List.of(s));
        Relations known = new Relations(this);
        while (!todo.isEmpty()) {
            Slot x = todo.remove(todo.size() - 1);
            if (!all.add(x)) {
                continue;
            }
            if (x.fact() != null) {
                return List.of(); // it is written, and what is wrong with it is said there
            }
            for (RelationUse r : x.relations) {
                if (r.active && r.solved == null) {
                    for (Slot y : r.slots) {
                        if ((y.decl.value == null || y.fact() != null) && !known.available(y)) {
                            todo.add(y);
                        }
                    }
                }
            }
        }
        for (Slot x : all) {
            if (x.decl.load) {
                return List.of(x);
            }
        }
        Slot first = s;
        for (Slot x : all) {
            if (!x.decl.name.equals(s.decl.name)) {
                return List.of(s);
            }
            if (x.owner.id < first.owner.id) {
                first = x;
            }
        }
        return List.of(first);
    }

    /** The unit in which a slot is shown. */
    public @Nullable Unit shownUnit(Slot s) {
        if (s.decl.kind instanceof backcone.engine.model.ValueKind.Quantity q) {
            return q.kind().shown();
        }
        return s.value instanceof Val.Num n && n.dimension() != null ? shownUnit(n.dimension()) : null;
    }

    public @Nullable Unit shownUnit(backcone.engine.units.Dimension d) {
        var q = shapes.library.quantityOf(d);
        return q == null ? null : q.shown();
    }

    /** The unit for a value met on the way; on a scale with a zero of its own, what the value is decides, not its dimension. */
    public @Nullable Unit shownUnit(Val.Num n) {
        Unit u = n.dimension() == null || n.dimension().isNone() ? null : shownUnit(n.dimension());
        Slot owner = u != null && u.fromBase(0) != 0 ? ownerOf(n.register()) : null;
        return owner != null && owner.decl.kind instanceof backcone.engine.model.ValueKind.Quantity q
                ? q.kind().shown()
                : u;
    }

    /** What the values of the requirements rest on, in the order of {@link #requirements()}. */
    public Reach reach() {
        Reach r = reach;
        if (r == null) {
            r = new Reach(tape, requirements().stream().mapToInt(u -> u.value).toArray());
            reach = r;
        }
        return r;
    }

    public boolean dependsOnInput(int register, int input) {
        return register >= 0 && tape.between(register, inputs.get(input).register()).count > 0;
    }

    public FileId fileOfElement(Element e) {
        return fileOf(e);
    }

    /** Slots of an element for which something is written. */
    public List<Slot> givenSlots(Element e) {
        List<Slot> out = new ArrayList<>();
        for (Slot s : e.touched()) {
            if (s.fact() != null) {
                out.add(s);
            }
        }
        for (Object x : e.named.values()) {
            if (x instanceof Slot s) {
                out.add(s);
            }
        }
        return out;
    }

    /** Slots that something has asked for. */
    public Collection<Slot> computedSlots() {
        Set<Slot> out = new LinkedHashSet<>(owners.values());
        for (Slot s : origin) {
            if (s != null) {
                out.add(s);
            }
        }
        return out;
    }

    /** The values of all inputs as written. */
    public double[] inputValues() {
        double[] v = new double[inputs.size()];
        for (int i = 0; i < v.length; i++) {
            v[i] = inputs.get(i).value();
        }
        return v;
    }
}
