package backcone.engine.review;

import backcone.engine.answers.RequirementAnswer;
import backcone.engine.units.Numbers;
import backcone.engine.units.Unit;
import backcone.engine.units.Units;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import org.jspecify.annotations.Nullable;

/** Tells a lowered bar from a changed design. */
public final class Bars {
    private static final double SAME = 1e-9;

    private Bars() {}

    public static List<Comparison.Lowered> lowered(
            List<Edit> edits, Map<String, RequirementAnswer> was, Map<String, RequirementAnswer> is) {
        List<Comparison.Lowered> out = new ArrayList<>();
        for (RequirementAnswer a : was.values()) {
            RequirementAnswer b = is.get(a.id());
            if (b == null) {
                out.add(new Comparison.Lowered("no longer required", a.id(), bound(a), ""));
            } else if (weaker(a, b)) {
                out.add(new Comparison.Lowered("requirement lowered", a.id(), bound(a), bound(b)));
            }
        }
        for (Edit e : edits) {
            String before = e.before() == null ? "" : e.before();
            String after = e.after() == null ? "" : e.after();
            switch (e.kind()) {
                case ACCEPTANCE -> {
                    if (e.after() != null) {
                        out.add(new Comparison.Lowered(
                                before.isEmpty() ? "deviation accepted" : "acceptance changed",
                                e.path(),
                                before,
                                after));
                    }
                }
                case WAIVER -> {
                    if (e.after() != null) {
                        out.add(new Comparison.Lowered(
                                before.isEmpty() ? "limit waived" : "waiver changed", e.path(), before, after));
                    }
                }
                case OVERRIDE -> {
                    if (e.after() != null) {
                        out.add(new Comparison.Lowered(
                                before.isEmpty() ? "value overridden" : "override changed", e.path(), before, after));
                    }
                }
                case READING -> out.add(new Comparison.Lowered("another reading", e.path(), before, after));
                default -> {
                    String way = byName(e);
                    if (way != null) {
                        out.add(new Comparison.Lowered(way, e.path(), before, after));
                    } else if (after.contains(" assumed") && !before.contains(" assumed")) {
                        out.add(new Comparison.Lowered("now assumed", e.path(), before, after));
                    }
                }
            }
        }
        return out;
    }

    private static @Nullable String byName(Edit e) {
        if (e.kind() != Edit.Kind.VALUE && e.kind() != Edit.Kind.ADDED && e.kind() != Edit.Kind.REMOVED) {
            return null;
        }
        String name = e.path().substring(e.path().lastIndexOf('.') + 1);
        ReviewWords.Way way = ReviewWords.standard().bar(name);
        if (way == null || e.before() == null) {
            return null; // a value that was open before is no bar that was lowered
        }
        if (e.from() == null || e.to() == null) {
            return e.after() == null ? "no longer given" : "changed on paper";
        }
        double a = base(e.from());
        double b = base(e.to());
        return switch (way) {
            case DOWN -> b < a ? "bar lowered" : null;
            case UP -> b > a ? "bar lowered" : null;
            case CHANGE -> b != a ? "changed on paper" : null;
        };
    }

    private static double base(backcone.engine.syntax.Expr.Num n) {
        Unit u = n.unit() != null && Units.standard().parse(n.unit().text()) instanceof Units.Parse.Ok ok
                ? ok.unit()
                : null;
        return u == null ? n.value() : u.toBase(n.value());
    }

    private static boolean weaker(RequirementAnswer a, RequirementAnswer b) {
        if (!a.comparison().equals(b.comparison())) {
            return true;
        }
        double slack = SAME * Math.max(Math.abs(a.required()), Math.abs(b.required()));
        return switch (a.comparison()) {
            case ">=" -> b.required() < a.required() - slack;
            case "<=" -> b.required() > a.required() + slack;
            case "between" -> b.required() < a.required() - slack || b.upper() > a.upper() + slack;
            default -> Math.abs(a.required() - b.required()) > slack;
        };
    }

    /** {@code >= 1.1}. */
    public static String bound(RequirementAnswer r) {
        if (Double.isNaN(r.required())) {
            return "";
        }
        String unit = r.unit().isEmpty() ? "" : " " + r.unit();
        return r.comparison().equals("between")
                ? Numbers.format(r.required(), 6) + unit + " … " + Numbers.format(r.upper(), 6) + unit
                : r.comparison() + " " + Numbers.format(r.required(), 6) + unit;
    }

    /** Facts that others depend on and that changed by more than rounding. */
    public static List<Comparison.FactChange> facts(List<ReviewFact> was, List<ReviewFact> is) {
        Map<String, ReviewFact> old = new LinkedHashMap<>();
        was.forEach(f -> old.put(f.path(), f));
        List<Comparison.FactChange> out = new ArrayList<>();
        for (ReviewFact f : is) {
            ReviewFact o = old.remove(f.path());
            if (o == null) {
                out.add(new Comparison.FactChange(f.path(), f.meaning(), Double.NaN, f.value(), f.unit(), false));
            } else if (Math.abs(o.value() - f.value()) > 5e-4 * Math.max(Math.abs(o.value()), Math.abs(f.value()))) {
                out.add(new Comparison.FactChange(
                        f.path(), f.meaning(), o.value(), f.value(), f.unit(), o.value() * f.value() < 0));
            }
        }
        for (ReviewFact o : old.values()) {
            out.add(new Comparison.FactChange(o.path(), o.meaning(), o.value(), Double.NaN, o.unit(), false));
        }
        return out;
    }

    /** What to say when rated facts changed and the signature did not; null when nothing is to be said. */
    public static @Nullable String approval(List<Edit> edits, String drive, @Nullable String approved) {
        if (approved == null) {
            return null;
        }
        boolean rated = false;
        for (Edit e : edits) {
            if (e.path().equals("approved")) {
                return null;
            }
            rated |= e.counts() && e.kind() != Edit.Kind.UNIT && e.kind() != Edit.Kind.REQUIREMENT;
        }
        return rated ? "Rated facts of `" + drive + "` changed, and `approved` is still " + approved + "." : null;
    }

    /** Whether these edits move what is asked for, or what is written on paper, and nothing of the design. */
    public static boolean movesBarOnly(List<Integer> ids, List<Edit> edits) {
        for (int i : ids) {
            if (edits.get(i).kind() != Edit.Kind.REQUIREMENT && byName(edits.get(i)) == null) {
                return false;
            }
        }
        return true;
    }
}
