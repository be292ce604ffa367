package backcone.engine.answers;

import backcone.engine.diagnostics.Code;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.eval.Run;
import backcone.engine.graph.DriveGraph;
import backcone.engine.graph.Problems;
import backcone.engine.graph.Slot;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import backcone.engine.units.Numbers;
import backcone.engine.units.Unit;
import java.util.ArrayList;
import java.util.List;
import org.jspecify.annotations.Nullable;

/** Findings about given values once numbers are known: not whole, out of range, contradicting each other. */
final class Facts {
    private final Run run;
    private final Problems problems;

    Facts(Run run, Problems problems) {
        this.run = run;
        this.problems = problems;
    }

    void report() {
        for (DriveGraph.Whole w : run.graph.wholes()) {
            whole(w);
        }
        for (DriveGraph.InRange r : run.graph.ranges()) {
            range(r);
        }
        if (problems.all().stream().anyMatch(d -> d.code() == Code.SPLIT_TRAIN)) {
            return; // speeds around a ring can't agree; the ring is said already
        }
        for (DriveGraph.Agreement a : run.graph.agreements()) {
            agree(a);
        }
    }

    private void whole(DriveGraph.Whole w) {
        double v = run.at(w.register());
        if (Double.isNaN(v) || Math.abs(v - Math.rint(v)) <= 1e-6 * Math.max(1, Math.abs(v))) {
            return;
        }
        Slot s = w.slot();
        Span span = s.factSpan();
        FileId file = s.factFile();
        if (span != null && file != null) {
            problems.add(
                    Code.NOT_WHOLE,
                    file,
                    span,
                    "`" + s.decl.name + "` is a whole number; found " + Numbers.format(v, 8) + ". Write " + near(v)
                            + ".");
        } else {
            FileId f = run.graph.fileOfElement(s.owner);
            problems.add(
                    Code.NOT_WHOLE,
                    f,
                    s.owner.headSpan(),
                    "`" + s.path() + "` would be " + Numbers.format(v, 8) + ", which is not whole; give it as "
                            + near(v) + ", or change what it follows from.");
        }
    }

    private static String near(double v) {
        return Numbers.format(Math.floor(v), 12) + " or " + Numbers.format(Math.ceil(v), 12);
    }

    private void range(DriveGraph.InRange r) {
        double v = run.at(r.register());
        double lo = run.at(r.low());
        double hi = run.at(r.high());
        if (Double.isNaN(v)
                || Double.isNaN(lo)
                || Double.isNaN(hi)
                || (v >= lo - 1e-9 * Math.abs(lo) && v <= hi + 1e-9 * Math.abs(hi))) {
            return;
        }
        Slot s = r.slot();
        Span span = s.factSpan();
        FileId file = s.factFile();
        if (span != null && file != null) {
            Unit u = run.graph.shownUnit(s);
            problems.add(
                    Code.OUT_OF_RANGE,
                    file,
                    span,
                    "`" + s.decl.name + "` is " + show(u, v) + "; it lies between " + show(u, lo) + " and "
                            + show(u, hi) + ". Check the number and its unit.");
        }
    }

    static String show(@Nullable Unit u, double v) {
        String t = u == null ? "" : DriveResults.text(u);
        return Numbers.format(DriveResults.in(u, v), 6) + (t.isEmpty() ? "" : " " + t);
    }

    private void agree(DriveGraph.Agreement a) {
        double l = run.at(a.left());
        double r = run.at(a.right());
        if (Double.isNaN(l)
                || Double.isNaN(r)
                || Math.abs(l - r) <= a.within() * Math.max(Math.abs(l), Math.abs(r)) + 1e-12) {
            return;
        }
        List<Slot> given = new ArrayList<>();
        for (Slot s : a.slots()) {
            if (s.factSpan() != null) {
                given.add(s);
            }
        }
        StringBuilder b = new StringBuilder();
        for (Slot s : a.slots()) {
            b.append(b.length() == 0 ? "" : ", ").append('`').append(s.path()).append("` ");
            b.append(s.factSpan() != null ? "= " : "comes to ")
                    .append(show(run.graph.shownUnit(s), run.at(s.register())));
        }
        double off = Math.abs(l - r) / Math.max(Math.abs(l), Math.abs(r)) * 100;
        String meaning = a.def().syntax().meaning() == null
                ? ""
                : " (" + a.def().syntax().meaning() + ")";
        String text = "These contradict each other" + meaning + " by " + Numbers.format(off, 2) + " %: " + b
                + ". Give one less, or correct one.";
        FileId file;
        Span span;
        if (given.isEmpty()) {
            file = run.graph.fileOfElement(a.at());
            span = a.at().headSpan();
        } else {
            Slot last = given.get(given.size() - 1);
            file = java.util.Objects.requireNonNull(last.factFile());
            span = java.util.Objects.requireNonNull(last.factSpan());
        }
        Diagnostic d = Diagnostic.of(Code.DISAGREE, file, span, text);
        for (int i = 0; i + 1 < given.size(); i++) {
            d = d.withRelated(
                    java.util.Objects.requireNonNull(given.get(i).factFile()),
                    java.util.Objects.requireNonNull(given.get(i).factSpan()),
                    "`" + given.get(i).path() + "` is given here");
        }
        problems.add(d.withRelated(a.def().file(), a.def().syntax().span(), "the relation between them"));
    }
}
