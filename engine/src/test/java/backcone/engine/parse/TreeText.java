package backcone.engine.parse;

import backcone.engine.syntax.Expr;
import backcone.engine.syntax.FileSyntax;
import backcone.engine.syntax.Name;
import backcone.engine.syntax.Node;
import backcone.engine.text.Span;
import java.lang.reflect.InvocationTargetException;
import java.lang.reflect.RecordComponent;
import java.util.List;
import java.util.StringJoiner;
import java.util.function.Consumer;
import org.jspecify.annotations.Nullable;

/** A tree as text without its places, so that two trees can be compared and a test can say what it expects. */
final class TreeText {
    private TreeText() {}

    static String of(FileSyntax file) {
        StringBuilder b = new StringBuilder();
        file.entries().forEach(e -> b.append(of(e)).append('\n'));
        file.comments().forEach(c -> b.append(c.text().stripTrailing()).append('\n'));
        return b.toString();
    }

    /** {@code Fact(teeth, 18)}: what is absent is left out. */
    static String of(@Nullable Object o) {
        if (o == null) {
            return "";
        }
        if (o instanceof Name n) {
            return n.isHole() ? "?" : n.text();
        }
        if (o instanceof Expr.Path p) {
            StringJoiner j = new StringJoiner(".");
            p.names().forEach(n -> j.add(of(n)));
            return j.toString();
        }
        if (o instanceof Expr.Num n) {
            return n.text() + (n.unit() == null ? "" : " " + n.unit().text());
        }
        if (o instanceof Expr.Hole) {
            return "?";
        }
        if (o instanceof Expr.Binary b) {
            return "(" + of(b.left()) + " " + b.op().sign + " " + of(b.right()) + ")";
        }
        if (o instanceof String s) {
            return "\"" + s + "\"";
        }
        if (o instanceof Expr.Cmp c) {
            return c.sign;
        }
        if (o instanceof List<?> l) {
            StringJoiner j = new StringJoiner(", ", "[", "]");
            l.forEach(e -> j.add(of(e)));
            return j.toString();
        }
        if (o instanceof Record r) {
            StringJoiner j = new StringJoiner(", ", r.getClass().getSimpleName() + "(", ")");
            for (RecordComponent c : r.getClass().getRecordComponents()) {
                String text = c.getType() == Span.class ? "" : of(value(r, c));
                if (!text.isEmpty() && !text.equals("[]")) {
                    j.add(text);
                }
            }
            return j.toString();
        }
        return o.toString();
    }

    /** Every node of a tree. */
    static void walk(@Nullable Object o, Consumer<Node> visitor) {
        if (o instanceof List<?> l) {
            l.forEach(e -> walk(e, visitor));
        }
        if (o instanceof Node n) {
            visitor.accept(n);
        }
        if (o instanceof Record r && !(o instanceof Span)) {
            for (RecordComponent c : r.getClass().getRecordComponents()) {
                if (c.getType() != Span.class) {
                    walk(value(r, c), visitor);
                }
            }
        }
    }

    private static @Nullable Object value(Record r, RecordComponent c) {
        try {
            c.getAccessor().setAccessible(true);
            return c.getAccessor().invoke(r);
        } catch (IllegalAccessException | InvocationTargetException e) {
            throw new IllegalStateException(e);
        }
    }
}
