package backcone.engine.answers;

import backcone.engine.eval.Run;
import backcone.engine.graph.Op;
import backcone.engine.graph.Slot;
import backcone.engine.graph.Tape;
import backcone.engine.model.Decl;
import backcone.engine.model.TableDef;
import backcone.engine.model.Trust;
import backcone.engine.syntax.Entry;
import backcone.engine.syntax.Expr;
import java.util.ArrayList;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Set;
import org.jspecify.annotations.Nullable;

/** The weakest word of trust behind verdicts, over the arms taken and the tables read. */
final class Trusts {
    private @Nullable Trust weakest;
    private final Set<String> recalled = new LinkedHashSet<>();
    private @Nullable Run run;
    private boolean[] seen = new boolean[0];

    void add(Run run, int register) {
        if (register < 0) {
            return;
        }
        Tape tape = run.graph.tape();
        if (this.run != run) {
            this.run = run;
            seen = new boolean[tape.size()];
        }
        List<Integer> todo = new ArrayList<>();
        todo.add(register);
        while (!todo.isEmpty()) {
            int r = todo.remove(todo.size() - 1);
            if (seen[r]) {
                continue;
            }
            seen[r] = true;
            Slot s = run.graph.ownerOf(r);
            if (s != null && s.factSpan() == null && s.decl.value != null && counts(s.decl)) {
                note(s.decl.trust(), "`" + s.decl.symbolOrName() + "` of " + s.decl.owner);
            }
            TableDef t = run.graph.tableAt(r);
            if (t != null) {
                note(t.trust(), "table `" + t.name() + "`");
            }
            if (tape.op(r) == Op.SELECT) {
                todo.add(tape.a(r));
                todo.add(run.at(tape.a(r)) != 0 ? tape.b(r) : tape.c(r));
                continue;
            }
            int n = tape.operands(r);
            if (n > 0) {
                todo.add(tape.a(r));
            }
            if (n > 1) {
                todo.add(tape.b(r));
            }
            if (tape.op(r) == Op.ROOT || tape.op(r) == Op.SETTLE) {
                todo.add(tape.c(r));
            }
        }
    }

    /** Plain renamings, lets, checks and pure numbers that a drive replaces may lack a source. */
    private static boolean counts(Decl d) {
        return d.role == Decl.Role.QUANTITY
                && (d.per != null || !(d.value instanceof Expr.Path))
                && !(d.how == Entry.Given.DEFAULT && d.per == null);
    }

    private void note(Trust t, String what) {
        weakest = weakest == null ? t : Trust.weaker(weakest, t);
        if (t == Trust.RECALLED || t == Trust.UNCERTAIN) {
            recalled.add(what + (t == Trust.UNCERTAIN ? " (uncertain)" : ""));
        }
    }

    @Nullable
    String weakest() {
        return weakest == null ? null : weakest.word();
    }

    List<String> recalled() {
        return List.copyOf(recalled);
    }
}
