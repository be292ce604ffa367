package backcone.engine.graph;

import backcone.engine.diagnostics.Code;
import backcone.engine.model.Suggest;
import backcone.engine.model.TableDef;
import backcone.engine.model.ValueKind;
import backcone.engine.numeric.Interpolation;
import backcone.engine.syntax.Entry;
import backcone.engine.syntax.Expr;
import backcone.engine.syntax.Name;
import backcone.engine.units.Dimension;
import backcone.engine.units.Unit;
import java.util.ArrayList;
import java.util.HashMap;
import java.util.List;
import java.util.Map;
import org.jspecify.annotations.Nullable;

/** Lookups in tables. Word keys are settled while building; number keys are read on the tape. */
final class Tables {
    private final Compiler compiler;
    private final Map<TableDef, Map<Integer, Integer>> built = new java.util.IdentityHashMap<>();

    Tables(Compiler compiler) {
        this.compiler = compiler;
    }

    Val lookup(TableDef t, Expr.Call c, Ctx ctx, Ctx scope, Frame f) {
        int keys = t.syntax.keys().size();
        if (c.args().size() != keys) {
            compiler.problem(
                    Code.WRONG_FORM,
                    f,
                    c.span(),
                    "`" + t.name() + "` is looked up by " + keys + (keys == 1 ? " key" : " keys") + "; found "
                            + c.args().size() + ".");
            return new Val.Bad();
        }
        if (t.rows.isEmpty()) {
            return new Val.Bad();
        }
        List<Val> values = new ArrayList<>();
        for (int i = 0; i < keys; i++) {
            values.add(key(t, i, c.args().get(i), ctx, f));
        }
        if (compiler.graph.checking) {
            return checked(t, values, c, scope, f);
        }
        for (Val v : values) {
            if (v instanceof Val.Bad) {
                return v;
            }
            if (v instanceof Val.Open) {
                return v;
            }
        }
        // words narrow the rows first
        List<Integer> rows = new ArrayList<>();
        int numeric = -1;
        for (int r = 0; r < t.rows.size(); r++) {
            rows.add(r);
        }
        for (int i = 0; i < t.keyColumns; i++) {
            Val v = values.get(i);
            if (v instanceof Val.Word || v instanceof Val.Ref || v instanceof Val.Text) {
                String w = v instanceof Val.Word x
                        ? x.text()
                        : v instanceof Val.Ref x ? x.element().name : v instanceof Val.Text x ? x.value() : "";
                int column = i;
                rows.removeIf(r -> !lists(t.rows.get(r).get(column), w));
            } else if (v instanceof Val.Num) {
                numeric = i;
            } else if (v instanceof Val.Picked p) {
                return byPicked(t, c, ctx, scope, f, values, i, p);
            }
        }
        if (rows.isEmpty()) {
            compiler.problem(
                    Code.BEYOND_TABLE,
                    f,
                    c.span(),
                    "The table `" + t.name() + "` has no row for " + said(values) + ".");
            return new Val.Bad();
        }
        Val row;
        if (numeric >= 0) {
            Val.Num n = (Val.Num) values.get(numeric);
            Unit u = t.units.get(numeric);
            Val.Num bare = u == null ? n : compiler.bare(n, u);
            row = new Val.Row(new Narrowed(t, rows, numeric).asTable(), -1, bare.register(), scope);
        } else {
            row = new Val.Row(t, rows.get(0), -1, scope);
        }
        if (t.syntax.kind() == null) {
            return row;
        }
        if (t.columnKey()) {
            return byColumn(t, row, values.get(t.keyColumns), c, f);
        }
        return cell(row, t.keyColumns, f);
    }

    /** A table reduced to the rows that fit the word keys; the numeric key column is told by its place. */
    private record Narrowed(TableDef table, List<Integer> rows, int keyColumn) {
        TableDef asTable() {
            if (rows.size() == table.rows.size() && keyColumn == 0) {
                return table;
            }
            TableDef t = new TableDef(table.syntax, table.file, table.owner, table.keyColumns);
            t.columns.addAll(table.columns);
            t.units.addAll(table.units);
            t.headerNumbers.addAll(table.headerNumbers);
            t.columnIndex.putAll(table.columnIndex);
            t.between = table.between;
            t.below = table.below;
            t.above = table.above;
            t.per = table.per;
            for (int r : rows) {
                List<Entry.Cell> cells = new ArrayList<>(table.rows.get(r));
                // the numeric key is read from column 0
                cells.set(0, table.rows.get(r).get(keyColumn));
                t.rows.add(cells);
            }
            return t;
        }
    }

    private Val byPicked(TableDef t, Expr.Call c, Ctx ctx, Ctx scope, Frame f, List<Val> values, int i, Val.Picked p) {
        Val result = null;
        for (int w = p.words().size() - 1; w >= 0; w--) {
            Map<String, Val> locals = new HashMap<>();
            if (ctx.locals != null) {
                locals.putAll(ctx.locals);
            }
            List<Expr> args = new ArrayList<>(c.args());
            String local = "key " + i;
            locals.put(local, new Val.Word(p.words().get(w), p.kind()));
            args.set(
                    i,
                    new Expr.Path(
                            List.of(new Name(local, c.args().get(i).span())),
                            c.args().get(i).span()));
            Ctx inner = ctx.withLocals(locals);
            Val v = lookup(t, new Expr.Call(c.callee(), args, c.span()), inner, scope, f);
            int cond = compiler.op(Op.EQ, p.register(), compiler.constant(w));
            result = result == null ? v : compiler.select(cond, v, result, c, f);
        }
        return result == null ? new Val.Bad() : result;
    }

    private static boolean lists(Entry.Cell cell, String word) {
        for (Expr e : cell.values()) {
            if (e instanceof Expr.Path p && p.text().equals(word)) {
                return true;
            }
            if (e instanceof Expr.Num n && n.text().equals(word)) {
                return true;
            }
        }
        return false;
    }

    private static String said(List<Val> values) {
        StringBuilder b = new StringBuilder();
        for (Val v : values) {
            if (v instanceof Val.Word w) {
                b.append(b.length() == 0 ? "" : ", ")
                        .append('`')
                        .append(w.text())
                        .append('`');
            }
        }
        return b.length() == 0 ? "this key" : b.toString();
    }

    /** A bare word that the first column lists is that row's word. */
    private Val key(TableDef t, int i, Expr e, Ctx ctx, Frame f) {
        if (e instanceof Expr.Path p && p.names().size() == 1 && i < t.keyColumns) {
            String w = p.text();
            for (List<Entry.Cell> row : t.rows) {
                if (lists(row.get(i), w)) {
                    Element[] holder = new Element[1];
                    if (compiler.graph.scopes.bare(w, ctx, holder) == null) {
                        return new Val.Word(w, null);
                    }
                }
            }
        }
        return compiler.eval(e, ctx, f);
    }

    private Val byColumn(TableDef t, Val row, Val key, Expr.Call c, Frame f) {
        if (key instanceof Val.Word w) {
            Integer col = t.columnIndex.get(w.text());
            if (col == null) {
                compiler.problem(
                        Code.BEYOND_TABLE,
                        f,
                        c.span(),
                        "The table `" + t.name() + "` has no column `" + w.text() + "`.");
                return new Val.Bad();
            }
            return cell(row, col, f);
        }
        if (key instanceof Val.Picked p) {
            Val result = null;
            for (int i = p.words().size() - 1; i >= 0; i--) {
                Val v = byColumn(t, row, new Val.Word(p.words().get(i), p.kind()), c, f);
                result = result == null
                        ? v
                        : compiler.select(compiler.op(Op.EQ, p.register(), compiler.constant(i)), v, result, c, f);
            }
            return result == null ? new Val.Bad() : result;
        }
        if (key instanceof Val.Num n) {
            return betweenColumns(t, row, n, f);
        }
        return key instanceof Val.Open ? key : new Val.Bad();
    }

    /** Linear between columns whose header cells are numbers; held or refused at the ends as the rows are. */
    private Val betweenColumns(TableDef t, Val row, Val.Num key, Frame f) {
        Val result = null;
        int last = t.columns.size() - 1;
        for (int col = last; col > t.keyColumns; col--) {
            double x0 = t.headerNumbers.get(col - 1);
            double x1 = t.headerNumbers.get(col);
            Val a = cell(row, col - 1, f);
            Val b = cell(row, col, f);
            if (!(a instanceof Val.Num p) || !(b instanceof Val.Num q)) {
                return new Val.Bad();
            }
            int share = compiler.op(
                    Op.DIV, compiler.op(Op.SUB, key.register(), compiler.constant(x0)), compiler.constant(x1 - x0));
            share = compiler.op(Op.MIN, compiler.op(Op.MAX, share, compiler.constant(0)), compiler.constant(1));
            int v = compiler.op(
                    Op.ADD, p.register(), compiler.op(Op.MUL, share, compiler.op(Op.SUB, q.register(), p.register())));
            Val.Num here = new Val.Num(v, p.dimension(), Double.NaN);
            result = result == null
                    ? here
                    : compiler.select(
                            compiler.op(Op.GE, key.register(), compiler.constant(x1)),
                            result,
                            here,
                            t.syntax.rows().get(0).cells().get(col).values().get(0),
                            f);
        }
        return result == null ? new Val.Bad() : result;
    }

    Val column(Val row, Name name, Frame f) {
        if (row instanceof Val.Bad || row instanceof Val.Open) {
            return row;
        }
        if (row instanceof Val.RowOf r) {
            Val a = column(r.yes(), name, f);
            Val b = column(r.no(), name, f);
            return compiler.select(r.condition(), a, b, new Expr.Path(List.of(name), name.span()), f);
        }
        if (row instanceof Val.Row r) {
            Integer col = r.table().columnIndex.get(name.text());
            if (col == null) {
                compiler.problem(
                        Code.UNKNOWN_NAME,
                        f,
                        name.span(),
                        "The table `" + r.table().name() + "` has no column `" + name + "`."
                                + Suggest.sentence(
                                        name.text(), r.table().columnIndex.keySet()));
                return new Val.Bad();
            }
            return cell(row, col, f);
        }
        compiler.problem(
                Code.WRONG_FORM,
                f,
                name.span(),
                "Only a row of a table or a block has something behind a dot; this is " + Compiler.what(row) + ".");
        return new Val.Bad();
    }

    private Val cell(Val row, int col, Frame f) {
        if (row instanceof Val.RowOf r) {
            return compiler.select(
                    r.condition(),
                    cell(r.yes(), col, f),
                    cell(r.no(), col, f),
                    new Expr.Hole(backcone.engine.text.Span.NONE),
                    f);
        }
        if (!(row instanceof Val.Row r)) {
            return new Val.Bad();
        }
        TableDef t = r.table();
        compiler.graph.use(t);
        if (r.index() >= 0) {
            return settled(t, r.index(), col, r.scope());
        }
        return read(t, r.key(), col);
    }

    private Val settled(TableDef t, int index, int col, Ctx scope) {
        Expr e = t.cell(index, col);
        Frame tf = Frame.at(t.file, false);
        Val v;
        if (e instanceof Expr.Path p && p.names().size() == 1) {
            Element[] holder = new Element[1];
            Object x = compiler.graph.scopes.bare(p.text(), scope, holder);
            v = x == null ? new Val.Word(p.text(), null) : compiler.eval(e, scope, tf);
        } else {
            v = compiler.eval(e, scope, tf);
        }
        return united(t, col, v, e, tf);
    }

    private Val united(TableDef t, int col, Val v, Expr e, Frame f) {
        Unit u = t.units.get(col);
        if (u == null && col >= t.keyColumns && t.syntax.unit() != null) {
            u = compiler.unit(t.syntax.unit(), f);
        }
        if (v instanceof Val.Num n
                && u != null
                && n.dimension() != null
                && n.dimension().isNone()) {
            if (n.isConstant()) {
                return compiler.constant(u.toBase(n.constant()), u.dimension());
            }
            int r = compiler.op(Op.MUL, n.register(), compiler.constant(u.numerator()));
            r = u.denominator() == 1 ? r : compiler.op(Op.DIV, r, compiler.constant(u.denominator()));
            return new Val.Num(r, u.dimension(), Double.NaN);
        }
        return v;
    }

    private Val read(TableDef t, int key, int col) {
        Unit u = t.units.get(col);
        Frame f = Frame.at(t.file, false);
        if (u == null && col >= t.keyColumns && t.syntax.unit() != null) {
            u = compiler.unit(t.syntax.unit(), f);
        }
        int[] index = new int[1];
        if (!interpolation(t, col, index)) {
            return new Val.Bad();
        }
        int r = compiler.graph.tape.emit(Op.TABLE, key, index[0], 0, 0);
        compiler.graph.tableOps.put(r, t);
        if (u == null) {
            return new Val.Num(r, Dimension.NONE, Double.NaN);
        }
        int s = u.numerator() == 1 ? r : compiler.op(Op.MUL, r, compiler.constant(u.numerator()));
        s = u.denominator() == 1 ? s : compiler.op(Op.DIV, s, compiler.constant(u.denominator()));
        return new Val.Num(s, u.dimension(), Double.NaN);
    }

    private boolean interpolation(TableDef t, int col, int[] index) {
        Map<Integer, Integer> columns = built.computeIfAbsent(t, k -> new HashMap<>());
        Integer known = columns.get(col);
        if (known != null) {
            index[0] = known;
            return true;
        }
        double[] keys = new double[t.rows.size()];
        double[] values = new double[t.rows.size()];
        for (int i = 0; i < keys.length; i++) {
            Double k = number(t.cell(i, 0));
            Double v = number(t.cell(i, col));
            if (k == null || v == null) {
                compiler.problem(
                        Code.BAD_TABLE,
                        Frame.at(t.file, false),
                        t.rows.get(i).get(k == null ? 0 : col).span(),
                        "A table read at a number holds plain numbers.");
                return false;
            }
            if (i > 0 && k <= keys[i - 1]) {
                compiler.problem(
                        Code.BAD_TABLE,
                        Frame.at(t.file, false),
                        t.rows.get(i).get(0).span(),
                        "The keys of `" + t.name() + "` must rise.");
                return false;
            }
            keys[i] = k;
            values[i] = v;
        }
        Interpolation in = new Interpolation(
                keys,
                values,
                Interpolation.Between.valueOf(t.between.name()),
                Interpolation.Beyond.valueOf(t.below.name()),
                Interpolation.Beyond.valueOf(t.above.name()));
        index[0] = compiler.graph.tape.addTable(in);
        columns.put(col, index[0]);
        return true;
    }

    static @Nullable Double number(Expr e) {
        if (e instanceof Expr.Num n && n.unit() == null) {
            return n.value();
        }
        if (e instanceof Expr.Neg n) {
            Double v = number(n.operand());
            return v == null ? null : -v;
        }
        return null;
    }

    /** nearest_in, next_in, listed_in: questions about the numeric key column of a table. */
    Val keyed(String name, Expr.Call c, Ctx ctx, Frame f) {
        if (c.args().size() != 2 || !(c.args().get(0) instanceof Expr.Path p)) {
            compiler.problem(
                    Code.WRONG_FORM,
                    f,
                    c.span(),
                    "`" + name + "` takes a table and a value: `" + name + "(module_series, m)`.");
            return new Val.Bad();
        }
        Element[] holder = new Element[1];
        Object x = compiler.graph.scopes.path(p, ctx, holder, new int[1]);
        TableDef t = x instanceof TableDef d ? d : compiler.graph.shapes.library.tables.get(p.text());
        if (t == null) {
            compiler.problem(Code.UNKNOWN_NAME, f, p.span(), "There is no table `" + p.text() + "`.");
            return new Val.Bad();
        }
        Val v = compiler.numeric(
                compiler.eval(c.args().get(1), ctx, f), f, c.args().get(1));
        if (!(v instanceof Val.Num n)) {
            return v;
        }
        Unit u = t.units.get(0);
        Dimension d = u == null ? Dimension.NONE : u.dimension();
        compiler.same(n.dimension(), d, c, f, "looked for in this table");
        boolean yes = name.equals("listed_in");
        if (compiler.graph.checking) {
            return yes ? new Val.Truth(0) : new Val.Num(0, d, Double.NaN);
        }
        compiler.graph.use(t);
        int[] index = new int[1];
        if (!interpolation(t, 0, index)) {
            return new Val.Bad();
        }
        int bare = u == null ? n.register() : compiler.bare(n, u).register();
        int r = compiler.graph.tape.emit(
                yes ? Op.LISTED_KEY : name.equals("next_in") ? Op.NEXT_KEY : Op.NEAREST_KEY, bare, index[0], 0, 0);
        compiler.graph.tableOps.put(r, t);
        if (yes) {
            return new Val.Truth(r);
        }
        if (u == null) {
            return new Val.Num(r, d, Double.NaN);
        }
        int s = compiler.op(Op.MUL, r, compiler.constant(u.numerator()));
        s = u.denominator() == 1 ? s : compiler.op(Op.DIV, s, compiler.constant(u.denominator()));
        return new Val.Num(s, d, Double.NaN);
    }

    // ---- dimensions only

    private Val checked(TableDef t, List<Val> keys, Expr.Call c, Ctx scope, Frame f) {
        for (int i = 0; i < t.keyColumns; i++) {
            Unit u = t.units.get(i);
            if (keys.get(i) instanceof Val.Num n && n.dimension() != null) {
                Dimension d = u == null ? Dimension.NONE : u.dimension();
                if (n.dimension() != d && number(t.cell(0, i)) != null) {
                    compiler.problem(
                            Code.DIMENSION_MISMATCH,
                            f,
                            c.args().get(i).span(),
                            "The key `" + t.columns.get(i) + "` of `" + t.name() + "` is taken "
                                    + (u == null ? "as a pure number" : "in " + u.text()) + "; this is of dimension "
                                    + n.dimension() + ".");
                }
            }
        }
        Val.Row row = new Val.Row(t, 0, -1, scope);
        if (t.syntax.kind() == null) {
            return row;
        }
        Val v = settled(t, 0, t.columnKey() ? t.keyColumns : t.keyColumns, scope);
        ValueKind k = kind(t);
        if (v instanceof Val.Num n
                && k instanceof ValueKind.Quantity q
                && n.dimension() != null
                && n.dimension() != q.kind().shown().dimension()) {
            compiler.problem(
                    Code.DIMENSION_MISMATCH,
                    Frame.at(t.file, false),
                    t.syntax.span(),
                    "The table `" + t.name() + "` is declared as " + q.kind().name() + "; its cells are of dimension "
                            + n.dimension() + ".");
        }
        return v instanceof Val.Num n ? new Val.Num(0, n.dimension(), Double.NaN) : v;
    }

    private @Nullable ValueKind kind(TableDef t) {
        Name k = t.syntax.kind();
        var q = k == null ? null : compiler.graph.shapes.library.quantities.get(k.text());
        return q == null ? null : new ValueKind.Quantity(q);
    }
}
