package backcone.engine.parse;

import backcone.engine.syntax.Expr;
import backcone.engine.syntax.Name;
import backcone.engine.text.Span;
import backcone.grammar.Tok;
import backcone.grammar.gen.BackconeParser;
import java.util.ArrayList;
import java.util.List;
import org.antlr.v4.runtime.ParserRuleContext;
import org.antlr.v4.runtime.Token;
import org.antlr.v4.runtime.tree.ParseTree;
import org.antlr.v4.runtime.tree.TerminalNode;
import org.jspecify.annotations.Nullable;

/** Expressions and values, with a hole wherever one is missing. */
final class Exprs {
    private final Places places;
    private final ItemCheck check;

    Exprs(Places places, ItemCheck check) {
        this.places = places;
        this.check = check;
    }

    /** Told of every arm, so that its failure is reported. */
    interface ItemCheck {
        void check(ParserRuleContext item, BackconeParser.@Nullable RestContext rest);
    }

    // ---- values

    Expr value(BackconeParser.@Nullable ValueContext c, ParserRuleContext owner) {
        if (c == null) {
            return hole(owner);
        }
        if (c.REFERENCE() != null) {
            return new Expr.BlockRef(places.name(c.head, c), places.name(c.id, c), places.of(c));
        }
        Expr e = expr(c.expr(), c);
        if (c.TOL() != null) {
            return new Expr.Toleranced(e, sum(c.from, c), sum(c.to, c), places.of(c));
        }
        if (c.DOTDOT() != null) {
            return new Expr.Range(e, sum(c.high, c), places.of(c));
        }
        if (c.ON() != null && c.DATE() != null) {
            return new Expr.Dated(e, day(c.DATE().getSymbol()), places.of(c));
        }
        return e;
    }

    static Expr.Day day(Token date) {
        return new Expr.Day(date.getText(), Places.of(date));
    }

    // ---- operators

    Expr expr(BackconeParser.@Nullable ExprContext c, ParserRuleContext owner) {
        if (c == null || c.children == null) {
            return hole(owner);
        }
        if (c.ROOT() != null) {
            return new Expr.Root(
                    sum(c.left, c), sum(c.right, c), sum(c.low, c), sum(c.high, c), textOrNull(c.text()), places.of(c));
        }
        if (c.SETTLE() != null) {
            return new Expr.Settle(
                    sum(c.what, c),
                    sum(c.begin, c),
                    sum(c.tolerance, c),
                    sum(c.most, c),
                    textOrNull(c.text()),
                    places.of(c));
        }
        if (c.children.size() == 1 && c.children.get(0) instanceof BackconeParser.CompareContext) {
            return compare((BackconeParser.CompareContext) c.children.get(0));
        }
        return logic(c);
    }

    /** {@code or} binds weakest, then {@code and}, then {@code not}. */
    private Expr logic(BackconeParser.ExprContext c) {
        Chain or = new Chain();
        Chain and = new Chain();
        int nots = -1;
        for (int i = 0; i < c.children.size(); i++) {
            ParseTree child = c.children.get(i);
            if (child instanceof BackconeParser.CompareContext compare) {
                Expr e = compare(compare);
                Span place = places.of(compare);
                for (int k = i - 1; nots >= 0 && k >= nots; k--) {
                    place = Places.of(((TerminalNode) c.children.get(k)).getSymbol())
                            .to(place);
                    e = new Expr.Not(e, place);
                }
                nots = -1;
                and.add(Expr.Op.AND, e, place);
            } else if (isType(child, BackconeParser.OR)) {
                or.add(Expr.Op.OR, and.take(c), and.span);
                and = new Chain();
            } else if (isType(child, BackconeParser.NOT) && nots < 0) {
                nots = i;
            }
        }
        or.add(Expr.Op.OR, and.take(c), and.span);
        return or.take(c);
    }

    /** Operands of one rank from left to right, with the place of all so far, brackets included. */
    private final class Chain {
        private @Nullable Expr sofar;
        private Span span = Span.NONE;

        void add(Expr.Op op, Expr e, Span place) {
            span = sofar == null ? place : span.to(place);
            sofar = sofar == null ? e : new Expr.Binary(op, sofar, e, span);
        }

        Expr take(ParserRuleContext owner) {
            if (sofar == null) {
                span = places.behind(owner);
                return new Expr.Hole(span);
            }
            return sofar;
        }
    }

    private Expr compare(BackconeParser.CompareContext c) {
        if (c.children == null) {
            return hole(c);
        }
        if (c.children.size() == 1 && c.children.get(0) instanceof BackconeParser.SumContext) {
            return sum((BackconeParser.SumContext) c.children.get(0), c);
        }
        List<Expr> operands = new ArrayList<>();
        List<Expr.Cmp> signs = new ArrayList<>();
        for (ParseTree child : c.children) {
            if (child instanceof BackconeParser.SumContext sumContext) {
                operands.add(sum(sumContext, c));
            } else if (child instanceof TerminalNode terminalNode) {
                signs.add(sign(terminalNode.getSymbol().getText()));
            }
        }
        while (operands.size() <= signs.size()) {
            operands.add(hole(c));
        }
        return signs.isEmpty()
                ? operands.get(0)
                : new Expr.Compare(List.copyOf(operands), List.copyOf(signs), places.of(c));
    }

    static Expr.Cmp sign(BackconeParser.@Nullable CmpSignContext c) {
        return c == null || c.getChildCount() == 0
                ? Expr.Cmp.GE
                : sign(c.getStart().getText());
    }

    private static Expr.Cmp sign(String text) {
        for (Expr.Cmp cmp : Expr.Cmp.values()) {
            if (cmp.sign.equals(text)) {
                return cmp;
            }
        }
        return Expr.Cmp.GE;
    }

    Expr sum(BackconeParser.@Nullable SumContext c, ParserRuleContext owner) {
        if (c == null || c.children == null) {
            return hole(owner);
        }
        if (c.children.size() == 1 && c.children.get(0) instanceof BackconeParser.OperandContext) {
            return operand((BackconeParser.OperandContext) c.children.get(0));
        }
        Chain sum = new Chain();
        Chain term = new Chain();
        Expr.Op sumSign = Expr.Op.ADD;
        Expr.Op termSign = Expr.Op.MUL;
        int i = 0;
        while (i < c.children.size()) {
            int end = endOfPower(c, i);
            Power power = power(c, i, end);
            term.add(termSign, power.value, power.span);
            i = end;
            if (i >= c.children.size()) {
                break;
            }
            ParseTree operator = c.children.get(i);
            i++;
            if (isType(operator, BackconeParser.STAR) || isType(operator, BackconeParser.SLASH)) {
                termSign = isType(operator, BackconeParser.STAR) ? Expr.Op.MUL : Expr.Op.DIV;
            } else {
                sum.add(sumSign, term.take(c), term.span);
                sumSign = isType(operator, BackconeParser.MINUS) ? Expr.Op.SUB : Expr.Op.ADD;
                term = new Chain();
                termSign = Expr.Op.MUL;
            }
        }
        sum.add(sumSign, term.take(c), term.span);
        return sum.take(c);
    }

    private record Power(Expr value, Span span) {}

    /** The index behind {@code -a ^ -b ^ c}, which is one factor. */
    private static int endOfPower(BackconeParser.SumContext c, int from) {
        int i = from;
        while (true) {
            while (i < c.children.size() && !(c.children.get(i) instanceof BackconeParser.OperandContext)) {
                i++;
            }
            i = Math.min(i + 1, c.children.size());
            if (i >= c.children.size() || !isType(c.children.get(i), BackconeParser.CARET)) {
                return i;
            }
            i++;
        }
    }

    /** {@code -a ^ -b ^ c} is {@code -(a ^ (-(b ^ c)))}. A plus says nothing. */
    private Power power(BackconeParser.SumContext c, int from, int end) {
        Expr right = null;
        Span span = Span.NONE;
        for (int i = end - 1; i >= from; i--) {
            ParseTree child = c.children.get(i);
            if (child instanceof BackconeParser.OperandContext operand) {
                Expr e = operand(operand);
                Span place = places.of(operand);
                span = right == null ? place : place.to(span);
                right = right == null ? e : new Expr.Binary(Expr.Op.POW, e, right, span);
                continue;
            }
            Token sign = ((TerminalNode) child).getSymbol();
            if (right == null) {
                span = places.behind(c);
                right = new Expr.Hole(span);
            }
            if (sign.getType() == BackconeParser.MINUS) {
                span = Places.of(sign).to(span);
                right = new Expr.Neg(right, span);
            }
        }
        return right == null ? new Power(hole(c), places.behind(c)) : new Power(right, span);
    }

    // ---- operands

    private Expr operand(BackconeParser.OperandContext c) {
        Expr e = bare(c);
        for (int i = 0; i < c.getChildCount(); i++) {
            if (isType(c.getChild(i), BackconeParser.IN)) {
                Token unit = i + 1 < c.getChildCount() ? ((TerminalNode) c.getChild(i + 1)).getSymbol() : null;
                Name name = places.name(unit, c);
                e = new Expr.In(
                        e, name, new Span(places.of(c).start(), name.span().end()));
            }
        }
        return e;
    }

    private Expr bare(BackconeParser.OperandContext c) {
        if (c.children == null) {
            return hole(c);
        }
        switch (c.getStart().getType()) {
            case BackconeParser.NUMBER -> {
                return number(c);
            }
            case BackconeParser.NAME -> {
                return pathOrCall(c.path(), c.call(), c);
            }
            case BackconeParser.LPAREN -> {
                return expr(c.expr(), c);
            }
            case BackconeParser.GIVEN -> {
                return new Expr.Given(path(c.path(), c), places.of(c));
            }
            case BackconeParser.CHOOSE -> {
                return choose(c);
            }
            case BackconeParser.DATE -> {
                return day(c.DATE().getSymbol());
            }
            default -> {
                BackconeParser.TextContext text = c.text();
                return text == null ? hole(c) : new Expr.Str(text(text), places.of(text));
            }
        }
    }

    private Expr number(BackconeParser.OperandContext c) {
        Token token = c.getStart();
        ParseTree next = c.getChildCount() > 1 ? c.getChild(1) : null;
        Token unit = next != null && isType(next, BackconeParser.UNIT) ? ((TerminalNode) next).getSymbol() : null;
        if (token instanceof Tok tok && tok.isUnreadable()) {
            return new Expr.Hole(Places.of(token));
        }
        return num(token, unit);
    }

    static Expr.Num num(Token number, @Nullable Token unit) {
        String text = number.getText();
        double value;
        try {
            value = Double.parseDouble(text);
        } catch (NumberFormatException unreadable) {
            // the token list has said so already
            value = 0;
        }
        Span span = Places.of(number);
        if (unit == null) {
            return new Expr.Num(text, value, null, span);
        }
        Span place = Places.of(unit);
        return new Expr.Num(text, value, new Name(unit.getText(), place), span.to(place));
    }

    private Expr pathOrCall(
            BackconeParser.PathContext pathContext,
            BackconeParser.@Nullable CallContext call,
            ParserRuleContext owner) {
        Expr.Path path = path(pathContext, owner);
        if (call == null) {
            return path;
        }
        List<Expr> args = new ArrayList<>();
        for (BackconeParser.ArgContext a : call.arg()) {
            args.add(argument(a));
        }
        int end = call.RPAREN() == null
                ? places.of(call).end()
                : Places.of(call.RPAREN().getSymbol()).end();
        Expr e = new Expr.Call(path, List.copyOf(args), new Span(path.span().start(), end));
        for (TerminalNode column : call.NAME()) {
            Span place = Places.of(column.getSymbol());
            e = new Expr.Column(e, new Name(column.getText(), place), e.span().to(place));
        }
        return e;
    }

    private Expr argument(BackconeParser.ArgContext a) {
        if (a.EACH() == null) {
            return expr(a.expr(), a);
        }
        Token name = a.NAME() == null ? null : a.NAME().getSymbol();
        Expr body = a.COLON() == null ? null : expr(a.expr(), a);
        return new Expr.Each(places.name(name, a), body, places.of(a));
    }

    private Expr choose(BackconeParser.OperandContext c) {
        Expr subject = c.sum() == null ? null : sum(c.sum(), c);
        List<Expr.Arm> arms = new ArrayList<>();
        if (c.arms() != null && c.arms().armList() != null) {
            for (BackconeParser.ArmContext a : c.arms().armList().arm()) {
                check.check(a, a.rest());
                BackconeParser.OneArmContext arm = a.oneArm();
                Expr when = arm.ELSE() != null ? null : expr(arm.when, arm);
                Expr value = expr(arm.then, arm);
                arms.add(new Expr.Arm(when, value, places.of(a)));
            }
        }
        int end = c.arms() == null ? places.of(c).end() : places.of(c.arms()).end();
        return new Expr.Choose(subject, List.copyOf(arms), new Span(places.of(c).start(), end));
    }

    Expr.Path path(BackconeParser.@Nullable PathContext c, ParserRuleContext owner) {
        if (c == null || c.children == null) {
            return new Expr.Path(List.of(new Name("", places.behind(owner))), places.behind(owner));
        }
        List<Name> names = new ArrayList<>((c.children.size() + 1) / 2);
        boolean open = false;
        for (ParseTree child : c.children) {
            Token t = ((TerminalNode) child).getSymbol();
            open = t.getType() == BackconeParser.DOT;
            if (!open) {
                names.add(new Name(t.getText(), Places.of(t)));
            }
        }
        if (open) {
            names.add(new Name("", places.behind(c)));
        }
        return new Expr.Path(List.copyOf(names), places.of(c));
    }

    // ---- small things

    /** The text of a string without its quotes. */
    static String text(BackconeParser.TextContext c) {
        return unquoted(c.getText());
    }

    static @Nullable String textOrNull(BackconeParser.@Nullable TextContext c) {
        return c == null || c.getChildCount() == 0 ? null : text(c);
    }

    static String unquoted(String raw) {
        boolean closed = raw.length() > 1 && raw.endsWith("\"");
        String inner = raw.isEmpty() ? "" : raw.substring(1, closed ? raw.length() - 1 : raw.length());
        if (inner.indexOf('\\') < 0) {
            return inner;
        }
        StringBuilder b = new StringBuilder(inner.length());
        for (int i = 0; i < inner.length(); i++) {
            char c = inner.charAt(i);
            if (c == '\\' && i + 1 < inner.length() && (inner.charAt(i + 1) == '"' || inner.charAt(i + 1) == '\\')) {
                i++;
                b.append(inner.charAt(i));
            } else {
                b.append(c);
            }
        }
        return b.toString();
    }

    Expr.Hole hole(ParserRuleContext where) {
        return new Expr.Hole(places.behind(where));
    }

    private static boolean isType(ParseTree node, int type) {
        return node instanceof TerminalNode terminalNode
                && terminalNode.getSymbol().getType() == type;
    }
}
