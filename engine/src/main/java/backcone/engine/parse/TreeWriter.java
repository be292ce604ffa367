package backcone.engine.parse;

import backcone.engine.syntax.Entry;
import backcone.engine.syntax.Expr;
import backcone.engine.syntax.FileSyntax;
import backcone.engine.syntax.Name;
import backcone.engine.syntax.Node;
import backcone.engine.syntax.Note;
import backcone.engine.text.Span;
import java.io.ByteArrayOutputStream;
import java.nio.charset.StandardCharsets;
import java.util.ArrayList;
import java.util.HashMap;
import java.util.List;
import java.util.Map;
import java.util.function.Consumer;
import org.jspecify.annotations.Nullable;

/**
 * Writes a tree as bytes. The number of a form is its place in this file and in {@link TreeReader}: the two are changed
 * together, and {@link TreeCodec#VERSION} with them.
 */
final class TreeWriter {
    private final Map<String, Integer> pool = new HashMap<>();
    private final List<String> strings = new ArrayList<>();
    private final ByteArrayOutputStream nodes = new ByteArrayOutputStream();
    private int lastStart;

    /** The string pool, then the nodes. */
    static byte[] write(FileSyntax file) {
        TreeWriter w = new TreeWriter();
        w.span(file.span());
        w.list(file.entries(), w::entry);
        w.list(file.comments(), w::comment);
        ByteArrayOutputStream out = new ByteArrayOutputStream();
        varint(out, w.strings.size());
        for (String s : w.strings) {
            byte[] bytes = s.getBytes(StandardCharsets.UTF_8);
            varint(out, bytes.length);
            out.write(bytes, 0, bytes.length);
        }
        out.write(w.nodes.toByteArray(), 0, w.nodes.size());
        return out.toByteArray();
    }

    // ---- entries

    private void entry(Entry e) {
        if (e instanceof Entry.Fact x) {
            head(0, e);
            path(x.path());
            expr(x.value());
            list(x.notes(), this::note);
            return;
        }
        if (e instanceof Entry.Requirement x) {
            head(1, e);
            path(x.path());
            text(x.cmp().name());
            expr(x.bound());
            list(x.notes(), this::note);
            return;
        }
        if (e instanceof Entry.Block x) {
            head(2, e);
            name(x.head());
            nameOrNull(x.name());
            nameOrNull(x.on());
            textOrNull(x.title());
            bodyOrNull(x.body());
            return;
        }
        if (e instanceof Entry.Declaration x) {
            head(3, e);
            name(x.name());
            nameOrNull(x.symbol());
            textOrNull(x.meaning());
            name(x.kind());
            nameOrNull(x.unit());
            text(x.how().name());
            exprOrNull(x.value());
            list(x.notes(), this::note);
            return;
        }
        if (e instanceof Entry.Drive x) {
            head(4, e);
            name(x.name());
            textOrNull(x.title());
            list(x.body(), this::entry);
            return;
        }
        if (e instanceof Entry.Use x) {
            head(5, e);
            text(x.path());
            nameOrNull(x.alias());
            span(x.pathSpan());
            return;
        }
        if (e instanceof Entry.Let x) {
            head(6, e);
            name(x.name());
            expr(x.value());
            list(x.notes(), this::note);
            return;
        }
        if (e instanceof Entry.Rate x) {
            head(7, e);
            path(x.mesh());
            name(x.method());
            numOrNull(x.edition());
            nameOrNull(x.as());
            nameOrNull(x.under());
            list(x.body(), this::entry);
            return;
        }
        if (e instanceof Entry.UseReading x) {
            head(8, e);
            name(x.reading());
            path(x.target());
            list(x.notes(), this::note);
            return;
        }
        if (e instanceof Entry.Require x) {
            head(9, e);
            expr(x.subject());
            exprOrNull(x.low());
            exprOrNull(x.high());
            exprOrNull(x.tolerance());
            exprOrNull(x.middle());
            list(x.notes(), this::note);
            return;
        }
        entry2(e);
    }

    private void entry2(Entry e) {
        if (e instanceof Entry.Assert x) {
            head(10, e);
            expr(x.condition());
            list(x.notes(), this::note);
            return;
        }
        if (e instanceof Entry.Override x) {
            head(11, e);
            path(x.path());
            expr(x.value());
            list(x.notes(), this::note);
            return;
        }
        if (e instanceof Entry.Accept x) {
            head(12, e);
            path(x.path());
            text(x.cmp().name());
            expr(x.bound());
            list(x.notes(), this::note);
            return;
        }
        if (e instanceof Entry.Waive x) {
            head(13, e);
            path(x.path());
            list(x.notes(), this::note);
            return;
        }
        if (e instanceof Entry.Variant x) {
            head(14, e);
            name(x.name());
            name(x.base());
            textOrNull(x.title());
            list(x.body(), this::entry);
            return;
        }
        if (e instanceof Entry.Family x) {
            head(15, e);
            name(x.name());
            name(x.base());
            textOrNull(x.title());
            list(x.rows(), this::row);
            return;
        }
        if (e instanceof Entry.FactFor x) {
            head(16, e);
            name(x.name());
            name(x.target());
            expr(x.value());
            list(x.notes(), this::note);
            return;
        }
        if (e instanceof Entry.Quantity x) {
            head(17, e);
            name(x.name());
            name(x.unit());
            textOrNull(x.meaning());
            flag(x.whole());
            list(x.unlike(), this::name);
            return;
        }
        if (e instanceof Entry.Source x) {
            head(18, e);
            name(x.name());
            text(x.text());
            return;
        }
        if (e instanceof Entry.Choice x) {
            head(19, e);
            name(x.name());
            textOrNull(x.meaning());
            list(x.words(), this::word);
            return;
        }
        entry3(e);
    }

    private void entry3(Entry e) {
        if (e instanceof Entry.Kind x) {
            head(20, e);
            name(x.name());
            nameOrNull(x.parent());
            textOrNull(x.meaning());
            list(x.body(), this::entry);
            return;
        }
        if (e instanceof Entry.Chapter x) {
            head(21, e);
            name(x.name());
            name(x.kind());
            textOrNull(x.meaning());
            list(x.body(), this::entry);
            return;
        }
        if (e instanceof Entry.Method x) {
            head(22, e);
            name(x.name());
            name(x.kind());
            textOrNull(x.meaning());
            list(x.body(), this::entry);
            return;
        }
        if (e instanceof Entry.Include x) {
            head(23, e);
            list(x.methods(), this::name);
            return;
        }
        if (e instanceof Entry.Function x) {
            head(24, e);
            name(x.name());
            list(x.parameters(), this::parameter);
            textOrNull(x.meaning());
            name(x.kind());
            expr(x.value());
            list(x.notes(), this::note);
            return;
        }
        if (e instanceof Entry.Table x) {
            head(25, e);
            name(x.name());
            textOrNull(x.meaning());
            list(x.keys(), this::name);
            nameOrNull(x.kind());
            nameOrNull(x.unit());
            list(x.notes(), this::note);
            list(x.rows(), this::row);
            return;
        }
        if (e instanceof Entry.Parts x) {
            head(26, e);
            list(x.names(), this::name);
            name(x.kind());
            nameOrNull(x.as());
            return;
        }
        if (e instanceof Entry.Part x) {
            head(27, e);
            name(x.name());
            name(x.kind());
            textOrNull(x.meaning());
            return;
        }
        if (e instanceof Entry.Role x) {
            head(28, e);
            name(x.name());
            expr(x.value());
            return;
        }
        if (e instanceof Entry.Collect x) {
            head(29, e);
            name(x.name());
            name(x.kind());
            expr(x.where());
            return;
        }
        entry4(e);
    }

    private void entry4(Entry e) {
        if (e instanceof Entry.Cases x) {
            head(30, e);
            name(x.name());
            list(x.words(), this::name);
            return;
        }
        if (e instanceof Entry.Each x) {
            head(31, e);
            name(x.collection());
            list(x.body(), this::entry);
            return;
        }
        if (e instanceof Entry.Edition x) {
            head(32, e);
            list(x.editions(), this::num);
            return;
        }
        if (e instanceof Entry.Relation x) {
            head(33, e);
            textOrNull(x.meaning());
            exprOrNull(x.when());
            expr(x.equation());
            list(x.notes(), this::note);
            return;
        }
        if (e instanceof Entry.Check x) {
            head(34, e);
            name(x.name());
            textOrNull(x.meaning());
            nameOrNull(x.kind());
            expr(x.value());
            list(x.notes(), this::note);
            return;
        }
        if (e instanceof Entry.Limit x) {
            head(35, e);
            name(x.name());
            textOrNull(x.meaning());
            nameOrNull(x.level());
            list(x.targets(), this::name);
            expr(x.condition());
            textOrNull(x.otherwise());
            list(x.notes(), this::note);
            return;
        }
        if (e instanceof Entry.Applies x) {
            head(36, e);
            expr(x.condition());
            textOrNull(x.otherwise());
            return;
        }
        if (e instanceof Entry.Example x) {
            head(37, e);
            text(x.title());
            list(x.notes(), this::note);
            list(x.body(), this::entry);
            return;
        }
        if (e instanceof Entry.Gives x) {
            head(38, e);
            path(x.path());
            expr(x.value());
            exprOrNull(x.within());
            return;
        }
        if (e instanceof Entry.Bad) {
            head(39, e);
            return;
        }
        throw new IllegalStateException("a form without a number: " + e.getClass());
    }

    private void parameter(Entry.Parameter p) {
        span(p.span());
        name(p.name());
        name(p.kind());
    }

    private void word(Entry.Word w) {
        span(w.span());
        name(w.name());
        textOrNull(w.meaning());
    }

    private void row(Entry.Row r) {
        span(r.span());
        list(r.cells(), c -> {
            span(c.span());
            list(c.values(), this::expr);
        });
    }

    private void bodyOrNull(@Nullable List<Entry> body) {
        flag(body != null);
        if (body != null) {
            list(body, this::entry);
        }
    }

    private void comment(FileSyntax.Comment c) {
        span(c.span());
        text(c.text());
    }

    // ---- notes

    private void note(Note n) {
        if (n instanceof Note.Per x) {
            head(0, n);
            nameOrNull(x.source());
            textOrNull(x.text());
            dayOrNull(x.on());
            nameOrNull(x.trust());
            textOrNull(x.seenIn());
            return;
        }
        if (n instanceof Note.Measured x) {
            head(1, n);
            textOrNull(x.text());
            return;
        }
        if (n instanceof Note.Assumed x) {
            head(2, n);
            textOrNull(x.reason());
            return;
        }
        if (n instanceof Note.Because x) {
            head(3, n);
            text(x.text());
            return;
        }
        if (n instanceof Note.Until x) {
            head(4, n);
            dayOrNull(x.day());
            return;
        }
        if (n instanceof Note.By x) {
            head(5, n);
            text(x.person());
            return;
        }
        if (n instanceof Note.Otherwise x) {
            head(6, n);
            text(x.text());
            return;
        }
        if (n instanceof Note.Taking x) {
            head(7, n);
            list(x.items(), this::taken);
            return;
        }
        note2(n);
    }

    private void note2(Note n) {
        if (n instanceof Note.Reading x) {
            head(8, n);
            name(x.name());
            expr(x.value());
            list(x.notes(), this::note);
            return;
        }
        if (n instanceof Note.InRange x) {
            head(9, n);
            expr(x.low());
            expr(x.high());
            return;
        }
        if (n instanceof Note.Rows x) {
            head(10, n);
            list(x.words(), this::name);
            return;
        }
        if (n instanceof Note.Worst x) {
            head(11, n);
            name(x.end());
            return;
        }
        if (n instanceof Note.Is x) {
            head(12, n);
            name(x.what());
            return;
        }
        if (n instanceof Note.Needed x) {
            head(13, n);
            textOrNull(x.reason());
            return;
        }
        if (n instanceof Note.Offer x) {
            head(14, n);
            expr(x.value());
            return;
        }
        if (n instanceof Note.Within x) {
            head(15, n);
            expr(x.amount());
            return;
        }
        throw new IllegalStateException("a form without a number: " + n.getClass());
    }

    private void taken(Note.Taken t) {
        span(t.span());
        path(t.path());
        nameOrNull(t.alias());
        name(t.unit());
    }

    // ---- expressions

    private void expr(Expr e) {
        if (e instanceof Expr.Num x) {
            head(0, e);
            text(x.text());
            number(x.value());
            nameOrNull(x.unit());
            return;
        }
        if (e instanceof Expr.Str x) {
            head(1, e);
            text(x.value());
            return;
        }
        if (e instanceof Expr.Day x) {
            head(2, e);
            text(x.text());
            return;
        }
        if (e instanceof Expr.Path x) {
            head(3, e);
            list(x.names(), this::name);
            return;
        }
        if (e instanceof Expr.Neg x) {
            head(4, e);
            expr(x.operand());
            return;
        }
        if (e instanceof Expr.Not x) {
            head(5, e);
            expr(x.operand());
            return;
        }
        if (e instanceof Expr.Binary x) {
            head(6, e);
            text(x.op().name());
            expr(x.left());
            expr(x.right());
            return;
        }
        if (e instanceof Expr.Compare x) {
            head(7, e);
            list(x.operands(), this::expr);
            list(x.ops(), c -> text(c.name()));
            return;
        }
        if (e instanceof Expr.Given x) {
            head(8, e);
            path(x.path());
            return;
        }
        if (e instanceof Expr.Call x) {
            head(9, e);
            path(x.callee());
            list(x.args(), this::expr);
            return;
        }
        if (e instanceof Expr.Each x) {
            head(10, e);
            name(x.collection());
            exprOrNull(x.body());
            return;
        }
        expr2(e);
    }

    private void expr2(Expr e) {
        if (e instanceof Expr.Column x) {
            head(11, e);
            expr(x.row());
            name(x.name());
            return;
        }
        if (e instanceof Expr.Choose x) {
            head(12, e);
            exprOrNull(x.subject());
            list(x.arms(), this::arm);
            return;
        }
        if (e instanceof Expr.Root x) {
            head(13, e);
            expr(x.left());
            expr(x.right());
            expr(x.low());
            expr(x.high());
            textOrNull(x.otherwise());
            return;
        }
        if (e instanceof Expr.Settle x) {
            head(14, e);
            expr(x.value());
            expr(x.start());
            expr(x.tolerance());
            expr(x.most());
            textOrNull(x.otherwise());
            return;
        }
        if (e instanceof Expr.In x) {
            head(15, e);
            expr(x.operand());
            name(x.unit());
            return;
        }
        if (e instanceof Expr.Range x) {
            head(16, e);
            expr(x.low());
            expr(x.high());
            return;
        }
        if (e instanceof Expr.Toleranced x) {
            head(17, e);
            expr(x.nominal());
            expr(x.low());
            expr(x.high());
            return;
        }
        if (e instanceof Expr.Dated x) {
            head(18, e);
            expr(x.value());
            day(x.day());
            return;
        }
        if (e instanceof Expr.BlockRef x) {
            head(19, e);
            name(x.kind());
            name(x.name());
            return;
        }
        if (e instanceof Expr.Hole) {
            head(20, e);
            return;
        }
        throw new IllegalStateException("a form without a number: " + e.getClass());
    }

    private void arm(Expr.Arm a) {
        span(a.span());
        exprOrNull(a.when());
        expr(a.value());
    }

    private void exprOrNull(@Nullable Expr e) {
        flag(e != null);
        if (e != null) {
            expr(e);
        }
    }

    private void path(Expr.Path p) {
        expr(p);
    }

    private void num(Expr.Num n) {
        expr(n);
    }

    private void numOrNull(Expr.@Nullable Num n) {
        exprOrNull(n);
    }

    private void day(Expr.Day d) {
        expr(d);
    }

    private void dayOrNull(Expr.@Nullable Day d) {
        exprOrNull(d);
    }

    // ---- small things

    private void head(int form, Node node) {
        small(form);
        span(node.span());
    }

    private void name(Name n) {
        span(n.span());
        text(n.text());
    }

    private void nameOrNull(@Nullable Name n) {
        flag(n != null);
        if (n != null) {
            name(n);
        }
    }

    private <T> void list(List<T> list, Consumer<T> writer) {
        varint(nodes, list.size());
        list.forEach(writer);
    }

    private void text(String s) {
        Integer index = pool.get(s);
        if (index == null) {
            index = strings.size();
            pool.put(s, index);
            strings.add(s);
        }
        varint(nodes, index + 1);
    }

    private void textOrNull(@Nullable String s) {
        if (s == null) {
            varint(nodes, 0);
        } else {
            text(s);
        }
    }

    /** Starts grow slowly, so the distance to the last one is a short number. */
    private void span(Span s) {
        int distance = s.start() - lastStart;
        varint(nodes, distance << 1 ^ distance >> 31);
        varint(nodes, s.length());
        lastStart = s.start();
    }

    private void number(double d) {
        long bits = Double.doubleToRawLongBits(d);
        for (int shift = 56; shift >= 0; shift -= 8) {
            nodes.write((int) (bits >>> shift));
        }
    }

    private void flag(boolean b) {
        nodes.write(b ? 1 : 0);
    }

    private void small(int value) {
        nodes.write(value);
    }

    private static void varint(ByteArrayOutputStream out, int value) {
        int rest = value;
        while ((rest & ~0x7F) != 0) {
            out.write((rest & 0x7F) | 0x80);
            rest >>>= 7;
        }
        out.write(rest);
    }
}
