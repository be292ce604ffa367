package backcone.cli;

import backcone.engine.answers.RequirementAnswer;
import backcone.engine.answers.State;
import backcone.engine.review.DriveReview;
import backcone.engine.review.ReviewFact;
import java.io.PrintWriter;
import java.io.StringWriter;
import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;

/**
 * The text of a ledger: per drive, sorted, its requirements and the facts that reviewers look at, rounded so that the last bits
 * of a platform never show, and without today's date.
 */
final class Ledger {
    private Ledger() {}

    /** {@code spec} is the name of the file without its folder. */
    static String of(String spec, List<DriveReview> drives) {
        StringWriter text = new StringWriter();
        PrintWriter out = new PrintWriter(text) {
            @Override
            public void println() {
                write('\n'); // the same bytes on every platform
            }
        };
        out.println("# Margins of " + spec
                + ", written by `backcone ledger`. Do not edit: change the spec and run it again,");
        out.println("# after a merge conflict in this file, too.");
        List<DriveReview> sorted = new ArrayList<>(drives);
        sorted.sort(Comparator.comparing((DriveReview d) -> d.answer().name()));
        for (DriveReview d : sorted) {
            drive(d, out);
        }
        out.flush();
        return text.toString();
    }

    private static void drive(DriveReview d, PrintWriter out) {
        out.println();
        out.println("drive " + d.answer().name());
        d.ratings().stream().sorted().forEach(r -> out.println("  rated      " + r));
        out.println("  equations  " + d.equations());
        if (d.answer().governing() != null) {
            out.println("  governs    " + d.answer().governing());
        }
        Columns t = new Columns("  ", 5);
        t.row("requirement", "value", "required", "margin", "state");
        List<RequirementAnswer> rs = new ArrayList<>(d.answer().requirements());
        rs.sort(Comparator.comparing(RequirementAnswer::id));
        for (RequirementAnswer r : rs) {
            t.row(r.id(), Figures.value(r), Figures.required(r), Figures.margin(r.margin(), r.comparison()), state(r));
        }
        if (!t.isEmpty()) {
            out.println();
            t.print(out, (c, cell, row) -> cell);
        }
        facts("fact", d.facts(), out);
        facts("allowable", d.allowables(), out);
    }

    private static void facts(String head, List<ReviewFact> facts, PrintWriter out) {
        Columns t = new Columns("  ", 2);
        t.row(head, "value");
        facts.stream()
                .sorted(Comparator.comparing(ReviewFact::path))
                .forEach(f -> t.row(f.path(), Figures.withUnit(Figures.fixed(f.value(), 4), f.unit())));
        if (!t.isEmpty()) {
            out.println();
            t.print(out, (c, cell, row) -> cell);
        }
    }

    /** Judged without a date: an accepted shortfall is short, accepted until its day. */
    private static String state(RequirementAnswer r) {
        RequirementAnswer.Acceptance a = r.accepted();
        if (r.state() == State.ACCEPTED && a != null) {
            return "short, accepted " + r.comparison() + " " + Figures.fixed(a.accepted(), 4) + " until " + a.until();
        }
        return r.state().word();
    }
}
