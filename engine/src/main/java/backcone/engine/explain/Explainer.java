package backcone.engine.explain;

import backcone.engine.answers.Explanation;
import backcone.engine.answers.Explanation.Status;
import backcone.engine.answers.Sensitivities;
import backcone.engine.answers.Sensitivity;
import backcone.engine.answers.Why;
import backcone.engine.eval.Run;
import backcone.engine.graph.DriveBuilder;
import backcone.engine.graph.DriveGraph;
import backcone.engine.graph.Element;
import backcone.engine.graph.Slot;
import backcone.engine.graph.Val;
import backcone.engine.model.Decl;
import backcone.engine.model.Library;
import backcone.engine.model.Trust;
import backcone.engine.syntax.Entry;
import backcone.engine.syntax.Expr;
import backcone.engine.syntax.Note;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import backcone.engine.units.Unit;
import backcone.engine.units.Units;
import java.util.ArrayList;
import java.util.Comparator;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Optional;
import java.util.Set;
import java.util.function.Function;
import org.jspecify.annotations.Nullable;

/** Traces values back to what was given, with the text of every equation and the numbers put in. */
public final class Explainer {
    private static final int DEEPEST = 60;
    private static final int SENSITIVITIES = 3;
    private final DriveGraph graph;
    private final Function<FileId, @Nullable String> texts;
    private final Library library;

    /** The graph must have been built with tracing on. */
    public Explainer(DriveGraph graph, Function<FileId, @Nullable String> texts) {
        this.graph = graph;
        this.texts = texts;
        this.library = graph.shapes().library();
    }

    public Optional<Explanation> explain(String name) {
        Slot s = graph.find(name);
        return s == null ? Optional.empty() : explain(s);
    }

    /** The same for a value at hand. */
    public Optional<Explanation> explain(Slot s) {
        graph.demand(s);
        Run run = new Run(graph);
        Explanation e = of(s, run, new LinkedHashSet<>(), 0);
        return Optional.of(with(e, e.from(), e.remark(), sensitivities(s, run)));
    }

    /** None for a number that is written itself. */
    private static List<Sensitivity> sensitivities(Slot s, Run run) {
        List<Sensitivity> all = Sensitivities.of(run, s.register(), SENSITIVITIES);
        return all.stream().allMatch(x -> x.name().equals(s.path())) ? List.of() : all;
    }

    /** Every value behind the checks of a rating, in calculation order: what is computed after what it rests on. */
    public Optional<List<Explanation>> rating(String name) {
        for (DriveGraph.RateUse r : graph.rates()) {
            Element space = r.space();
            if (space == null
                    || !(r.id().equals(name)
                            || (r.mesh().path().equals(name) && r.mesh().path().length() > 0))) {
                continue;
            }
            Set<Slot> all = new LinkedHashSet<>();
            for (Slot s : DriveBuilder.checks(graph, space)) {
                graph.demand(s);
                gather(s, all, 0);
            }
            Run run = new Run(graph);
            List<Slot> order = new ArrayList<>(all);
            // given values first, then by the order in which the tape computes them
            order.sort(Comparator.comparingInt((Slot s) -> s.factSpan() != null ? 0 : 1)
                    .thenComparingInt(Slot::register));
            List<Explanation> out = new ArrayList<>();
            for (Slot s : order) {
                out.add(flat(s, run));
            }
            return Optional.of(out);
        }
        return Optional.empty();
    }

    private void gather(Slot s, Set<Slot> all, int depth) {
        if (depth > 200 || all.contains(s)) {
            return;
        }
        for (Slot x : behind(s)) {
            gather(x, all, depth + 1);
        }
        all.add(s);
    }

    /** Names of a drive that can be explained: what is given, and what the ratings and geometry compute. */
    public List<String> names() {
        Set<String> out = new LinkedHashSet<>();
        for (Element e : graph.elements()) {
            for (Slot s : graph.givenSlots(e)) {
                out.add(s.path());
            }
            if (!e.kind().isEmpty()) {
                for (String n : e.declaredNames()) {
                    out.add(e.path().isEmpty() ? n : e.path() + "." + n);
                }
            }
        }
        for (DriveGraph.RateUse r : graph.rates()) {
            Element space = r.space();
            if (space != null) {
                out.add(r.id());
                for (Slot s : DriveBuilder.checks(graph, space)) {
                    out.add(s.path());
                }
            }
        }
        return List.copyOf(out);
    }

    // ---- one value

    private Explanation of(Slot s, Run run, Set<Slot> above, int depth) {
        Explanation flat = flat(s, run);
        List<Explanation> from = new ArrayList<>();
        if (depth < DEEPEST && above.add(s)) {
            for (Slot x : behind(s)) {
                if (x == s) {
                    continue;
                }
                from.add(above.contains(x) ? told(flat(x, run)) : of(x, run, above, depth + 1));
            }
        }
        return with(flat, from, flat.remark());
    }

    private static Explanation told(Explanation e) {
        boolean leaf = e.status() == Status.GIVEN || e.status() == Status.ASSUMED || e.status() == Status.MEASURED;
        return leaf ? e : with(e, List.of(), e.remark() == null ? "told above" : e.remark() + "; told above");
    }

    private static Explanation with(Explanation e, List<Explanation> from, @Nullable String remark) {
        return with(e, from, remark, e.sensitivities());
    }

    private static Explanation with(
            Explanation e, List<Explanation> from, @Nullable String remark, List<Sensitivity> sensitivities) {
        return new Explanation(
                e.name(),
                e.value(),
                e.unit(),
                e.text(),
                e.symbol(),
                e.meaning(),
                e.source(),
                e.trust(),
                e.equation(),
                e.numbers(),
                e.status(),
                remark,
                e.file(),
                e.span(),
                List.copyOf(from),
                sensitivities);
    }

    /** One value alone, without what it came from. */
    public Explanation alone(Slot s, Run run) {
        return flat(s, run);
    }

    /** The slots named in the part of the equation that was taken, in order of their first use. */
    public static List<Slot> behind(Slot s) {
        Set<Slot> out = new LinkedHashSet<>();
        for (Slot.Reach r : s.reachedOrNone()) {
            out.add(r.slot());
        }
        return new ArrayList<>(out);
    }

    private Explanation flat(Slot s, Run run) {
        Decl d = s.decl;
        Slot.Fact fact = s.fact();
        Val v = s.value();
        double value = Double.NaN;
        String word = null;
        Unit unit = fact != null ? authorUnit(fact.value()) : null;
        if (unit == null) {
            unit = graph.shownUnit(s);
        }
        if (v instanceof Val.Num n) {
            value = run.at(n.register());
        } else if (v instanceof Val.Word w) {
            word = w.text();
        } else if (v instanceof Val.Picked p) {
            double i = run.at(p.register());
            word = Double.isNaN(i) ? null : p.words().get((int) i);
        } else if (v instanceof Val.Ref r) {
            word = r.element().path().isEmpty() ? r.element().name : r.element().path();
        } else if (v instanceof Val.Text t) {
            word = t.value();
        } else if (v instanceof Val.Day t) {
            word = t.value();
        }
        Status status = status(run, s, fact, v, value, word);
        String remark = null;
        if (status == Status.OPEN || status == Status.FAULT) {
            remark = v instanceof Val.Num n ? Why.open(run, n.register()) : "not given";
        }
        Texts text = new Texts(graph, run, texts, s);
        String equation = fact != null
                ? text.given(fact)
                : s.relationText() != null
                        ? text.of(s.relationFile(), s.relationSpan())
                        : d.value == null ? null : text.equation();
        String numbers = fact != null || d.value == null && s.relationText() == null ? null : text.numbers();
        if (s.relationText() != null) {
            remark = remark == null ? "solved for " + d.symbolOrName() : remark;
        } else if (fact == null && text.taken() != null) {
            remark = remark == null ? text.taken() : remark;
        }
        return new Explanation(
                s.path(),
                unit == null || Double.isNaN(value) ? value : unit.fromBase(value),
                unit == null || unit.text().equals("1") ? "" : unit.text(),
                word,
                d.symbol,
                d.meaning,
                fact != null ? provenance(fact.notes()) : source(s),
                fact != null || (d.value == null && s.relationText() == null) || renaming(d) ? null : trust(s).word(),
                equation,
                numbers,
                status,
                remark,
                fact != null ? fact.file() : d.file,
                fact != null ? fact.span() : d.span,
                List.of(),
                List.of());
    }

    private static boolean renaming(Decl d) {
        return d.per == null && (d.value instanceof Expr.Path || d.role != Decl.Role.QUANTITY);
    }

    private static Status status(
            Run run, Slot s, Slot.@Nullable Fact fact, @Nullable Val v, double value, @Nullable String word) {
        if (v instanceof Val.Num n && Double.isNaN(value)) {
            return Why.isFault(run, n.register()) ? Status.FAULT : Status.OPEN;
        }
        if (!(v instanceof Val.Num) && word == null) {
            return Status.OPEN;
        }
        if (fact != null) {
            if (s.isOverridden()) {
                return Status.OVERRIDDEN;
            }
            for (Note n : fact.notes()) {
                if (n instanceof Note.Assumed) {
                    return Status.ASSUMED;
                } else if (n instanceof Note.Measured) {
                    return Status.MEASURED;
                }
            }
            return Status.GIVEN;
        }
        if (s.relationText() != null) {
            return Status.SOLVED;
        }
        return s.decl.how == Entry.Given.DEFAULT ? Status.DEFAULT : s.isGiven() ? Status.GIVEN : Status.COMPUTED;
    }

    private static @Nullable Unit authorUnit(Expr e) {
        Expr x = e instanceof Expr.Toleranced t
                ? t.nominal()
                : e instanceof Expr.Range r ? r.low() : e instanceof Expr.Neg n ? n.operand() : e;
        if (x instanceof Expr.Num n
                && n.unit() != null
                && Units.standard().parse(n.unit().text()) instanceof Units.Parse.Ok ok) {
            return ok.unit();
        }
        return null;
    }

    private static @Nullable String provenance(List<Note> notes) {
        StringBuilder b = new StringBuilder();
        for (Note n : notes) {
            String t = null;
            if (n instanceof Note.Per p) {
                t = (p.text() != null
                                ? p.text()
                                : p.source() != null ? p.source().text() : "")
                        + (p.on() == null ? "" : ", " + p.on().text());
            } else if (n instanceof Note.Measured m) {
                t = m.text() == null ? "measured" : "measured, " + m.text();
            } else if (n instanceof Note.Assumed a) {
                t = "assumed" + (a.reason() == null ? "" : " because " + a.reason());
            } else if (n instanceof Note.Because c) {
                t = "because " + c.text();
            }
            if (t != null && !t.isEmpty()) {
                b.append(b.length() == 0 ? "" : "; ").append(t);
            }
        }
        return b.length() == 0 ? null : b.toString();
    }

    private Note.@Nullable Per per(Slot s) {
        Note.Per p = s.relationPer();
        return p != null ? p : s.decl.per;
    }

    private @Nullable String source(Slot s) {
        Note.Per p = per(s);
        if (p == null) {
            return null;
        }
        String name = p.source() == null ? "" : p.source().text();
        Library.SourceDef def = library.sources.get(name);
        String said = def == null ? name : def.text();
        return p.text() == null ? said : said + ", " + p.text();
    }

    private Trust trust(Slot s) {
        Note.Per p = per(s);
        if (p == null || p.trust() == null) {
            return Trust.RECALLED;
        }
        Trust t = Trust.of(p.trust().text());
        return t == null ? Trust.RECALLED : t;
    }

    static Span none() {
        return Span.NONE;
    }
}
