package backcone.cli;

import backcone.engine.answers.RequirementAnswer;
import backcone.engine.answers.State;
import backcone.engine.review.Comparison;
import backcone.engine.review.Comparison.DriveChange;
import backcone.engine.review.Comparison.Fate;
import backcone.engine.review.Comparison.Move;
import backcone.engine.review.Comparison.Share;
import backcone.engine.review.Edit;
import java.io.PrintWriter;
import java.io.StringWriter;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;
import java.util.TreeSet;
import org.jspecify.annotations.Nullable;

/**
 * A comparison for a reviewer, on a terminal or as Markdown: verdict, lowered bars, states that changed, facts that others depend
 * on, margins that moved with the edits that moved them, and what moves nothing in one line.
 */
final class CompareReport {
    private static final int WIDTH = 110;

    /** Between the parts of a cell that may stand on lines of their own. */
    private static final String LINES = "\n";

    private final Compared compared;
    private final PrintWriter out;
    private final boolean markdown;

    CompareReport(Compared compared, PrintWriter out, boolean markdown) {
        this.compared = compared;
        this.out = out;
        this.markdown = markdown;
    }

    /** A drive of some spec, with its spec. */
    private record Of(Comparison spec, DriveChange drive) {
        String name() {
            return drive.name();
        }
    }

    void write() {
        List<Of> drives = new ArrayList<>();
        for (Comparison c : compared.specs) {
            for (DriveChange d : c.drives()) {
                if (d.fate() != Fate.SAME) {
                    drives.add(new Of(c, d));
                }
            }
        }
        head("Drives: " + compared.before + " → " + compared.after);
        paragraph(verdict(drives));
        for (Comparison c : compared.specs) {
            for (String r : c.remarks()) {
                paragraph(code(name(c)) + ": " + r);
            }
        }
        lowered(drives);
        states(drives);
        renamed(drives);
        facts(drives);
        moved(drives);
        rest(drives);
        if (markdown) {
            out.println("---");
            out.println(Caution.TEXT);
        } else {
            Usage.wrap(Caution.TEXT, 0, 0, WIDTH, out);
        }
    }

    private static String name(Comparison c) {
        return c.after() != null ? c.after().path() : String.valueOf(c.before());
    }

    // ---- (1) verdict

    private String verdict(List<Of> drives) {
        if (drives.isEmpty()) {
            return "No drive changed.";
        }
        int shorter = 0;
        int better = 0;
        int bars = 0;
        int worse = 0;
        Set<String> bad = new TreeSet<>();
        for (Of o : drives) {
            bars += o.drive.lowered().size();
            for (Comparison.StateChange s : o.drive.states()) {
                boolean was = s.before() != null && s.before().isMet();
                boolean is = s.after() != null && s.after().isMet();
                if (s.after() != null && !is && (was || s.before() == null)) {
                    shorter++;
                    bad.add(o.name());
                } else if (is && s.before() != null && !was) {
                    better++;
                }
            }
            for (Move m : o.drive.moved()) {
                worse += m.after() < m.before() ? 1 : 0;
            }
        }
        StringBuilder b = new StringBuilder();
        b.append(count(drives.size(), "drive")).append(" changed: ");
        if (shorter > 0) {
            b.append(count(shorter, "requirement"))
                    .append(shorter == 1 ? " is" : " are")
                    .append(" no longer met (")
                    .append(String.join(", ", bad))
                    .append(")");
        } else {
            b.append("nothing fell short, outside or open");
        }
        if (better > 0) {
            b.append("; ")
                    .append(count(better, "requirement"))
                    .append(better == 1 ? " is" : " are")
                    .append(" met now");
        }
        if (bars > 0) {
            b.append("; ")
                    .append(count(bars, "bar"))
                    .append(bars == 1 ? " was" : " were")
                    .append(" lowered or may be");
        }
        if (worse > 0 && shorter == 0) {
            b.append("; ")
                    .append(count(worse, "margin"))
                    .append(worse == 1 ? " is" : " are")
                    .append(" smaller");
        }
        return strong(b.append('.').toString());
    }

    private static String count(int n, String what) {
        return n + " " + what + (n == 1 ? "" : "s");
    }

    // ---- (2) lowered bars

    private void lowered(List<Of> drives) {
        List<List<String>> rows = new ArrayList<>();
        for (Of o : drives) {
            for (Comparison.Lowered l : o.drive.lowered()) {
                rows.add(List.of(o.name(), l.what(), l.path(), step(l)));
            }
            for (String r : o.drive.remarks()) {
                rows.add(List.of(o.name(), "signature", "approved", r));
            }
        }
        table("Lowered bars", List.of("drive", "what", "where", "how"), rows);
    }

    private static String step(Comparison.Lowered l) {
        return l.before().isEmpty()
                ? l.after()
                : l.before() + " → " + (l.after().isEmpty() ? "nothing" : l.after());
    }

    // ---- (3) states

    private void states(List<Of> drives) {
        List<List<String>> rows = new ArrayList<>();
        for (Of o : drives) {
            for (Comparison.StateChange s : o.drive.states()) {
                rows.add(List.of(o.name(), s.id(), state(s.before(), s.was()), state(s.after(), s.is())));
            }
        }
        table("States", List.of("drive", "requirement", "before", "after"), rows);
    }

    private static String state(@Nullable State s, @Nullable RequirementAnswer r) {
        if (s == null || r == null) {
            return "–";
        }
        String margin = Figures.margin(r.margin(), r.comparison());
        String word = s == State.ACCEPTED && r.accepted() != null
                ? "short, accepted until " + r.accepted().until()
                : s.word();
        return word + (margin.isEmpty() ? "" : " " + margin);
    }

    private void renamed(List<Of> drives) {
        for (Of o : drives) {
            if (o.drive.formerName() != null) {
                paragraph(code(o.name()) + " was called " + code(o.drive.formerName()) + ".");
            }
        }
        for (Comparison c : compared.specs) {
            if (c.before() != null && c.after() != null && !c.before().equals(c.after())) {
                paragraph(code(c.after().path()) + " was " + code(c.before().path()) + ".");
            }
        }
    }

    // ---- (4) facts

    private void facts(List<Of> drives) {
        List<List<String>> rows = new ArrayList<>();
        for (Of o : drives) {
            for (Comparison.FactChange f : o.drive.facts()) {
                rows.add(List.of(
                        o.name(), f.path(), figure(f.before(), f.unit()), figure(f.after(), f.unit()), difference(f)));
            }
        }
        table("Facts that others depend on", List.of("drive", "fact", "before", "after", "change"), rows);
    }

    private static String figure(double v, String unit) {
        return Double.isNaN(v) ? "–" : Figures.withUnit(Figures.fixed(v, 5).replace('-', '−'), unit);
    }

    private static String difference(Comparison.FactChange f) {
        if (Double.isNaN(f.before()) || Double.isNaN(f.after())) {
            return Double.isNaN(f.before()) ? "new" : "gone";
        }
        double d = f.after() - f.before();
        String sign = d < 0 ? "−" : "+";
        return (f.turned() ? "turned round, " : "") + sign + Figures.withUnit(Figures.fixed(Math.abs(d), 3), f.unit());
    }

    // ---- (5) margins

    private void moved(List<Of> drives) {
        List<List<String>> rows = new ArrayList<>();
        Map<String, Boolean> sampled = new LinkedHashMap<>();
        for (Of o : drives) {
            for (Move m : o.drive.moved()) {
                rows.add(move(o, m));
                for (Share s : m.shares()) {
                    if (s.error() > 0) {
                        sampled.put(o.name(), true);
                    }
                }
            }
        }
        table(
                "Margins that moved, in points of a percent, with the share of each edit",
                List.of("drive", "requirement", "before", "after", "design", "bar", "by"),
                rows);
        for (Of o : drives) {
            for (Comparison.Together t : o.drive.together()) {
                List<String> names = new ArrayList<>();
                t.edits().forEach(e -> names.add(o.spec.edits().get(e).path()));
                paragraph("Made together in " + code(o.name()) + ": " + String.join(", ", names) + " (apart, "
                        + lower(t.why()) + ")");
            }
        }
        if (!sampled.isEmpty()) {
            paragraph("With so many edits the shares of " + String.join(", ", sampled.keySet())
                    + " are averages over sampled orders; the standard error stands behind each.");
        }
    }

    private static String lower(String s) {
        String t = s.endsWith(".") ? s.substring(0, s.length() - 1) : s;
        return t.isEmpty() || !Character.isUpperCase(t.charAt(0))
                ? t
                : Character.toLowerCase(t.charAt(0)) + t.substring(1);
    }

    /** Tenths of a percent, so corrected that the shares printed add up to the move printed. */
    private List<String> move(Of o, Move m) {
        long before = Math.round(m.before() * 1000);
        long after = Math.round(m.after() * 1000);
        double[] exact = new double[m.shares().size()];
        for (int i = 0; i < exact.length; i++) {
            exact[i] = m.shares().get(i).share() * 1000;
        }
        long[] shown = roundedTo(exact, after - before);
        long design = 0;
        long bar = 0;
        List<String> by = new ArrayList<>();
        for (int i = 0; i < shown.length; i++) {
            Share s = m.shares().get(i);
            if (s.bar()) {
                bar += shown[i];
            } else {
                design += shown[i];
            }
            if (shown[i] != 0) {
                by.add(signed(shown[i])
                        + (s.error() > 0 ? " ± " + tenths(Math.max(1, Math.round(s.error() * 1000))) : "") + " "
                        + text(o, s));
            }
        }
        return List.of(
                o.name(),
                m.id(),
                percent(before) + " " + m.was().word(),
                percent(after) + " " + m.is().word(),
                design == 0 ? "" : signed(design),
                bar == 0 ? "" : signed(bar),
                by.isEmpty() ? "less than the digits shown" : String.join(LINES, by));
    }

    private static String text(Of o, Share s) {
        if (s.edits().size() > 1) {
            List<String> names = new ArrayList<>();
            for (int e : s.edits()) {
                names.add(o.spec.edits().get(e).path());
            }
            return names.size() > 3
                    ? String.join(" + ", names.subList(0, 3)) + " + " + (names.size() - 3) + " more"
                    : String.join(" + ", names);
        }
        Edit e = o.spec.edits().get(s.edits().get(0));
        boolean own = o.spec.after() == null || e.file().equals(o.spec.after());
        String where = own ? "" : " (" + e.file().path() + ")";
        if (e.before() != null && e.after() != null && e.kind() == Edit.Kind.VALUE) {
            return e.path() + " " + e.before() + " → " + e.after() + where;
        }
        return e.path() + (e.before() == null ? " new" : e.after() == null ? " gone" : "") + where;
    }

    /** Whole numbers near {@code exact} that add up to {@code sum}: the largest remainders are rounded up first. */
    static long[] roundedTo(double[] exact, long sum) {
        long[] out = new long[exact.length];
        long have = 0;
        Integer[] order = new Integer[exact.length];
        for (int i = 0; i < exact.length; i++) {
            out[i] = (long) Math.floor(exact[i]);
            have += out[i];
            order[i] = i;
        }
        java.util.Arrays.sort(
                order, (a, b) -> Double.compare(exact[b] - Math.floor(exact[b]), exact[a] - Math.floor(exact[a])));
        long left = sum - have;
        for (int i = 0; left != 0 && order.length > 0; i = (i + 1) % order.length) {
            int step = left > 0 ? 1 : -1;
            out[order[left > 0 ? i : order.length - 1 - i]] += step;
            left -= step;
        }
        return out;
    }

    private static String percent(long tenths) {
        return signed(tenths) + " %";
    }

    private static String signed(long tenths) {
        return (tenths < 0 ? "−" : "+") + tenths(Math.abs(tenths));
    }

    private static String tenths(long t) {
        return t / 10 + "." + t % 10;
    }

    // ---- (6) the rest

    private void rest(List<Of> drives) {
        Set<String> units = new LinkedHashSet<>();
        Set<String> records = new LinkedHashSet<>();
        List<String> others = new ArrayList<>();
        for (Of o : drives) {
            Set<Integer> told = new LinkedHashSet<>();
            o.drive.moved().forEach(m -> m.shares().forEach(s -> told.addAll(s.edits())));
            for (int id : o.drive.edits()) {
                Edit e = o.spec.edits().get(id);
                if (e.kind() == Edit.Kind.UNIT) {
                    units.add(o.name() + "." + e.text());
                } else if (e.kind() == Edit.Kind.RECORD) {
                    records.add(o.name() + "." + e.path());
                } else if (!told.contains(id) && e.counts() && o.drive.fate() == Fate.CHANGED) {
                    others.add(code(o.name() + "." + e.text()));
                }
            }
            if (o.drive.fate() == Fate.ADDED || o.drive.fate() == Fate.REMOVED) {
                others.add(code(o.name()) + (o.drive.fate() == Fate.ADDED ? " is new" : " is gone"));
            }
        }
        if (!others.isEmpty()) {
            paragraph("Moved no margin: " + String.join("; ", others) + ".");
        }
        if (!units.isEmpty()) {
            paragraph("Unit only: " + String.join("; ", units) + ".");
        }
        if (!records.isEmpty()) {
            paragraph("Record only: " + String.join(", ", records) + ".");
        }
        if (!compared.unused.isEmpty()) {
            paragraph("Changed, and no drive compared here uses it: " + String.join(", ", compared.unused) + ".");
        }
    }

    // ---- writing

    private void head(String text) {
        out.println(markdown ? "## " + text : text);
        out.println();
    }

    private String strong(String s) {
        return markdown ? "**" + s + "**" : s;
    }

    private String code(String s) {
        return "`" + s + "`";
    }

    private void paragraph(String text) {
        if (markdown) {
            out.println(text);
        } else {
            Usage.wrap(text, 0, 2, WIDTH, out);
        }
        out.println();
    }

    private void table(String title, List<String> head, List<List<String>> rows) {
        if (rows.isEmpty()) {
            return;
        }
        if (markdown) {
            out.println("### " + title);
            out.println();
            out.println("| " + String.join(" | ", head) + " |");
            out.println("|" + " --- |".repeat(head.size()));
            for (List<String> r : rows) {
                List<String> cells = new ArrayList<>();
                r.forEach(c ->
                        cells.add(c.replace("|", "\\|").replace(LINES, "; ").replace("<", "&lt;")));
                out.println("| " + String.join(" | ", cells) + " |");
            }
            out.println();
            return;
        }
        out.println(title);
        int last = head.size() - 1;
        boolean wide = false;
        for (List<String> r : rows) {
            wide |= r.get(last).length() > 40;
        }
        Columns t = new Columns("  ", wide ? last : head.size());
        t.row((wide ? head.subList(0, last) : head).toArray(String[]::new));
        if (!wide) {
            rows.forEach(r -> t.row(r.toArray(String[]::new)));
            t.print(out, (c, cell, row) -> cell);
        } else {
            // the last column is long: it stands below its row
            rows.forEach(r -> t.row(r.subList(0, last).toArray(String[]::new)));
            StringWriter lines = new StringWriter();
            t.print(new PrintWriter(lines), (c, cell, row) -> cell);
            List<String> line = lines.toString().lines().toList();
            out.println(line.get(0));
            for (int i = 0; i < rows.size(); i++) {
                out.println(line.get(i + 1));
                for (String part : rows.get(i).get(last).split(LINES, -1)) {
                    Usage.wrap(part, 6, 8, WIDTH, out);
                }
            }
        }
        out.println();
    }
}
