package backcone.engine.editing;

import backcone.engine.answers.RequirementAnswer;
import backcone.engine.graph.DriveGraph;
import backcone.engine.graph.Element;
import backcone.engine.graph.Names;
import backcone.engine.graph.Names.Meaning;
import backcone.engine.graph.Slot;
import backcone.engine.model.Decl;
import backcone.engine.syntax.Entry;
import backcone.engine.syntax.Expr;
import backcone.engine.syntax.Nodes;
import backcone.engine.text.Span;
import backcone.engine.units.Numbers;
import backcone.engine.units.Unit;
import backcone.engine.units.Units;
import java.io.IOException;
import java.io.InputStream;
import java.io.UncheckedIOException;
import java.nio.charset.StandardCharsets;
import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;
import org.jspecify.annotations.Nullable;

/** Values shown beside the text: what requirements achieve, and what follows from a fact. */
public final class Hints {
    private static final List<Rule> RULES = rules();

    /** A text shown at an offset. {@code about} is what {@link #tooltip} is asked for. */
    public record Hint(int offset, String label, boolean requirement, String about) {}

    private record Rule(String kind, @Nullable String name, String property, List<String> paths) {}

    private Hints() {}

    /** The values that hints of a drive show; they are to be computed even where nothing else asks for them. */
    public static List<Slot> wanted(DriveGraph graph) {
        List<Slot> out = new ArrayList<>();
        Names names = new Names(graph);
        for (Element e : List.copyOf(graph.elements())) {
            for (Rule r : RULES) {
                if (fits(r, e)) {
                    for (String p : r.paths()) {
                        Slot s = slot(names, e, p);
                        if (s != null) {
                            out.add(s);
                        }
                    }
                }
            }
        }
        return out;
    }

    private static @Nullable Slot slot(Names names, Element at, String path) {
        List<backcone.engine.syntax.Name> parts = new ArrayList<>();
        for (String n : path.split("\\.")) {
            parts.add(new backcone.engine.syntax.Name(n, Span.NONE));
        }
        return names.path(parts, parts.size() - 1, at) instanceof Meaning.Value v ? v.slot() : null;
    }

    /** Hints of requirements and of facts between two offsets, by place. */
    public static List<Hint> between(Scene scene, int from, int to, boolean requirements, boolean derived) {
        List<Hint> out = new ArrayList<>();
        if (requirements) {
            for (Scene.Shown s : scene.drives) {
                if (s.source().layers().size() > 1) {
                    continue; // requirements of a base are shown with the base's own figures
                }
                String last = "";
                for (RequirementAnswer r : s.answer().requirements()) {
                    int line = endOfEntry(scene.text, r.span());
                    if (!r.file().equals(scene.file) || line < from || line > to) {
                        continue;
                    }
                    String key = line + "";
                    if (key.equals(last)) {
                        // a requirement of both members: the worse one is shown, the other told by the tooltip
                        Hint before = out.get(out.size() - 1);
                        RequirementAnswer other = find(s, before.about());
                        if (other != null && worse(r, other)) {
                            out.set(out.size() - 1, new Hint(line, Labels.hint(r), true, r.id()));
                        }
                        continue;
                    }
                    last = key;
                    out.add(new Hint(line, Labels.hint(r), true, r.id()));
                }
            }
        }
        if (derived) {
            for (Entry e : scene.tree.entries()) {
                String drive = e instanceof Entry.Drive d ? d.name().text() : null;
                Scene.Shown s = drive == null ? null : scene.drive(drive);
                if (s == null
                        || s.runs().isEmpty()
                        || e.span().end() < from
                        || e.span().start() > to) {
                    continue;
                }
                DriveGraph g = s.runs().get(0).graph;
                body(scene, s, new Names(g), g.drive(), ((Entry.Drive) e).body(), from, to, out);
            }
        }
        out.sort(Comparator.comparingInt(Hint::offset));
        return out;
    }

    private static boolean worse(RequirementAnswer a, RequirementAnswer b) {
        if (Double.isNaN(a.margin()) || Double.isNaN(b.margin())) {
            return Double.isNaN(a.margin()) && !Double.isNaN(b.margin());
        }
        return a.margin() < b.margin();
    }

    private static @Nullable RequirementAnswer find(Scene.Shown s, String id) {
        for (RequirementAnswer r : s.answer().requirements()) {
            if (r.id().equals(id)) {
                return r;
            }
        }
        return null;
    }

    /** Behind the last character of the entry's own first line, before a comment or note. */
    private static int endOfEntry(String text, Span span) {
        int end = Math.min(span.end(), text.length());
        int line = text.indexOf('\n', span.start());
        if (line >= 0 && line < end) {
            end = line;
        }
        while (end > span.start() && Character.isWhitespace(text.charAt(end - 1))) {
            end--;
        }
        return end;
    }

    private static void body(
            Scene scene, Scene.Shown s, Names names, Element at, List<Entry> body, int from, int to, List<Hint> out) {
        for (Entry e : body) {
            if (e.span().end() < from || e.span().start() > to) {
                continue;
            }
            if (e instanceof Entry.Fact f && f.path().names().size() == 1) {
                String property = f.path().text();
                for (Rule r : RULES) {
                    if (r.property().equals(property) && fits(r, at)) {
                        String label = label(s, names, at, r.paths(), unitOf(f.value()));
                        if (!label.isEmpty()) {
                            out.add(new Hint(f.value().span().end(), label, false, about(at, r)));
                        }
                    }
                }
            } else if (e instanceof Entry.Block b) {
                Element inner = names.block(at, b);
                if (inner == null) {
                    continue;
                }
                for (Rule r : RULES) {
                    if (r.property().equals("-") && fits(r, inner)) {
                        List<String> some = new ArrayList<>();
                        for (String p : r.paths()) {
                            if (!saidIn(b, p)) {
                                some.add(p);
                            }
                        }
                        // what is said in the block is shown where it is said
                        String label = some.size() < r.paths().size() && b.body() != null && says(b, r.kind())
                                ? ""
                                : label(s, names, inner, some, null);
                        if (!label.isEmpty()) {
                            out.add(new Hint(headEnd(b), label, false, about(inner, r)));
                        }
                    }
                }
                if (b.body() != null) {
                    body(scene, s, names, inner, b.body(), from, to, out);
                }
            }
        }
    }

    /** Whether a fact of this block has a rule of its own, so that nothing need stand beside the head. */
    private static boolean says(Entry.Block b, String kind) {
        for (Entry e : b.body() == null ? List.<Entry>of() : b.body()) {
            if (e instanceof Entry.Fact f) {
                for (Rule r : RULES) {
                    if (r.kind().equals(kind) && r.property().equals(f.path().text())) {
                        return true;
                    }
                }
            }
        }
        return false;
    }

    private static boolean saidIn(Entry.Block b, String path) {
        for (Entry e : b.body() == null ? List.<Entry>of() : b.body()) {
            if (e instanceof Entry.Fact f && f.path().text().equals(path)) {
                return true;
            }
        }
        return false;
    }

    private static int headEnd(Entry.Block b) {
        return b.on() != null
                ? b.on().span().end()
                : b.name() != null ? b.name().span().end() : b.head().span().end();
    }

    private static boolean fits(Rule r, Element at) {
        return r.kind().equals(at.kind()) && (r.name() == null || r.name().equals(at.name));
    }

    private static String about(Element at, Rule r) {
        return (at.path().isEmpty() ? "" : at.path() + ".") + r.paths().get(0);
    }

    private static @Nullable Unit unitOf(Expr value) {
        Unit[] found = new Unit[1];
        Nodes.walk(value, n -> {
            if (n instanceof Expr.Num x
                    && x.unit() != null
                    && found[0] == null
                    && Units.standard().parse(x.unit().text()) instanceof Units.Parse.Ok ok) {
                found[0] = ok.unit();
            }
        });
        return found[0];
    }

    private static String label(Scene.Shown s, Names names, Element at, List<String> paths, @Nullable Unit written) {
        StringBuilder b = new StringBuilder();
        String before = "";
        for (String p : paths) {
            Slot slot = slot(names, at, p);
            if (slot == null) {
                continue;
            }
            double value = s.runs().get(0).at(slot.register());
            if (Double.isNaN(value)) {
                continue;
            }
            Unit u = s.runs().get(0).graph.shownUnit(slot);
            if (written != null && u != null && written.dimension() == u.dimension() && !written.isOffset()) {
                u = written;
            }
            Decl d = slot.decl;
            String symbol = d.symbol != null ? d.symbol : d.name;
            String unit = u == null || u.text().equals("1") ? "" : " " + u.text();
            String number = Numbers.format(u == null ? value : u.fromBase(value), 4);
            if (b.length() > 0) {
                b.append(symbol.equals(before) ? " / " : ", ");
            }
            String piece = (symbol.equals(before) ? "" : symbol + " ") + number + unit;
            if (b.length() + piece.length() > Labels.LONGEST) {
                break;
            }
            b.append(piece);
            before = symbol;
        }
        String text = b.toString();
        // d_e 72 mm / 140 mm reads better as d_e 72 / 140 mm
        return text.replaceAll(" (\\S+) / (\\S+) \\1$", " / $2 $1");
    }

    /** What a hint is about, as Markdown; empty when there is nothing more to say. */
    public static String tooltip(Scene scene, String about) {
        for (Scene.Shown s : scene.drives) {
            RequirementAnswer r = find(s, about);
            if (r != null) {
                StringBuilder b = new StringBuilder(Hovers.told(r));
                for (RequirementAnswer other : s.answer().requirements()) {
                    if (other != r
                            && other.span().equals(r.span())
                            && other.file().equals(r.file())) {
                        b.append("\n\n---\n").append(Hovers.told(other));
                    }
                }
                return b.toString();
            }
        }
        for (Scene.Shown s : scene.drives) {
            DriveGraph g = scene.graph(s.source().name());
            if (g != null) {
                synchronized (scene) {
                    var e = new backcone.engine.explain.Explainer(g, scene.texts).explain(about);
                    if (e.isPresent()) {
                        return "**"
                                + Hovers.escape(
                                        e.get().meaning() == null
                                                ? about
                                                : e.get().meaning())
                                + "**\n\n" + Hovers.explained(e.get());
                    }
                }
            }
        }
        return "";
    }

    private static List<Rule> rules() {
        List<Rule> out = new ArrayList<>();
        try (InputStream in = Hints.class.getResourceAsStream("hints.txt")) {
            String all = in == null ? "" : new String(in.readAllBytes(), StandardCharsets.UTF_8);
            for (String line : all.split("\n")) {
                if (line.isBlank() || line.startsWith("#")) {
                    continue;
                }
                String[] cells = line.split("\\|");
                String[] who = cells[0].strip().split(" +");
                List<String> paths = new ArrayList<>();
                for (int i = 2; i < cells.length; i++) {
                    paths.add(cells[i].strip());
                }
                out.add(new Rule(who[0], who.length > 1 ? who[1] : null, cells[1].strip(), List.copyOf(paths)));
            }
        } catch (IOException e) {
            throw new UncheckedIOException(e);
        }
        return List.copyOf(out);
    }
}
