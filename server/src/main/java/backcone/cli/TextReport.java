package backcone.cli;

import backcone.cli.Terminal.Ink;
import backcone.engine.answers.CheckAnswer;
import backcone.engine.answers.DriveAnswer;
import backcone.engine.answers.RequirementAnswer;
import backcone.engine.answers.State;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.diagnostics.Severity;
import backcone.engine.units.Numbers;
import java.io.PrintWriter;
import java.util.ArrayList;
import java.util.EnumMap;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;

/** The findings and requirements of checked files for a person at a terminal. */
final class TextReport {
    private final PrintWriter out;
    private final boolean colour;
    private final boolean quiet;
    private final Map<State, Integer> states = new EnumMap<>(State.class);
    private int wrong;
    private int warnings;

    TextReport(PrintWriter out, boolean colour, boolean quiet) {
        this.out = out;
        this.colour = colour;
        this.quiet = quiet;
    }

    void write(List<CheckCommand.Checked> all) {
        boolean first = true;
        for (CheckCommand.Checked c : all) {
            if (quiet && !worthSaying(c)) {
                count(c);
                continue;
            }
            if (!first) {
                out.println();
            }
            first = false;
            file(c);
        }
        summary(all);
    }

    private static boolean worthSaying(CheckCommand.Checked c) {
        return c.analysis().diagnostics().stream()
                        .anyMatch(d -> d.severity() == Severity.ERROR || d.severity() == Severity.WARNING)
                || c.analysis().drives().stream()
                        .anyMatch(d -> d.requirements().stream()
                                .anyMatch(r -> !r.state().isMet()));
    }

    private void count(CheckCommand.Checked c) {
        for (DriveAnswer d : c.analysis().drives()) {
            d.requirements().forEach(r -> states.merge(r.state(), 1, Integer::sum));
        }
    }

    private void file(CheckCommand.Checked c) {
        String shown = FileSet.shown(c.file());
        out.println(Ink.BOLD.paint(shown, colour));
        Places places = new Places(c.analysis().text());
        for (Diagnostic d : c.analysis().diagnostics()) {
            if (d.severity() == Severity.HINT
                    || CheckCommand.aboutStates(d)
                    || (quiet && d.severity() == Severity.INFORMATION)) {
                continue; // the table tells it
            }
            problem(shown, places, d);
        }
        for (DriveAnswer d : c.analysis().drives()) {
            drive(d, c.analysis().drives().size() > 1);
        }
    }

    private void problem(String shown, Places places, Diagnostic d) {
        int line = places.line(d.span().start());
        int column = places.column(d.span().start());
        String word;
        Ink ink;
        switch (d.severity()) {
            case ERROR:
                word = "wrong";
                ink = Ink.RED;
                wrong++;
                break;
            case WARNING:
                word = "warning";
                ink = Ink.YELLOW;
                warnings++;
                break;
            default:
                word = "note";
                ink = Ink.CYAN;
        }
        out.println("  " + shown + ":" + line + ":" + column + " " + ink.paint(word, colour) + " " + d.message() + " "
                + Ink.DIM.paint("[" + d.code().id() + "]", colour));
        if (d.severity() == Severity.ERROR) {
            String text = places.lineText(line);
            if (!text.isBlank() && text.length() < 200) {
                String number = Integer.toString(line);
                String gap = " ".repeat(number.length());
                int width = Math.min(places.width(d.span()), Math.max(1, text.length() - column + 1));
                StringBuilder under = new StringBuilder();
                for (int i = 0; i < Math.min(column - 1, text.length()); i++) {
                    under.append(text.charAt(i) == '\t' ? '\t' : ' ');
                }
                out.println("    " + Ink.DIM.paint(number + " | ", colour) + text);
                out.println("    " + Ink.DIM.paint(gap + " | ", colour) + under + ink.paint("^".repeat(width), colour));
            }
        }
    }

    // ---- one drive

    private void drive(DriveAnswer d, boolean named) {
        if (d.requirements().isEmpty() && d.unrequired().isEmpty()) {
            return;
        }
        String title = d.title() == null ? "" : "  " + d.title();
        out.println();
        out.println("  " + Ink.BOLD.paint(d.name(), colour) + title);
        Columns table = new Columns("    ");
        table.row("", "requirement", "value", "required", "margin", "load reserve", "");
        List<String> notes = new ArrayList<>();
        for (RequirementAnswer r : d.requirements()) {
            states.merge(r.state(), 1, Integer::sum);
            if (quiet && r.state().isMet()) {
                continue;
            }
            requirement(d, r, table, notes);
        }
        table.print(out, this::paint);
        for (CheckAnswer c : d.unrequired()) {
            if (!quiet && !Double.isNaN(c.value())) {
                notes.add(c.id() + " is " + Numbers.format(c.value(), 4)
                        + (c.unit().isEmpty() ? "" : " " + c.unit()) + ", not required");
            }
        }
        Set<String> once = new LinkedHashSet<>(notes);
        for (String n : once) {
            out.println("      " + n);
        }
        if (!quiet && d.weakestTrust() != null) {
            trust(d);
        }
        if (!quiet && !d.assumptions().isEmpty()) {
            out.println("      assumed: " + String.join("; ", d.assumptions()));
        }
    }

    private void trust(DriveAnswer d) {
        int n = d.recalled().size();
        out.println("      weakest source behind these figures: " + d.weakestTrust()
                + (n == 0
                        ? ""
                        : " (" + n + (n == 1 ? " equation or table" : " equations or tables")
                                + " from memory; `backcone explain` names them)"));
    }

    private void requirement(DriveAnswer d, RequirementAnswer r, Columns table, List<String> notes) {
        String unit = r.unit().isEmpty() ? "" : " " + r.unit();
        String value = Double.isNaN(r.value()) ? "–" : Numbers.format(r.value(), 4) + unit;
        String required = r.comparison().equals("between")
                ? Numbers.format(r.required(), 4) + " … " + Numbers.format(r.upper(), 4) + unit
                : Double.isNaN(r.required()) ? "holds" : r.comparison() + " " + Numbers.format(r.required(), 4) + unit;
        String margin = margin(r);
        String reserve = Double.isNaN(r.loadReserve())
                ? ""
                : "× " + Numbers.format(r.loadReserve(), 3) + (r.id().equals(d.governing()) ? " governs" : "");
        String after = "";
        RequirementAnswer.Acceptance a = r.accepted();
        if (r.state() == State.ACCEPTED && a != null) {
            after = "until " + a.until() + " by " + a.by();
        }
        table.row(r.state().word(), r.id(), value, required, margin, reserve, after);
        explain(r, notes);
    }

    private static String margin(RequirementAnswer r) {
        if (Double.isNaN(r.margin()) || r.comparison().equals("==")) {
            return "";
        }
        if (Double.isInfinite(r.margin())) {
            return "ample";
        }
        double percent = r.margin() * 100;
        return (percent < 0 ? "−" : "+") + Numbers.format(Math.abs(percent), Math.abs(percent) >= 99.5 ? 3 : 2) + " %";
    }

    private static void explain(RequirementAnswer r, List<String> notes) {
        if (!r.missing().isEmpty()) {
            StringBuilder b = new StringBuilder(r.id()).append(" needs ");
            for (int i = 0; i < r.missing().size(); i++) {
                RequirementAnswer.Missing m = r.missing().get(i);
                b.append(i == 0 ? "" : i == r.missing().size() - 1 ? " and " : ", ")
                        .append(m.path())
                        .append(" (")
                        .append(m.meaning())
                        .append(')');
            }
            notes.add(b.toString());
        } else if (r.fault() != null && !r.fault().endsWith("is not in this handbook")) {
            notes.add(r.id() + ": " + r.fault());
        }
        for (RequirementAnswer.Passed p : r.outside()) {
            notes.add((p.waived() ? "waived: " : "outside: ") + p.message());
        }
        for (RequirementAnswer.Band b : r.bands()) {
            notes.add(r.id() + " hangs on an open point: with reading `" + b.reading() + "` of `" + b.equation()
                    + "` it is " + Numbers.format(b.value(), 4) + " and "
                    + b.state().word());
        }
        RequirementAnswer.Acceptance a = r.accepted();
        if (a != null && r.state() == State.ACCEPTED) {
            notes.add(r.id() + " is accepted because " + a.because());
        }
    }

    private String paint(int column, String cell, List<String> row) {
        if (column != 0 && !(column == 4)) {
            return cell;
        }
        switch (row.get(0)) {
            case "short":
            case "outside":
                return Ink.RED.paint(cell, colour);
            case "open":
                return Ink.CYAN.paint(cell, colour);
            case "tight":
            case "accepted":
                return Ink.YELLOW.paint(cell, colour);
            case "clear":
                return Ink.GREEN.paint(cell, colour);
            default:
                return cell;
        }
    }

    private void summary(List<CheckCommand.Checked> all) {
        int drives = 0;
        for (CheckCommand.Checked c : all) {
            drives += c.analysis().drives().size();
        }
        List<String> parts = new ArrayList<>();
        for (State s : new State[] {State.SHORT, State.OUTSIDE, State.OPEN, State.ACCEPTED, State.TIGHT, State.CLEAR}) {
            int n = states.getOrDefault(s, 0);
            if (n > 0) {
                parts.add(paint(0, n + " " + s.word(), List.of(s.word())));
            }
        }
        if (wrong > 0) {
            parts.add(0, Ink.RED.paint(wrong + " wrong", colour));
        }
        if (warnings > 0) {
            parts.add(warnings + (warnings == 1 ? " warning" : " warnings"));
        }
        out.println();
        out.println(count(all.size(), "file") + ", " + count(drives, "drive") + ": "
                + (parts.isEmpty() ? "nothing required" : String.join(", ", parts)));
        out.println(Ink.DIM.paint(Caution.TEXT, colour));
    }

    private static String count(int n, String what) {
        return n + " " + what + (n == 1 ? "" : "s");
    }
}
