package backcone.engine.answers;

import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.eval.Run;
import backcone.engine.graph.DriveGraph;
import backcone.engine.graph.ExampleGraph;
import backcone.engine.graph.Op;
import backcone.engine.graph.Problems;
import backcone.engine.graph.Shapes;
import backcone.engine.graph.Slot;
import backcone.engine.graph.Tape;
import backcone.engine.graph.Val;
import backcone.engine.model.BodyDef;
import backcone.engine.model.Decl;
import backcone.engine.model.KindDef;
import backcone.engine.model.Library;
import backcone.engine.model.MethodDef;
import backcone.engine.model.TableDef;
import backcone.engine.syntax.Entry;
import backcone.engine.text.FileId;
import backcone.engine.units.Unit;
import java.util.ArrayList;
import java.util.HashSet;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Set;
import java.util.function.Predicate;
import org.jspecify.annotations.Nullable;

/** Runs the worked examples that stand in handbook texts and tells which equations they reach. */
public final class Examples {
    private Examples() {}

    /** One {@code gives}: NaN where open; deviation is relative. */
    public record Outcome(
            String owner,
            String example,
            String path,
            double got,
            double expected,
            double tolerance,
            String unit,
            boolean met,
            String why,
            FileId file,
            Entry.Gives syntax) {
        public double deviation() {
            return expected == 0 ? Math.abs(got) : Math.abs(got / expected - 1);
        }
    }

    public record Report(
            List<Outcome> outcomes,
            List<Diagnostic> problems,
            Set<Decl> reachedEquations,
            Set<TableDef> reachedTables) {}

    /** The examples of all files for which {@code wanted} holds. */
    public static Report run(Shapes shapes, Predicate<FileId> wanted) {
        return run(shapes, wanted, x -> true);
    }

    /** Of these files, the examples for which {@code example} holds. */
    public static Report run(Shapes shapes, Predicate<FileId> wanted, Predicate<Entry.Example> example) {
        Library library = shapes.library();
        Report report = new Report(new ArrayList<>(), new ArrayList<>(), new HashSet<>(), new HashSet<>());
        for (KindDef k : library.kinds.values()) {
            all(shapes, k.name(), null, k.body(), wanted, example, report);
        }
        for (List<MethodDef> cs : library.chapters.values()) {
            for (MethodDef c : cs) {
                all(shapes, c.kind(), null, c.body(), wanted, example, report);
            }
        }
        for (List<MethodDef> ms : library.methods.values()) {
            for (MethodDef m : ms) {
                all(shapes, m.kind(), m, m.body(), wanted, example, report);
            }
        }
        return report;
    }

    private static void all(
            Shapes shapes,
            String kind,
            @Nullable MethodDef method,
            BodyDef body,
            Predicate<FileId> wanted,
            Predicate<Entry.Example> example,
            Report report) {
        if (!wanted.test(body.file)) {
            return;
        }
        for (Entry.Example x : body.examples) {
            if (example.test(x)) {
                one(shapes, kind, method, body, x, report);
            }
        }
        for (List<BodyDef> each : body.each.values()) {
            for (BodyDef b : each) {
                all(shapes, kind, method, b, wanted, example, report);
            }
        }
    }

    private static void one(
            Shapes shapes, String kind, @Nullable MethodDef method, BodyDef body, Entry.Example x, Report report) {
        Problems problems = new Problems();
        ExampleGraph g = ExampleGraph.build(shapes, kind, method, x, body.file, problems, false);
        Run run = new Run(g.graph);
        report.problems.addAll(problems.all());
        for (ExampleGraph.Expectation e : g.expectations) {
            report.outcomes.add(outcome(run, body, x, e));
            reach(run, e.value(), report);
            Slot named = run.graph.find("it." + e.syntax().path().text());
            if (named == null) {
                named = run.graph.find(e.syntax().path().text()); // the example is of a whole drive
            }
            if (named != null && named.factSpan() == null) {
                report.reachedEquations.add(named.decl);
            }
        }
    }

    private static Outcome outcome(Run run, BodyDef body, Entry.Example x, ExampleGraph.Expectation e) {
        String path = e.syntax().path().text();
        if (e.wordExpected() != null) {
            String found = e.word() != null
                    ? e.word()
                    : Double.isNaN(run.at(e.value())) ? "open" : e.words().get((int) run.at(e.value()));
            boolean met = e.wordExpected().equals(found);
            return new Outcome(
                    body.owner,
                    x.title(),
                    path,
                    Double.NaN,
                    Double.NaN,
                    0,
                    "",
                    met,
                    met ? "" : "found " + found,
                    body.file,
                    e.syntax());
        }
        double got = run.at(e.value());
        double expected = run.at(e.expected());
        double tolerance = e.within() < 0
                ? 1e-9 * Math.abs(expected)
                : run.at(e.within()) * (e.relative() ? Math.abs(expected) : 1);
        boolean met = Math.abs(got - expected) <= tolerance * (1 + 1e-9) + 1e-15;
        String why = "";
        if (Double.isNaN(got)) {
            StringBuilder b = new StringBuilder();
            Reasons.Why w = new Reasons(run).of(e.value());
            w.open().forEach(s -> b.append(b.length() == 0 ? "open: " : ", ").append(s.path()));
            w.faults().forEach(f -> b.append(b.length() == 0 ? "" : "; ").append(f.message()));
            why = b.toString();
        }
        Unit u = e.dimension() == null ? null : run.graph.shownUnit(new Val.Num(e.value(), e.dimension(), Double.NaN));
        return new Outcome(
                body.owner,
                x.title(),
                path,
                DriveResults.in(u, got),
                DriveResults.in(u, expected),
                u == null ? tolerance : tolerance * u.denominator() / u.numerator(),
                u == null ? "" : DriveResults.text(u),
                met,
                why,
                body.file,
                e.syntax());
    }

    /** Equations and tables on the way to a value, over the arms taken. */
    private static void reach(Run run, int register, Report report) {
        if (register < 0) {
            return;
        }
        DriveGraph g = run.graph;
        Tape tape = g.tape();
        Set<Integer> seen = new LinkedHashSet<>();
        List<Integer> todo = new ArrayList<>(List.of(register));
        while (!todo.isEmpty()) {
            int r = todo.remove(todo.size() - 1);
            if (!seen.add(r)) {
                continue;
            }
            for (Slot s :
                    List.of(java.util.Optional.ofNullable(g.ownerOf(r)), java.util.Optional.ofNullable(g.near(r)))
                            .stream()
                            .flatMap(java.util.Optional::stream)
                            .toList()) {
                if (s.factSpan() == null) {
                    report.reachedEquations.add(s.decl);
                }
            }
            TableDef t = g.tableAt(r);
            if (t != null) {
                report.reachedTables.add(t);
            }
            if (tape.op(r) == Op.SELECT) {
                todo.add(tape.a(r));
                if (!Double.isNaN(run.at(tape.a(r)))) {
                    todo.add(run.at(tape.a(r)) != 0 ? tape.b(r) : tape.c(r));
                }
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
        report.reachedTables.addAll(g.usedTables());
    }
}
