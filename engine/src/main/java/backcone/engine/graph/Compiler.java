package backcone.engine.graph;

import backcone.engine.diagnostics.Code;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.model.ChoiceKind;
import backcone.engine.model.English;
import backcone.engine.model.FunctionDef;
import backcone.engine.model.QuantityKind;
import backcone.engine.model.Suggest;
import backcone.engine.model.TableDef;
import backcone.engine.model.ValueKind;
import backcone.engine.syntax.Entry;
import backcone.engine.syntax.Expr;
import backcone.engine.syntax.Name;
import backcone.engine.syntax.Note;
import backcone.engine.text.Span;
import backcone.engine.units.Dimension;
import backcone.engine.units.Unit;
import backcone.engine.units.Units;
import java.util.ArrayList;
import java.util.HashMap;
import java.util.List;
import java.util.Map;
import org.jspecify.annotations.Nullable;

/**
 * Compiles expressions to the tape of a graph, on demand. Words, references and givenness are settled here; numbers become
 * registers. Dimensions are checked on the way.
 */
final class Compiler {
    private static final Val.Bad BAD = new Val.Bad();
    private static final int DEEPEST = 400;
    final DriveGraph graph;
    private final Problems problems;
    private final Units units;
    private final Builtins builtins;
    private final Tables tables;
    private final Solver solver;
    private final List<Slot> stack = new ArrayList<>();
    private final Map<Double, Integer> constants = new HashMap<>();
    private int depth;

    Compiler(DriveGraph graph) {
        this.graph = graph;
        this.problems = graph.problems;
        this.units = Units.standard();
        this.builtins = new Builtins(this);
        this.tables = new Tables(this);
        this.solver = new Solver(this);
    }

    // ---- values of slots

    Val value(Slot s) {
        Val known = s.value;
        if (known != null) {
            return known;
        }
        if (graph.checking) {
            return graph.checker().typeOf(s);
        }
        if (s.compiling) {
            cycle(s);
            return BAD;
        }
        if (depth > DEEPEST) {
            problems.add(
                    Code.TOO_DEEP,
                    s.decl.file,
                    s.decl.span,
                    "The values behind `" + s.path() + "` are nested too deep.");
            return BAD;
        }
        s.compiling = true;
        stack.add(s);
        depth++;
        if (graph.traced) {
            s.tracing();
        }
        Val v;
        int from = graph.tape.size();
        try {
            v = compute(s);
            graph.computedIn(s, from);
        } finally {
            depth--;
            stack.remove(stack.size() - 1);
            s.compiling = false;
        }
        Val inner = s.value;
        if (inner != null) {
            return inner;
        }
        s.value = v;
        if (v instanceof Val.Num n) {
            graph.owners.putIfAbsent(n.register(), s);
        }
        return v;
    }

    private void cycle(Slot s) {
        StringBuilder chain = new StringBuilder();
        int from = stack.lastIndexOf(s);
        for (int i = Math.max(0, from); i < stack.size(); i++) {
            chain.append('`').append(stack.get(i).path()).append("` <- ");
        }
        chain.append('`').append(s.path()).append('`');
        Slot.Fact f = s.fact();
        Diagnostic d = Diagnostic.of(
                Code.CYCLE,
                f != null ? f.file() : s.decl.file,
                f != null ? f.span() : s.decl.span,
                "These values depend on each other: " + chain + ". Give one of them a value of its own.");
        for (int i = Math.max(0, from); i < stack.size(); i++) {
            Slot x = stack.get(i);
            Slot.Fact g = x.fact();
            d = d.withRelated(
                    g != null ? g.file() : x.decl.file,
                    g != null ? g.span() : x.decl.span,
                    "`" + x.path() + "` is part of the circle");
        }
        problems.add(d);
    }

    private Val compute(Slot s) {
        Slot.Fact fact = s.fact();
        if (fact != null) {
            return fact(s, fact);
        }
        Element inline = s.inline;
        if (inline != null) {
            return new Val.Ref(inline);
        }
        RelationUse by = s.solvedBy;
        if (by != null) {
            return solver.solve(s, by);
        }
        Expr e = s.decl.value;
        if (e == null) {
            return open(s);
        }
        Frame f = new Frame(s, s.decl.file, s.decl.taking, graph.isDriveText(s.decl.file));
        Ctx ctx = Ctx.of(s.owner);
        if (s.decl.readings.isEmpty()) {
            return coerce(s, words(s, e, ctx, f), e);
        }
        return readings(s, e, ctx, f);
    }

    /** The default reading, with every other on the tape behind a switch, so that all can be asked without rebuilding. */
    private Val readings(Slot s, Expr e, Ctx ctx, Frame f) {
        String chosen = s.reading;
        if (chosen != null) {
            for (Note.Reading r : s.decl.readings) {
                if (r.name().text().equals(chosen)) {
                    return coerce(s, eval(r.value(), ctx, f), r.value());
                }
            }
        }
        Val v = coerce(s, words(s, e, ctx, f), e);
        if (!(v instanceof Val.Num n)) {
            return v;
        }
        int register = n.register();
        for (Note.Reading r : s.decl.readings) {
            Val other = coerce(s, eval(r.value(), ctx, f), r.value());
            if (other instanceof Val.Num m) {
                int sw = graph.addInput(0, null, null, s, null);
                graph.openPoints.add(new DriveGraph.OpenPoint(s, r.name().text(), graph.tape.b(sw)));
                register = graph.tape.emit(Op.SELECT, sw, m.register(), register, 0);
            }
        }
        return new Val.Num(register, n.dimension(), Double.NaN);
    }

    /** A bare word where a choice is declared is a word of that choice. */
    private Val words(Slot s, Expr e, Ctx ctx, Frame f) {
        if (s.decl.kind instanceof ValueKind.Choice c
                && e instanceof Expr.Path p
                && p.names().size() == 1
                && c.kind().has(p.text())) {
            return new Val.Word(p.text(), c.kind());
        }
        return eval(e, ctx, f);
    }

    private Val fact(Slot s, Slot.Fact fact) {
        Frame f = new Frame(s, fact.file(), Frame.NOTHING, graph.isDriveText(fact.file()));
        return coerce(s, factValue(s, fact.value(), fact.scope(), f), fact.value());
    }

    private Val factValue(Slot s, Expr e, Ctx ctx, Frame f) {
        if (s.decl.kind instanceof ValueKind.Text
                && (e instanceof Expr.Path || e instanceof Expr.Num || e instanceof Expr.Binary)) {
            problem(
                    Code.WRONG_FORM,
                    f,
                    e.span(),
                    "`" + s.decl.name + "` is a text; write it in quotes: `" + s.decl.name + " = \"" + textOf(e, f)
                            + "\"`.");
            return BAD;
        }
        if (e instanceof Expr.Path p && p.names().size() == 1) {
            if (s.decl.kind instanceof ValueKind.Choice c) {
                if (c.kind().has(p.text())) {
                    return new Val.Word(p.text(), c.kind());
                }
                problem(
                        Code.UNKNOWN_CHOICE,
                        f,
                        p.span(),
                        "`" + p.text() + "` is no " + lower(c.kind().meaning(), s.decl.name) + "; it is one of "
                                + list(c.kind().words().keySet()) + "."
                                + Suggest.sentence(p.text(), c.kind().words().keySet()));
                return BAD;
            }
        }
        return eval(e, ctx, f);
    }

    private static String lower(@Nullable String meaning, String name) {
        return meaning == null ? "value of `" + name + "`" : meaning.split(";")[0];
    }

    static String list(java.util.Collection<String> words) {
        StringBuilder b = new StringBuilder();
        int i = 0;
        for (String w : words) {
            b.append(i == 0 ? "" : i == words.size() - 1 ? " or " : ", ")
                    .append('`')
                    .append(w)
                    .append('`');
            i++;
        }
        return b.toString();
    }

    /** Fits what an expression gave to what is declared. */
    private Val coerce(Slot s, Val v, Expr e) {
        ValueKind kind = s.decl.kind;
        Slot.Fact fact = s.fact();
        boolean given = fact != null;
        Frame f = new Frame(s, fact != null ? fact.file() : s.decl.file, Frame.NOTHING, given);
        if (v instanceof Val.Bad) {
            return kind instanceof ValueKind.Quantity q ? bad(q.kind().shown().dimension()) : v;
        }
        if (kind instanceof ValueKind.Quantity q) {
            return quantity(s, q.kind(), v, e, f, given);
        }
        if (kind instanceof ValueKind.Choice c) {
            if (v instanceof Val.Word w && c.kind().has(w.text())) {
                return new Val.Word(w.text(), c.kind());
            }
            if (v instanceof Val.Picked || v instanceof Val.Open) {
                return v;
            }
            problem(
                    Code.UNKNOWN_CHOICE,
                    f,
                    e.span(),
                    "`" + s.decl.name + "` is one of " + list(c.kind().words().keySet()) + "; found " + what(v) + ".");
            return BAD;
        }
        if (kind instanceof ValueKind.Reference r) {
            if (v instanceof Val.Ref ref) {
                if (graph.shapes.library.isKind(ref.element().kind(), r.kind())) {
                    return v;
                }
                problem(
                        Code.NOT_A_BLOCK,
                        f,
                        e.span(),
                        "`" + s.decl.name + "` refers to " + English.a(r.kind()) + "; `" + ref.element().name
                                + "` is a "
                                + (ref.element().kind().isEmpty()
                                        ? "word"
                                        : ref.element().kind()) + ".");
                return BAD;
            }
            if (v instanceof Val.Open || v instanceof Val.Picked) {
                return v;
            }
            problem(
                    Code.NOT_A_BLOCK,
                    f,
                    e.span(),
                    "`" + s.decl.name + "` refers to " + English.a(r.kind()) + " by name; found " + what(v) + ".");
            return BAD;
        }
        if (kind instanceof ValueKind.Text && !(v instanceof Val.Text) && !(v instanceof Val.Open)) {
            problem(
                    Code.WRONG_FORM,
                    f,
                    e.span(),
                    "`" + s.decl.name + "` is a text; write it in quotes: `" + s.decl.name + " = \"…\"`.");
            return BAD;
        }
        if (kind instanceof ValueKind.Day && !(v instanceof Val.Day) && !(v instanceof Val.Open)) {
            problem(Code.WRONG_FORM, f, e.span(), "`" + s.decl.name + "` is a date, for example `2027-06-30`.");
            return BAD;
        }
        return v;
    }

    private Val quantity(Slot s, QuantityKind q, Val v0, Expr e, Frame f, boolean given) {
        Val v = v0 instanceof Val.Open ? numeric(v0, f, e) : v0;
        Dimension want = q.shown().dimension();
        if (!(v instanceof Val.Num n)) {
            if (!(v instanceof Val.Bad)) {
                problem(
                        Code.WRONG_FORM,
                        f,
                        e.span(),
                        "`" + s.decl.name + "` is a number, " + English.a(q.meaning()) + "; found " + what(v) + ".");
            }
            return bad(want);
        }
        Unit result = given ? null : s.decl.resultUnit;
        if (result != null) {
            if (n.dimension() != null && !n.dimension().isNone()) {
                problem(
                        Code.DIMENSION_MISMATCH,
                        f,
                        e.span(),
                        "With `in " + result.text() + "` the right side must be a pure number; it is "
                                + English.a(units.nameOf(n.dimension())) + ".");
                return bad(want);
            }
            n = scaled(n, result);
        } else if (n.dimension() != null && n.dimension() != want) {
            if (given && n.dimension().isNone()) {
                missingUnit(s, q, e, f);
            } else if (given) {
                problem(
                        Code.WRONG_UNIT,
                        f,
                        e.span(),
                        "`" + s.decl.name + "` is " + English.a(q.meaning()) + "; found "
                                + English.a(units.nameOf(n.dimension())) + ". Write it in "
                                + q.shown().text() + " or another unit of that kind.");
            } else {
                problem(
                        Code.DIMENSION_MISMATCH,
                        f,
                        e.span(),
                        "`" + s.decl.symbolOrName() + "` is declared as " + q.name() + " (" + want
                                + "); its equation gives " + n.dimension() + ".");
            }
            return bad(want);
        } else if (given) {
            kindOfUnit(s, q, e, f);
            if (q.whole() && e instanceof Expr.Num literal && literal.value() != Math.rint(literal.value())) {
                problem(
                        Code.NOT_WHOLE,
                        f,
                        e.span(),
                        "`" + s.decl.name + "` is a whole number; found " + literal.text() + ". Write "
                                + (long) Math.floor(literal.value()) + " or " + (long) Math.ceil(literal.value())
                                + ".");
                return bad(want);
            }
        }
        if (given && s.decl.load && s.override == null) {
            int r = graph.tape.emit(Op.MUL, graph.load(), n.register(), 0, 0);
            n = new Val.Num(r, n.dimension(), Double.NaN);
        }
        if (n.dimension() == null) {
            n = new Val.Num(n.register(), want, n.constant());
        }
        if (!graph.checking) {
            if (q.whole() && (given || s.solvedBy != null)) {
                graph.wholes.add(new DriveGraph.Whole(s, n.register()));
            }
            Note.InRange range = s.decl.range;
            if (range != null && given) {
                Frame df = Frame.at(s.decl.file, false);
                Ctx dc = Ctx.of(s.owner);
                if (eval(range.low(), dc, df) instanceof Val.Num lo
                        && eval(range.high(), dc, df) instanceof Val.Num hi) {
                    graph.ranges.add(new DriveGraph.InRange(s, n.register(), lo.register(), hi.register()));
                }
            }
        }
        return n;
    }

    /** Where one spoken name stands for several scales, all of them are offered. */
    private void missingUnit(Slot s, QuantityKind q, Expr e, Frame f) {
        List<String> scales = new ArrayList<>();
        if (s.owner.shape.names.get(s.decl.name) instanceof Shape.Spoken sp) {
            for (Shape.Member m : sp.members()) {
                if (m.decl().kind instanceof ValueKind.Quantity k) {
                    scales.add(textOf(e, f) + " " + k.kind().shown().text());
                }
            }
        }
        String say = q.shown().text();
        Span end = new Span(e.span().end(), e.span().end());
        if (scales.size() > 1) {
            problem(
                    Code.MISSING_UNIT,
                    f,
                    e.span(),
                    "`" + s.decl.name + "` says nothing without its scale or system; write " + list(scales) + ".");
        } else {
            problems.add(Diagnostic.of(
                            Code.MISSING_UNIT,
                            f.file,
                            e.span(),
                            "`" + s.decl.name + "` is " + English.a(q.meaning()) + " and needs its unit, for example `"
                                    + textOf(e, f) + " " + say + "`.")
                    .withFix("add the unit " + say, end, " " + say));
        }
    }

    /** A unit of the right dimension may still belong to another kind: a torque is no energy. */
    private void kindOfUnit(Slot s, QuantityKind q, Expr e, Frame f) {
        if (e instanceof Expr.Num n && n.unit() != null && units.parse(n.unit().text()) instanceof Units.Parse.Ok ok) {
            String k = ok.unit().kind();
            QuantityKind other = k == null ? null : graph.shapes.library.quantities.get(k);
            if (k != null
                    && !k.equals(q.name())
                    && (q.unlike().contains(k)
                            || (other != null && other.unlike().contains(q.name())))) {
                problem(
                        Code.WRONG_KIND,
                        f,
                        n.unit().span(),
                        "`" + n.unit().text() + "` is a unit of " + (other == null ? k : other.meaning()) + "; `"
                                + s.decl.name + "` is " + English.a(q.meaning()) + ". Write it in "
                                + q.shown().text() + ".");
            }
        } else if (e instanceof Expr.Range r) {
            kindOfUnit(s, q, r.low(), f);
            kindOfUnit(s, q, r.high(), f);
        } else if (e instanceof Expr.Toleranced t) {
            kindOfUnit(s, q, t.nominal(), f);
        } else if (e instanceof Expr.Neg n) {
            kindOfUnit(s, q, n.operand(), f);
        }
    }

    private String textOf(Expr e, Frame f) {
        return graph.textOf(f.file, e.span());
    }

    private Val.Num scaled(Val.Num n, Unit u) {
        if (u.isOffset()) {
            int r = op(Op.ADD, times(n.register(), u), constant(u.toBase(0)));
            return new Val.Num(r, u.dimension(), n.isConstant() ? u.toBase(n.constant()) : Double.NaN);
        }
        return new Val.Num(times(n.register(), u), u.dimension(), n.isConstant() ? u.toBase(n.constant()) : Double.NaN);
    }

    private int times(int register, Unit u) {
        int r = u.numerator() == 1 ? register : op(Op.MUL, register, constant(u.numerator()));
        return u.denominator() == 1 ? r : op(Op.DIV, r, constant(u.denominator()));
    }

    /** The bare number in a unit. */
    Val.Num bare(Val.Num n, Unit u) {
        int r = n.register();
        if (u.isOffset()) {
            r = op(Op.SUB, r, constant(u.toBase(0)));
        }
        r = u.denominator() == 1 ? r : op(Op.MUL, r, constant(u.denominator()));
        r = u.numerator() == 1 ? r : op(Op.DIV, r, constant(u.numerator()));
        return new Val.Num(r, Dimension.NONE, n.isConstant() ? u.fromBase(n.constant()) : Double.NaN);
    }

    static String what(Val v) {
        if (v instanceof Val.Num) {
            return "a number";
        } else if (v instanceof Val.Word w) {
            return "the word `" + w.text() + "`";
        } else if (v instanceof Val.Ref r) {
            return "the "
                    + (r.element().kind().isEmpty() ? "element" : r.element().kind()) + " `" + r.element().name + "`";
        } else if (v instanceof Val.Text) {
            return "a text";
        } else if (v instanceof Val.Day) {
            return "a date";
        } else if (v instanceof Val.Group g) {
            return "the collection `" + g.collection() + "`";
        } else if (v instanceof Val.Truth || v instanceof Val.Fixed) {
            return "a condition";
        } else if (v instanceof Val.Row || v instanceof Val.RowOf) {
            return "a row of a table";
        }
        return "something else";
    }

    // ---- open and bad values

    Val open(Slot s) {
        ValueKind k = s.decl.kind;
        if (k instanceof ValueKind.Quantity q) {
            return new Val.Num(openRegister(s), q.kind().shown().dimension(), Double.NaN);
        }
        return new Val.Open(s);
    }

    int openRegister(@Nullable Object why) {
        if (graph.checking) {
            return 0;
        }
        return graph.tape.emit(Op.OPEN, graph.tape.addReason(why == null ? "" : why), 0, 0, 0);
    }

    Val.Num bad(@Nullable Dimension d) {
        return new Val.Num(openRegister(BAD), d, Double.NaN);
    }

    /** As a number: an open word or a bad value becomes an open register of unknown dimension. */
    Val numeric(Val v, Frame f, Expr e) {
        if (v instanceof Val.Num) {
            return v;
        }
        if (v instanceof Val.Open o) {
            return new Val.Num(openRegister(o.slot()), null, Double.NaN);
        }
        if (v instanceof Val.Bad) {
            return bad(null);
        }
        problem(Code.WRONG_FORM, f, e.span(), "A number is expected here; found " + what(v) + ".");
        return bad(null);
    }

    private Val.Num number(Expr e, Ctx ctx, Frame f) {
        Val v = numeric(eval(e, ctx, f), f, e);
        return v instanceof Val.Num n ? n : bad(null);
    }

    // ---- emitting

    int op(Op o, int a) {
        return graph.checking ? 0 : graph.tape.emit(o, a, 0, 0, 0);
    }

    int op(Op o, int a, int b) {
        return graph.checking ? 0 : graph.tape.emit(o, a, b, 0, 0);
    }

    int op(Op o, int a, int b, int c) {
        return graph.checking ? 0 : graph.tape.emit(o, a, b, c, 0);
    }

    /** Constants are kept apart by value; they stand at the start of regions without harm, since moving is by use. */
    int constant(double v) {
        if (graph.checking) {
            return 0;
        }
        Integer known = graph.regions == 0 ? constants.get(v) : null;
        if (known != null) {
            return known;
        }
        int r = graph.tape.emit(Op.CONST, 0, 0, 0, v);
        if (graph.regions == 0) {
            constants.put(v, r);
        }
        return r;
    }

    Val.Num constant(double v, Dimension d) {
        return new Val.Num(constant(v), d, v);
    }

    void problem(Code code, Frame f, Span span, String message) {
        if (f.drive || !graph.isDriveText(f.file)) {
            problems.add(code, f.file, span, message);
        } else {
            problems.add(code, f.file, span, message);
        }
    }

    // ---- expressions

    Val eval(Expr e, Ctx ctx, Frame f) {
        if (++depth > DEEPEST * 3) {
            depth--;
            problem(Code.TOO_DEEP, f, e.span(), "This expression is nested too deep.");
            return BAD;
        }
        try {
            Val v = eval0(e, ctx, f);
            Slot s = f.slot;
            if (s != null && s.trace != null) {
                s.trace.put(e, v);
            }
            return v;
        } finally {
            depth--;
        }
    }

    private Val eval0(Expr e, Ctx ctx, Frame f) {
        if (e instanceof Expr.Num n) {
            return literal(n, f);
        } else if (e instanceof Expr.Path p) {
            return path(p, ctx, f);
        } else if (e instanceof Expr.Binary b) {
            return b.op() == Expr.Op.AND || b.op() == Expr.Op.OR ? logic(b, ctx, f) : arithmetic(b, ctx, f);
        } else if (e instanceof Expr.Neg n) {
            Val v = numeric(eval(n.operand(), ctx, f), f, n.operand());
            return v instanceof Val.Num x ? new Val.Num(op(Op.NEG, x.register()), x.dimension(), -x.constant()) : v;
        } else if (e instanceof Expr.Not n) {
            Val v = eval(n.operand(), ctx, f);
            if (v instanceof Val.Fixed x) {
                return new Val.Fixed(!x.is());
            }
            return new Val.Truth(op(Op.NOT, truth(v, n.operand(), f)));
        } else if (e instanceof Expr.Compare c) {
            return compare(c, ctx, f);
        } else if (e instanceof Expr.Choose c) {
            return choose(c, ctx, f);
        } else if (e instanceof Expr.Call c) {
            return builtins.call(c, ctx, f);
        } else if (e instanceof Expr.In i) {
            return inUnit(i, ctx, f);
        } else if (e instanceof Expr.Given g) {
            return given(g, ctx, f);
        } else if (e instanceof Expr.Column c) {
            return tables.column(eval(c.row(), ctx, f), c.name(), f);
        } else if (e instanceof Expr.Root r) {
            return root(r, ctx, f);
        } else if (e instanceof Expr.Settle s) {
            return settle(s, ctx, f);
        } else if (e instanceof Expr.Str s) {
            return new Val.Text(s.value());
        } else if (e instanceof Expr.Day d) {
            return new Val.Day(d.text());
        } else if (e instanceof Expr.Range r) {
            return range(r, ctx, f);
        } else if (e instanceof Expr.Toleranced t) {
            Val nominal = eval(t.nominal(), ctx, f);
            eval(t.low(), ctx, f);
            eval(t.high(), ctx, f);
            return nominal;
        } else if (e instanceof Expr.Dated d) {
            return eval(d.value(), ctx, f);
        } else if (e instanceof Expr.BlockRef b) {
            return path(new Expr.Path(List.of(b.name()), b.span()), ctx, f);
        } else if (e instanceof Expr.Each x) {
            problem(Code.WRONG_PLACE, f, x.span(), "`each` stands only inside sum, least, greatest or count.");
            return BAD;
        }
        return BAD; // a hole: the parser has said what is missing
    }

    private Val range(Expr.Range r, Ctx ctx, Frame f) {
        Val lo = eval(r.low(), ctx, f);
        Val hi = eval(r.high(), ctx, f);
        Slot s = f.slot;
        String worst = s == null ? null : s.decl.worst;
        if (worst == null && s != null) {
            problem(
                    Code.WRONG_FORM,
                    f,
                    r.span(),
                    "`" + s.decl.name + "` is rated at one value and takes no range; write the value that counts.");
            return BAD;
        }
        return "high".equals(worst) ? hi : lo;
    }

    private Val literal(Expr.Num n, Frame f) {
        double v = n.value();
        Dimension d = Dimension.NONE;
        Name u = n.unit();
        Unit unit = null;
        if (u != null) {
            unit = unit(u, f);
            if (unit == null) {
                return BAD;
            }
            v = unit.toBase(v);
            d = unit.dimension();
        }
        if (graph.checking) {
            return new Val.Num(0, d, f.drive ? Double.NaN : v);
        }
        if (f.drive) {
            return new Val.Num(graph.addInput(v, n, unit, f.slot, f.file), d, Double.NaN);
        }
        return new Val.Num(constant(v), d, v);
    }

    @Nullable
    Unit unit(Name u, Frame f) {
        Units.Parse p = units.parse(u.text());
        if (p instanceof Units.Parse.Ok ok) {
            return ok.unit();
        }
        if (p instanceof Units.Parse.Bad bad) {
            String nearest = bad.nearest();
            Diagnostic d = Diagnostic.of(Code.UNKNOWN_UNIT, f.file, u.span(), bad.message());
            problems.add(nearest == null ? d : d.withFix("write " + nearest, u.span(), nearest));
        }
        return null;
    }

    private Val path(Expr.Path p, Ctx ctx, Frame f) {
        if (!f.taking.isEmpty()) {
            for (Note.Taken t : f.taking) {
                Name alias = t.alias();
                String says = alias != null ? alias.text() : t.path().text();
                if (says.equals(p.text())) {
                    Val v = path(t.path(), ctx, f.bare());
                    Unit u = unit(t.unit(), f);
                    if (u == null) {
                        return BAD;
                    }
                    Val m = numeric(v, f, p);
                    if (m instanceof Val.Num n) {
                        if (n.dimension() != null && n.dimension() != u.dimension()) {
                            problem(
                                    Code.DIMENSION_MISMATCH,
                                    f,
                                    t.span(),
                                    "`" + t.path().text() + "` is " + English.a(units.nameOf(n.dimension()))
                                            + " and cannot be taken in " + u.text() + ".");
                            return bad(Dimension.NONE);
                        }
                        return bare(n, u);
                    }
                    return m;
                }
            }
        }
        Element[] holder = new Element[1];
        int[] failed = new int[1];
        Object x = graph.scopes.path(p, ctx, holder, failed);
        if (x == null) {
            return special(p, ctx, f, failed[0]);
        }
        return found(x, holder[0], p, f);
    }

    Val found(Object x, @Nullable Element holder, Expr.Path p, Frame f) {
        if (x instanceof Slot s) {
            if (f.slot != null && f.slot.trace != null) {
                f.slot.reached.add(new Slot.Reach(p, s));
            }
            graph.use(s);
            return value(s);
        } else if (x instanceof Element e) {
            return new Val.Ref(e);
        } else if (x instanceof Val v) {
            return v;
        } else if (x instanceof Shape.Spoken sp && holder != null) {
            Slot s = spoken(sp, holder);
            if (s == null) {
                problem(
                        Code.AMBIGUOUS_NAME,
                        f,
                        p.span(),
                        "`" + p.text() + "` stands for several scales and none or several are given; write "
                                + list(symbols(sp)) + ".");
                return BAD;
            }
            return found(s, holder, p, f);
        } else if (x instanceof Entry.Role r && holder != null) {
            return role(r, holder);
        } else if (x instanceof Entry.Collect c && holder != null) {
            return collect(c, holder);
        } else if (x instanceof Scopes.RowColumn rc) {
            return tables.column(rc.row(), rc.column(), f);
        } else if (x instanceof TableDef t) {
            problem(
                    Code.WRONG_PLACE,
                    f,
                    p.span(),
                    "`" + t.name() + "` is a table; look up a row with `" + t.name() + "(…)`.");
            return BAD;
        }
        return BAD;
    }

    static List<String> symbols(Shape.Spoken sp) {
        List<String> out = new ArrayList<>();
        for (Shape.Member m : sp.members()) {
            out.add(m.decl().symbolOrName());
        }
        return out;
    }

    /** The one of several scales that is given. */
    @Nullable
    Slot spoken(Shape.Spoken sp, Element holder) {
        Slot one = null;
        for (Shape.Member m : sp.members()) {
            Slot s = holder.slot(m);
            if (s.isGiven()) {
                if (one != null) {
                    return null;
                }
                one = s;
            }
        }
        return one;
    }

    private Val special(Expr.Path p, Ctx ctx, Frame f, int failedAt) {
        if (p.names().size() == 1) {
            String n = p.text();
            if (n.equals("pi")) {
                return new Val.Num(constant(Math.PI), Dimension.NONE, Math.PI);
            }
            if (n.equals("edition")) {
                Element s = ctx.space;
                while (s != null && !s.isSpace()) {
                    s = s.parent;
                }
                return new Val.Text(s == null || s.edition == null ? "" : s.edition);
            }
            ChoiceKind c = wordKind(n);
            if (c != null) {
                return new Val.Word(n, c);
            }
        }
        if (p.names().stream().anyMatch(Name::isHole)) {
            return BAD;
        }
        Name at = p.names().get(failedAt);
        if (failedAt == 0) {
            Diagnostic d = Diagnostic.of(
                    Code.UNKNOWN_NAME,
                    f.file,
                    at.span(),
                    "Nothing here is called `" + at + "`." + Suggest.sentence(at.text(), graph.scopes.visible(ctx)));
            String near = Suggest.nearest(at.text(), graph.scopes.visible(ctx));
            problems.add(near == null ? d : d.withFix("write " + near, at.span(), near));
        } else {
            String before = p.names().get(failedAt - 1).text();
            problem(
                    Code.UNKNOWN_NAME,
                    f,
                    at.span(),
                    "`" + before + "` has nothing called `" + at + "`."
                            + Suggest.sentence(at.text(), graph.namesBehind(p, failedAt, ctx)));
        }
        return BAD;
    }

    private @Nullable ChoiceKind wordKind(String n) {
        for (ChoiceKind c : graph.shapes.library.choices.values()) {
            if (c.has(n)) {
                return c;
            }
        }
        return null;
    }

    Val role(Entry.Role r, Element holder) {
        Object known = holder.named.get("role " + r.name().text());
        if (known instanceof Val v) {
            return v;
        }
        Val v = eval(
                r.value(), Ctx.of(holder), Frame.at(holder.shape.homes.getOrDefault(r, graph.fileOf(holder)), false));
        holder.named.put("role " + r.name().text(), v);
        return v;
    }

    Val collect(Entry.Collect c, Element holder) {
        Object known = holder.named.get("collect " + c.name().text());
        if (known instanceof Val v) {
            return v;
        }
        List<Element> out = new ArrayList<>();
        for (Element e : graph.allOfKind(c.kind().text())) {
            // the condition speaks of the element by its own names, of the holder as self
            Map<String, Val> locals = new HashMap<>();
            locals.put("self", new Val.Ref(holder));
            Ctx ctx = new Ctx(e, List.of(), locals);
            if (!e.collection.isEmpty() && e.fixed && e.parent != null) {
                ctx = new Ctx(e.parent, List.of(new Axis(e.collection, e)), locals);
            }
            Val v = eval(c.where(), ctx, Frame.at(holder.shape.homes.getOrDefault(c, graph.fileOf(holder)), false));
            if (v instanceof Val.Fixed x && x.is()) {
                out.add(e);
            }
        }
        Val.Group g = new Val.Group(out, c.name().text(), "collect");
        holder.named.put("collect " + c.name().text(), g);
        return g;
    }

    private Val given(Expr.Given g, Ctx ctx, Frame f) {
        Element[] holder = new Element[1];
        Object x = graph.scopes.path(g.path(), ctx, holder, new int[1]);
        if (x instanceof Slot s) {
            return new Val.Fixed(s.isGiven() || s.override != null);
        }
        if (x instanceof Shape.Spoken sp) {
            return new Val.Fixed(spoken(sp, holder[0]) != null);
        }
        if (x instanceof Val.Open) {
            return new Val.Fixed(false);
        }
        if (x == null) {
            problem(
                    Code.UNKNOWN_NAME,
                    f,
                    g.span(),
                    "Nothing here is called `" + g.path().text() + "`.");
        }
        return new Val.Fixed(x instanceof Element);
    }

    private Val inUnit(Expr.In i, Ctx ctx, Frame f) {
        Val.Num n = number(i.operand(), ctx, f);
        Unit u = unit(i.unit(), f);
        if (u == null) {
            return BAD;
        }
        if (n.dimension() != null && n.dimension() != u.dimension()) {
            problem(
                    Code.DIMENSION_MISMATCH,
                    f,
                    i.span(),
                    "This is " + English.a(units.nameOf(n.dimension())) + " and cannot be taken in " + u.text() + ".");
            return bad(Dimension.NONE);
        }
        return bare(n, u);
    }

    // ---- arithmetic

    private Val arithmetic(Expr.Binary b, Ctx ctx, Frame f) {
        Val.Num l = number(b.left(), ctx, f);
        Val.Num r = number(b.right(), ctx, f);
        return arithmetic(b.op(), l, r, b, f);
    }

    Val.Num arithmetic(Expr.Op o, Val.Num l, Val.Num r, Expr at, Frame f) {
        boolean fold = l.isConstant() && r.isConstant();
        switch (o) {
            case ADD:
            case SUB: {
                Dimension d = same(l.dimension(), r.dimension(), at, f, o == Expr.Op.ADD ? "added" : "subtracted");
                double v = !fold
                        ? Double.NaN
                        : o == Expr.Op.ADD ? l.constant() + r.constant() : l.constant() - r.constant();
                return result(o == Expr.Op.ADD ? Op.ADD : Op.SUB, l, r, d, v);
            }
            case MUL: {
                Dimension d = l.dimension() == null || r.dimension() == null
                        ? null
                        : l.dimension().times(r.dimension());
                return result(Op.MUL, l, r, d, fold ? l.constant() * r.constant() : Double.NaN);
            }
            case DIV: {
                Dimension d = l.dimension() == null || r.dimension() == null
                        ? null
                        : l.dimension().over(r.dimension());
                return result(Op.DIV, l, r, d, fold && r.constant() != 0 ? l.constant() / r.constant() : Double.NaN);
            }
            default:
                return power(l, r, at, f);
        }
    }

    private Val.Num result(Op o, Val.Num l, Val.Num r, @Nullable Dimension d, double folded) {
        if (!Double.isNaN(folded) && !Double.isInfinite(folded)) {
            return new Val.Num(constant(folded), d, folded);
        }
        return new Val.Num(op(o, l.register(), r.register()), d, Double.NaN);
    }

    @Nullable
    Dimension same(@Nullable Dimension a, @Nullable Dimension b, Expr at, Frame f, String done) {
        if (a == null) {
            return b;
        }
        if (b != null && a != b) {
            problem(
                    Code.DIMENSION_MISMATCH,
                    f,
                    at.span(),
                    English.capital(English.a(units.nameOf(a))) + " and " + English.a(units.nameOf(b)) + " can't be "
                            + done + ".");
            return null;
        }
        return a;
    }

    private Val.Num power(Val.Num l, Val.Num r, Expr at, Frame f) {
        if (r.dimension() != null && !r.dimension().isNone()) {
            problem(
                    Code.DIMENSION_MISMATCH,
                    f,
                    at.span(),
                    "An exponent is a pure number; this one is " + English.a(units.nameOf(r.dimension())) + ".");
            return bad(null);
        }
        Dimension d = l.dimension();
        if (d != null && !d.isNone()) {
            double x = r.constant();
            int[] fraction = fraction(x);
            if (fraction == null) {
                problem(
                        Code.DIMENSION_MISMATCH,
                        f,
                        at.span(),
                        English.capital(English.a(units.nameOf(d))) + " can only be raised to a fixed simple power.");
                return bad(null);
            }
            d = d.power(fraction[0], fraction[1]);
        }
        return new Val.Num(
                op(Op.POW, l.register(), r.register()),
                d,
                l.isConstant() && r.isConstant() ? Math.pow(l.constant(), r.constant()) : Double.NaN);
    }

    static int @Nullable [] fraction(double x) {
        for (int q = 1; q <= 12; q++) {
            double p = x * q;
            if (Math.abs(p - Math.rint(p)) < 1e-9 && Math.abs(p) < 100) {
                return new int[] {(int) Math.rint(p), q};
            }
        }
        return null;
    }

    // ---- conditions

    private Val logic(Expr.Binary b, Ctx ctx, Frame f) {
        boolean and = b.op() == Expr.Op.AND;
        Val l = eval(b.left(), ctx, f);
        if (!graph.checking && l instanceof Val.Fixed x && x.is() != and) {
            return l;
        }
        Val r = eval(b.right(), ctx, f);
        if (l instanceof Val.Fixed) {
            return r instanceof Val.Fixed || r instanceof Val.Truth ? r : new Val.Truth(truth(r, b.right(), f));
        }
        if (r instanceof Val.Fixed x) {
            return x.is() == and ? (l instanceof Val.Truth ? l : new Val.Truth(truth(l, b.left(), f))) : r;
        }
        return new Val.Truth(op(and ? Op.AND : Op.OR, truth(l, b.left(), f), truth(r, b.right(), f)));
    }

    int truth(Val v, Expr e, Frame f) {
        if (v instanceof Val.Truth t) {
            return t.register();
        }
        if (v instanceof Val.Fixed x) {
            return constant(x.is() ? 1 : 0);
        }
        if (v instanceof Val.Open o) {
            return openRegister(o.slot());
        }
        if (!(v instanceof Val.Bad)) {
            problem(Code.WRONG_FORM, f, e.span(), "A condition is expected here; found " + what(v) + ".");
        }
        return openRegister(BAD);
    }

    private Val compare(Expr.Compare c, Ctx ctx, Frame f) {
        Val all = null;
        Val left = operand(c, 0, ctx, f, null);
        for (int i = 0; i < c.ops().size(); i++) {
            Val right = operand(c, i + 1, ctx, f, left);
            if (i == 0 && left instanceof Val.Word w && right instanceof Val.Ref) {
                left = operandAsElement(c.operands().get(0), w, left);
            }
            Val one = compare(c.ops().get(i), left, right, c, f);
            all = all == null ? one : both(all, one);
            left = right;
        }
        return all == null ? BAD : all;
    }

    private static Val operandAsElement(Expr e, Val.Word w, Val fallback) {
        return fallback;
    }

    /** A bare word beside a choice is a word of that choice, and beside an element at hand its name. */
    private Val operand(Expr.Compare c, int i, Ctx ctx, Frame f, @Nullable Val beside) {
        Expr e = c.operands().get(i);
        if (e instanceof Expr.Path p && p.names().size() == 1) {
            if (beside instanceof Val.Word w && w.kind() != null && w.kind().has(p.text())) {
                return new Val.Word(p.text(), w.kind());
            }
            if (beside instanceof Val.Picked w
                    && (w.words().contains(p.text())
                            || (w.kind() != null && w.kind().has(p.text())))) {
                return new Val.Word(p.text(), w.kind());
            }
            if (beside instanceof Val.Open o
                    && o.slot() != null
                    && o.slot().decl.kind instanceof ValueKind.Choice k
                    && k.kind().has(p.text())) {
                return new Val.Word(p.text(), k.kind());
            }
            if (beside instanceof Val.Ref r && r.element().name.equals(p.text()) && r.element().parent != null) {
                return beside;
            }
        }
        return eval(e, ctx, f);
    }

    private Val both(Val a, Val b) {
        if (a instanceof Val.Fixed x) {
            return x.is() ? b : a;
        }
        if (b instanceof Val.Fixed x) {
            return x.is() ? a : b;
        }
        if (a instanceof Val.Truth x && b instanceof Val.Truth y) {
            return new Val.Truth(op(Op.AND, x.register(), y.register()));
        }
        return BAD;
    }

    private Val compare(Expr.Cmp o, Val l, Val r, Expr at, Frame f) {
        if (l instanceof Val.Bad || r instanceof Val.Bad) {
            return BAD;
        }
        boolean eq = o == Expr.Cmp.EQ || o == Expr.Cmp.NE;
        boolean yes = o == Expr.Cmp.EQ;
        if (l instanceof Val.Ref x && r instanceof Val.Ref y && eq) {
            return new Val.Fixed((x.element() == y.element()) == yes);
        }
        if ((l instanceof Val.Ref || r instanceof Val.Ref) && eq) {
            if (l instanceof Val.Open || r instanceof Val.Open) {
                return new Val.Fixed(!yes);
            }
            if (l instanceof Val.Ref x && r instanceof Val.Word w) {
                return new Val.Fixed(x.element().name.equals(w.text()) == yes);
            }
            if (r instanceof Val.Ref x && l instanceof Val.Word w) {
                return new Val.Fixed(x.element().name.equals(w.text()) == yes);
            }
        }
        if (l instanceof Val.Open x && r instanceof Val.Open y && eq && isReference(x) && isReference(y)) {
            // two members whose shafts are not given: the same open shaft is the same shaft
            return new Val.Fixed((x.slot() == y.slot()) == yes);
        }
        if (l instanceof Val.Word x && r instanceof Val.Word y && eq) {
            return new Val.Fixed(x.text().equals(y.text()) == yes);
        }
        if (l instanceof Val.Picked p && r instanceof Val.Word w && eq) {
            return picked(p, w.text(), yes);
        }
        if (r instanceof Val.Picked p && l instanceof Val.Word w && eq) {
            return picked(p, w.text(), yes);
        }
        if (l instanceof Val.Picked x && r instanceof Val.Picked y && eq) {
            int any = constant(0);
            for (String w : x.words()) {
                if (y.words().contains(w)) {
                    any = op(
                            Op.OR,
                            any,
                            op(
                                    Op.AND,
                                    op(Op.EQ, x.register(), constant(x.words().indexOf(w))),
                                    op(Op.EQ, y.register(), constant(y.words().indexOf(w)))));
                }
            }
            return new Val.Truth(yes ? any : op(Op.NOT, any));
        }
        if (l instanceof Val.Text x && r instanceof Val.Text y && eq) {
            return new Val.Fixed(x.value().equals(y.value()) == yes);
        }
        if (l instanceof Val.Text x && r instanceof Val.Num n && eq && n.isConstant()) {
            return new Val.Fixed(x.value().equals(plain(n.constant())) == yes);
        }
        if (l instanceof Val.Open x && !(r instanceof Val.Num)) {
            return new Val.Truth(openRegister(x.slot()));
        }
        if (r instanceof Val.Open x && !(l instanceof Val.Num)) {
            return new Val.Truth(openRegister(x.slot()));
        }
        Val ln = l instanceof Val.Open ? numeric(l, f, at) : l;
        Val rn = r instanceof Val.Open ? numeric(r, f, at) : r;
        if (ln instanceof Val.Num x && rn instanceof Val.Num y) {
            same(x.dimension(), y.dimension(), at, f, "compared");
            if (x.isConstant() && y.isConstant() && !graph.checking) {
                return new Val.Fixed(holds(o, x.constant(), y.constant()));
            }
            return new Val.Truth(op(Op.valueOf(name(o)), x.register(), y.register()));
        }
        problem(Code.WRONG_FORM, f, at.span(), "This compares " + what(l) + " with " + what(r) + ".");
        return BAD;
    }

    private static boolean isReference(Val.Open o) {
        return o.slot() != null && o.slot().decl.kind instanceof ValueKind.Reference;
    }

    private static String plain(double v) {
        return v == Math.rint(v) ? Long.toString((long) v) : Double.toString(v);
    }

    private Val picked(Val.Picked p, String word, boolean yes) {
        int index = p.words().indexOf(word);
        int r = op(yes ? Op.EQ : Op.NE, p.register(), constant(index));
        return new Val.Truth(r);
    }

    private static String name(Expr.Cmp o) {
        return o.name();
    }

    static boolean holds(Expr.Cmp o, double x, double y) {
        switch (o) {
            case EQ:
                return x == y;
            case NE:
                return x != y;
            case LE:
                return x <= y;
            case GE:
                return x >= y;
            case LT:
                return x < y;
            default:
                return x > y;
        }
    }

    // ---- choices

    private Val choose(Expr.Choose c, Ctx ctx, Frame f) {
        Expr subject = c.subject();
        if (graph.checking) {
            return graph.checker().choose(this, c, ctx, f);
        }
        if (subject == null) {
            return pick(conditions(c, ctx, f), c, ctx, f);
        }
        Val s = eval(subject, ctx, f);
        if (s instanceof Val.Bad) {
            return BAD;
        }
        if (s instanceof Val.Open o) {
            return o;
        }
        List<Arm> arms = new ArrayList<>();
        Expr.Arm otherwise = null;
        for (Expr.Arm a : c.arms()) {
            Expr when = a.when();
            if (when == null) {
                otherwise = a;
                continue;
            }
            Val is = matches(s, when, ctx, f);
            if (is instanceof Val.Fixed x && !x.is()) {
                continue;
            }
            arms.add(new Arm(is, a));
        }
        if (otherwise != null) {
            arms.add(new Arm(new Val.Fixed(true), otherwise));
        }
        return pick(arms, c, ctx, f);
    }

    record Arm(Val condition, Expr.Arm arm) {}

    private List<Arm> conditions(Expr.Choose c, Ctx ctx, Frame f) {
        List<Arm> out = new ArrayList<>();
        for (Expr.Arm a : c.arms()) {
            Expr when = a.when();
            Val v = when == null ? new Val.Fixed(true) : eval(when, ctx, f);
            if (v instanceof Val.Fixed x && !x.is()) {
                continue;
            }
            out.add(new Arm(v, a));
            if (v instanceof Val.Fixed) {
                break;
            }
        }
        return out;
    }

    Val matches(Val subject, Expr when, Ctx ctx, Frame f) {
        if (subject instanceof Val.Text t && when instanceof Expr.Num n) {
            return new Val.Fixed(t.value().equals(n.text()));
        }
        if (when instanceof Expr.Path p && p.names().size() == 1) {
            String w = p.text();
            if (subject instanceof Val.Word x) {
                return new Val.Fixed(x.text().equals(w));
            }
            if (subject instanceof Val.Picked x) {
                return picked(x, w, true);
            }
            if (subject instanceof Val.Ref r) {
                return new Val.Fixed(r.element().name.equals(w));
            }
        }
        Val v = eval(when, ctx, f);
        return compare(Expr.Cmp.EQ, subject, v, when, f);
    }

    private Val pick(List<Arm> arms, Expr.Choose c, Ctx ctx, Frame f) {
        if (arms.isEmpty()) {
            return f.slot != null ? open(f.slot) : new Val.Open(null);
        }
        List<Val> values = new ArrayList<>();
        for (Arm a : arms) {
            values.add(words(a.arm().value(), ctx, f));
            if (a.condition() instanceof Val.Fixed) {
                break;
            }
        }
        int last = values.size() - 1;
        Val result = arms.get(last).condition() instanceof Val.Fixed ? values.get(last) : null;
        int from = last;
        if (result == null) {
            Slot s = f.slot;
            result = new Val.Num(openRegister(s), null, Double.NaN);
            from = last + 1;
            if (!(values.get(last) instanceof Val.Num)) {
                result = values.get(last);
                from = last;
            }
        }
        if (from > 0 && values.stream().anyMatch(v -> v instanceof Val.Word || v instanceof Val.Ref)) {
            return pickWord(arms, values, from, f);
        }
        for (int i = from - 1; i >= 0; i--) {
            int cond = truth(arms.get(i).condition(), c, f);
            result = select(cond, values.get(i), result, arms.get(i).arm().value(), f);
        }
        return result;
    }

    private Val words(Expr e, Ctx ctx, Frame f) {
        Slot s = f.slot;
        return s == null ? eval(e, ctx, f) : words(s, e, ctx, f);
    }

    private Val pickWord(List<Arm> arms, List<Val> values, int last, Frame f) {
        List<String> words = new ArrayList<>();
        ChoiceKind kind = null;
        int result = -1;
        for (int i = last; i >= 0; i--) {
            Val v = values.get(i);
            int index;
            if (v instanceof Val.Open o) {
                index = openRegister(o.slot());
            } else if (v instanceof Val.Bad) {
                index = openRegister(BAD);
            } else {
                String w = v instanceof Val.Word x ? x.text() : v instanceof Val.Ref r ? r.element().name : "";
                if (v instanceof Val.Word x && x.kind() != null) {
                    kind = x.kind();
                }
                if (!words.contains(w)) {
                    words.add(w);
                }
                index = constant(words.indexOf(w));
            }
            result = result < 0
                    ? index
                    : op(
                            Op.SELECT,
                            truth(arms.get(i).condition(), arms.get(i).arm().value(), f),
                            index,
                            result);
        }
        return new Val.Picked(result, List.copyOf(words), kind);
    }

    Val select(int cond, Val a, Val b, Expr at, Frame f) {
        if (a instanceof Val.Row || a instanceof Val.RowOf || b instanceof Val.Row || b instanceof Val.RowOf) {
            return new Val.RowOf(cond, a, b);
        }
        if ((a instanceof Val.Truth || a instanceof Val.Fixed) && (b instanceof Val.Truth || b instanceof Val.Fixed)) {
            return new Val.Truth(op(Op.SELECT, cond, truth(a, at, f), truth(b, at, f)));
        }
        Val x = numeric(a, f, at);
        Val y = numeric(b, f, at);
        if (x instanceof Val.Num m && y instanceof Val.Num n) {
            Dimension d = same(m.dimension(), n.dimension(), at, f, "alternatives of one value");
            return new Val.Num(op(Op.SELECT, cond, m.register(), n.register()), d, Double.NaN);
        }
        return BAD;
    }

    // ---- roots and iterations

    private Val root(Expr.Root r, Ctx ctx, Frame f) {
        Slot s = f.slot;
        Val.Num lo = number(r.low(), ctx, f);
        Val.Num hi = number(r.high(), ctx, f);
        Dimension d = same(lo.dimension(), hi.dimension(), r, f, "the ends of one bracket");
        if (s == null) {
            problem(Code.WRONG_PLACE, f, r.span(), "`root of` stands only as the equation of a declared name.");
            return BAD;
        }
        if (graph.checking) {
            Val.Num left = number(r.left(), ctx, f);
            Val.Num right = number(r.right(), ctx, f);
            same(left.dimension(), right.dimension(), r, f, "compared");
            return new Val.Num(0, d, Double.NaN);
        }
        int position = graph.tape.position();
        int x = graph.tape.emit(Op.ROOT, lo.register(), hi.register(), 0, 0);
        Val.Num unknown = new Val.Num(x, d, Double.NaN);
        List<Slot> saved = enter(s, unknown);
        Val.Num left = number(r.left(), ctx, f);
        Val.Num right = number(r.right(), ctx, f);
        same(left.dimension(), right.dimension(), r, f, "compared");
        int residual = op(Op.SUB, left.register(), right.register());
        leave(saved, position, x, residual);
        graph.unknowns.put(x, new DriveGraph.Unknown(s, r.otherwise()));
        return unknown;
    }

    private Val settle(Expr.Settle e, Ctx ctx, Frame f) {
        Slot s = f.slot;
        Val.Num start = number(e.start(), ctx, f);
        Val.Num tolerance = number(e.tolerance(), ctx, f);
        Val.Num most = number(e.most(), ctx, f);
        if (s == null) {
            problem(Code.WRONG_PLACE, f, e.span(), "`settle` stands only as the equation of a declared name.");
            return BAD;
        }
        same(start.dimension(), tolerance.dimension(), e, f, "start and tolerance");
        if (graph.checking) {
            Val.Num v = number(e.value(), ctx, f);
            same(v.dimension(), start.dimension(), e, f, "settled from that start");
            return new Val.Num(0, start.dimension(), Double.NaN);
        }
        int position = graph.tape.position();
        int x = graph.tape.emit(
                Op.SETTLE, start.register(), tolerance.register(), 0, most.isConstant() ? most.constant() : 60);
        Val.Num unknown = new Val.Num(x, start.dimension(), Double.NaN);
        List<Slot> saved = enter(s, unknown);
        Val.Num v = number(e.value(), ctx, f);
        same(v.dimension(), start.dimension(), e, f, "settled from that start");
        leave(saved, position, x, v.register());
        graph.unknowns.put(x, new DriveGraph.Unknown(s, e.otherwise()));
        return unknown;
    }

    /** Binds the unknown; slots that are being compiled may be compiled anew inside its region. */
    private List<Slot> enter(Slot s, Val.Num unknown) {
        List<Slot> saved = new ArrayList<>();
        for (Slot x : stack) {
            if (x.compiling) {
                saved.add(x);
                x.compiling = false;
            }
        }
        s.value = unknown;
        graph.owners.put(unknown.register(), s);
        graph.regions++;
        return saved;
    }

    private void leave(List<Slot> saved, int position, int unknown, int last) {
        graph.tape.residual(unknown, last);
        graph.tape.emit(Op.END, unknown, last, 0, 0);
        graph.tape.close(position, unknown);
        graph.regions--;
        for (Slot x : saved) {
            x.compiling = true;
        }
    }

    Tables tables() {
        return tables;
    }

    Val callFunction(FunctionDef fn, List<Val> args, Expr.Call at, Frame f) {
        return builtins.expand(fn, args, at, f);
    }
}
