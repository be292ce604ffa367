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
        if (c instanceof BackconeParser.RefValueContext) {
            BackconeParser.RefValueContext ref = (BackconeParser.RefValueContext) c;
            return new Expr.BlockRef(places.name(ref.head, c), places.name(ref.id, c), places.of(c));
        }
        if (!(c instanceof BackconeParser.ExprValueContext)) {
            return hole(owner);
        }
        BackconeParser.ExprValueContext v = (BackconeParser.ExprValueContext) c;
        Expr e = expr(v.expr(), c);
        if (v.TOL() != null) {
            return new Expr.Toleranced(e, sum(v.from, c), sum(v.to, c), places.of(c));
        }
        if (v.DOTDOT() != null) {
            return new Expr.Range(e, sum(v.high, c), places.of(c));
        }
        if (v.ON() != null && v.DATE() != null) {
            return new Expr.Dated(e, day(v.DATE().getSymbol()), places.of(c));
        }
        return e;
    }

    static Expr.Day day(Token date) {
        return new Expr.Day(date.getText(), Places.of(date));
    }

    // ---- operators

    Expr expr(BackconeParser.@Nullable ExprContext c, ParserRuleContext owner) {
        if (c == null) {
            return hole(owner);
        }
        if (c instanceof BackconeParser.RootExprContext) {
            BackconeParser.RootExprContext r = (BackconeParser.RootExprContext) c;
            return new Expr.Root(
                    sum(r.left, c),
                    sum(r.right, c),
                    sum(r.low, c),
                    sum(r.high, c),
                    textOrNull(r.text()),
                    places.of(c));
        }
        if (c instanceof BackconeParser.SettleExprContext) {
            BackconeParser.SettleExprContext s = (BackconeParser.SettleExprContext) c;
            return new Expr.Settle(
                    sum(s.what, c),
                    sum(s.begin, c),
                    sum(s.tolerance, c),
                    sum(s.most, c),
                    textOrNull(s.text()),
                    places.of(c));
        }
        if (!(c instanceof BackconeParser.OrExprContext)) {
            return hole(c);
        }
        List<BackconeParser.ConjContext> parts = ((BackconeParser.OrExprContext) c).conj();
        if (parts.isEmpty()) {
            return hole(c);
        }
        Expr left = conj(parts.get(0));
        Span span = places.of(parts.get(0));
        for (int i = 1; i < parts.size(); i++) {
            span = span.to(places.of(parts.get(i)));
            left = new Expr.Binary(Expr.Op.OR, left, conj(parts.get(i)), span);
        }
        return left;
    }

    private Expr conj(BackconeParser.ConjContext c) {
        List<BackconeParser.NegContext> parts = c.neg();
        if (parts.isEmpty()) {
            return hole(c);
        }
        Expr left = neg(parts.get(0));
        Span span = places.of(parts.get(0));
        for (int i = 1; i < parts.size(); i++) {
            span = span.to(places.of(parts.get(i)));
            left = new Expr.Binary(Expr.Op.AND, left, neg(parts.get(i)), span);
        }
        return left;
    }

    private Expr neg(BackconeParser.NegContext c) {
        BackconeParser.CompareContext inner = c.compare();
        Expr e = inner == null ? hole(c) : compare(inner);
        List<TerminalNode> nots = c.NOT();
        for (int i = nots.size() - 1; i >= 0; i--) {
            e = new Expr.Not(e, Places.of(nots.get(i).getSymbol()).to(places.of(c)));
        }
        return e;
    }

    private Expr compare(BackconeParser.CompareContext c) {
        List<BackconeParser.SumContext> parts = c.sum();
        if (parts.isEmpty()) {
            return hole(c);
        }
        if (parts.size() == 1 && c.cmpSign().isEmpty()) {
            return sum(parts.get(0), c);
        }
        List<Expr> operands = new ArrayList<>(parts.size());
        for (BackconeParser.SumContext p : parts) {
            operands.add(sum(p, c));
        }
        List<Expr.Cmp> signs = new ArrayList<>();
        for (BackconeParser.CmpSignContext s : c.cmpSign()) {
            signs.add(sign(s));
        }
        while (operands.size() <= signs.size()) {
            operands.add(hole(c));
        }
        return new Expr.Compare(List.copyOf(operands), List.copyOf(signs), places.of(c));
    }

    static Expr.Cmp sign(BackconeParser.@Nullable CmpSignContext c) {
        if (c != null && c.getStart() != null) {
            String text = c.getStart().getText();
            for (Expr.Cmp cmp : Expr.Cmp.values()) {
                if (cmp.sign.equals(text)) {
                    return cmp;
                }
            }
        }
        return Expr.Cmp.GE;
    }

    Expr sum(BackconeParser.@Nullable SumContext c, ParserRuleContext owner) {
        if (c == null) {
            return hole(owner);
        }
        Expr left = null;
        Span span = Span.NONE;
        Expr.Op op = Expr.Op.ADD;
        for (int i = 0; i < c.getChildCount(); i++) {
            ParseTree child = c.getChild(i);
            if (child instanceof BackconeParser.TermContext) {
                BackconeParser.TermContext part = (BackconeParser.TermContext) child;
                Expr e = term(part);
                Span place = places.of(part);
                span = left == null ? place : span.to(place);
                left = left == null ? e : new Expr.Binary(op, left, e, span);
            } else {
                op = isType(child, BackconeParser.MINUS) ? Expr.Op.SUB : Expr.Op.ADD;
            }
        }
        return left == null ? hole(c) : left;
    }

    private Expr term(BackconeParser.TermContext c) {
        Expr left = null;
        Span span = Span.NONE;
        Expr.Op op = Expr.Op.MUL;
        for (int i = 0; i < c.getChildCount(); i++) {
            ParseTree child = c.getChild(i);
            if (child instanceof BackconeParser.UnaryContext) {
                BackconeParser.UnaryContext part = (BackconeParser.UnaryContext) child;
                Expr e = unary(part);
                Span place = places.of(part);
                span = left == null ? place : span.to(place);
                left = left == null ? e : new Expr.Binary(op, left, e, span);
            } else {
                op = isType(child, BackconeParser.SLASH) ? Expr.Op.DIV : Expr.Op.MUL;
            }
        }
        return left == null ? hole(c) : left;
    }

    private Expr unary(BackconeParser.UnaryContext c) {
        BackconeParser.PowerContext inner = c.power();
        Expr e = inner == null ? hole(c) : power(inner);
        int end = places.of(c).end();
        for (int i = c.getChildCount() - 1; i >= 0; i--) {
            e = signed(c.getChild(i), e, end);
        }
        return e;
    }

    /** A minus is kept; a plus says nothing. */
    private static Expr signed(ParseTree sign, Expr e, int end) {
        if (isType(sign, BackconeParser.MINUS)) {
            int start = ((TerminalNode) sign).getSymbol().getStartIndex();
            return new Expr.Neg(e, new Span(start, Math.max(start, end)));
        }
        return e;
    }

    /** {@code a ^ -b ^ c} is {@code a ^ (-(b ^ c))}. */
    private Expr power(BackconeParser.PowerContext c) {
        Expr right = null;
        int end = places.of(c).end();
        for (int i = c.getChildCount() - 1; i >= 0; i--) {
            ParseTree child = c.getChild(i);
            if (child instanceof BackconeParser.PostContext) {
                BackconeParser.PostContext part = (BackconeParser.PostContext) child;
                Expr e = post(part);
                int start = places.of(part).start();
                right = right == null ? e : new Expr.Binary(Expr.Op.POW, e, right, new Span(start, Math.max(start, end)));
            } else if (right == null) {
                right = hole(c);
            } else {
                right = signed(child, right, end);
            }
        }
        return right == null ? hole(c) : right;
    }

    private Expr post(BackconeParser.PostContext c) {
        BackconeParser.PrimaryContext inner = c.primary();
        Expr e = inner == null ? hole(c) : primary(inner);
        for (TerminalNode unit : c.UNIT()) {
            Span span = places.of(c).to(Places.of(unit.getSymbol()));
            e = new Expr.In(e, new Name(unit.getText(), Places.of(unit.getSymbol())), span);
        }
        return e;
    }

    // ---- operands

    private Expr primary(BackconeParser.PrimaryContext c) {
        if (c instanceof BackconeParser.NumberExprContext) {
            return number((BackconeParser.NumberExprContext) c);
        }
        if (c instanceof BackconeParser.PathExprContext) {
            return pathOrCall((BackconeParser.PathExprContext) c);
        }
        if (c instanceof BackconeParser.ParenExprContext) {
            return expr(((BackconeParser.ParenExprContext) c).expr(), c);
        }
        if (c instanceof BackconeParser.TextExprContext) {
            BackconeParser.TextContext text = ((BackconeParser.TextExprContext) c).text();
            return text == null ? hole(c) : new Expr.Str(text(text), places.of(text));
        }
        if (c instanceof BackconeParser.DateExprContext) {
            return day(((BackconeParser.DateExprContext) c).DATE().getSymbol());
        }
        if (c instanceof BackconeParser.GivenExprContext) {
            return new Expr.Given(path(((BackconeParser.GivenExprContext) c).path(), c), places.of(c));
        }
        if (c instanceof BackconeParser.ChooseExprContext) {
            return choose((BackconeParser.ChooseExprContext) c);
        }
        return hole(c);
    }

    private Expr number(BackconeParser.NumberExprContext c) {
        Token token = c.NUMBER().getSymbol();
        if (token instanceof Tok && ((Tok) token).isUnreadable()) {
            return new Expr.Hole(places.of(c));
        }
        return num(token, c.UNIT() == null ? null : c.UNIT().getSymbol());
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
        return new Expr.Num(
                text, value, new Name(unit.getText(), Places.of(unit)), span.to(Places.of(unit)));
    }

    private Expr pathOrCall(BackconeParser.PathExprContext c) {
        Expr.Path path = path(c.path(), c);
        if (c.LPAREN() == null) {
            return path;
        }
        List<Expr> args = new ArrayList<>();
        for (BackconeParser.ArgContext a : c.arg()) {
            args.add(argument(a));
        }
        int end = c.RPAREN() == null ? places.of(c).end() : Places.of(c.RPAREN().getSymbol()).end();
        Expr e = new Expr.Call(path, List.copyOf(args), new Span(path.span().start(), end));
        for (TerminalNode column : c.NAME()) {
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

    private Expr choose(BackconeParser.ChooseExprContext c) {
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
        return new Expr.Choose(subject, List.copyOf(arms), places.of(c));
    }

    Expr.Path path(BackconeParser.@Nullable PathContext c, ParserRuleContext owner) {
        if (c == null || c.NAME().isEmpty()) {
            return new Expr.Path(List.of(new Name("", places.behind(owner))), places.behind(owner));
        }
        List<Name> names = new ArrayList<>(c.NAME().size());
        for (TerminalNode n : c.NAME()) {
            names.add(new Name(n.getText(), Places.of(n.getSymbol())));
        }
        if (c.DOT().size() >= names.size()) {
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
        return node instanceof TerminalNode && ((TerminalNode) node).getSymbol().getType() == type;
    }
}
