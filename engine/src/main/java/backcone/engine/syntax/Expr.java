package backcone.engine.syntax;

import backcone.engine.text.Span;
import java.util.List;
import org.jspecify.annotations.Nullable;

/** An expression. Every form has a place in the text; {@link Hole} stands where one is missing. */
public sealed interface Expr extends Node {

    /** A number as written ({@code text}), its value, and the unit that touches or follows it, if any. */
    record Num(String text, double value, @Nullable Name unit, Span span) implements Expr {}

    record Str(String value, Span span) implements Expr {}

    /** A date as written, {@code 2027-06-30}. */
    record Day(String text, Span span) implements Expr {}

    /** A dotted name: {@code pinion.material.E}. Never empty. */
    record Path(List<Name> names, Span span) implements Expr {
        public String text() {
            if (names.size() == 1) {
                return names.get(0).text();
            }
            StringBuilder b = new StringBuilder();
            for (Name n : names) {
                if (b.length() > 0) {
                    b.append('.');
                }
                b.append(n.text());
            }
            return b.toString();
        }
    }

    record Neg(Expr operand, Span span) implements Expr {}

    record Not(Expr operand, Span span) implements Expr {}

    record Binary(Op op, Expr left, Expr right, Span span) implements Expr {}

    /** {@code a <= b < c}: operands one more than operators. */
    record Compare(List<Expr> operands, List<Cmp> ops, Span span) implements Expr {}

    /** {@code given path}. */
    record Given(Path path, Span span) implements Expr {}

    /** A function, a table, or a built-in: {@code rim_speed(d, n)}. */
    record Call(Path callee, List<Expr> args, Span span) implements Expr {}

    /** {@code each bin : D}, an argument of sum, least, greatest, count. */
    record Each(Name collection, @Nullable Expr body, Span span) implements Expr {}

    /** A column of a looked-up row: {@code C_v(low).v1}. */
    record Column(Expr row, Name name, Span span) implements Expr {}

    record Choose(@Nullable Expr subject, List<Arm> arms, Span span) implements Expr {}

    /** One arm of a choice; {@code when} is null for {@code else}. */
    record Arm(@Nullable Expr when, Expr value, Span span) implements Node {}

    /** {@code root of left == right between low and high [else "…"]}. */
    record Root(
            Expr left,
            Expr right,
            Expr low,
            Expr high,
            @Nullable String otherwise,
            Span span) implements Expr {}

    /** {@code settle value from start within tolerance at most count [else "…"]}. */
    record Settle(
            Expr value,
            Expr start,
            Expr tolerance,
            Expr most,
            @Nullable String otherwise,
            Span span) implements Expr {}

    /** {@code x in m/s}: the bare number in that unit. */
    record In(Expr operand, Name unit, Span span) implements Expr {}

    /** {@code 58 HRC .. 62 HRC}. */
    record Range(Expr low, Expr high, Span span) implements Expr {}

    /** {@code 112 mm tol -0.02 mm .. +0.05 mm}. */
    record Toleranced(Expr nominal, Expr low, Expr high, Span span) implements Expr {}

    /** {@code "A. Brandt" on 2026-03-02}. */
    record Dated(Expr value, Day day, Span span) implements Expr {}

    /** {@code gear sun}: a reference to a shared block, kind first. */
    record BlockRef(Name kind, Name name, Span span) implements Expr {}

    /** An expression was expected here. */
    record Hole(Span span) implements Expr {}

    enum Op {
        ADD("+"),
        SUB("-"),
        MUL("*"),
        DIV("/"),
        POW("^"),
        AND("and"),
        OR("or");

        public final String sign;

        Op(String sign) {
            this.sign = sign;
        }
    }

    enum Cmp {
        EQ("=="),
        NE("!="),
        LE("<="),
        GE(">="),
        LT("<"),
        GT(">");

        public final String sign;

        Cmp(String sign) {
            this.sign = sign;
        }
    }
}
