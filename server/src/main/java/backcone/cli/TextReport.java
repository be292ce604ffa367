package backcone.cli;

import backcone.cli.Terminal.Ink;
import backcone.engine.answers.DriveAnswer;
import backcone.engine.answers.RequirementAnswer;
import backcone.engine.answers.State;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.diagnostics.Severity;
import java.io.PrintWriter;
import java.util.ArrayList;
import java.util.EnumMap;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;

/** The findings and requirements of checked files for a person at a terminal. */
final class TextReport implements Report {
    /** So many troubles are repeated at the end of a long report: of so many drives. */
    private static final int REPEATED = 12;

    private static final int LONG = 4;

    private static final int LONGEST_LINE = 200;
    private final PrintWriter out;
    private final boolean colour;
    private final boolean quiet;
    private final boolean alone;
    private final Map<State, Integer> states = new EnumMap<>(State.class);
    private final List<String> wrongs = new ArrayList<>();
    private final List<String> shorts = new ArrayList<>();
    private final Set<String> recalled = new LinkedHashSet<>();
    private final Set<String> words = new LinkedHashSet<>();
    private int files;
    private int drives;
    private int warnings;
    private boolean first = true;

    /** {@code alone}: one file was asked for, so it is told even where there is nothing to say of it. */
    TextReport(PrintWriter out, boolean colour, boolean quiet, boolean alone) {
        this.out = out;
        this.colour = colour;
        this.quiet = quiet;
        this.alone = alone;
    }

    @Override
    public void file(Checked c) {
        files++;
        drives += c.drives().size();
        tally(c);
        if (c.fault() != null || (!worthSaying(c) && !(alone && !quiet))) {
            return;
        }
        if (!first) {
            out.println();
        }
        first = false;
        out.println(Ink.BOLD.paint(c.shown(), colour));
        for (Diagnostic d : c.diagnostics()) {
            if (isShown(d)) {
                problem(c, d);
            }
        }
        for (DriveAnswer d : c.drives()) {
            new DriveTable(c, d, quiet, colour).print(out);
        }
        out.flush();
    }

    private boolean worthSaying(Checked c) {
        for (Diagnostic d : c.diagnostics()) {
            if (isShown(d)) {
                return true;
            }
        }
        for (DriveAnswer d : c.drives()) {
            if (!quiet && !(d.requirements().isEmpty() && d.unrequired().isEmpty())) {
                return true;
            }
            for (RequirementAnswer r : d.requirements()) {
                if (!r.state().isMet()) {
                    return true;
                }
            }
        }
        return false;
    }

    private boolean isShown(Diagnostic d) {
        return switch (d.code()) {
            case SHORT, OUTSIDE, ASSERT_FAILED, MISSING_INPUT, TIGHT, ACCEPTED -> false; // the table tells it
            default -> d.severity() != Severity.HINT && !(quiet && d.severity() == Severity.INFORMATION);
        };
    }

    private void tally(Checked c) {
        for (Diagnostic d : c.diagnostics()) {
            if (d.severity() == Severity.ERROR && !Checked.aboutStates(d)) {
                trouble(
                        wrongs,
                        "wrong",
                        c.shown(d.file()) + ":" + c.places(d.file()).at(d.span().start()) + "  " + d.message());
            } else if (d.severity() == Severity.WARNING) {
                warnings++;
            }
        }
        for (DriveAnswer d : c.drives()) {
            for (RequirementAnswer r : d.requirements()) {
                states.merge(r.state(), 1, Integer::sum);
                if (r.state() == State.SHORT || r.state() == State.OUTSIDE) {
                    String margin = Figures.margin(r.margin(), r.comparison());
                    trouble(
                            shorts,
                            r.state().word(),
                            c.at(r) + "  " + d.name() + "  " + r.id() + (margin.isEmpty() ? "" : "  " + margin));
                }
            }
            if (d.weakestTrust() != null) {
                words.add(d.weakestTrust());
            }
            recalled.addAll(d.recalled());
        }
    }

    private void trouble(List<String> list, String word, String text) {
        list.add("  " + Ink.RED.paint(word, colour) + " ".repeat(9 - word.length()) + text);
    }

    private void problem(Checked c, Diagnostic d) {
        Places places = c.places(d.file());
        String word;
        Ink ink;
        switch (d.severity()) {
            case ERROR -> {
                word = "wrong";
                ink = Ink.RED;
            }
            case WARNING -> {
                word = "warning";
                ink = Ink.YELLOW;
            }
            default -> {
                word = "note";
                ink = Ink.CYAN;
            }
        }
        out.println("  " + c.shown(d.file()) + ":" + places.at(d.span().start()) + " " + ink.paint(word, colour) + " "
                + d.message() + " " + Ink.DIM.paint("[" + d.code().id() + "]", colour));
        if (d.severity() == Severity.ERROR) {
            caret(places, d, ink);
        }
    }

    private void caret(Places places, Diagnostic d, Ink ink) {
        int line = places.line(d.span().start());
        int column = places.column(d.span().start());
        String text = places.lineText(line);
        if (text.isBlank() || text.length() >= LONGEST_LINE) {
            return;
        }
        String number = Integer.toString(line);
        int width = Math.min(places.width(d.span()), Math.max(1, text.length() - column + 1));
        StringBuilder under = new StringBuilder();
        for (int i = 0; i < Math.min(column - 1, text.length()); i++) {
            under.append(text.charAt(i) == '\t' ? '\t' : ' ');
        }
        out.println("    " + Ink.DIM.paint(number + " | ", colour) + text);
        out.println("    " + Ink.DIM.paint(" ".repeat(number.length()) + " | ", colour) + under
                + ink.paint("^".repeat(width), colour));
    }

    // ---- the end

    @Override
    public void end(List<String> unreachable) {
        if (!quiet && drives >= LONG) {
            repeat();
        }
        if (!first) {
            out.println();
        }
        out.println(
                count(files, "file") + ", " + count(drives, "drive") + ": " + String.join(", ", counts(unreachable)));
        if (!quiet && !words.isEmpty()) {
            out.println(Ink.DIM.paint(trust(), colour));
        }
        out.println(Ink.DIM.paint(Caution.TEXT, colour));
    }

    /** Texts that are wrong come first: what else is amiss may follow from them. */
    private void repeat() {
        List<String> troubles = new ArrayList<>(wrongs);
        troubles.addAll(shorts);
        if (troubles.isEmpty()) {
            return;
        }
        out.println();
        out.println(Ink.BOLD.paint("Look here first", colour));
        for (int i = 0; i < Math.min(REPEATED, troubles.size()); i++) {
            out.println(troubles.get(i));
        }
        if (troubles.size() > REPEATED) {
            out.println("  … and " + (troubles.size() - REPEATED) + " more");
        }
    }

    private List<String> counts(List<String> unreachable) {
        List<String> out = new ArrayList<>();
        if (!unreachable.isEmpty()) {
            out.add(Ink.RED.paint(unreachable.size() + " not found or unreadable", colour));
        }
        if (!wrongs.isEmpty()) {
            out.add(Ink.RED.paint(wrongs.size() + " wrong", colour));
        }
        for (State s : DriveTable.order()) {
            int n = states.getOrDefault(s, 0);
            if (n > 0) {
                out.add(DriveTable.paint(s, n + " " + s.word(), colour));
            }
        }
        if (warnings > 0) {
            out.add(count(warnings, "warning"));
        }
        if (out.isEmpty()) {
            out.add("nothing is required");
        }
        return out;
    }

    /** The weakest word of trust behind any verdict. */
    private String trust() {
        String weakest = "";
        for (String w : List.of("confirmed", "derived", "agreed", "recalled", "uncertain")) {
            weakest = words.contains(w) ? w : weakest;
        }
        return "Weakest source behind these figures: " + weakest
                + (recalled.isEmpty()
                        ? "."
                        : "; " + count(recalled.size(), "equation or table", "equations or tables")
                                + " from memory, named by `backcone explain FILE MESH.RATING`.");
    }

    private static String count(int n, String what) {
        return count(n, what, what + "s");
    }

    private static String count(int n, String one, String many) {
        return n + " " + (n == 1 ? one : many);
    }
}
