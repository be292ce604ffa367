package backcone.engine.answers;

import backcone.engine.eval.Run;
import backcone.engine.graph.DriveGraph;
import backcone.engine.graph.Op;
import backcone.engine.graph.Slot;
import backcone.engine.graph.Tape;
import backcone.engine.graph.Val;
import backcone.engine.model.QuantityKind;
import backcone.engine.model.TableDef;
import backcone.engine.model.ValueKind;
import backcone.engine.numeric.Interpolation;
import backcone.engine.units.Numbers;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;
import org.jspecify.annotations.Nullable;

/** Why a value is not there: what is missing, or what went wrong, in words. */
final class Reasons {
    private final Run run;
    private final DriveGraph graph;

    Reasons(Run run) {
        this.run = run;
        this.graph = run.graph;
    }

    /** {@code open} are inputs not given, {@code faults} sentences, {@code broken} whether a finding elsewhere explains it. */
    record Why(List<Slot> open, List<Fault> faults, boolean broken) {}

    record Fault(Op op, @Nullable Slot slot, String message) {}

    Why of(int register) {
        Set<Slot> open = new LinkedHashSet<>();
        Map<String, Fault> faults = new LinkedHashMap<>();
        if (register < 0) {
            return new Why(List.of(), List.of(), true); // it was never understood, and a finding says why
        }
        boolean broken = false;
        for (int r : run.faults().origins(register)) {
            Tape tape = graph.tape();
            Op op = tape.op(r);
            if (op == Op.OPEN) {
                Object why = tape.reason(tape.a(r));
                if (why instanceof Slot s) {
                    open.addAll(graph.missingFor(s));
                } else {
                    broken |= why instanceof Val.Bad;
                    if (why instanceof Val.Group g) {
                        faults.put(
                                "empty " + g.collection(),
                                new Fault(op, null, "there is no `" + g.collection() + "` yet"));
                    }
                }
            } else {
                Slot s = graph.near(r);
                String m = message(r, op, s);
                faults.put(m, new Fault(op, s, m));
            }
        }
        return new Why(new ArrayList<>(open), new ArrayList<>(faults.values()), broken);
    }

    private String message(int r, Op op, @Nullable Slot s) {
        Tape tape = graph.tape();
        String where = s == null ? "" : " in `" + s.path() + "`";
        switch (op) {
            case DIV:
                return run.at(tape.b(r)) == 0 ? "a division by zero" + where : "a number out of range" + where;
            case SQRT:
                return "the square root of a negative number (" + Numbers.format(run.at(tape.a(r)), 4) + ")" + where;
            case LN:
            case LOG10:
                return "the logarithm of a number that is not positive" + where;
            case ASIN:
            case ACOS:
                return "an angle whose sine or cosine would be " + Numbers.format(run.at(tape.a(r)), 5) + where;
            case POW:
                return "a power that is no number (" + Numbers.format(run.at(tape.a(r)), 4) + " ^ "
                        + Numbers.format(run.at(tape.b(r)), 4) + ")" + where;
            case ROOT:
            case SETTLE: {
                DriveGraph.Unknown u = graph.unknown(r);
                String text = u == null ? null : u.otherwise();
                String name = u == null ? "" : "`" + u.slot().path() + "`: ";
                return name
                        + (text != null
                                ? text
                                : op == Op.ROOT
                                        ? "the equation has no solution between " + Numbers.format(run.at(tape.a(r)), 4)
                                                + " and " + Numbers.format(run.at(tape.b(r)), 4)
                                        : "the iteration does not settle");
            }
            case TABLE:
            case NEXT_KEY:
            case NEAREST_KEY: {
                TableDef t = graph.tableAt(r);
                Interpolation in = tape.table(tape.b(r));
                String unit = t == null || t.units.get(0) == null
                        ? ""
                        : " " + t.units.get(0).text();
                return "the table `" + (t == null ? "" : t.name()) + "` holds from " + Numbers.format(in.first(), 6)
                        + " to " + Numbers.format(in.last(), 6) + unit + "; asked for "
                        + Numbers.format(run.at(tape.a(r)), 6) + unit + where;
            }
            default:
                return "a number out of range" + where;
        }
    }

    static String kindName(Slot s) {
        ValueKind k = s.decl.kind;
        if (k instanceof ValueKind.Quantity q) {
            QuantityKind kind = q.kind();
            return kind.name();
        } else if (k instanceof ValueKind.Choice c) {
            return c.kind().name();
        } else if (k instanceof ValueKind.Reference r) {
            return r.kind();
        }
        return "Text";
    }

    static RequirementAnswer.Missing missing(Slot s) {
        return new RequirementAnswer.Missing(
                s.path(), s.decl.meaning == null ? s.decl.name : s.decl.meaning, kindName(s));
    }
}
