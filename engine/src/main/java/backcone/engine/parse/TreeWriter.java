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
        if (e instanceof Entry.Fact) {
            Entry.Fact x = (Entry.Fact) e;
            head(0, e);
            path(x.path());
            expr(x.value());
            list(x.notes(), this::note);
            return;
        }
        if (e instanceof Entry.Requirement) {
            Entry.Requirement x = (Entry.Requirement) e;
            head(1, e);
            path(x.path());
            small(x.cmp().ordinal());
            expr(x.bound());
            list(x.notes(), this::note);
            return;
        }
        if (e instanceof Entry.Block) {
            Entry.Block x = (Entry.Block) e;
            head(2, e);
            name(x.head());
            nameOrNull(x.name());
            nameOrNull(x.on());
            textOrNull(x.title());
            bodyOrNull(x.body());
            return;
        }
        if (e instanceof Entry.Declaration) {
            Entry.Declaration x = (Entry.Declaration) e;
            head(3, e);
            name(x.name());
            nameOrNull(x.symbol());
            textOrNull(x.meaning());
            name(x.kind());
            nameOrNull(x.unit());
            small(x.how().ordinal());
            exprOrNull(x.value());
            list(x.notes(), this::note);
            return;
        }
        if (e instanceof Entry.Drive) {
            Entry.Drive x = (Entry.Drive) e;
            head(4, e);
            name(x.name());
            textOrNull(x.title());
            list(x.body(), this::entry);
            return;
        }
        if (e instanceof Entry.Use) {
            Entry.Use x = (Entry.Use) e;
            head(5, e);
            text(x.path());
            nameOrNull(x.alias());
            span(x.pathSpan());
            return;
        }
        if (e instanceof Entry.Let) {
            Entry.Let x = (Entry.Let) e;
            head(6, e);
            name(x.name());
            expr(x.value());
            list(x.notes(), this::note);
            return;
        }
        if (e instanceof Entry.Rate) {
            Entry.Rate x = (Entry.Rate) e;
            head(7, e);
            path(x.mesh());
            name(x.method());
            numOrNull(x.edition());
            nameOrNull(x.as());
            nameOrNull(x.under());
            list(x.body(), this::entry);
            return;
        }
        if (e instanceof Entry.UseReading) {
            Entry.UseReading x = (Entry.UseReading) e;
            head(8, e);
            name(x.reading());
            path(x.target());
            list(x.notes(), this::note);
            return;
        }
        if (e instanceof Entry.Require) {
            Entry.Require x = (Entry.Require) e;
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
        if (e instanceof Entry.Assert) {
            Entry.Assert x = (Entry.Assert) e;
            head(10, e);
            expr(x.condition());
            list(x.notes(), this::note);
            return;
        }
        if (e instanceof Entry.Override) {
            Entry.Override x = (Entry.Override) e;
            head(11, e);
            path(x.path());
            expr(x.value());
            list(x.notes(), this::note);
            return;
        }
        if (e instanceof Entry.Accept) {
            Entry.Accept x = (Entry.Accept) e;
            head(12, e);
            path(x.path());
            small(x.cmp().ordinal());
            expr(x.bound());
            list(x.notes(), this::note);
            return;
        }
        if (e instanceof Entry.Waive) {
            Entry.Waive x = (Entry.Waive) e;
            head(13, e);
            path(x.path());
            list(x.notes(), this::note);
            return;
        }
        if (e instanceof Entry.Variant) {
            Entry.Variant x = (Entry.Variant) e;
            head(14, e);
            name(x.name());
            name(x.base());
            textOrNull(x.title());
            list(x.body(), this::entry);
            return;
        }
        if (e instanceof Entry.Family) {
            Entry.Family x = (Entry.Family) e;
            head(15, e);
            name(x.name());
            name(x.base());
            textOrNull(x.title());
            list(x.rows(), this::row);
            return;
        }
        if (e instanceof Entry.FactFor) {
            Entry.FactFor x = (Entry.FactFor) e;
            head(16, e);
            name(x.name());
            name(x.target());
            expr(x.value());
            list(x.notes(), this::note);
            return;
        }
        if (e instanceof Entry.Quantity) {
            Entry.Quantity x = (Entry.Quantity) e;
            head(17, e);
            name(x.name());
            name(x.unit());
            textOrNull(x.meaning());
            flag(x.whole());
            list(x.unlike(), this::name);
            return;
        }
        if (e instanceof Entry.Source) {
            Entry.Source x = (Entry.Source) e;
            head(18, e);
            name(x.name());
            text(x.text());
            return;
        }
        if (e instanceof Entry.Choice) {
            Entry.Choice x = (Entry.Choice) e;
            head(19, e);
            name(x.name());
            textOrNull(x.meaning());
            list(x.words(), this::word);
            return;
        }
        entry3(e);
    }

    private void entry3(Entry e) {
        if (e instanceof Entry.Kind) {
            Entry.Kind x = (Entry.Kind) e;
            head(20, e);
            name(x.name());
            nameOrNull(x.parent());
            textOrNull(x.meaning());
            list(x.body(), this::entry);
            return;
        }
        if (e instanceof Entry.Chapter) {
            Entry.Chapter x = (Entry.Chapter) e;
            head(21, e);
            name(x.name());
            name(x.kind());
            textOrNull(x.meaning());
            list(x.body(), this::entry);
            return;
        }
        if (e instanceof Entry.Method) {
            Entry.Method x = (Entry.Method) e;
            head(22, e);
            name(x.name());
            name(x.kind());
            textOrNull(x.meaning());
            list(x.body(), this::entry);
            return;
        }
        if (e instanceof Entry.Include) {
            Entry.Include x = (Entry.Include) e;
            head(23, e);
            list(x.methods(), this::name);
            return;
        }
        if (e instanceof Entry.Function) {
            Entry.Function x = (Entry.Function) e;
            head(24, e);
            name(x.name());
            list(x.parameters(), this::parameter);
            textOrNull(x.meaning());
            name(x.kind());
            expr(x.value());
            list(x.notes(), this::note);
            return;
        }
        if (e instanceof Entry.Table) {
            Entry.Table x = (Entry.Table) e;
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
        if (e instanceof Entry.Parts) {
            Entry.Parts x = (Entry.Parts) e;
            head(26, e);
            list(x.names(), this::name);
            name(x.kind());
            nameOrNull(x.as());
            return;
        }
        if (e instanceof Entry.Part) {
            Entry.Part x = (Entry.Part) e;
            head(27, e);
            name(x.name());
            name(x.kind());
            textOrNull(x.meaning());
            return;
        }
        if (e instanceof Entry.Role) {
            Entry.Role x = (Entry.Role) e;
            head(28, e);
            name(x.name());
            expr(x.value());
            return;
        }
        if (e instanceof Entry.Collect) {
            Entry.Collect x = (Entry.Collect) e;
            head(29, e);
            name(x.name());
            name(x.kind());
            expr(x.where());
            return;
        }
        entry4(e);
    }

    private void entry4(Entry e) {
        if (e instanceof Entry.Cases) {
            Entry.Cases x = (Entry.Cases) e;
            head(30, e);
            name(x.name());
            list(x.words(), this::name);
            return;
        }
        if (e instanceof Entry.Each) {
            Entry.Each x = (Entry.Each) e;
            head(31, e);
            name(x.collection());
            list(x.body(), this::entry);
            return;
        }
        if (e instanceof Entry.Edition) {
            Entry.Edition x = (Entry.Edition) e;
            head(32, e);
            list(x.editions(), this::num);
            return;
        }
        if (e instanceof Entry.Relation) {
            Entry.Relation x = (Entry.Relation) e;
            head(33, e);
            textOrNull(x.meaning());
            exprOrNull(x.when());
            expr(x.equation());
            list(x.notes(), this::note);
            return;
        }
        if (e instanceof Entry.Check) {
            Entry.Check x = (Entry.Check) e;
            head(34, e);
            name(x.name());
            textOrNull(x.meaning());
            nameOrNull(x.kind());
            expr(x.value());
            list(x.notes(), this::note);
            return;
        }
        if (e instanceof Entry.Limit) {
            Entry.Limit x = (Entry.Limit) e;
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
        if (e instanceof Entry.Applies) {
            Entry.Applies x = (Entry.Applies) e;
            head(36, e);
            expr(x.condition());
            textOrNull(x.otherwise());
            return;
        }
        if (e instanceof Entry.Example) {
            Entry.Example x = (Entry.Example) e;
            head(37, e);
            text(x.title());
            list(x.notes(), this::note);
            list(x.body(), this::entry);
            return;
        }
        if (e instanceof Entry.Gives) {
            Entry.Gives x = (Entry.Gives) e;
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
        if (n instanceof Note.Per) {
            Note.Per x = (Note.Per) n;
            head(0, n);
            nameOrNull(x.source());
            textOrNull(x.text());
            dayOrNull(x.on());
            nameOrNull(x.trust());
            textOrNull(x.seenIn());
            return;
        }
        if (n instanceof Note.Measured) {
            Note.Measured x = (Note.Measured) n;
            head(1, n);
            textOrNull(x.text());
            return;
        }
        if (n instanceof Note.Assumed) {
            Note.Assumed x = (Note.Assumed) n;
            head(2, n);
            textOrNull(x.reason());
            return;
        }
        if (n instanceof Note.Because) {
            Note.Because x = (Note.Because) n;
            head(3, n);
            text(x.text());
            return;
        }
        if (n instanceof Note.Until) {
            Note.Until x = (Note.Until) n;
            head(4, n);
            dayOrNull(x.day());
            return;
        }
        if (n instanceof Note.By) {
            Note.By x = (Note.By) n;
            head(5, n);
            text(x.person());
            return;
        }
        if (n instanceof Note.Otherwise) {
            Note.Otherwise x = (Note.Otherwise) n;
            head(6, n);
            text(x.text());
            return;
        }
        if (n instanceof Note.Taking) {
            Note.Taking x = (Note.Taking) n;
            head(7, n);
            list(x.items(), this::taken);
            return;
        }
        note2(n);
    }

    private void note2(Note n) {
        if (n instanceof Note.Reading) {
            Note.Reading x = (Note.Reading) n;
            head(8, n);
            name(x.name());
            expr(x.value());
            list(x.notes(), this::note);
            return;
        }
        if (n instanceof Note.InRange) {
            Note.InRange x = (Note.InRange) n;
            head(9, n);
            expr(x.low());
            expr(x.high());
            return;
        }
        if (n instanceof Note.Rows) {
            Note.Rows x = (Note.Rows) n;
            head(10, n);
            list(x.words(), this::name);
            return;
        }
        if (n instanceof Note.Worst) {
            Note.Worst x = (Note.Worst) n;
            head(11, n);
            name(x.end());
            return;
        }
        if (n instanceof Note.Is) {
            Note.Is x = (Note.Is) n;
            head(12, n);
            name(x.what());
            return;
        }
        if (n instanceof Note.Needed) {
            Note.Needed x = (Note.Needed) n;
            head(13, n);
            textOrNull(x.reason());
            return;
        }
        if (n instanceof Note.Offer) {
            Note.Offer x = (Note.Offer) n;
            head(14, n);
            expr(x.value());
            return;
        }
        if (n instanceof Note.Within) {
            Note.Within x = (Note.Within) n;
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
        if (e instanceof Expr.Num) {
            Expr.Num x = (Expr.Num) e;
            head(0, e);
            text(x.text());
            number(x.value());
            nameOrNull(x.unit());
            return;
        }
        if (e instanceof Expr.Str) {
            Expr.Str x = (Expr.Str) e;
            head(1, e);
            text(x.value());
            return;
        }
        if (e instanceof Expr.Day) {
            Expr.Day x = (Expr.Day) e;
            head(2, e);
            text(x.text());
            return;
        }
        if (e instanceof Expr.Path) {
            Expr.Path x = (Expr.Path) e;
            head(3, e);
            list(x.names(), this::name);
            return;
        }
        if (e instanceof Expr.Neg) {
            Expr.Neg x = (Expr.Neg) e;
            head(4, e);
            expr(x.operand());
            return;
        }
        if (e instanceof Expr.Not) {
            Expr.Not x = (Expr.Not) e;
            head(5, e);
            expr(x.operand());
            return;
        }
        if (e instanceof Expr.Binary) {
            Expr.Binary x = (Expr.Binary) e;
            head(6, e);
            small(x.op().ordinal());
            expr(x.left());
            expr(x.right());
            return;
        }
        if (e instanceof Expr.Compare) {
            Expr.Compare x = (Expr.Compare) e;
            head(7, e);
            list(x.operands(), this::expr);
            list(x.ops(), c -> small(c.ordinal()));
            return;
        }
        if (e instanceof Expr.Given) {
            Expr.Given x = (Expr.Given) e;
            head(8, e);
            path(x.path());
            return;
        }
        if (e instanceof Expr.Call) {
            Expr.Call x = (Expr.Call) e;
            head(9, e);
            path(x.callee());
            list(x.args(), this::expr);
            return;
        }
        if (e instanceof Expr.Each) {
            Expr.Each x = (Expr.Each) e;
            head(10, e);
            name(x.collection());
            exprOrNull(x.body());
            return;
        }
        expr2(e);
    }

    private void expr2(Expr e) {
        if (e instanceof Expr.Column) {
            Expr.Column x = (Expr.Column) e;
            head(11, e);
            expr(x.row());
            name(x.name());
            return;
        }
        if (e instanceof Expr.Choose) {
            Expr.Choose x = (Expr.Choose) e;
            head(12, e);
            exprOrNull(x.subject());
            list(x.arms(), this::arm);
            return;
        }
        if (e instanceof Expr.Root) {
            Expr.Root x = (Expr.Root) e;
            head(13, e);
            expr(x.left());
            expr(x.right());
            expr(x.low());
            expr(x.high());
            textOrNull(x.otherwise());
            return;
        }
        if (e instanceof Expr.Settle) {
            Expr.Settle x = (Expr.Settle) e;
            head(14, e);
            expr(x.value());
            expr(x.start());
            expr(x.tolerance());
            expr(x.most());
            textOrNull(x.otherwise());
            return;
        }
        if (e instanceof Expr.In) {
            Expr.In x = (Expr.In) e;
            head(15, e);
            expr(x.operand());
            name(x.unit());
            return;
        }
        if (e instanceof Expr.Range) {
            Expr.Range x = (Expr.Range) e;
            head(16, e);
            expr(x.low());
            expr(x.high());
            return;
        }
        if (e instanceof Expr.Toleranced) {
            Expr.Toleranced x = (Expr.Toleranced) e;
            head(17, e);
            expr(x.nominal());
            expr(x.low());
            expr(x.high());
            return;
        }
        if (e instanceof Expr.Dated) {
            Expr.Dated x = (Expr.Dated) e;
            head(18, e);
            expr(x.value());
            day(x.day());
            return;
        }
        if (e instanceof Expr.BlockRef) {
            Expr.BlockRef x = (Expr.BlockRef) e;
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
            out.write(rest & 0x7F | 0x80);
            rest >>>= 7;
        }
        out.write(rest);
    }
}
