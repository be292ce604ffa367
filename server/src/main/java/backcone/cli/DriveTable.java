package backcone.cli;

import backcone.cli.Terminal.Ink;
import backcone.engine.answers.CheckAnswer;
import backcone.engine.answers.DriveAnswer;
import backcone.engine.answers.RequirementAnswer;
import backcone.engine.answers.State;
import java.io.PrintWriter;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import java.util.Objects;

/** One drive: what it falls short of first, then what is met, then what the verdicts hang on. */
final class DriveTable {
    /** What an engineer looks for first. */
    private static final List<State> ORDER =
            List.of(State.SHORT, State.OUTSIDE, State.OPEN, State.ACCEPTED, State.TIGHT, State.CLEAR);

    private static final String NOTE = "      ";
    private static final int NOTE_WIDTH = 120;
    private final Checked checked;
    private final DriveAnswer drive;
    private final boolean quiet;
    private final boolean colour;

    DriveTable(Checked checked, DriveAnswer drive, boolean quiet, boolean colour) {
        this.checked = checked;
        this.drive = drive;
        this.quiet = quiet;
        this.colour = colour;
    }

    static List<State> order() {
        return ORDER;
    }

    static String paint(State state, String text, boolean colour) {
        return switch (state) {
            case SHORT, OUTSIDE -> Ink.RED.paint(text, colour);
            case OPEN -> Ink.CYAN.paint(text, colour);
            case TIGHT, ACCEPTED -> Ink.YELLOW.paint(text, colour);
            case CLEAR -> Ink.GREEN.paint(text, colour);
        };
    }

    void print(PrintWriter out) {
        List<RequirementAnswer> shown = shown();
        if (shown.isEmpty() && (quiet || drive.unrequired().isEmpty())) {
            return;
        }
        out.println();
        out.println("  " + Ink.BOLD.paint(drive.name(), colour) + (drive.title() == null ? "" : "  " + drive.title()));
        table(shown, out);
        for (String n : notes(shown)) {
            Usage.wrap(n, NOTE.length(), NOTE.length() + 2, NOTE_WIDTH, out);
        }
    }

    private List<RequirementAnswer> shown() {
        List<RequirementAnswer> out = new ArrayList<>();
        for (State s : ORDER) {
            for (RequirementAnswer r : drive.requirements()) {
                if (r.state() == s && !(quiet && s.isMet())) {
                    out.add(r);
                }
            }
        }
        return out;
    }

    private void table(List<RequirementAnswer> shown, PrintWriter out) {
        Columns table = new Columns("    ", 8, 2, 4, 5);
        table.row("", "requirement", "value", "required", "margin", "load reserve", "", "");
        for (RequirementAnswer r : shown) {
            table.row(
                    r.state().word(),
                    r.id(),
                    Figures.value(r),
                    Figures.required(r),
                    Figures.margin(r.margin(), r.comparison()),
                    Figures.reserve(r.loadReserve()),
                    r.id().equals(drive.governing()) ? "governs" : "",
                    r.state() == State.CLEAR ? "" : checked.at(r));
        }
        if (table.isEmpty()) {
            return;
        }
        table.print(out, (column, cell, row) -> {
            String word = row.get(0);
            if (word.isEmpty() || column == 7) {
                return Ink.DIM.paint(cell, colour);
            }
            return column == 0 || column == 4
                    ? paint(State.valueOf(word.toUpperCase(Locale.ROOT)), cell, colour)
                    : cell;
        });
    }

    // ---- what the verdicts hang on

    private List<String> notes(List<RequirementAnswer> shown) {
        // one cause, one line: requirements that share it stand in front of it together
        Map<String, List<RequirementAnswer>> causes = new LinkedHashMap<>();
        for (RequirementAnswer r : shown) {
            for (String c : causes(r)) {
                causes.computeIfAbsent(c, k -> new ArrayList<>()).add(r);
            }
        }
        List<String> out = new ArrayList<>();
        causes.forEach((cause, of) -> out.add(subject(of) + cause));
        for (RequirementAnswer r : shown) {
            for (RequirementAnswer.Passed p : r.outside()) {
                String line = (p.waived() ? "waived: " : "outside: ") + p.message();
                if (!out.contains(line)) {
                    out.add(line);
                }
            }
        }
        for (RequirementAnswer r : shown) {
            for (RequirementAnswer.Band b : r.bands()) {
                out.add(r.id() + " hangs on an open point: with reading `" + b.reading() + "` of `" + b.equation()
                        + "` it is " + Figures.withUnit(Figures.fixed(b.value(), 4), r.unit()) + ", "
                        + b.state().word());
            }
        }
        if (!quiet) {
            unrequired(out);
            for (String a : drive.assumptions()) {
                out.add("assumed: " + a);
            }
        }
        return out;
    }

    /** The rating where all of several are of one, else their ids. */
    private static String subject(List<RequirementAnswer> of) {
        RequirementAnswer first = of.get(0);
        List<String> ids = new ArrayList<>();
        boolean oneRating = of.size() > 1 && first.rating() != null;
        for (RequirementAnswer r : of) {
            ids.add(r.id());
            oneRating &= Objects.equals(r.mesh(), first.mesh()) && Objects.equals(r.rating(), first.rating());
        }
        return oneRating ? first.mesh() + "." + first.rating() : together(ids);
    }

    private static List<String> causes(RequirementAnswer r) {
        List<String> out = new ArrayList<>();
        String fault = r.fault();
        if (!r.missing().isEmpty()) {
            List<String> needs = new ArrayList<>();
            for (RequirementAnswer.Missing m : r.missing()) {
                needs.add(m.path() + " (" + m.meaning() + ")");
            }
            out.add(": needs " + together(needs));
        } else if (fault != null && !fault.endsWith("is not in this handbook")) { // that one stands above as a finding
            out.add(": " + fault);
        }
        RequirementAnswer.Acceptance a = r.accepted();
        if (a != null && r.state() == State.ACCEPTED) {
            out.add(": accepted until " + a.until() + " by " + a.by() + " because " + a.because());
        }
        if (r.because() != null && (r.state() == State.SHORT || r.state() == State.OUTSIDE)) {
            out.add(": required because " + r.because());
        }
        return out;
    }

    private static String together(List<String> names) {
        if (names.size() < 2) {
            return names.isEmpty() ? "" : names.get(0);
        }
        int last = names.size() - 1;
        return String.join(", ", names.subList(0, last)) + " and " + names.get(last);
    }

    /** Checks that nothing requires: their values, one line a rating. */
    private void unrequired(List<String> out) {
        Map<String, List<String>> byRating = new LinkedHashMap<>();
        for (CheckAnswer c : drive.unrequired()) {
            if (Double.isNaN(c.value())) {
                continue;
            }
            int first = c.id().indexOf('.');
            int second = c.id().indexOf('.', first + 1);
            int cut = second > 0 ? second : Math.max(first, 0);
            byRating.computeIfAbsent(c.id().substring(0, cut), k -> new ArrayList<>())
                    .add(c.id().substring(cut + 1) + " " + Figures.withUnit(Figures.fixed(c.value(), 4), c.unit()));
        }
        byRating.forEach((rating, values) -> out.add(rating + ", not required: " + String.join(", ", values)));
    }
}
