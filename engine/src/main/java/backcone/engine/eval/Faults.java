package backcone.engine.eval;

import backcone.engine.graph.Op;
import backcone.engine.graph.Tape;
import java.util.ArrayList;
import java.util.List;

/** Finds why a register is NaN: the registers where it began. */
public final class Faults {
    private final Tape tape;
    private final double[] value;

    public Faults(Tape tape, double[] value) {
        this.tape = tape;
        this.value = value;
    }

    /** The registers at which the trouble of {@code register} began; empty when it has a value. */
    public List<Integer> origins(int register) {
        List<Integer> out = new ArrayList<>();
        boolean[] seen = new boolean[tape.size()];
        List<Integer> todo = new ArrayList<>();
        todo.add(register);
        while (!todo.isEmpty()) {
            int r = todo.remove(todo.size() - 1);
            if (seen[r] || !Double.isNaN(value[r])) {
                continue;
            }
            seen[r] = true;
            int before = todo.size();
            Op op = tape.op(r);
            if (op == Op.SELECT) {
                double cond = value[tape.a(r)];
                todo.add(Double.isNaN(cond) ? tape.a(r) : cond != 0 ? tape.b(r) : tape.c(r));
            } else if (op == Op.ROOT || op == Op.SETTLE) {
                add(todo, tape.a(r));
                add(todo, tape.b(r));
                if (todo.size() == before) {
                    List<Integer> inner = openOf(r);
                    if (!inner.isEmpty()) {
                        out.addAll(inner);
                        continue;
                    }
                }
            } else {
                int n = tape.operands(r);
                if (n > 0) {
                    add(todo, tape.a(r));
                }
                if (n > 1) {
                    add(todo, tape.b(r));
                }
            }
            if (todo.size() == before) {
                out.add(r);
            }
        }
        java.util.Collections.sort(out);
        return out;
    }

    private void add(List<Integer> todo, int r) {
        if (Double.isNaN(value[r])) {
            todo.add(r);
        }
    }

    /** Open inputs that the equation of an unknown rests on: then it is open, not without a solution. */
    private List<Integer> openOf(int unknown) {
        List<Integer> out = new ArrayList<>();
        boolean[] seen = new boolean[tape.size()];
        seen[unknown] = true;
        List<Integer> todo = new ArrayList<>();
        todo.add(tape.c(unknown));
        while (!todo.isEmpty()) {
            int r = todo.remove(todo.size() - 1);
            if (seen[r]) {
                continue;
            }
            seen[r] = true;
            if (tape.op(r) == Op.OPEN) {
                out.add(r);
            }
            int n = tape.operands(r);
            if (n > 0) {
                todo.add(tape.a(r));
            }
            if (n > 1) {
                todo.add(tape.b(r));
            }
            if (n > 2) {
                todo.add(tape.c(r));
            }
        }
        return out;
    }
}
