package backcone.engine;

import backcone.engine.answers.DriveAnswer;
import backcone.engine.answers.DriveResults;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.editing.Hints;
import backcone.engine.eval.Run;
import backcone.engine.graph.DriveBuilder;
import backcone.engine.graph.DriveGraph;
import backcone.engine.graph.DriveSource;
import backcone.engine.graph.Problems;
import backcone.engine.graph.Shapes;
import backcone.engine.syntax.Entry;
import backcone.engine.syntax.Expr;
import backcone.engine.syntax.Nodes;
import backcone.engine.text.Span;
import backcone.engine.units.Unit;
import backcone.engine.units.Units;
import java.time.LocalDate;
import java.util.ArrayList;
import java.util.Collections;
import java.util.IdentityHashMap;
import java.util.List;
import java.util.Set;
import org.jspecify.annotations.Nullable;

/**
 * A drive with its graphs and results, for the text in which it was built. It serves later texts too: as it is while only its
 * place has changed, and with another number in its inputs while only that number has.
 */
final class Built {
    final DriveSource source;

    /** The text and the entries of the whole file when the graphs were built. */
    final SourceText base;

    final List<Run> runs;
    final List<Diagnostic> whileBuilding;
    final DriveAnswer answer;
    final List<Diagnostic> found;

    /** The number that differs from the text in which the graphs were built, and how much longer it is now. */
    final @Nullable Span number;

    final int longer;

    private Built(
            DriveSource source,
            SourceText base,
            List<Run> runs,
            List<Diagnostic> whileBuilding,
            @Nullable Span number,
            int longer,
            LocalDate today) {
        this.source = source;
        this.base = base;
        this.runs = runs;
        this.whileBuilding = whileBuilding;
        this.number = number;
        this.longer = longer;
        Problems p = new Problems();
        whileBuilding.forEach(p::add);
        this.answer = DriveResults.of(source, runs, today, p);
        this.found = List.copyOf(p.all());
    }

    /** With {@code editing} what editors show beside the text is computed too. */
    static Built of(DriveSource s, SourceText main, Sources sources, Shapes shapes, LocalDate today, boolean editing) {
        Problems p = new Problems();
        List<Run> runs = new ArrayList<>();
        for (String c : DriveBuilder.casesInUse(s)) {
            DriveGraph g = DriveBuilder.build(shapes, sources, s, c, p, false);
            if (editing) {
                g.demand(Hints.wanted(g));
            }
            runs.add(new Run(g));
        }
        return new Built(s, main, runs, List.copyOf(p.all()), null, 0, today);
    }

    /** The places of this drive's text in the present text of its file. */
    Moved moved(SourceText main) {
        return new Moved(main.file(), base.tree().entries(), main.tree().entries(), number, longer);
    }

    /**
     * The same drive where entry number {@code index} of the file differs from the text in which it was built by one number
     * alone; null where it differs by more.
     */
    @Nullable
    Built withNumber(int index, SourceText main, LocalDate today) {
        if (source.layers().size() != 1) {
            return null;
        }
        Entry old = base.tree().entries().get(index);
        Entry now = main.tree().entries().get(index);
        int os = old.span().start();
        int ns = now.span().start();
        int ol = old.span().length();
        int nl = now.span().length();
        String a = base.text();
        String b = main.text();
        int most = Math.min(ol, nl);
        int head = 0;
        while (head < most && a.charAt(os + head) == b.charAt(ns + head)) {
            head++;
        }
        int tail = 0;
        while (tail < most - head && a.charAt(os + ol - 1 - tail) == b.charAt(ns + nl - 1 - tail)) {
            tail++;
        }
        Span changed = new Span(os + head, os + ol - tail);
        Expr.Num literal = literal(old, changed);
        if (literal == null) {
            return null;
        }
        int start = literal.span().start();
        Expr.Num typed = number(now, ns + (start - os));
        int longer = nl - ol;
        if (typed == null
                || typed.text().length() != literal.text().length() + longer
                || !java.util.Objects.equals(text(typed), text(literal))) {
            return null;
        }
        // the same mistakes as before, at the same places
        Span number = new Span(start, start + literal.text().length());
        if (!problemsIn(base, old.span()).isEmpty()
                || !problemsIn(main, now.span()).isEmpty()) {
            return null;
        }
        double v = base(typed);
        List<Run> again = new ArrayList<>();
        boolean used = false;
        for (Run r : runs) {
            double[] in = r.graph.inputValues();
            for (int i = 0; i < in.length; i++) {
                if (r.graph.inputs().get(i).literal() == literal) {
                    in[i] = v;
                    used = true;
                }
            }
            again.add(new Run(r.graph, in));
        }
        return used && !Double.isNaN(v) ? new Built(source, base, again, whileBuilding, number, longer, today) : null;
    }

    private static List<Diagnostic> problemsIn(SourceText t, Span where) {
        List<Diagnostic> out = new ArrayList<>();
        for (Diagnostic d : t.problems()) {
            if (where.contains(d.span().start())) {
                out.add(d);
            }
        }
        return out;
    }

    private static @Nullable String text(Expr.Num n) {
        return n.unit() == null ? null : n.unit().text();
    }

    /** The number of the drive in whose digits all of {@code changed} lies, if it is an input of the graphs. */
    private Expr.@Nullable Num literal(Entry drive, Span changed) {
        Set<Expr.Num> own = Collections.newSetFromMap(new IdentityHashMap<>());
        Nodes.walk(drive, n -> {
            if (n instanceof Expr.Num x
                    && x.span().start() <= changed.start()
                    && changed.end() <= x.span().start() + x.text().length()) {
                own.add(x);
            }
        });
        if (own.size() != 1) {
            return null;
        }
        for (Run r : runs) {
            for (DriveGraph.Input i : r.graph.inputs()) {
                if (i.literal() != null && own.contains(i.literal())) {
                    return i.literal();
                }
            }
        }
        return null;
    }

    private static Expr.@Nullable Num number(Entry drive, int start) {
        Expr.Num[] found = new Expr.Num[1];
        Nodes.walk(drive, n -> {
            if (n instanceof Expr.Num x && x.span().start() == start) {
                found[0] = x;
            }
        });
        return found[0];
    }

    static double base(Expr.Num n) {
        if (n.unit() == null) {
            return n.value();
        }
        Unit u = Units.standard().parse(n.unit().text()) instanceof Units.Parse.Ok ok ? ok.unit() : null;
        return u == null ? Double.NaN : u.toBase(n.value());
    }
}
