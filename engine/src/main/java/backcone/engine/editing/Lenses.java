package backcone.engine.editing;

import backcone.engine.answers.RequirementAnswer;
import backcone.engine.syntax.Entry;
import backcone.engine.text.Span;
import java.util.ArrayList;
import java.util.List;
import org.jspecify.annotations.Nullable;

/** Lines shown above drives, ratings and materials. */
public final class Lenses {
    /** {@code name} is what a click is about: the governing requirement's place, or the material whose uses are shown. */
    public record Lens(Span span, String title, @Nullable Span leadsTo, boolean material) {}

    private Lenses() {}

    public static List<Lens> of(Scene scene) {
        List<Lens> out = new ArrayList<>();
        for (Entry e : scene.tree.entries()) {
            String name = e instanceof Entry.Drive x
                    ? x.name().text()
                    : e instanceof Entry.Variant x ? x.name().text() : null;
            Scene.Shown s = name == null ? null : scene.drive(name);
            if (e instanceof Entry.Drive d && s != null) {
                out.add(drive(d.name().span(), s));
                for (Entry x : d.body()) {
                    if (x instanceof Entry.Rate r) {
                        List<RequirementAnswer> own = new ArrayList<>();
                        for (RequirementAnswer a : s.answer().requirements()) {
                            if (a.file().equals(scene.file)
                                    && r.span().start() <= a.span().start()
                                    && a.span().end() <= r.span().end()) {
                                own.add(a);
                            }
                        }
                        if (!own.isEmpty()) {
                            out.add(lens(r.mesh().span(), own));
                        }
                    }
                }
            } else if (e instanceof Entry.Variant v && s != null) {
                out.add(drive(v.name().span(), s));
            } else if (e instanceof Entry.Block b && b.head().text().equals("material") && b.name() != null) {
                out.add(new Lens(b.name().span(), "", null, true));
            }
        }
        return out;
    }

    private static Lens drive(Span at, Scene.Shown s) {
        RequirementAnswer governing = null;
        for (RequirementAnswer r : s.answer().requirements()) {
            if (r.id().equals(s.answer().governing())) {
                governing = r;
            }
        }
        String text = Labels.counts(s.answer().requirements());
        if (governing != null) {
            text += " \u00B7 governing " + governing.id() + ", load \u00D7"
                    + backcone.engine.units.Numbers.format(governing.loadReserve(), 3);
        }
        boolean here = governing != null && governing.file().equals(s.source().file());
        return new Lens(at, text, here && governing != null ? governing.span() : null, false);
    }

    private static Lens lens(Span at, List<RequirementAnswer> all) {
        RequirementAnswer least = null;
        for (RequirementAnswer r : all) {
            if (!Double.isNaN(r.loadReserve()) && (least == null || r.loadReserve() < least.loadReserve())) {
                least = r;
            }
        }
        String text = Labels.counts(all);
        if (least != null && least.rating() != null && least.mesh() != null) {
            String id = least.id()
                    .substring(Math.min(least.id().length(), (least.mesh() + "." + least.rating() + ".").length()));
            text += " \u00B7 governing " + id + ", " + Labels.percent(least.margin());
        }
        return new Lens(at, text, least == null ? null : least.span(), false);
    }
}
