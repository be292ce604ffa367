package backcone.engine.fixes;

import backcone.engine.answers.RequirementAnswer;
import backcone.engine.syntax.Entry;
import backcone.engine.syntax.Expr;
import backcone.engine.syntax.Node;
import backcone.engine.text.Span;
import java.util.ArrayList;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;

/** A name for a value that is written several times, and back. Either is offered only if nothing that is computed changes. */
final class Lets {
    private final Subject subject;

    Lets(Subject subject) {
        this.subject = subject;
    }

    List<Fix> at(Span range) {
        List<Fix> out = new ArrayList<>();
        List<Node> around = Walk.around(subject.syntax().entries(), range);
        Entry.Drive drive = Walk.first(around, Entry.Drive.class);
        if (drive == null) {
            return out;
        }
        extract(drive, around, out);
        inline(drive, around, out);
        out.removeIf(f -> !changesNothing(f));
        return out;
    }

    private void extract(Entry.Drive drive, List<Node> around, List<Fix> out) {
        Expr.Num num = Walk.last(around, Expr.Num.class);
        Entry.Fact fact = Walk.last(around, Entry.Fact.class);
        if (num == null || fact == null || fact.value() != num) {
            return;
        }
        String name = last(fact.path());
        String value = text(num);
        List<Expr> same = new ArrayList<>();
        Walk.all(drive, n -> {
            if (n instanceof Entry.Fact f
                    && last(f.path()).equals(name)
                    && f.value() instanceof Expr.Num x
                    && text(x).equals(value)) {
                same.add(x);
            }
        });
        if (same.size() < 2) {
            return;
        }
        Set<String> taken = new LinkedHashSet<>();
        Walk.all(drive, n -> {
            if (n instanceof backcone.engine.syntax.Name x) {
                taken.add(x.text());
            }
        });
        taken.addAll(subject.top().names());
        String let = "common_" + name;
        for (int i = 2; taken.contains(let); i++) {
            let = "common_" + name + "_" + i;
        }
        List<TextEdit> edits = new ArrayList<>();
        String text = subject.text();
        if (drive.body().isEmpty()) {
            return;
        }
        int at = Edits.lineStart(text, drive.body().get(0).span().start());
        if (at <= drive.span().start()) {
            return; // a drive on one line
        }
        String in = Edits.indent(text, at);
        edits.add(new TextEdit(
                subject.file(), new Span(at, at), in + "let " + let + " = " + value + Edits.newline(text)));
        for (Expr x : same) {
            edits.add(Edits.inPlace(subject.file(), text, x.span(), let));
        }
        out.add(new Fix(
                "name " + value + ", written " + same.size() + " times for `" + name + "`: let " + let,
                Fix.Kind.EXTRACT,
                false,
                edits,
                List.of()));
    }

    private void inline(Entry.Drive drive, List<Node> around, List<Fix> out) {
        Entry.Let let = Walk.last(around, Entry.Let.class);
        Expr.Path path = Walk.last(around, Expr.Path.class);
        String name = path != null && path.names().size() == 1
                ? path.text()
                : let != null ? let.name().text() : "";
        Entry.Let declared = null;
        for (Entry e : drive.body()) {
            if (e instanceof Entry.Let l && l.name().text().equals(name)) {
                declared = l;
            }
        }
        if (declared == null || name.isEmpty()) {
            return;
        }
        Entry.Let of = declared;
        String value = text(of.value());
        String notes = of.notes().isEmpty()
                ? ""
                : subject.text()
                        .substring(
                                of.notes().get(0).span().start(),
                                of.notes().get(of.notes().size() - 1).span().end());
        List<TextEdit> edits = new ArrayList<>();
        boolean[] lost = new boolean[1];
        int[] uses = new int[1];
        Set<Span> whole = new LinkedHashSet<>();
        Set<Span> targets = new LinkedHashSet<>();
        Walk.all(subject.syntax(), n -> {
            if (n instanceof Entry.Fact f) {
                targets.add(f.path().span());
                if (f.notes().isEmpty()) {
                    whole.add(f.value().span());
                }
            }
            if (n instanceof Expr.Path p && p.text().equals(name) && !targets.contains(p.span())) {
                uses[0]++;
                boolean alone = whole.contains(p.span());
                lost[0] |= !alone && !notes.isEmpty();
                boolean simple = of.value() instanceof Expr.Num || of.value() instanceof Expr.Path;
                String instead = alone || simple || bare(p) ? value : "(" + value + ")";
                edits.add(
                        alone && !notes.isEmpty()
                                ? new TextEdit(subject.file(), p.span(), instead + "     " + notes)
                                : Edits.inPlace(subject.file(), subject.text(), p.span(), instead));
            }
        });
        if (uses[0] == 0 || lost[0]) {
            return;
        }
        String text = subject.text();
        int from = Edits.lineStart(text, of.span().start());
        int to = text.indexOf('\n', of.span().end());
        if (to < 0
                || !text.substring(from, of.span().start()).isBlank()
                || !text.substring(of.span().end(), to).isBlank()) {
            return; // something else stands on the line
        }
        edits.add(new TextEdit(subject.file(), new Span(from, to + 1), ""));
        out.add(new Fix(
                "write out `" + name + "` as " + value + " in " + uses[0] + (uses[0] == 1 ? " place" : " places"),
                Fix.Kind.INLINE,
                false,
                edits,
                List.of()));
    }

    /** Whether a use is a whole value, so that no brackets are needed around what takes its place. */
    private boolean bare(Expr.Path p) {
        boolean[] yes = new boolean[1];
        Walk.all(subject.syntax(), n -> {
            if (n instanceof Entry.Fact f && f.value() == p || n instanceof Entry.Let l && l.value() == p) {
                yes[0] = true;
            }
        });
        return yes[0];
    }

    private static String last(Expr.Path p) {
        return p.names().get(p.names().size() - 1).text();
    }

    private String text(Node n) {
        return subject.text().substring(n.span().start(), n.span().end());
    }

    /** The same requirements with the same values, and no new finding. */
    private boolean changesNothing(Fix f) {
        Subject after = subject.edited(f.edits());
        return same(subject, after);
    }

    static boolean same(Subject before, Subject after) {
        Verdict a = Verdict.of(before.drives(), before.diagnostics());
        Verdict b = Verdict.of(after.drives(), after.diagnostics());
        if (!b.notWorseThan(a) || !a.requirements.keySet().equals(b.requirements.keySet())) {
            return false;
        }
        for (Map.Entry<String, RequirementAnswer> e : a.requirements.entrySet()) {
            RequirementAnswer x = e.getValue();
            RequirementAnswer y = java.util.Objects.requireNonNull(b.requirements.get(e.getKey()));
            boolean near = Double.isNaN(x.value())
                    ? Double.isNaN(y.value())
                    : Math.abs(x.value() - y.value()) <= 1e-12 * Math.abs(x.value());
            if (x.state() != y.state() || !near) {
                return false;
            }
        }
        return true;
    }
}
