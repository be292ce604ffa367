package backcone.lsp;

import backcone.engine.Analysis;
import backcone.engine.answers.Explanation;
import backcone.engine.editing.Occurrence;
import backcone.engine.editing.Scene;
import backcone.engine.syntax.Entry;
import backcone.engine.syntax.Name;
import backcone.engine.syntax.Nodes;
import backcone.engine.units.Numbers;
import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import org.jspecify.annotations.Nullable;

/** Pages that show how a value came about, for reading beside the text. */
final class Reports {
    private static final String CAUTION =
            "\n---\n*These figures support a qualified engineer's judgement and do not replace it; local codes, the machine's"
                    + " safety standards and the bought standard prevail.*\n";

    record Page(String title, String markdown) {}

    private Reports() {}

    static @Nullable Page at(Analysis a, int offset) {
        Scene scene = a.scene();
        String drive = null;
        for (Entry e : scene.tree.entries()) {
            if (e.span().contains(offset) && (e instanceof Entry.Drive || e instanceof Entry.Variant)) {
                Name called = Nodes.name(e);
                List<Entry> body = Nodes.body(e);
                drive = called == null ? null : called.text();
                for (Entry x : body == null ? List.<Entry>of() : body) {
                    if (x instanceof Entry.Rate r
                            && r.span().start() <= offset
                            && offset
                                    <= (r.as() != null
                                            ? r.as().span().end()
                                            : r.method().span().end())) {
                        String id = r.mesh().text() + "."
                                + (r.as() == null ? r.method().text() : r.as().text());
                        Optional<List<Explanation>> all = a.explainRating(drive + "." + id);
                        if (all.isPresent()) {
                            return rating(id, all.get());
                        }
                    }
                }
            }
        }
        Occurrence o = scene.occurrences().at(offset);
        if (o == null || o.target().path() == null || drive == null) {
            return null;
        }
        String name = o.target().path();
        Optional<Explanation> e = a.explain(drive + "." + name);
        if (e.isEmpty()) {
            return null;
        }
        StringBuilder b = new StringBuilder("# ").append(name).append("\n\n");
        List<Explanation> order = new ArrayList<>();
        gather(e.get(), order);
        for (int i = order.size() - 1; i >= 0; i--) {
            one(order.get(i), b);
        }
        return new Page(name, b + CAUTION);
    }

    private static void gather(Explanation e, List<Explanation> out) {
        if (out.size() < 400) {
            out.add(e);
            e.from().forEach(x -> {
                boolean told = out.stream().anyMatch(y -> y.name().equals(x.name()));
                if (!told) {
                    gather(x, out);
                }
            });
        }
    }

    private static Page rating(String id, List<Explanation> all) {
        StringBuilder b = new StringBuilder("# ").append(id).append("\n\n");
        for (Explanation e : all) {
            one(e, b);
        }
        return new Page(id, b + CAUTION);
    }

    private static void one(Explanation e, StringBuilder b) {
        String shown = e.text() != null
                ? e.text()
                : Double.isNaN(e.value())
                        ? e.status().word()
                        : Numbers.format(e.value(), 6) + (e.unit().isEmpty() ? "" : " " + e.unit());
        b.append("**")
                .append(e.meaning() == null ? e.name() : plain(e.meaning()))
                .append("** `")
                .append(e.name())
                .append("`");
        b.append(" = `").append(shown.replace('`', '\'')).append("`");
        boolean given = e.equation() == null || e.numbers() == null;
        if (!given) {
            b.append("\n\n```\n")
                    .append(e.symbol() == null ? "" : e.symbol() + " = ")
                    .append(e.equation())
                    .append("\n  = ")
                    .append(e.numbers())
                    .append("\n```\n");
        } else {
            b.append(", ").append(e.status().word()).append("\n");
        }
        if (e.source() != null) {
            b.append(given ? "" : "after ").append(plain(e.source()));
            b.append(e.trust() == null ? "" : " (" + e.trust() + ")").append("\n");
        }
        b.append("\n");
    }

    private static String plain(String s) {
        return s.replace("<", "&lt;").replace("*", "\\*").replace("_", "\\_").replace("`", "'");
    }
}
