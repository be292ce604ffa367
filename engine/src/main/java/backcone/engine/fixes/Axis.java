package backcone.engine.fixes;

import backcone.engine.graph.Slot;
import backcone.engine.model.Library;
import backcone.engine.model.TableDef;
import backcone.engine.syntax.Expr;
import backcone.engine.syntax.Note;
import backcone.engine.text.Span;
import backcone.engine.units.Numbers;
import backcone.engine.units.Unit;
import backcone.engine.units.Units;
import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;
import java.util.TreeSet;
import org.jspecify.annotations.Nullable;

/** A number of the text that a search may change, and the values to try, in the unit as written. */
record Axis(
        Steps.Step step,
        Slot slot,
        Expr value,
        Expr.Num literal,
        @Nullable Unit unit,
        Note.@Nullable Per source) {

    /** One value of one number; {@code change} is how dear it is. */
    record Setting(Axis axis, double value, double change) {
        double base() {
            double written = axis.value instanceof Expr.Neg ? -value : value;
            return axis.unit == null ? written : axis.unit.toBase(written);
        }
    }

    static @Nullable Axis of(Steps.Step step, Slot slot, Slot.Fact fact) {
        Expr value = fact.value();
        Expr inner = value instanceof Expr.Neg n ? n.operand() : value;
        if (!(inner instanceof Expr.Num num)) {
            return null;
        }
        Unit unit = null;
        if (num.unit() != null) {
            unit = unit(num.unit().text());
            if (unit == null) {
                return null;
            }
        }
        Note.Per per = !fact.notes().isEmpty() && fact.notes().get(0) instanceof Note.Per p ? p : null;
        return new Axis(step, slot, value, num, unit, per);
    }

    static @Nullable Unit unit(String text) {
        return Units.standard().parse(text) instanceof Units.Parse.Ok ok ? ok.unit() : null;
    }

    double now() {
        return value instanceof Expr.Neg ? -literal.value() : literal.value();
    }

    String unitText() {
        return literal.unit() == null ? "" : literal.unit().text();
    }

    /** The other number in place of this one; the source that said this one doesn't say the other, so it goes. */
    TextEdit edit(Subject s, double v) {
        TextEdit e = Edits.number(s.file(), s.text(), literal, value, v);
        if (source == null || source.span().start() < value.span().end()) {
            return e;
        }
        Span digits = new Span(
                literal.span().start(), literal.span().start() + literal.text().length());
        int from = value instanceof Expr.Neg && v > 0 ? value.span().start() : digits.start();
        String number = Numbers.exact(value instanceof Expr.Neg ? Math.abs(v) : v);
        String rest = s.text().substring(digits.end(), value.span().end());
        return new TextEdit(s.file(), new Span(from, source.span().end()), number + rest);
    }

    private Setting setting(double v, double steps) {
        double was = now();
        double change = step.way() == Steps.Way.GRADE || step.way() == Steps.Way.SHIFT
                ? Math.abs(steps)
                : was > 0 && v > 0 ? Math.abs(Math.log(v / was)) : Math.abs(v - was);
        return new Setting(this, v, step.cost() * change);
    }

    /** The values to try, the least change first. */
    List<Setting> settings(Library library) {
        List<Setting> out = new ArrayList<>();
        switch (step.way()) {
            case SERIES -> {
                TreeSet<Double> all = new TreeSet<>();
                for (String t : step.words().subList(1, step.words().size())) {
                    TableDef table = library.tables.get(t);
                    if (table != null) {
                        firstColumn(table, all);
                    }
                }
                neighbours(all, step.count(0), out);
            }
            case LIST -> {
                TreeSet<Double> all = new TreeSet<>();
                Unit u = step.words().get(1).equals("1")
                        ? null
                        : unit(step.words().get(1));
                for (int i = 2; i < step.words().size(); i++) {
                    Double v = converted(step.number(i), u);
                    if (v != null) {
                        all.add(v);
                    }
                }
                neighbours(all, step.count(0), out);
            }
            case GRID -> {
                for (int i = 2; i + 1 < step.words().size(); i += 2) {
                    if (step.words().get(i + 1).equals(unitText())) {
                        grid(now() * step.number(0), now() * step.number(1), step.number(i), out);
                    }
                }
            }
            case SHIFT -> {
                if (unit == null) {
                    grid(step.number(0), step.number(1), step.number(2), out);
                }
            }
            case GRADE -> {
                if (step.words().get(0).equals(unitText())) {
                    for (int i = 1; i <= step.count(2); i++) {
                        out.add(setting(now() + i * step.number(1), i));
                    }
                }
            }
            default -> {}
        }
        out.sort(Comparator.comparingDouble(Setting::change));
        return out;
    }

    /** A count near the present one; for pairs of counts. */
    Setting count(double v) {
        return setting(v, 0);
    }

    private void grid(double low, double high, double by, List<Setting> out) {
        long first = (long) Math.ceil(low / by - 1e-9);
        long last = (long) Math.floor(high / by + 1e-9);
        for (long k = first; k <= last && k - first < 400; k++) {
            // the step is a decimal, and its multiples shall be decimals too
            double v = new java.math.BigDecimal(Double.toString(by))
                    .multiply(java.math.BigDecimal.valueOf(k))
                    .doubleValue();
            if (v != now()) {
                out.add(setting(v, (v - now()) / by));
            }
        }
    }

    private void neighbours(TreeSet<Double> all, int count, List<Setting> out) {
        int n = 0;
        for (double v : all.tailSet(now(), false)) {
            if (n++ < count) {
                out.add(setting(v, n));
            }
        }
        n = 0;
        for (double v : all.headSet(now(), false).descendingSet()) {
            if (n++ < count) {
                out.add(setting(v, n));
            }
        }
    }

    private void firstColumn(TableDef table, TreeSet<Double> into) {
        Unit u = table.units.isEmpty() ? null : table.units.get(0);
        for (int r = 0; r < table.rows.size(); r++) {
            for (Expr e : table.rows.get(r).get(0).values()) {
                if (e instanceof Expr.Num n) {
                    Double v = converted(n.value(), u);
                    if (v != null) {
                        into.add(v);
                    }
                }
            }
        }
    }

    /** In the unit of the text; null where it is of another dimension, or no round figure there. */
    private @Nullable Double converted(double v, @Nullable Unit from) {
        if (from == null || unit == null) {
            return from == null && unit == null ? v : null;
        }
        if (!from.dimension().equals(unit.dimension())) {
            return null;
        }
        return from.text().equals(unit.text()) ? v : unit.fromBase(from.toBase(v));
    }
}
