package backcone.engine.graph;

import backcone.engine.diagnostics.Code;
import backcone.engine.model.English;
import backcone.engine.model.FunctionDef;
import backcone.engine.model.Suggest;
import backcone.engine.model.TableDef;
import backcone.engine.model.ValueKind;
import backcone.engine.syntax.Expr;
import backcone.engine.units.Dimension;
import java.util.ArrayList;
import java.util.HashMap;
import java.util.List;
import java.util.Map;
import java.util.Set;
import org.jspecify.annotations.Nullable;

/** Functions that Java supplies: elementary mathematics, running over collections, tables, and the train of shafts. */
final class Builtins {
    static final Dimension ANGLE = Dimension.base("angle");
    static final Set<String> NAMES = Set.of(
            "sin",
            "cos",
            "tan",
            "asin",
            "acos",
            "atan",
            "atan2",
            "sqrt",
            "exp",
            "ln",
            "log",
            "abs",
            "sign",
            "least",
            "greatest",
            "clamp",
            "floor",
            "ceil",
            "round",
            "common_divisor",
            "sum",
            "count",
            "nearest_in",
            "next_in",
            "listed_in",
            "upstream",
            "downstream",
            "case_at_hand");
    private final Compiler compiler;

    Builtins(Compiler compiler) {
        this.compiler = compiler;
    }

    Val call(Expr.Call c, Ctx ctx, Frame f) {
        String name = c.callee().text();
        if (c.callee().names().size() == 1 && NAMES.contains(name)) {
            return builtin(name, c, ctx, f);
        }
        Element[] holder = new Element[1];
        Object x = compiler.graph.scopes.path(c.callee(), ctx, holder, new int[1]);
        TableDef table =
                x instanceof TableDef t ? t : x == null ? compiler.graph.shapes.library.tables.get(name) : null;
        if (table != null) {
            Element at = holder[0];
            Ctx scope = x instanceof TableDef && at != null ? ctx : ctx;
            return compiler.tables().lookup(table, c, ctx, scope, f);
        }
        FunctionDef fn = compiler.graph.shapes.library.functions.get(name);
        if (fn != null) {
            List<Val> args = new ArrayList<>();
            for (Expr a : c.args()) {
                args.add(compiler.eval(a, ctx, f));
            }
            return expand(fn, args, c, f);
        }
        List<String> all = new ArrayList<>(NAMES);
        all.addAll(compiler.graph.shapes.library.functions.keySet());
        all.addAll(compiler.graph.shapes.library.tables.keySet());
        compiler.problem(
                Code.UNKNOWN_NAME,
                f,
                c.callee().span(),
                "There is no function or table `" + name + "`." + Suggest.sentence(name, all));
        return new Val.Bad();
    }

    /** A function of the handbook is expanded where it is called. */
    Val expand(FunctionDef fn, List<Val> args, Expr.Call at, Frame f) {
        int wanted = fn.syntax().parameters().size();
        if (args.size() != wanted) {
            compiler.problem(
                    Code.WRONG_FORM,
                    f,
                    at.span(),
                    "`" + fn.name() + "` takes " + wanted + " values; found " + args.size() + ".");
            return new Val.Bad();
        }
        Map<String, Val> locals = new HashMap<>();
        for (int i = 0; i < wanted; i++) {
            Val v = compiler.numeric(
                    args.get(i), f, at.args().get(Math.min(i, at.args().size() - 1)));
            ValueKind k = fn.parameters().get(i);
            if (v instanceof Val.Num n
                    && k instanceof ValueKind.Quantity q
                    && n.dimension() != null
                    && n.dimension() != q.kind().shown().dimension()) {
                compiler.problem(
                        Code.DIMENSION_MISMATCH,
                        f,
                        at.args().get(Math.min(i, at.args().size() - 1)).span(),
                        "`" + fn.name() + "` takes " + English.a(q.kind().meaning()) + " as its " + ordinal(i)
                                + " value; this is of dimension " + n.dimension() + ".");
                v = compiler.bad(q.kind().shown().dimension());
            }
            locals.put(fn.syntax().parameters().get(i).name().text(), v);
        }
        Element top = compiler.graph.drive;
        Val v = compiler.eval(
                fn.syntax().value(), new Ctx(top, List.of(), locals), new Frame(null, fn.file(), Frame.NOTHING, false));
        if (v instanceof Val.Num n && fn.kind() instanceof ValueKind.Quantity q) {
            Dimension want = q.kind().shown().dimension();
            if (n.dimension() != null && n.dimension() != want) {
                compiler.problem(
                        Code.DIMENSION_MISMATCH,
                        Frame.at(fn.file(), false),
                        fn.syntax().value().span(),
                        "`" + fn.name() + "` is declared as " + q.kind().name() + "; its expression gives "
                                + n.dimension() + ".");
                return compiler.bad(want);
            }
            return new Val.Num(n.register(), want, n.constant());
        }
        return v;
    }

    private static String ordinal(int i) {
        return i == 0 ? "first" : i == 1 ? "second" : i == 2 ? "third" : (i + 1) + "th";
    }

    private Val builtin(String name, Expr.Call c, Ctx ctx, Frame f) {
        switch (name) {
            case "sum":
            case "count":
                return collection(name, c, ctx, f);
            case "least":
            case "greatest":
                return c.args().size() == 1 && c.args().get(0) instanceof Expr.Each
                        ? collection(name, c, ctx, f)
                        : extremes(name, c, ctx, f);
            case "upstream":
            case "downstream":
                return shaft(name, c, ctx, f);
            case "case_at_hand":
                Element k = compiler.graph.activeCase;
                return k == null ? new Val.Open(null) : new Val.Ref(k);
            case "nearest_in":
            case "next_in":
            case "listed_in":
                return compiler.tables().keyed(name, c, ctx, f);
            case "clamp":
                return clamp(c, ctx, f);
            default:
                return elementary(name, c, ctx, f);
        }
    }

    private Val.@Nullable Num arg(Expr.Call c, int i, int count, Ctx ctx, Frame f) {
        if (c.args().size() != count) {
            if (i == 0) {
                compiler.problem(
                        Code.WRONG_FORM,
                        f,
                        c.span(),
                        "`" + c.callee().text() + "` takes " + count + (count == 1 ? " value" : " values") + "; found "
                                + c.args().size() + ".");
            }
            return null;
        }
        Val v = compiler.numeric(
                compiler.eval(c.args().get(i), ctx, f), f, c.args().get(i));
        return v instanceof Val.Num n ? n : null;
    }

    private void wants(Val.Num n, Dimension d, String what, Expr at, Frame f) {
        if (n.dimension() != null && n.dimension() != d) {
            compiler.problem(Code.DIMENSION_MISMATCH, f, at.span(), what);
        }
    }

    private Val elementary(String name, Expr.Call c, Ctx ctx, Frame f) {
        boolean two = name.equals("atan2") || name.equals("common_divisor");
        Val.Num x = arg(c, 0, two ? 2 : 1, ctx, f);
        if (x == null) {
            return new Val.Bad();
        }
        Expr at = c.args().get(0);
        switch (name) {
            case "sin":
            case "cos":
            case "tan":
                wants(x, ANGLE, "`" + name + "` takes an angle, with a unit such as deg or rad.", at, f);
                return new Val.Num(
                        compiler.op(Op.valueOf(name.toUpperCase(java.util.Locale.ROOT)), x.register()),
                        Dimension.NONE,
                        Double.NaN);
            case "asin":
            case "acos":
            case "atan":
                wants(x, Dimension.NONE, "`" + name + "` takes a pure number.", at, f);
                return new Val.Num(
                        compiler.op(Op.valueOf(name.toUpperCase(java.util.Locale.ROOT)), x.register()),
                        ANGLE,
                        Double.NaN);
            case "atan2":
            case "common_divisor": {
                Val.Num y = arg(c, 1, 2, ctx, f);
                if (y == null) {
                    return new Val.Bad();
                }
                Dimension d = compiler.same(x.dimension(), y.dimension(), c, f, "used together here");
                boolean angle = name.equals("atan2");
                return new Val.Num(
                        compiler.op(angle ? Op.ATAN2 : Op.COMMON_DIVISOR, x.register(), y.register()),
                        angle ? ANGLE : d,
                        Double.NaN);
            }
            case "sqrt":
                return new Val.Num(
                        compiler.op(Op.SQRT, x.register()),
                        x.dimension() == null ? null : x.dimension().power(1, 2),
                        x.isConstant() ? Math.sqrt(x.constant()) : Double.NaN);
            case "exp":
            case "ln":
            case "log":
                wants(x, Dimension.NONE, "`" + name + "` takes a pure number.", at, f);
                return new Val.Num(
                        compiler.op(name.equals("exp") ? Op.EXP : name.equals("ln") ? Op.LN : Op.LOG10, x.register()),
                        Dimension.NONE,
                        Double.NaN);
            case "sign":
                return new Val.Num(compiler.op(Op.SIGN, x.register()), Dimension.NONE, Double.NaN);
            case "abs":
                return new Val.Num(compiler.op(Op.ABS, x.register()), x.dimension(), Math.abs(x.constant()));
            default:
                wants(
                        x,
                        Dimension.NONE,
                        "`" + name + "` takes a pure number; take a quantity in a unit first (`x in mm`).",
                        at,
                        f);
                return new Val.Num(
                        compiler.op(Op.valueOf(name.toUpperCase(java.util.Locale.ROOT)), x.register()),
                        x.dimension(),
                        Double.NaN);
        }
    }

    private Val extremes(String name, Expr.Call c, Ctx ctx, Frame f) {
        Val.Num best = null;
        for (Expr e : c.args()) {
            Val v = compiler.numeric(compiler.eval(e, ctx, f), f, e);
            if (!(v instanceof Val.Num n)) {
                return new Val.Bad();
            }
            best = best == null ? n : extreme(name, best, n, e, f);
        }
        if (best == null) {
            compiler.problem(Code.WRONG_FORM, f, c.span(), "`" + name + "` needs at least one value.");
            return new Val.Bad();
        }
        return best;
    }

    private Val.Num extreme(String name, Val.Num a, Val.Num b, Expr at, Frame f) {
        Dimension d = compiler.same(a.dimension(), b.dimension(), at, f, "compared");
        return new Val.Num(
                compiler.op(name.equals("least") ? Op.MIN : Op.MAX, a.register(), b.register()), d, Double.NaN);
    }

    private Val clamp(Expr.Call c, Ctx ctx, Frame f) {
        Val.Num x = arg(c, 0, 3, ctx, f);
        if (x == null) {
            return new Val.Bad();
        }
        Val.Num lo = arg(c, 1, 3, ctx, f);
        Val.Num hi = arg(c, 2, 3, ctx, f);
        if (lo == null || hi == null) {
            return new Val.Bad();
        }
        return extreme("least", extreme("greatest", x, lo, c, f), hi, c, f);
    }

    // ---- collections

    private Val collection(String name, Expr.Call c, Ctx ctx, Frame f) {
        if (c.args().size() != 1 || !(c.args().get(0) instanceof Expr.Each each)) {
            compiler.problem(
                    Code.WRONG_FORM,
                    f,
                    c.span(),
                    "`" + name + "` runs over a collection: `" + name + "(each bin : x)`.");
            return new Val.Bad();
        }
        Val.Group g = group(each, ctx, f);
        if (g == null) {
            return new Val.Bad();
        }
        if (name.equals("count")) {
            if (each.body() == null) {
                return compiler.constant(g.elements().size(), Dimension.NONE);
            }
            return counted(g, each, ctx, f);
        }
        Expr body = each.body();
        if (body == null) {
            compiler.problem(
                    Code.MISSING_VALUE,
                    f,
                    each.span(),
                    "What shall be taken of each " + each.collection() + "? Write `each " + each.collection()
                            + " : x`.");
            return new Val.Bad();
        }
        if (compiler.graph.checking) {
            return compiler.eval(body, compiler.graph.checker().sample(g, ctx), f);
        }
        if (g.elements().isEmpty() && !g.kind().equals("collect")) {
            return new Val.Num(compiler.openRegister(g), null, Double.NaN);
        }
        Val.Num total = null;
        for (Element e : g.elements()) {
            Val v = compiler.numeric(compiler.eval(body, at(ctx, g, e), f), f, body);
            if (!(v instanceof Val.Num n)) {
                return new Val.Bad();
            }
            if (total == null) {
                total = n;
            } else if (name.equals("sum")) {
                total = compiler.arithmetic(Expr.Op.ADD, total, n, body, f);
            } else {
                total = extreme(name, total, n, body, f);
            }
        }
        if (total == null) {
            return name.equals("sum")
                    ? new Val.Num(compiler.constant(0), null, 0)
                    : new Val.Num(compiler.openRegister(g), null, Double.NaN);
        }
        return total;
    }

    private Val counted(Val.Group g, Expr.Each each, Ctx ctx, Frame f) {
        Expr body = each.body();
        if (body == null || compiler.graph.checking) {
            return new Val.Num(0, Dimension.NONE, Double.NaN);
        }
        int fixed = 0;
        int r = -1;
        for (Element e : g.elements()) {
            Val v = compiler.eval(body, at(ctx, g, e), f);
            if (v instanceof Val.Fixed x) {
                fixed += x.is() ? 1 : 0;
            } else {
                int t = compiler.truth(v, body, f);
                r = r < 0 ? t : compiler.op(Op.ADD, r, t);
            }
        }
        if (r < 0) {
            return compiler.constant(fixed, Dimension.NONE);
        }
        return new Val.Num(
                fixed == 0 ? r : compiler.op(Op.ADD, r, compiler.constant(fixed)), Dimension.NONE, Double.NaN);
    }

    /** The scope in which what is said of each element is read. */
    static Ctx at(Ctx ctx, Val.Group g, Element e) {
        return ctx.with(new Axis(g.collection(), e));
    }

    Val.@Nullable Group group(Expr.Each each, Ctx ctx, Frame f) {
        Element[] holder = new Element[1];
        String name = each.collection().text();
        Object x = compiler.graph.scopes.collection(name, ctx, holder);
        Val v = x == null
                ? null
                : compiler.found(
                        x,
                        holder[0],
                        new Expr.Path(
                                List.of(each.collection()), each.collection().span()),
                        f);
        if (v instanceof Val.Group g) {
            return g;
        }
        compiler.problem(Code.UNKNOWN_NAME, f, each.collection().span(), "There is no collection `" + name + "` here.");
        return null;
    }

    // ---- the train of shafts

    private Val shaft(String name, Expr.Call c, Ctx ctx, Frame f) {
        if (c.args().size() != 2) {
            compiler.problem(Code.WRONG_FORM, f, c.span(), "`" + name + "` takes the shafts of both members.");
            return new Val.Bad();
        }
        Val a = compiler.eval(c.args().get(0), ctx, f);
        Val b = compiler.eval(c.args().get(1), ctx, f);
        if (a instanceof Val.Ref x && b instanceof Val.Ref y) {
            boolean first = compiler.graph.train().isNearer(x.element(), y.element());
            return name.equals("upstream") == first ? a : b;
        }
        return name.equals("upstream") ? a : b;
    }
}
