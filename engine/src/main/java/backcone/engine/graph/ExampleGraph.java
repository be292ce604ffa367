package backcone.engine.graph;

import backcone.engine.model.MethodDef;
import backcone.engine.syntax.Entry;
import backcone.engine.syntax.Expr;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import backcone.engine.units.Dimension;
import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import org.jspecify.annotations.Nullable;

/** A worked example of a handbook text as a small drive of its own. */
public final class ExampleGraph {
    public final DriveGraph graph;
    public final List<Expectation> expectations = new ArrayList<>();

    /** {@code gives path = expected within tolerance}; a word is compared as text. Registers are −1 where unused. */
    public record Expectation(
            Entry.Gives syntax,
            int value,
            int expected,
            int within,
            boolean relative,
            @Nullable Dimension dimension,
            @Nullable String word,
            @Nullable String wordExpected,
            List<String> words) {}

    private ExampleGraph(DriveGraph graph) {
        this.graph = graph;
    }

    /** {@code method} is set for the example of a method, else {@code kind} is the kind of the chapter or kind. */
    public static ExampleGraph build(
            Shapes shapes,
            String kind,
            @Nullable MethodDef method,
            Entry.Example example,
            FileId file,
            Problems problems,
            boolean traced) {
        DriveGraph g = new DriveGraph(shapes, new NoTexts(), problems, traced);
        Element drive = new Element(0, "example", shapes.of("drive"), null, "");
        drive.file = file;
        drive.span = example.span();
        g.drive = drive;
        g.elements.add(drive);
        Elaborator el = new Elaborator(g).forExample();
        el.furnish(drive);
        Element owner = drive;
        if (!kind.equals("drive")) {
            String collection = "";
            for (Entry.Parts p : drive.shape.parts) {
                if (!Shape.fixed(p) && shapes.library.isKind(kind, p.kind().text())) {
                    collection = p.names().get(0).text();
                }
            }
            owner = el.create(
                    "it", shapes.of(kind), collection.isEmpty() ? drive : drive, collection, file, example.span());
            if (!collection.isEmpty() && drive.named.get("group " + collection) instanceof Val.Group group) {
                group.elements().add(owner);
            }
            drive.named.put("it", owner);
        }
        if (method != null) {
            String edition = method.body().editions.isEmpty()
                    ? null
                    : method.body().editions.get(0);
            for (Entry e : example.body()) {
                if (e instanceof Entry.Edition d && !d.editions().isEmpty()) {
                    edition = d.editions().get(0).text();
                }
                if (e instanceof Entry.Fact f && f.path().text().equals("edition") && f.value() instanceof Expr.Num n) {
                    edition = n.text();
                }
            }
            owner = el.space(owner, method, method.name(), edition, file, example.span());
            el.exampleSpace = owner;
        }
        List<Entry> body = new ArrayList<>();
        for (Entry e : example.body()) {
            if (e instanceof Entry.Fact f && f.path().text().equals("edition")) {
                continue;
            }
            if (!(e instanceof Entry.Gives) && !(e instanceof Entry.Edition)) {
                body.add(e);
            }
        }
        for (Entry e : body) {
            if (e instanceof Entry.Block b && b.head().text().equals("gear") && b.name() != null) {
                g.sharedBlocks.put(b.name().text(), new DriveGraph.TopEntry(file, b, Map.of()));
            }
        }
        el.queue(owner, body, file);
        List<Element> cases = g.allOfKind("case");
        if (!cases.isEmpty()) {
            g.activeCase = cases.get(0);
        }
        el.drain();
        for (Entry e : body) {
            if (e instanceof Entry.Rate r) {
                el.rate(r, file, false);
            } else if (e instanceof Entry.UseReading u && owner.isSpace()) {
                el.reading(owner, u, file);
            }
        }
        el.drain();
        new Relations(g).orient();
        ExampleGraph x = new ExampleGraph(g);
        for (Entry e : example.body()) {
            if (e instanceof Entry.Gives give) {
                x.expect(give, owner, file);
            }
        }
        g.tape.finish();
        return x;
    }

    private void expect(Entry.Gives give, Element owner, FileId file) {
        Ctx ctx = Ctx.of(owner);
        Frame f = Frame.at(file, false);
        Val v = graph.compiler.eval(give.path(), ctx, f);
        if (v instanceof Val.Word || v instanceof Val.Picked || v instanceof Val.Ref || v instanceof Val.Text) {
            String word = give.value() instanceof Expr.Path p
                    ? p.text()
                    : give.value() instanceof Expr.Str s ? s.value() : "";
            if (v instanceof Val.Picked p) {
                expectations.add(new Expectation(give, p.register(), -1, -1, false, null, null, word, p.words()));
            } else {
                String found = v instanceof Val.Word w
                        ? w.text()
                        : v instanceof Val.Ref r ? r.element().name : v instanceof Val.Text t ? t.value() : "";
                expectations.add(new Expectation(give, -1, -1, -1, false, null, found, word, List.of()));
            }
            return;
        }
        if (v instanceof Val.Truth || v instanceof Val.Fixed) {
            v = new Val.Num(graph.compiler.truth(v, give.path(), f), Dimension.NONE, Double.NaN);
        }
        Val n = graph.compiler.numeric(v, f, give.path());
        Val e = graph.compiler.numeric(graph.compiler.eval(give.value(), ctx, f), f, give.value());
        if (!(n instanceof Val.Num value) || !(e instanceof Val.Num expected)) {
            return;
        }
        if (value.dimension() != null && expected.dimension() != null && value.dimension() != expected.dimension()) {
            graph.problems.add(
                    backcone.engine.diagnostics.Code.WRONG_UNIT,
                    file,
                    give.value().span(),
                    "`" + give.path().text() + "` is of dimension " + value.dimension() + "; this is of dimension "
                            + expected.dimension() + ".");
        }
        int within = -1;
        boolean relative = false;
        Expr w = give.within();
        if (w != null && graph.compiler.eval(w, ctx, f) instanceof Val.Num t) {
            within = t.register();
            relative = w instanceof Expr.Num num
                    && num.unit() != null
                    && num.unit().text().equals("%");
        }
        expectations.add(new Expectation(
                give,
                value.register(),
                expected.register(),
                within,
                relative,
                value.dimension(),
                null,
                null,
                List.of()));
    }

    /** Examples stand alone. */
    private static final class NoTexts implements DriveGraph.Top {
        @Override
        public DriveGraph.@Nullable TopEntry find(String name) {
            return null;
        }

        @Override
        public java.util.Collection<String> names() {
            return List.of();
        }

        @Override
        public String text(FileId file, Span span) {
            return "…";
        }
    }
}
