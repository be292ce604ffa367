package backcone.cli;

import backcone.engine.answers.DriveAnswer;
import backcone.engine.answers.RequirementAnswer;
import com.fasterxml.jackson.core.JsonGenerator;
import java.io.IOException;
import java.io.PrintWriter;
import java.nio.file.Path;
import java.time.LocalDate;
import java.util.ArrayList;
import java.util.Comparator;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.TreeMap;

/** {@code backcone register}: deviations, assumptions, waived limits and recalled constants over a folder. */
final class RegisterCommand implements Command {
    private static final Usage USAGE = new Usage(
            "register",
            "Lists accepted deviations by expiry, assumptions, waived limits and constants from memory.",
            List.of(new Usage.Operand(
                    "PATH",
                    "specs, or folders with every .drive below them; this folder if none is named",
                    false,
                    true)),
            List.of(
                    Usage.Option.oneOf(
                            "--format",
                            "FORMAT",
                            "text, markdown or json; text unless said",
                            "text",
                            "markdown",
                            "json"),
                    Usage.Option.value("--on", "DATE", "as of this day; today unless said")),
            List.of("Exit status: 0 listed; 2 something can't be read; 64 wrong usage."),
            List.of(
                    "backcone register                          over this folder",
                    "backcone register --format markdown drives > register.md"));

    private record Deviation(
            String drive,
            String requirement,
            String value,
            String accepted,
            String until,
            String by,
            String because,
            String state) {}

    private record Said(String drive, String what, String why) {}

    @Override
    public Usage usage() {
        return USAGE;
    }

    @Override
    public int run(Arguments arguments, PrintWriter out, PrintWriter err)
            throws WrongUsage, IOException, InterruptedException {
        String on = arguments.value("--on");
        LocalDate day = on == null ? Today.day() : CompareCommand.day(on);
        FileSet set = FileSet.of(arguments.operands(), false);
        for (String u : set.unreachable()) {
            err.println("backcone: " + u + ".");
        }
        if (set.files().isEmpty()) {
            return Status.WRONG_TEXT;
        }
        List<Deviation> deviations = new ArrayList<>();
        List<Said> assumptions = new ArrayList<>();
        List<Said> waived = new ArrayList<>();
        Map<String, List<String>> recalled = new TreeMap<>();
        int status = set.unreachable().isEmpty() ? Status.FINE : Status.WRONG_TEXT;
        EngineFactory engine = new EngineFactory(FileSet.root(set.files()), day);
        for (Path file : set.files()) {
            Checked c = Checked.of(engine, file);
            if (c.status() >= Status.WRONG_TEXT) {
                status = Status.WRONG_TEXT;
                err.println("backcone: `" + c.shown() + "` has errors; what can be read of it is listed.");
            }
            for (DriveAnswer d : c.drives()) {
                drive(d, day, deviations, assumptions, waived, recalled);
            }
            engine.forget(file);
        }
        deviations.sort(Comparator.comparing(Deviation::until).thenComparing(Deviation::drive));
        switch (arguments.value("--format", "text")) {
            case "json" -> json(deviations, assumptions, waived, recalled, out);
            case "markdown" -> tables(deviations, assumptions, waived, recalled, true, out);
            default -> tables(deviations, assumptions, waived, recalled, false, out);
        }
        return status;
    }

    private static void drive(
            DriveAnswer d,
            LocalDate day,
            List<Deviation> deviations,
            List<Said> assumptions,
            List<Said> waived,
            Map<String, List<String>> recalled) {
        Map<String, Said> limits = new LinkedHashMap<>();
        for (RequirementAnswer r : d.requirements()) {
            RequirementAnswer.Acceptance a = r.accepted();
            if (a != null) {
                String state = a.expired()
                        ? "expired"
                        : r.state() == backcone.engine.answers.State.ACCEPTED
                                ? ends(a.until(), day)
                                : r.state().isMet()
                                        ? "not needed, it is " + r.state().word()
                                        : r.state().word();
                deviations.add(new Deviation(
                        d.name(),
                        r.id(),
                        Figures.value(r) + ", required " + Figures.required(r),
                        r.comparison() + " " + Figures.withUnit(Figures.fixed(a.accepted(), 4), r.unit()),
                        a.until(),
                        a.by(),
                        a.because(),
                        state));
            }
            for (RequirementAnswer.Passed p : r.outside()) {
                if (p.waived()) {
                    limits.putIfAbsent(p.path(), new Said(d.name(), p.path(), p.message()));
                }
            }
        }
        waived.addAll(limits.values());
        for (String a : d.assumptions()) {
            int colon = a.indexOf(": ");
            assumptions.add(
                    colon < 0
                            ? new Said(d.name(), a, "")
                            : new Said(d.name(), a.substring(0, colon), a.substring(colon + 2)));
        }
        for (String r : d.recalled()) {
            recalled.computeIfAbsent(r, k -> new ArrayList<>()).add(d.name());
        }
    }

    private static String ends(String until, LocalDate day) {
        try {
            long days = java.time.temporal.ChronoUnit.DAYS.between(day, LocalDate.parse(until));
            return days <= 30 ? "in force, ends in " + days + (days == 1 ? " day" : " days") : "in force";
        } catch (java.time.format.DateTimeParseException e) {
            return "in force";
        }
    }

    private static void tables(
            List<Deviation> deviations,
            List<Said> assumptions,
            List<Said> waived,
            Map<String, List<String>> recalled,
            boolean markdown,
            PrintWriter out) {
        List<List<String>> rows = new ArrayList<>();
        for (Deviation x : deviations) {
            rows.add(List.of(x.until, x.drive, x.requirement, x.value, x.accepted, x.by, x.state, x.because));
        }
        table(
                "Accepted deviations, by expiry",
                List.of("until", "drive", "requirement", "is", "accepted", "by", "state", "because"),
                rows,
                markdown,
                out);
        said("Assumptions", "assumed", assumptions, markdown, out);
        said("Waived limits", "limit", waived, markdown, out);
        List<List<String>> constants = new ArrayList<>();
        recalled.forEach(
                (k, v) -> constants.add(List.of(k, v.size() <= 4 ? String.join(", ", v) : v.size() + " drives")));
        table("Constants and equations from memory", List.of("what", "used by"), constants, markdown, out);
        if (markdown) {
            out.println(Caution.TEXT);
        } else {
            Usage.wrap(Caution.TEXT, 0, 0, 110, out);
        }
    }

    private static void said(String title, String what, List<Said> list, boolean markdown, PrintWriter out) {
        List<List<String>> rows = new ArrayList<>();
        list.forEach(s -> rows.add(List.of(s.drive, s.what, s.why)));
        table(title, List.of("drive", what, "because"), rows, markdown, out);
    }

    private static void table(
            String title, List<String> head, List<List<String>> rows, boolean markdown, PrintWriter out) {
        out.println(markdown ? "### " + title : title);
        if (markdown) {
            out.println();
        }
        if (rows.isEmpty()) {
            out.println(markdown ? "None." : "  none");
            out.println();
            return;
        }
        if (markdown) {
            out.println("| " + String.join(" | ", head) + " |");
            out.println("|" + " --- |".repeat(head.size()));
            for (List<String> r : rows) {
                List<String> cells = new ArrayList<>();
                r.forEach(c ->
                        cells.add(c.replace("|", "\\|").replace("<", "&lt;").replace("\n", " ")));
                out.println("| " + String.join(" | ", cells) + " |");
            }
        } else {
            Columns t = new Columns("  ", head.size());
            t.row(head.toArray(String[]::new));
            rows.forEach(r -> t.row(r.toArray(String[]::new)));
            t.print(out, (c, cell, row) -> cell);
        }
        out.println();
    }

    private static void json(
            List<Deviation> deviations,
            List<Said> assumptions,
            List<Said> waived,
            Map<String, List<String>> recalled,
            PrintWriter out)
            throws IOException {
        JsonGenerator g = JsonReport.generator(out);
        g.writeStartObject();
        g.writeStringField("backcone", Version.TEXT);
        g.writeStringField("caution", Caution.TEXT);
        g.writeArrayFieldStart("deviations");
        for (Deviation d : deviations) {
            g.writeStartObject();
            g.writeStringField("drive", d.drive);
            g.writeStringField("requirement", d.requirement);
            g.writeStringField("accepted", d.accepted);
            g.writeStringField("until", d.until);
            g.writeStringField("by", d.by);
            g.writeStringField("because", d.because);
            g.writeStringField("state", d.state);
            g.writeEndObject();
        }
        g.writeEndArray();
        saidJson(g, "assumptions", assumptions);
        saidJson(g, "waived", waived);
        g.writeArrayFieldStart("recalled");
        for (Map.Entry<String, List<String>> e : recalled.entrySet()) {
            g.writeStartObject();
            g.writeStringField("what", e.getKey());
            g.writeArrayFieldStart("drives");
            for (String d : e.getValue()) {
                g.writeString(d);
            }
            g.writeEndArray();
            g.writeEndObject();
        }
        g.writeEndArray();
        g.writeEndObject();
        g.flush();
        out.println();
    }

    private static void saidJson(JsonGenerator g, String name, List<Said> list) throws IOException {
        g.writeArrayFieldStart(name);
        for (Said s : list) {
            g.writeStartObject();
            g.writeStringField("drive", s.drive);
            g.writeStringField("what", s.what);
            g.writeStringField("because", s.why);
            g.writeEndObject();
        }
        g.writeEndArray();
    }
}
