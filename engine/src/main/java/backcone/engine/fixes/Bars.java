package backcone.engine.fixes;

import backcone.engine.answers.CheckAnswer;
import backcone.engine.answers.DriveAnswer;
import backcone.engine.answers.RequirementAnswer;
import backcone.engine.answers.State;
import backcone.engine.diagnostics.Code;
import backcone.engine.eval.Run;
import backcone.engine.graph.DriveGraph;
import backcone.engine.graph.Slot;
import backcone.engine.syntax.Entry;
import backcone.engine.syntax.Node;
import backcone.engine.text.Span;
import backcone.engine.units.Numbers;
import java.math.BigDecimal;
import java.math.MathContext;
import java.math.RoundingMode;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import org.jspecify.annotations.Nullable;

/** Requirements for checks that have none, and deviations for those that are short. What a person decides stays empty. */
final class Bars {
    private static final int MOST = 6;
    private final Subject subject;
    private final Trial trial;

    Bars(Subject subject, Trial trial) {
        this.subject = subject;
        this.trial = trial;
    }

    // ---- a requirement for a check

    /** With the cursor on the words that open a rating: a line for each check that nothing asks for. */
    List<Fix> requirements(Span range) {
        List<Fix> out = new ArrayList<>();
        List<Node> around = Walk.around(subject.syntax().entries(), range);
        Entry.Rate rate = Walk.last(around, Entry.Rate.class);
        if (rate == null) {
            return out;
        }
        String text = subject.text();
        int brace = text.indexOf('{', rate.span().start());
        if (brace < 0 || brace >= rate.span().end() || range.start() > brace + 1) {
            return out;
        }
        Entry.Drive drive = Walk.first(around, Entry.Drive.class);
        Entry.Variant variant = Walk.first(around, Entry.Variant.class);
        String name = drive != null
                ? drive.name().text()
                : variant != null ? variant.name().text() : "";
        String id = rate.mesh().text() + "."
                + (rate.as() != null ? rate.as().text() : rate.method().text()) + ".";
        for (DriveAnswer d : subject.drives()) {
            if (!d.name().equals(name)) {
                continue;
            }
            Map<String, List<CheckAnswer>> checks = new LinkedHashMap<>();
            for (CheckAnswer c : d.unrequired()) {
                if (c.id().startsWith(id)) {
                    checks.computeIfAbsent(c.id().substring(c.id().lastIndexOf('.') + 1), k -> new ArrayList<>())
                            .add(c);
                }
            }
            checks.forEach((check, list) -> {
                if (out.size() < MOST && !required(rate, check)) {
                    out.add(requirement(d.name(), rate, check, list));
                }
            });
        }
        return out;
    }

    private static boolean required(Entry.Rate rate, String check) {
        return rate.body().stream().anyMatch(e -> e instanceof Entry.Requirement q && last(q).equals(check));
    }

    private static String last(Entry.Requirement q) {
        String p = q.path().text();
        return p.substring(p.lastIndexOf('.') + 1);
    }

    private Fix requirement(String drive, Entry.Rate rate, String check, List<CheckAnswer> list) {
        StringBuilder now = new StringBuilder();
        for (CheckAnswer c : list) {
            if (!Double.isNaN(c.value())) {
                now.append(now.length() == 0 ? "" : " and ").append(Numbers.format(c.value(), 4));
            }
        }
        String unit = list.get(0).unit();
        String said = now.length() == 0 ? "open" : "now " + now + (unit.isEmpty() ? "" : " " + unit);
        String line = check + (growsWithLoad(drive, list.get(0).id()) ? " <= " : " >= ") + "    # " + said + ": "
                + list.get(0).meaning();
        return new Fix(
                "require `" + check + "` (" + said + ")",
                Fix.Kind.REWRITE,
                false,
                List.of(Edits.atEndOf(subject.file(), subject.text(), rate.span(), List.of(line))),
                List.of());
    }

    /** A safety falls as the load grows, and is asked to be at least something; a demand grows, and at most. */
    private boolean growsWithLoad(String drive, String id) {
        for (DriveGraph g : trial.graphs(drive)) {
            Slot s = g.find(id);
            if (s == null || s.register() < 0) {
                continue;
            }
            Run run = new Run(g);
            if (run.loadActsOn(s.register())) {
                return run.underLoad(s.register()).applyAsDouble(1.05) > run.at(s.register());
            }
        }
        return false;
    }

    // ---- a deviation

    /** The last of all: an acceptance whose date, person and reason are still to be typed. */
    List<Fix> deviations(Span range) {
        for (DriveAnswer d : subject.drives()) {
            List<String> lines = new ArrayList<>();
            List<String> values = new ArrayList<>();
            String name = "";
            for (RequirementAnswer r : d.requirements()) {
                if (r.state() == State.SHORT
                        && r.file().equals(subject.file())
                        && r.mesh() != null
                        && r.accepted() == null
                        && (r.comparison().equals(">=") || r.comparison().equals("<="))
                        && Fixes.touches(r.span(), range)) {
                    String v = rounded(r) + (r.unit().isEmpty() ? "" : " " + r.unit());
                    lines.add("accept " + r.id() + " " + r.comparison() + " " + v + " until  by \"\"");
                    lines.add("    because \"\"");
                    values.add(v);
                    name = r.check() == null ? r.id() : r.check();
                }
            }
            Span body = body(d.name());
            if (!lines.isEmpty() && body != null) {
                return List.of(new Fix(
                        "accept `" + name + "` at " + String.join(" and ", values)
                                + " as a deviation: date, person and reason are yours to type",
                        Fix.Kind.QUICK_FIX,
                        false,
                        List.of(Edits.atEndOf(subject.file(), subject.text(), body, lines)),
                        List.of(Code.SHORT.id())));
            }
        }
        return List.of();
    }

    /** To three digits, on the side that is still reached. */
    private static String rounded(RequirementAnswer r) {
        RoundingMode mode = r.comparison().equals(">=") ? RoundingMode.FLOOR : RoundingMode.CEILING;
        return new BigDecimal(r.value())
                .round(new MathContext(3, mode))
                .stripTrailingZeros()
                .toPlainString();
    }

    private @Nullable Span body(String drive) {
        for (Entry e : subject.syntax().entries()) {
            if (e instanceof Entry.Drive d && d.name().text().equals(drive)
                    || e instanceof Entry.Variant v && v.name().text().equals(drive)) {
                return e.span();
            }
        }
        return null;
    }
}
