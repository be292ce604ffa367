package backcone.engine.editing;

import backcone.engine.answers.Explanation;
import backcone.engine.answers.HandbookPages;
import backcone.engine.answers.RequirementAnswer;
import backcone.engine.diagnostics.Code;
import backcone.engine.diagnostics.Pages;
import backcone.engine.explain.Explainer;
import backcone.engine.graph.DriveGraph;
import backcone.engine.model.Decl;
import backcone.engine.model.ValueKind;
import backcone.engine.parse.Colours;
import backcone.engine.syntax.Entry;
import backcone.engine.text.Span;
import backcone.engine.units.Dimension;
import backcone.engine.units.Numbers;
import backcone.engine.units.Unit;
import backcone.engine.units.Units;
import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import org.jspecify.annotations.Nullable;

/** What is told about the word under the pointer, as Markdown. All that came from a file is put in code spans or escaped. */
public final class Hovers {
    private static final int LONGEST = 6000;
    private static final List<String> SI = List.of(
            "m", "m^2", "m^3", "N", "N*m", "Pa", "W", "m/s", "rad/s", "rad", "s", "kg", "kg/m^3", "K", "1/K", "m^2/s",
            "Hz", "N/m", "kg*m^2", "m^4", "m/s^2", "Pa*s", "1/m");

    private Hovers() {}

    /** Markdown about the text {@code span}. */
    public record Hover(Span span, String markdown) {}

    public static @Nullable Hover at(Scene scene, int offset) {
        Occurrence o = scene.occurrences().at(offset);
        if (o != null) {
            String text = of(scene, o, offset);
            return text.isEmpty() ? null : new Hover(o.span(), cut(text));
        }
        for (Colours.Piece p : scene.pieces()) {
            if (p.start() <= offset && offset < p.end()) {
                String word = scene.text.substring(p.start(), p.end());
                String text = p.sort() == Colours.Sort.KEYWORD
                        ? Keywords.of(word)
                        : p.sort() == Colours.Sort.SIGN ? requirement(scene, offset) : "";
                return text.isEmpty() ? null : new Hover(new Span(p.start(), p.end()), cut(text));
            }
        }
        return null;
    }

    private static String requirement(Scene scene, int offset) {
        for (Scene.Shown s : scene.drives) {
            for (RequirementAnswer r : s.answer().requirements()) {
                if (r.file().equals(scene.file) && r.span().contains(offset)) {
                    return told(r);
                }
            }
        }
        return "";
    }

    static String told(RequirementAnswer r) {
        StringBuilder b = new StringBuilder();
        b.append("**").append(escape(r.meaning())).append("** `").append(r.id()).append("`\n\n");
        b.append(Labels.sentence(r)).append('\n');
        if (r.method() != null) {
            b.append("\nby `").append(r.method()).append('`');
            if (r.edition() != null) {
                b.append(" edition ").append(r.edition());
            }
            if (r.caseName() != null) {
                b.append(", case `").append(r.caseName()).append('`');
            }
            b.append('\n');
        }
        for (RequirementAnswer.Missing m : r.missing()) {
            b.append("\n- needs `").append(m.path()).append("`: ").append(escape(m.meaning()));
        }
        for (RequirementAnswer.Passed p : r.outside()) {
            b.append("\n- limit passed: ").append(escape(p.message())).append(p.waived() ? " (waived)" : "");
        }
        for (RequirementAnswer.Band x : r.bands()) {
            b.append("\n- with reading `")
                    .append(x.reading())
                    .append("` of `")
                    .append(x.equation())
                    .append("`: ")
                    .append(Numbers.format(x.value(), 4))
                    .append(", ")
                    .append(x.state().word());
        }
        RequirementAnswer.Acceptance a = r.accepted();
        if (a != null) {
            b.append("\n- accepted at ")
                    .append(Numbers.format(a.accepted(), 4))
                    .append(" until ")
                    .append(a.until())
                    .append(" by ")
                    .append(escape(a.by()))
                    .append(": ")
                    .append(escape(a.because()));
        }
        if (r.because() != null) {
            b.append("\n- because ").append(escape(r.because()));
        }
        return b.toString();
    }

    private static String cut(String text) {
        return text.length() <= LONGEST ? text : text.substring(0, LONGEST) + " …";
    }

    static String escape(@Nullable String s) {
        if (s == null) {
            return "";
        }
        StringBuilder b = new StringBuilder(s.length() + 8);
        for (int i = 0; i < s.length(); i++) {
            char c = s.charAt(i);
            if ("\\`*_{}[]<>#|!&".indexOf(c) >= 0) {
                b.append('\\');
            }
            b.append(c < ' ' ? ' ' : c);
        }
        return b.toString();
    }

    static String code(String s) {
        return "```\n" + s.replace("```", "'''") + "\n```\n";
    }

    private static String of(Scene scene, Occurrence o, int offset) {
        Target t = o.target();
        switch (t.sort()) {
            case UNIT:
                return unit(scene, o, t.name());
            case METHOD:
            case KIND:
            case TABLE:
            case FUNCTION:
            case QUANTITY:
            case CHOICE:
                return page(scene, t);
            case WORD:
            case SOURCE:
            case READING:
            case FILE:
                return "`" + t.name() + "`" + (t.meaning() == null ? "" : ": " + escape(t.meaning()));
            case DRIVE:
                return drive(scene, t);
            case BLOCK:
            case MATERIAL:
                return block(scene, t);
            default:
                return value(scene, o, offset);
        }
    }

    private static String page(Scene scene, Target t) {
        List<String> page = new HandbookPages(scene.shapes, scene.texts).page(t.name());
        StringBuilder b = new StringBuilder("**").append(escape(t.name())).append("**");
        if (t.meaning() != null) {
            b.append(": ").append(escape(t.meaning()));
        }
        b.append("\n\n");
        if (page.size() > 1) {
            List<String> some = page.subList(1, Math.min(page.size(), 24));
            b.append(code(String.join("\n", some) + (page.size() > 24 ? "\n…" : "")));
        }
        return b.toString();
    }

    private static String drive(Scene scene, Target t) {
        Scene.Shown s = scene.drive(t.name());
        StringBuilder b = new StringBuilder("**").append(escape(t.name())).append("**");
        if (t.meaning() != null) {
            b.append(": ").append(escape(t.meaning()));
        }
        if (s != null) {
            b.append("\n\n").append(Labels.counts(s.answer().requirements()));
            if (s.answer().governing() != null) {
                b.append("\n\ngoverning: `").append(s.answer().governing()).append('`');
            }
            if (s.answer().weakestTrust() != null) {
                b.append("\n\nweakest source behind these figures: ")
                        .append(s.answer().weakestTrust());
            }
        }
        return b.toString();
    }

    private static String block(Scene scene, Target t) {
        StringBuilder b = new StringBuilder("**").append(escape(t.name())).append("**");
        if (t.meaning() != null) {
            b.append(": ").append(escape(t.meaning()));
        }
        String text = scene.texts.apply(t.file());
        if (text != null && t.span().end() <= text.length()) {
            int start = text.lastIndexOf('\n', t.span().start()) + 1;
            int end = start;
            int depth = 0;
            int lines = 0;
            while (end < text.length() && lines < 16) {
                char c = text.charAt(end);
                depth += c == '{' ? 1 : c == '}' ? -1 : 0;
                if (c == '\n') {
                    lines++;
                    if (depth <= 0) {
                        break;
                    }
                }
                end++;
            }
            b.append("\n\n").append(code(unindented(text.substring(start, end))));
        }
        return b.toString();
    }

    private static String unindented(String s) {
        String[] lines = s.split("\r?\n", -1);
        int least = Integer.MAX_VALUE;
        for (String l : lines) {
            if (!l.isBlank()) {
                least = Math.min(least, l.length() - l.stripLeading().length());
            }
        }
        List<String> out = new ArrayList<>();
        for (String l : lines) {
            out.add(l.length() >= least ? l.substring(least == Integer.MAX_VALUE ? 0 : least) : l.strip());
        }
        return String.join("\n", out).stripTrailing();
    }

    private static String unit(Scene scene, Occurrence o, String name) {
        Units units = Units.standard();
        StringBuilder b = new StringBuilder("`").append(name).append("`");
        String said = units.describe(name);
        if (!said.isEmpty()) {
            b.append(": ").append(escape(said));
        }
        if (units.parse(name) instanceof Units.Parse.Ok ok) {
            double v = numberBefore(scene.text, o.span().start());
            if (!Double.isNaN(v)) {
                List<String> same = new ArrayList<>();
                double base = ok.unit().toBase(v);
                for (String other : ok.unit().kind() == null
                        ? units.unitsOf(ok.unit().dimension())
                        : units.unitsOf(ok.unit().dimension(), ok.unit().kind())) {
                    if (!other.equals(name) && same.size() < 5 && units.parse(other) instanceof Units.Parse.Ok x) {
                        same.add("`" + Numbers.format(x.unit().fromBase(base), 6) + " " + other + "`");
                    }
                }
                if (!same.isEmpty()) {
                    b.append("\n\n= ").append(String.join(" = ", same));
                }
            }
        }
        return b.toString();
    }

    private static double numberBefore(String text, int at) {
        int end = at;
        while (end > 0 && text.charAt(end - 1) == ' ') {
            end--;
        }
        int start = end;
        while (start > 0
                && (Character.isDigit(text.charAt(start - 1)) || "+-.eE".indexOf(text.charAt(start - 1)) >= 0)) {
            start--;
        }
        try {
            return Double.parseDouble(text.substring(start, end));
        } catch (NumberFormatException e) {
            return Double.NaN;
        }
    }

    /** A value in SI, where the unit it is shown in is not SI; empty otherwise. */
    static String si(double value, String unit) {
        if (Double.isNaN(value)
                || unit.isEmpty()
                || SI.contains(unit)
                || !(Units.standard().parse(unit) instanceof Units.Parse.Ok ok)) {
            return "";
        }
        Unit u = ok.unit();
        Dimension d = u.dimension();
        if (u.isOffset()) {
            return Numbers.format(u.toBase(value), 6) + " K";
        }
        for (String s : SI) {
            if (Units.standard().parse(s) instanceof Units.Parse.Ok x
                    && x.unit().dimension() == d
                    && (x.unit().kind() == null || x.unit().kind().equals(u.kind()))) {
                return Numbers.format(x.unit().fromBase(u.toBase(value)), 6) + " " + s;
            }
        }
        return "";
    }

    private static String value(Scene scene, Occurrence o, int offset) {
        Target t = o.target();
        Decl d = t.decl();
        StringBuilder b = new StringBuilder();
        Explanation e = null;
        DriveGraph g = Spot.at(scene, offset).graph();
        if (t.path() != null && g != null) {
            synchronized (scene) {
                e = new Explainer(g, scene.texts).explain(t.path()).orElse(null);
            }
        }
        String meaning = e != null && e.meaning() != null ? e.meaning() : t.meaning();
        b.append("**")
                .append(escape(meaning == null ? t.name() : meaning))
                .append("** `")
                .append(e == null ? t.name() : e.name())
                .append('`');
        if (d != null && d.symbol != null && !d.symbol.equals(d.name)) {
            b.append(" `").append(d.symbol).append('`');
        }
        b.append("\n\n");
        if (e != null) {
            b.append(explained(e));
            b.append(Sensitive.line(g, t.path(), scene));
        }
        if (d != null && (e == null || e.status() == Explanation.Status.OPEN)) {
            b.append(input(scene, d));
        }
        if (t.sort() == Target.Sort.CHECK) {
            for (Scene.Shown s : scene.drives) {
                for (RequirementAnswer r : s.answer().requirements()) {
                    if (r.file().equals(scene.file) && r.span().contains(offset)) {
                        b.append("\n\n---\n").append(told(r)).append("\n");
                    }
                }
            }
        }
        return b.toString();
    }

    /** A value as it came about, its inputs left out. */
    static String explained(Explanation e) {
        StringBuilder b = new StringBuilder();
        String shown = e.text() != null
                ? e.text()
                : Double.isNaN(e.value())
                        ? ""
                        : Numbers.format(e.value(), 6) + (e.unit().isEmpty() ? "" : " " + e.unit());
        if (!shown.isEmpty()) {
            b.append("`").append(shown.replace('`', '\'')).append("`");
            String si = si(e.value(), e.unit());
            if (!si.isEmpty() && e.text() == null) {
                b.append(" = `").append(si).append('`');
            }
            b.append(", ");
        }
        b.append(e.status().word());
        if (e.remark() != null) {
            b.append(": ").append(escape(e.remark()));
        }
        b.append("\n\n");
        boolean given = e.status() == Explanation.Status.GIVEN
                || e.status() == Explanation.Status.ASSUMED
                || e.status() == Explanation.Status.MEASURED;
        if (e.equation() != null && !given) {
            String symbol = e.symbol() != null
                    ? e.symbol()
                    : e.name().substring(e.name().lastIndexOf('.') + 1);
            StringBuilder eq = new StringBuilder();
            boolean relation = e.status() == Explanation.Status.SOLVED;
            eq.append(relation ? "" : symbol + " = ").append(e.equation());
            if (e.numbers() != null && !e.numbers().equals(e.equation())) {
                eq.append('\n')
                        .append(relation ? "" : " ".repeat(symbol.length()) + " = ")
                        .append(e.numbers());
            }
            b.append(code(eq.toString())).append('\n');
        }
        if (e.source() != null) {
            b.append(given ? "" : "after ").append(escape(e.source()));
            if (e.trust() != null) {
                b.append(" (").append(e.trust()).append(')');
            }
            b.append("\n\n");
        } else if (e.trust() != null && !given) {
            b.append("trust: ").append(e.trust()).append("\n\n");
        }
        return b.toString();
    }

    private static String input(Scene scene, Decl d) {
        StringBuilder b = new StringBuilder();
        if (d.kind instanceof ValueKind.Quantity q) {
            b.append(escape(q.kind().meaning()));
            if (!q.kind().shown().text().equals("1")) {
                b.append(", in `").append(q.kind().shown().text()).append("` or another unit of it");
            }
            b.append(". ");
        } else if (d.kind instanceof ValueKind.Choice c) {
            b.append("one of `")
                    .append(String.join("`, `", c.kind().words().keySet()))
                    .append("`. ");
        } else if (d.kind instanceof ValueKind.Reference r) {
            b.append("names a `").append(r.kind()).append("`. ");
        }
        if (d.range != null) {
            b.append("Range `")
                    .append(Labels.text(scene, d.file, d.range.low().span()))
                    .append("` to `")
                    .append(Labels.text(scene, d.file, d.range.high().span()))
                    .append("`. ");
        }
        if (d.how == Entry.Given.DEFAULT && d.value != null) {
            b.append("Default `")
                    .append(Labels.text(scene, d.file, d.value.span()))
                    .append("`. ");
        }
        if (d.neededBecause != null) {
            b.append("Never defaulted: ").append(escape(d.neededBecause)).append(". ");
        }
        return b.toString();
    }

    /** The page of a diagnostic. */
    public static Optional<String> code(Code code) {
        String page = Pages.of(code);
        return page.isEmpty() ? Optional.empty() : Optional.of(page);
    }
}
