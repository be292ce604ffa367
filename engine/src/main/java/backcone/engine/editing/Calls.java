package backcone.engine.editing;

import backcone.engine.answers.Explanation;
import backcone.engine.eval.Run;
import backcone.engine.explain.Explainer;
import backcone.engine.graph.DriveGraph;
import backcone.engine.graph.Element;
import backcone.engine.graph.Slot;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import backcone.engine.units.Numbers;
import java.util.ArrayList;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Set;
import org.jspecify.annotations.Nullable;

/** What a value is computed from and what it is used in. */
public final class Calls {
    /** A value of a drive, where it is written or declared, and the case in which it was met. */
    public record Item(String drive, String name, String detail, FileId file, Span span, Span nameSpan) {}

    private Calls() {}

    public static @Nullable Item at(Scene scene, int offset) {
        Occurrence o = scene.occurrences().at(offset);
        Spot spot = Spot.at(scene, offset);
        if (o == null || o.target().path() == null || spot.graph() == null || spot.drive() == null) {
            return null;
        }
        Slot s = spot.graph().find(o.target().path());
        return s == null ? null : item(scene, spot.drive(), spot.graph(), s);
    }

    private static Item item(Scene scene, String drive, DriveGraph g, Slot s) {
        Explanation e;
        synchronized (scene) {
            g.demand(s);
            e = new Explainer(g, scene.texts).alone(s, new Run(g));
        }
        String value = e.text() != null
                ? e.text()
                : Double.isNaN(e.value())
                        ? e.status().word()
                        : Numbers.format(e.value(), 5) + (e.unit().isEmpty() ? "" : " " + e.unit());
        Slot.Fact f = s.fact();
        FileId file = f != null ? f.file() : s.decl.file;
        Span span = f != null ? f.span() : s.decl.span;
        Span name = f != null ? f.nameSpan() : s.decl.nameNode.span();
        return new Item(
                drive,
                s.path(),
                value + (s.decl.meaning == null ? "" : ", " + s.decl.meaning),
                file,
                span,
                name.start() < span.start() || name.end() > span.end() ? span : name);
    }

    /** The values named in the equation of a value. */
    public static List<Item> from(Scene scene, String drive, String name) {
        List<Item> out = new ArrayList<>();
        DriveGraph g = graphOf(scene, drive, name);
        Slot s = g == null ? null : g.find(name);
        if (g != null && s != null) {
            g.demand(s);
            for (Slot x : Explainer.behind(s)) {
                if (x != s) {
                    out.add(item(scene, drive, g, x));
                }
            }
        }
        return out;
    }

    /** The values in whose equations a value is named. */
    public static List<Item> into(Scene scene, String drive, String name) {
        List<Item> out = new ArrayList<>();
        DriveGraph g = graphOf(scene, drive, name);
        Slot s = g == null ? null : g.find(name);
        if (g == null || s == null) {
            return out;
        }
        Set<Slot> users = new LinkedHashSet<>();
        for (Slot x : all(g)) {
            for (Slot.Reach r : x.reachedOrNone()) {
                if (r.slot() == s && x != s) {
                    users.add(x);
                }
            }
        }
        for (Slot x : users) {
            out.add(item(scene, drive, g, x));
        }
        return out;
    }

    private static List<Slot> all(DriveGraph g) {
        Set<Slot> out = new LinkedHashSet<>();
        for (Element e : g.elements()) {
            out.addAll(g.givenSlots(e));
        }
        out.addAll(g.computedSlots());
        return new ArrayList<>(out);
    }

    private static @Nullable DriveGraph graphOf(Scene scene, String drive, String name) {
        Scene.Shown s = scene.drive(drive);
        if (s == null) {
            return null;
        }
        for (String c : backcone.engine.graph.DriveBuilder.casesInUse(s.source())) {
            DriveGraph g = scene.graph(drive, c);
            if (g != null && g.find(name) != null) {
                return g;
            }
        }
        return null;
    }
}
