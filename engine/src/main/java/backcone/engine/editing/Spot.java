package backcone.engine.editing;

import backcone.engine.graph.DriveGraph;
import backcone.engine.graph.Element;
import backcone.engine.graph.Names;
import backcone.engine.syntax.Entry;
import backcone.engine.syntax.Nodes;
import java.util.List;
import org.jspecify.annotations.Nullable;

/**
 * Where an offset lies: the drive, the innermost block and what it means there. {@code element} is null at the top of a file and
 * in blocks that mean nothing.
 */
record Spot(
        @Nullable String drive,
        @Nullable DriveGraph graph,
        @Nullable Element element,
        Entry.@Nullable Rate rate,
        @Nullable Entry entry) {

    static Spot at(Scene scene, int offset) {
        for (Entry e : scene.tree.entries()) {
            if (!inside(e, offset)) {
                continue;
            }
            String drive = e instanceof Entry.Drive d
                    ? d.name().text()
                    : e instanceof Entry.Variant v ? v.name().text() : null;
            if (drive != null) {
                DriveGraph g = scene.graph(drive);
                return g == null ? new Spot(drive, null, null, null, e) : down(scene, drive, g, g.drive(), e, offset);
            }
            if (e instanceof Entry.Block b) {
                DriveGraph g = scene.blocks();
                Element el = g == null || b.name() == null
                        ? null
                        : new Names(g).top(b.name().text());
                if (g != null && el != null) {
                    return down(scene, null, g, el, e, offset);
                }
            }
            return new Spot(null, null, null, null, e);
        }
        return new Spot(null, null, null, null, null);
    }

    private static boolean inside(Entry e, int offset) {
        return e.span().start() <= offset && offset <= e.span().end();
    }

    private static Spot down(
            Scene scene, @Nullable String drive, DriveGraph graph, Element element, Entry around, int offset) {
        DriveGraph g = graph;
        Element el = element;
        Entry at = around;
        Entry.Rate rate = null;
        List<Entry> body = Nodes.body(around);
        boolean deeper = true;
        while (deeper && body != null) {
            deeper = false;
            for (Entry e : body) {
                if (!inside(e, offset)) {
                    continue;
                }
                at = e;
                if (e instanceof Entry.Block b
                        && b.body() != null
                        && offset > b.head().span().end()) {
                    Element inner = new Names(g).block(el, b);
                    if (inner == null) {
                        return new Spot(drive, g, null, rate, e);
                    }
                    el = inner;
                    body = b.body();
                    deeper = true;
                } else if (e instanceof Entry.Rate r && drive != null) {
                    rate = r;
                    if (r.under() != null && !r.under().isHole()) {
                        DriveGraph own = scene.graph(drive, r.under().text());
                        g = own == null ? g : own;
                    }
                    Element space = new Names(g).space(r);
                    int brace = scene.text.indexOf('{', r.method().span().end());
                    if (space != null && brace >= 0 && offset > brace) {
                        el = space;
                    }
                    body = r.body();
                    deeper = true;
                }
                break;
            }
        }
        return new Spot(drive, g, el, rate, at);
    }
}
