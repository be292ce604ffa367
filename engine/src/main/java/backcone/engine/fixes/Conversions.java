package backcone.engine.fixes;

import backcone.engine.syntax.Expr;
import backcone.engine.syntax.Name;
import backcone.engine.syntax.Node;
import backcone.engine.text.Span;
import backcone.engine.units.Numbers;
import backcone.engine.units.Unit;
import java.util.ArrayList;
import java.util.List;
import org.jspecify.annotations.Nullable;

/** The quantity at the cursor in other units of its kind; both ends of a range together. */
final class Conversions {
    private static final int FEW = 7;
    private final Subject subject;

    Conversions(Subject subject) {
        this.subject = subject;
    }

    List<Fix> at(Span range) {
        List<Fix> out = new ArrayList<>();
        List<Node> around = Walk.around(subject.syntax().entries(), range);
        Expr.Num num = Walk.last(around, Expr.Num.class);
        if (num == null || num.unit() == null) {
            return out;
        }
        Node whole = num;
        for (int i = around.size() - 1; i >= 0; i--) {
            if (around.get(i) instanceof Expr.Range || around.get(i) instanceof Expr.Toleranced) {
                whole = around.get(i);
                break;
            }
        }
        List<Expr.Num> all = new ArrayList<>();
        String unit = num.unit().text();
        Walk.all(whole, n -> {
            if (n instanceof Expr.Num x && x.unit() != null && x.unit().text().equals(unit)) {
                all.add(x);
            }
        });
        for (List<String> group : Steps.standard().units) {
            if (!group.contains(unit)) {
                continue;
            }
            for (String to : group) {
                Fix f = to.equals(unit) ? null : fix(all, num, unit, to);
                if (f != null) {
                    out.add(f);
                }
            }
        }
        return out;
    }

    private @Nullable Fix fix(List<Expr.Num> all, Expr.Num shown, String from, String to) {
        Unit a = Axis.unit(from);
        Unit b = Axis.unit(to);
        if (a == null || b == null || !a.dimension().equals(b.dimension())) {
            return null;
        }
        List<TextEdit> edits = new ArrayList<>();
        String said = "";
        boolean exact = true;
        for (Expr.Num n : all) {
            double v = b.fromBase(a.toBase(n.value()));
            String text = Numbers.exact(v);
            if (text.replaceAll("[-.]|e.*", "").length() > FEW + 1) {
                text = Numbers.format(v, FEW);
                exact &= b.toBase(Double.parseDouble(text)) == a.toBase(n.value());
            }
            Name unit = java.util.Objects.requireNonNull(n.unit());
            String whole = text + gap(n, unit) + to;
            edits.add(
                    all.size() == 1
                            ? Edits.inPlace(
                                    subject.file(),
                                    subject.text(),
                                    new Span(n.span().start(), unit.span().end()),
                                    whole)
                            : new TextEdit(
                                    subject.file(),
                                    new Span(n.span().start(), unit.span().end()),
                                    whole));
            if (n == shown) {
                said = text + " " + to;
            }
        }
        return new Fix(
                "write in " + to + ": " + said + (exact ? "" : " (rounded to " + FEW + " digits)"),
                Fix.Kind.REWRITE,
                false,
                edits,
                List.of());
    }

    /** What stands between a number and its unit; {@code 5%} stays without a blank, a word gets one. */
    private String gap(Expr.Num n, Name unit) {
        int end = n.span().start() + n.text().length();
        String there = subject.text().substring(end, Math.max(end, unit.span().start()));
        return there.isEmpty() ? " " : there;
    }
}
