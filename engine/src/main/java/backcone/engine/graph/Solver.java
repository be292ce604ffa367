package backcone.engine.graph;

import backcone.engine.diagnostics.Code;
import backcone.engine.syntax.Expr;
import backcone.engine.units.Dimension;
import java.util.ArrayList;
import java.util.List;
import org.jspecify.annotations.Nullable;

/** Solves a relation for the one name that is not known, undoing + - * / and powers step by step. */
final class Solver {
    private final Compiler compiler;

    Solver(Compiler compiler) {
        this.compiler = compiler;
    }

    Val solve(Slot unknown, RelationUse use) {
        Frame f = new Frame(unknown, use.def.file(), Frame.NOTHING, false);
        if (!(use.def.syntax().equation() instanceof Expr.Compare c)
                || c.operands().size() != 2) {
            return compiler.open(unknown);
        }
        Expr l = c.operands().get(0);
        Expr r = c.operands().get(1);
        boolean left = contains(l, use.ctx, unknown);
        Val other = compiler.numeric(compiler.eval(left ? r : l, use.ctx, f), f, left ? r : l);
        if (!(other instanceof Val.Num target)) {
            return compiler.open(unknown);
        }
        Val.Num v = undo(left ? l : r, use.ctx, unknown, target, f);
        if (v == null) {
            compiler.problem(
                    Code.NOT_SOLVABLE,
                    f,
                    use.def.syntax().span(),
                    "This relation can't be solved for `" + unknown.path() + "`.");
            return compiler.open(unknown);
        }
        if (unknown.decl.kind instanceof backcone.engine.model.ValueKind.Quantity q) {
            Dimension want = q.kind().shown().dimension();
            if (v.dimension() != null && v.dimension() != want) {
                compiler.problem(
                        Code.DIMENSION_MISMATCH,
                        f,
                        use.def.syntax().span(),
                        "Solved for `" + unknown.decl.name + "` this relation gives " + v.dimension() + ", not "
                                + q.kind().name() + ".");
            }
            if (q.kind().whole()) {
                compiler.graph.wholes.add(new DriveGraph.Whole(unknown, v.register()));
            }
            return new Val.Num(v.register(), want, v.constant());
        }
        return v;
    }

    private Val.@Nullable Num undo(Expr e, Ctx ctx, Slot unknown, Val.Num target, Frame f) {
        if (e instanceof Expr.Path) {
            return target;
        }
        if (e instanceof Expr.Neg n) {
            Val.Num t = new Val.Num(compiler.op(Op.NEG, target.register()), target.dimension(), Double.NaN);
            return undo(n.operand(), ctx, unknown, t, f);
        }
        if (e instanceof Expr.Binary b) {
            return binary(b, ctx, unknown, target, f);
        }
        if (e instanceof Expr.Call c
                && c.callee().text().equals("sqrt")
                && c.args().size() == 1) {
            Val.Num t = new Val.Num(
                    compiler.op(Op.MUL, target.register(), target.register()),
                    target.dimension() == null ? null : target.dimension().power(2, 1),
                    Double.NaN);
            return undo(c.args().get(0), ctx, unknown, t, f);
        }
        if (e instanceof Expr.Call c
                && c.callee().text().equals("sum")
                && c.args().size() == 1
                && c.args().get(0) instanceof Expr.Each x) {
            Expr body = x.body();
            Val.Group g = new Builtins(compiler).group(x, ctx, f);
            if (g == null || body == null) {
                return null;
            }
            Val.Num rest = target;
            Ctx mine = null;
            for (Element el : g.elements()) {
                Ctx at = Builtins.at(ctx, g, el);
                if (contains(body, at, unknown)) {
                    mine = at;
                } else if (compiler.numeric(compiler.eval(body, at, f), f, body) instanceof Val.Num n) {
                    rest = compiler.arithmetic(Expr.Op.SUB, rest, n, body, f);
                }
            }
            return mine == null ? null : undo(body, mine, unknown, rest, f);
        }
        return null;
    }

    private Val.@Nullable Num binary(Expr.Binary b, Ctx ctx, Slot unknown, Val.Num target, Frame f) {
        boolean left = contains(b.left(), ctx, unknown);
        Expr known = left ? b.right() : b.left();
        Expr rest = left ? b.left() : b.right();
        if (!(compiler.numeric(compiler.eval(known, ctx, f), f, known) instanceof Val.Num k)) {
            return null;
        }
        Val.Num t;
        switch (b.op()) {
            case ADD:
                t = compiler.arithmetic(Expr.Op.SUB, target, k, b, f);
                break;
            case SUB:
                t = left
                        ? compiler.arithmetic(Expr.Op.ADD, target, k, b, f)
                        : compiler.arithmetic(Expr.Op.SUB, k, target, b, f);
                break;
            case MUL:
                t = compiler.arithmetic(Expr.Op.DIV, target, k, b, f);
                break;
            case DIV:
                t = left
                        ? compiler.arithmetic(Expr.Op.MUL, target, k, b, f)
                        : compiler.arithmetic(Expr.Op.DIV, k, target, b, f);
                break;
            case POW:
                if (!left || !k.isConstant() || k.constant() == 0) {
                    return null;
                }
                t = compiler.arithmetic(Expr.Op.POW, target, compiler.constant(1 / k.constant(), Dimension.NONE), b, f);
                break;
            default:
                return null;
        }
        return undo(rest, ctx, unknown, t, f);
    }

    boolean contains(Expr e, Ctx ctx, Slot s) {
        List<Slot> all = new ArrayList<>();
        compiler.graph.slotsIn(e, ctx, all);
        return all.contains(s);
    }
}
