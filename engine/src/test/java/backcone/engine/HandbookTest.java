package backcone.engine;

import static org.assertj.core.api.Assertions.assertThat;

import backcone.engine.answers.Examples;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.graph.Checker;
import backcone.engine.model.BodyDef;
import backcone.engine.model.Decl;
import backcone.engine.model.KindDef;
import backcone.engine.model.Library;
import backcone.engine.model.MethodDef;
import backcone.engine.syntax.Entry;
import backcone.engine.syntax.Expr;
import java.util.ArrayList;
import java.util.List;
import java.util.Set;
import java.util.TreeSet;
import java.util.stream.Stream;
import org.junit.jupiter.api.DynamicTest;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.TestFactory;

/** The shipped handbook: every name and dimension fits, every example is met, every equation is reached and cited. */
class HandbookTest {
    private final Handbook handbook = Handbook.whole();

    private static List<String> said(List<Diagnostic> problems) {
        List<String> out = new ArrayList<>();
        for (Diagnostic d : problems) {
            String text = Handbook.text(d.file());
            int line = 1;
            for (int i = 0; text != null && i < d.span().start() && i < text.length(); i++) {
                line += text.charAt(i) == '\n' ? 1 : 0;
            }
            out.add(d.file() + ":" + line + " " + d.code().id() + " " + d.message());
        }
        return out;
    }

    @Test
    void textsCanBeRead() {
        assertThat(said(handbook.problems())).isEmpty();
    }

    @Test
    void namesAndDimensionsOfEveryEquationFit() {
        assertThat(said(Checker.check(handbook.shapes()))).isEmpty();
    }

    @TestFactory
    Stream<DynamicTest> everyExampleIsMet() {
        Examples.Report report = Examples.run(handbook.shapes(), f -> true);
        assertThat(said(report.problems())).isEmpty();
        assertThat(report.outcomes()).isNotEmpty();
        return report.outcomes().stream()
                .map(o -> DynamicTest.dynamicTest(
                        o.owner() + " / " + o.example() + " / " + o.path(),
                        () -> assertThat(o.met())
                                .as(
                                        "%s: got %s, expected %s %s (%s) in %s",
                                        o.path(), o.got(), o.expected(), o.unit(), o.why(), o.file())
                                .isTrue()));
    }

    @Test
    void everyEquationIsReachedByAnExample() {
        Examples.Report report = Examples.run(handbook.shapes(), f -> true);
        Set<String> missed = new TreeSet<>();
        for (Decl d : declarations()) {
            if (isEquation(d) && !report.reachedEquations().contains(d)) {
                missed.add(d.file.path() + " " + d);
            }
        }
        assertThat(missed).isEmpty();
    }

    @Test
    void everyEquationNamesItsSource() {
        Set<String> bare = new TreeSet<>();
        for (Decl d : declarations()) {
            if (isEquation(d) && d.per == null) {
                bare.add(d.file.path() + " " + d);
            }
        }
        assertThat(bare).isEmpty();
    }

    @Test
    void everySourceThatIsCitedIsDeclared() {
        Set<String> unknown = new TreeSet<>();
        for (Decl d : declarations()) {
            if (d.per != null
                    && d.per.source() != null
                    && !handbook.shapes()
                            .library()
                            .sources
                            .containsKey(d.per.source().text())) {
                unknown.add(d + " cites " + d.per.source());
            }
        }
        assertThat(unknown).isEmpty();
    }

    @Test
    void whatMustBeGivenHasNoDefault() {
        Set<String> silent = new TreeSet<>();
        for (Decl d : declarations()) {
            if (d.needed
                    && d.how == Entry.Given.DEFAULT
                    && !(d.value instanceof Expr.Choose)
                    && !(d.value instanceof Expr.Path)) {
                silent.add(d.toString());
            }
        }
        assertThat(silent).isEmpty();
    }

    /** Something computed: not a renaming, a choice of words or a plain number that a drive replaces. */
    private static boolean isEquation(Decl d) {
        if (d.role != Decl.Role.QUANTITY || d.value == null) {
            return false;
        }
        return computes(d.value);
    }

    private static boolean computes(Expr e) {
        if (e instanceof Expr.Binary || e instanceof Expr.Root || e instanceof Expr.Settle) {
            return true;
        } else if (e instanceof Expr.Call c) {
            return !Set.of("upstream", "downstream", "case_at_hand", "count", "given")
                    .contains(c.callee().text());
        } else if (e instanceof Expr.Choose c) {
            return c.arms().stream().anyMatch(a -> computes(a.value()));
        } else if (e instanceof Expr.Neg n) {
            return computes(n.operand());
        }
        return false;
    }

    private List<Decl> declarations() {
        Library library = handbook.shapes().library();
        List<Decl> out = new ArrayList<>();
        for (KindDef k : library.kinds.values()) {
            collect(k.body(), out);
        }
        for (List<MethodDef> all : library.chapters.values()) {
            all.forEach(c -> collect(c.body(), out));
        }
        for (List<MethodDef> all : library.methods.values()) {
            all.forEach(m -> collect(m.body(), out));
        }
        return out;
    }

    private static void collect(BodyDef b, List<Decl> out) {
        out.addAll(b.decls);
        b.each.values().forEach(l -> l.forEach(x -> collect(x, out)));
    }
}
