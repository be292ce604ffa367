package backcone.engine.fixes;

import backcone.engine.answers.DriveAnswer;
import backcone.engine.answers.DriveResults;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.eval.Run;
import backcone.engine.graph.DriveBuilder;
import backcone.engine.graph.DriveGraph;
import backcone.engine.graph.DriveSource;
import backcone.engine.graph.Problems;
import backcone.engine.syntax.Expr;
import java.util.ArrayList;
import java.util.IdentityHashMap;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import org.jspecify.annotations.Nullable;

/** Runs the tapes of a text with other numbers. Graphs are built once. */
final class Trial {
    private final Subject subject;
    private final Map<String, List<DriveGraph>> graphs = new LinkedHashMap<>();

    Trial(Subject subject) {
        this.subject = subject;
    }

    List<DriveGraph> graphs(String drive) {
        return graphs.computeIfAbsent(drive, d -> {
            List<DriveGraph> out = new ArrayList<>();
            DriveSource s = subject.sources().get(d);
            if (s != null) {
                for (String c : DriveBuilder.casesInUse(s)) {
                    out.add(DriveBuilder.build(subject.shapes(), subject.top(), s, c, new Problems(), false));
                }
            }
            return out;
        });
    }

    /** What a drive says when literals have other values (in base units). */
    void run(String drive, IdentityHashMap<Expr.Num, Double> values, Verdict into) {
        DriveSource source = subject.sources().get(drive);
        if (source == null) {
            return;
        }
        List<Run> runs = new ArrayList<>();
        for (DriveGraph g : graphs(drive)) {
            runs.add(new Run(g, inputs(g, values)));
        }
        Problems p = new Problems();
        DriveAnswer a = DriveResults.states(source, runs, subject.today(), p);
        into.add(a);
        String name = source.layers().size() > 1 ? drive : "";
        for (Diagnostic d : p.all()) {
            if (d.file().equals(subject.file())) {
                into.add(name, d);
            }
        }
    }

    private static double[] inputs(DriveGraph g, IdentityHashMap<Expr.Num, Double> values) {
        double[] v = g.inputValues();
        List<DriveGraph.Input> inputs = g.inputs();
        for (int k = 0; k < v.length; k++) {
            Double other = other(inputs.get(k).literal(), values);
            if (other != null) {
                v[k] = other;
            }
        }
        return v;
    }

    private static @Nullable Double other(Expr.@Nullable Num literal, IdentityHashMap<Expr.Num, Double> values) {
        return literal == null ? null : values.get(literal);
    }

    /** Whether a number of the text moves a register. */
    static boolean moves(DriveGraph g, Expr.Num literal, int register) {
        if (register < 0) {
            return false;
        }
        List<DriveGraph.Input> inputs = g.inputs();
        for (int k = 0; k < inputs.size(); k++) {
            if (inputs.get(k).literal() == literal && g.dependsOnInput(register, k)) {
                return true;
            }
        }
        return false;
    }
}
