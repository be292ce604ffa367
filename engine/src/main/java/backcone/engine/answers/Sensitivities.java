package backcone.engine.answers;

import backcone.engine.eval.Derivatives;
import backcone.engine.eval.Run;
import backcone.engine.graph.DriveGraph;
import backcone.engine.graph.Slot;
import backcone.engine.syntax.Expr;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import backcone.engine.units.Unit;
import java.util.ArrayList;
import java.util.Comparator;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;

/** The numbers of the texts that a value hangs on most. */
public final class Sensitivities {
    /** Less than this is rounding. */
    private static final double NOTHING = 1e-9;

    private Sensitivities() {}

    private record Place(FileId file, Span span) {}

    /**
     * The {@code most} largest, by size. A number that several elements share counts once, with all it does. Left out:
     * numbers that are zero, for which 1 % more means nothing, and those the value does not move with. Empty where the
     * value is zero, open or at fault.
     */
    public static List<Sensitivity> of(Run run, int register, int most) {
        double y = register < run.values().length ? run.at(register) : Double.NaN;
        if (Double.isNaN(y) || y == 0) {
            return List.of();
        }
        Derivatives d = new Derivatives(run, register);
        Map<Place, Sensitivity> all = new LinkedHashMap<>();
        for (DriveGraph.Input i : run.graph.inputs()) {
            Expr.Num literal = i.literal();
            Slot slot = i.slot();
            FileId file = i.file();
            double slope = d.by(i);
            if (literal == null || slot == null || file == null || slope == 0) {
                continue;
            }
            Unit unit = i.unit();
            double x = run.at(i.register());
            // 1 % of 60 °C is 0.6 K, not 3.3 K
            double by = slope * (unit == null ? x : x - unit.toBase(0)) / y;
            Sensitivity s = new Sensitivity(
                    slot.path(),
                    by,
                    unit == null ? x : unit.fromBase(x),
                    unit == null || unit.text().equals("1") ? "" : unit.text(),
                    file,
                    literal.span());
            all.merge(
                    new Place(file, literal.span()),
                    s,
                    (p, q) -> new Sensitivity(
                            p.name(), p.relative() + q.relative(), p.written(), p.unit(), p.file(), p.span()));
        }
        List<Sensitivity> out = new ArrayList<>(all.values());
        out.removeIf(s -> !(Math.abs(s.relative()) >= NOTHING));
        out.sort(Comparator.comparingDouble((Sensitivity s) -> -Math.abs(s.relative())));
        return List.copyOf(out.subList(0, Math.min(Math.max(most, 0), out.size())));
    }
}
