package backcone.engine.explain;

import backcone.engine.eval.Run;
import backcone.engine.graph.DriveGraph;
import backcone.engine.graph.Slot;
import backcone.engine.graph.Val;
import backcone.engine.syntax.Expr;
import backcone.engine.syntax.Note;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import backcone.engine.units.Numbers;
import backcone.engine.units.Unit;
import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;
import java.util.function.Function;
import org.jspecify.annotations.Nullable;

/** The text of a slot's equation, as written and with numbers put in. */
final class Texts {
    private final DriveGraph graph;
    private final Run run;
    private final Function<FileId, @Nullable String> texts;
    private final Slot slot;
    private @Nullable String taken;

    Texts(DriveGraph graph, Run run, Function<FileId, @Nullable String> texts, Slot slot) {
        this.graph = graph;
        this.run = run;
        this.texts = texts;
        this.slot = slot;
    }

    /** Which arm was taken, once {@link #numbers} has been asked. */
    @Nullable
    String taken() {
        return taken;
    }

    String given(Slot.Fact f) {
        return of(f.file(), f.value().span());
    }

    String equation() {
        Expr e = slot.decl.value;
        return e == null ? "" : of(slot.decl.file, e.span()) + takings();
    }

    private String takings() {
        StringBuilder b = new StringBuilder();
        for (Note.Taken t : slot.decl.taking) {
            b.append(b.length() == 0 ? "   taking " : ", ").append(t.path().text());
            if (t.alias() != null) {
                b.append(" as ").append(t.alias());
            }
            b.append(" in ").append(t.unit());
        }
        return b.toString();
    }

    String of(@Nullable FileId file, @Nullable Span span) {
        if (file == null || span == null) {
            return "";
        }
        String t = texts.apply(file);
        if (t == null || span.end() > t.length()) {
            return "";
        }
        return squeeze(t.substring(span.start(), span.end()));
    }

    static String squeeze(String s) {
        StringBuilder b = new StringBuilder(s.length());
        boolean blank = false;
        boolean comment = false;
        for (int i = 0; i < s.length(); i++) {
            char c = s.charAt(i);
            if (c == '#') {
                comment = true;
            }
            if (c == '\n') {
                comment = false;
            }
            if (comment) {
                continue;
            }
            if (Character.isWhitespace(c)) {
                blank = b.length() > 0;
            } else {
                if (blank) {
                    b.append(' ');
                    blank = false;
                }
                b.append(c);
            }
        }
        return b.toString();
    }

    /** The part of the equation that was taken, with the numbers of its names. */
    String numbers() {
        FileId file = slot.relationText() != null ? slot.relationFile() : slot.decl.file;
        Expr e = slot.relationText() != null ? slot.relationText() : slot.decl.value;
        if (e == null || file == null) {
            return "";
        }
        Expr part = arm(e);
        String t = texts.apply(file);
        if (t == null || part.span().end() > t.length()) {
            return "";
        }
        List<Expr> names = new ArrayList<>();
        collect(part, names);
        names.sort(Comparator.comparingInt(x -> x.span().start()));
        StringBuilder b = new StringBuilder();
        int at = part.span().start();
        for (Expr x : names) {
            if (x.span().start() < at) {
                continue;
            }
            b.append(t, at, x.span().start()).append(show(x, t));
            at = x.span().end();
        }
        b.append(t, at, part.span().end());
        return squeeze(b.toString());
    }

    private String show(Expr x, String text) {
        Val v = slot.traced(x);
        if (v instanceof Val.Num n) {
            Unit u = graph.shownUnit(n);
            double value = run.at(n.register());
            if (Double.isNaN(value)) {
                return "open";
            }
            String s = Numbers.format(u == null ? value : u.fromBase(value), 5);
            return u == null ? s.startsWith("-") ? "(" + s + ")" : s : s + " " + u.text();
        } else if (v instanceof Val.Word w) {
            return w.text();
        } else if (v instanceof Val.Ref r) {
            return r.element().name;
        }
        return text.substring(x.span().start(), x.span().end());
    }

    /** The arm taken of a choice, down to what was computed. */
    private Expr arm(Expr e) {
        if (!(e instanceof Expr.Choose c)) {
            return e;
        }
        for (Expr.Arm a : c.arms()) {
            Val value = slot.traced(a.value());
            if (value == null && !(a.value() instanceof Expr.Path)) {
                continue;
            }
            Expr when = a.when();
            if (when == null || holds(c, when)) {
                taken = when == null ? "otherwise" : "case " + of(slot.decl.file, when.span());
                return arm(a.value());
            }
        }
        return e;
    }

    private boolean holds(Expr.Choose c, Expr when) {
        Expr subject = c.subject();
        if (subject != null) {
            Val s = slot.traced(subject);
            String w = when instanceof Expr.Path p ? p.text() : when instanceof Expr.Num n ? n.text() : "";
            if (s instanceof Val.Word x) {
                return x.text().equals(w);
            } else if (s instanceof Val.Ref r) {
                return r.element().name.equals(w);
            } else if (s instanceof Val.Text x) {
                return x.value().equals(w);
            } else if (s instanceof Val.Picked p) {
                double i = run.at(p.register());
                return !Double.isNaN(i) && p.words().get((int) i).equals(w);
            }
            return false;
        }
        Val v = slot.traced(when);
        if (v instanceof Val.Fixed f) {
            return f.is();
        }
        return v instanceof Val.Truth t && run.at(t.register()) == 1;
    }

    private static void collect(Expr e, List<Expr> out) {
        if (e instanceof Expr.Path) {
            out.add(e);
        } else if (e instanceof Expr.Binary b) {
            collect(b.left(), out);
            collect(b.right(), out);
        } else if (e instanceof Expr.Neg n) {
            collect(n.operand(), out);
        } else if (e instanceof Expr.Call c) {
            for (Expr a : c.args()) {
                if (!(a instanceof Expr.Each)) {
                    collect(a, out);
                }
            }
        } else if (e instanceof Expr.Column) {
            out.add(e);
        } else if (e instanceof Expr.In i) {
            collect(i.operand(), out);
        } else if (e instanceof Expr.Compare c) {
            c.operands().forEach(x -> collect(x, out));
        } else if (e instanceof Expr.Root r) {
            collect(r.left(), out);
            collect(r.right(), out);
        } else if (e instanceof Expr.Settle s) {
            collect(s.value(), out);
        } else if (e instanceof Expr.Choose c) {
            c.arms().forEach(a -> collect(a.value(), out));
        }
    }
}
