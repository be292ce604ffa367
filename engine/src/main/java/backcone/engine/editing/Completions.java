package backcone.engine.editing;

import backcone.engine.answers.RequirementAnswer;
import backcone.engine.graph.DriveGraph;
import backcone.engine.graph.Element;
import backcone.engine.graph.Names;
import backcone.engine.graph.Names.Meaning;
import backcone.engine.model.ChoiceKind;
import backcone.engine.model.Decl;
import backcone.engine.model.FunctionDef;
import backcone.engine.model.KindDef;
import backcone.engine.model.Library;
import backcone.engine.model.MethodDef;
import backcone.engine.model.ValueKind;
import backcone.engine.parse.Colours;
import backcone.engine.syntax.Entry;
import backcone.engine.syntax.Expr;
import backcone.engine.syntax.Name;
import backcone.engine.text.Span;
import backcone.engine.units.Units;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;
import java.util.regex.Matcher;
import java.util.regex.Pattern;
import org.jspecify.annotations.Nullable;

/** What could be written at a place. What is missing comes first. */
public final class Completions {
    private static final Pattern NUMBER = Pattern.compile(".*(?:^|[\\s=(<>*/+\\-])\\d[\\d.]*(?:[eE][+\\-]?\\d+)?\\s*$");
    private static final Pattern FACT = Pattern.compile("^\\s*(?:override\\s+)?([\\p{L}_][\\w\\p{L}.]*)\\s*=\\s*(.*)$");
    private static final Pattern DOTTED = Pattern.compile("([\\p{L}_][\\w\\p{L}]*(?:\\.[\\p{L}_][\\w\\p{L}]*)*)\\.$");
    private static final Pattern COMPARED =
            Pattern.compile("([\\p{L}_][\\w\\p{L}.]*)\\s*(?:>=|<=|==|<|>|between|within)\\s*(.*)$");

    /** What sort of thing is offered; it picks the sign an editor shows. */
    public enum Sort {
        PROPERTY,
        BLOCK,
        KEYWORD,
        UNIT,
        WORD,
        REFERENCE,
        METHOD,
        CHECK,
        VALUE,
        FUNCTION,
        FILE,
        TABLE
    }

    /**
     * {@code insert} replaces the word at the cursor; with {@code snippet} it holds places to fill in ({@code $1},
     * {@code ${1|a,b|}}, {@code $0}). {@code plain} is the same for editors without such places. {@code order} sorts.
     */
    public record Item(
            String label,
            Sort sort,
            String detail,
            String order,
            String insert,
            boolean snippet,
            String plain,
            String about) {}

    /** {@code word}: what the items replace. {@code paths}: the items are files, to be found by the caller. */
    public record Offer(Span word, List<Item> items, boolean paths) {}

    private final Scene scene;
    private final Library library;
    private final List<Item> out = new ArrayList<>();
    private final Set<String> seen = new LinkedHashSet<>();

    private Completions(Scene scene) {
        this.scene = scene;
        this.library = scene.library();
    }

    public static Offer at(Scene scene, int offset) {
        String text = scene.text;
        int at = Math.min(offset, text.length());
        int start = at;
        while (start > 0 && word(text.charAt(start - 1))) {
            start--;
        }
        // digits alone are a number, not the beginning of a name
        if (start < at && Character.isDigit(text.charAt(start))) {
            int s = start;
            while (s < at && (Character.isDigit(text.charAt(s)) || text.charAt(s) == '.')) {
                s++;
            }
            start = s;
        }
        int end = at;
        while (end < text.length() && word(text.charAt(end))) {
            end++;
        }
        int lineStart = text.lastIndexOf('\n', at - 1) + 1;
        String line = text.substring(lineStart, at);
        for (Colours.Piece p : scene.pieces()) {
            boolean open = p.sort() == Colours.Sort.STRING
                    && p.start() < at
                    && (at < p.end() || (at == p.end() && !closed(text, p)));
            if (open) {
                if (line.strip().startsWith("use")) {
                    int from = p.start() + 1;
                    int to = closed(text, p) ? p.end() - 1 : p.end();
                    return new Offer(new Span(from, Math.max(from, to)), List.of(), true);
                }
                return new Offer(new Span(at, at), List.of(), false);
            }
            if (p.sort() == Colours.Sort.COMMENT && p.start() < at && at <= p.end()) {
                return new Offer(new Span(at, at), List.of(), false);
            }
        }
        Completions c = new Completions(scene);
        String before = text.substring(lineStart, start);
        if (scene.file.isMethodFile()) {
            c.method(before);
        } else {
            c.spec(before, Spot.at(scene, Math.max(0, at)), at);
        }
        return new Offer(new Span(start, end), List.copyOf(c.out), false);
    }

    private static boolean closed(String text, Colours.Piece p) {
        return p.end() - p.start() >= 2 && text.charAt(p.end() - 1) == '"';
    }

    private static boolean word(char c) {
        return Character.isLetterOrDigit(c) || c == '_';
    }

    private void put(String label, Sort sort, String detail, String order, String insert, String plain, String about) {
        if (seen.add(label + "/" + sort)) {
            out.add(new Item(label, sort, detail, order + label, insert, !insert.equals(plain), plain, about));
        }
    }

    private void put(String label, Sort sort, String detail, String order) {
        put(label, sort, detail, order, label, label, label);
    }

    // ---- specs

    private void spec(String line, Spot spot, int at) {
        // the entry at hand, where several stand in one line
        int open = Math.max(line.lastIndexOf('{'), line.lastIndexOf(';'));
        String before =
                open >= 0 && line.chars().filter(c -> c == '"').count() % 2 == 0 ? line.substring(open + 1) : line;
        Element el = spot.element();
        DriveGraph g = spot.graph();
        String stripped = before.strip();
        if (g == null || el == null) {
            if (stripped.isEmpty()) {
                top();
            } else if (stripped.matches("(variant|family)\\s+\\w+\\s+of")) {
                for (Scene.Shown s : scene.drives) {
                    put(s.source().name(), Sort.REFERENCE, "drive", "1");
                }
            }
            return;
        }
        Names names = new Names(g);
        Matcher dotted = DOTTED.matcher(before);
        if (dotted.find()) {
            dotted(
                    names,
                    el,
                    dotted.group(1),
                    before.substring(0, dotted.start()).strip());
            return;
        }
        if (stripped.isEmpty()) {
            start(spot, names, el);
            return;
        }
        if (head(stripped, names, g, el, spot)) {
            return;
        }
        Matcher fact = FACT.matcher(before);
        if (fact.find()) {
            Decl d = declOf(names, el, fact.group(1));
            if (NUMBER.matcher(before).matches()) {
                units(d);
                notes();
            } else if (fact.group(2).isBlank() && d != null) {
                value(names, d);
            } else {
                if (!fact.group(2).isBlank()) {
                    notes();
                }
                expression(names, el);
            }
            return;
        }
        Matcher compared = COMPARED.matcher(before);
        if (compared.find() && NUMBER.matcher(before).matches()) {
            units(declOf(names, el, compared.group(1)));
            notes();
            return;
        }
        if (NUMBER.matcher(before).matches()) {
            units(null);
            notes();
            return;
        }
        expression(names, el);
        if (stripped.startsWith("require")) {
            put("between", Sort.KEYWORD, "two bounds", "3");
            put("within", Sort.KEYWORD, "a tolerance around a value", "3");
        }
        notes();
    }

    private boolean head(String stripped, Names names, DriveGraph g, Element el, Spot spot) {
        if (stripped.equals("rate")) {
            for (String m : names.elementsOf("mesh")) {
                put(m, Sort.REFERENCE, "mesh", "1");
            }
            return true;
        }
        if (stripped.matches("rate\\s+[\\w.]+\\s+by")) {
            String[] words = stripped.split("\\s+");
            Meaning m = names.path(path(words[1]), 0, g.drive());
            String kind = m instanceof Meaning.Block b ? b.element().kind() : null;
            for (List<MethodDef> all : library.methods.values()) {
                for (MethodDef x : all) {
                    if ((kind == null || library.isKind(kind, x.kind())) && rates(x)) {
                        String edition = x.body().editions.isEmpty()
                                ? ""
                                : " edition " + x.body().editions.get(0);
                        put(
                                x.name() + edition,
                                Sort.METHOD,
                                x.meaning() == null ? "for " + x.kind() : x.meaning(),
                                "1",
                                x.name() + edition,
                                x.name() + edition,
                                x.name());
                    }
                }
            }
            return true;
        }
        if (stripped.matches("rate\\s+[\\w.]+\\s+by\\s+\\w+.*\\bedition")) {
            String[] words = stripped.split("\\s+");
            for (MethodDef x : library.methods.getOrDefault(words[3], List.of())) {
                for (String e : x.body().editions) {
                    put(e, Sort.VALUE, "edition of " + x.name(), "1");
                }
            }
            return true;
        }
        if (stripped.matches("rate\\s.*\\bunder")) {
            for (String c : names.elementsOf("case")) {
                put(c, Sort.REFERENCE, "case", "1");
            }
            return true;
        }
        if (stripped.matches("rate\\s+[\\w.]+\\s+by\\s+.*\\w")) {
            put("as", Sort.KEYWORD, "a name of its own", "2");
            put("edition", Sort.KEYWORD, "the edition of the method", "2");
            put("under", Sort.KEYWORD, "the case", "2");
            return true;
        }
        if (stripped.matches("\\w+(\\s+\\w+)?\\s+on") && spot.entry() instanceof Entry.Block
                || stripped.matches("(pinion|wheel|gear|bearing)(\\s+\\w+)?\\s+on")) {
            for (String s : names.elementsOf("shaft")) {
                put(s, Sort.REFERENCE, "shaft", "1");
            }
            return true;
        }
        if (stripped.equals("accept") && spot.drive() != null) {
            Scene.Shown s = scene.drive(spot.drive());
            if (s != null) {
                for (RequirementAnswer r : s.answer().requirements()) {
                    if (r.rating() != null) {
                        put(r.id(), Sort.CHECK, Labels.hint(r), r.state().isMet() ? "2" : "1");
                    }
                }
            }
            return true;
        }
        if (stripped.equals("waive") && spot.drive() != null) {
            Scene.Shown s = scene.drive(spot.drive());
            if (s != null) {
                for (RequirementAnswer r : s.answer().requirements()) {
                    for (RequirementAnswer.Passed p : r.outside()) {
                        put(p.path(), Sort.CHECK, p.message(), "1");
                    }
                }
            }
            return true;
        }
        if (stripped.equals("use") && el.isSpace()) {
            MethodDef m = el.method();
            if (m != null) {
                for (Decl d : m.body().decls) {
                    d.readings.forEach(r -> put(
                            r.name().text() + " for " + d.name,
                            Sort.VALUE,
                            "another reading of " + d.symbolOrName(),
                            "1"));
                }
            }
            return true;
        }
        return false;
    }

    private static boolean rates(MethodDef m) {
        return hasCheck(m.body()) || !m.body().includes.isEmpty();
    }

    private static boolean hasCheck(backcone.engine.model.BodyDef b) {
        for (Decl d : b.decls) {
            if (d.role == Decl.Role.CHECK) {
                return true;
            }
        }
        return b.each.values().stream().anyMatch(l -> l.stream().anyMatch(Completions::hasCheck));
    }

    private static List<Name> path(String dotted) {
        List<Name> out = new ArrayList<>();
        for (String n : dotted.split("\\.")) {
            out.add(new Name(n, Span.NONE));
        }
        return out;
    }

    private static @Nullable Decl declOf(Names names, Element el, String dotted) {
        List<Name> p = path(dotted);
        Meaning m = names.path(p, p.size() - 1, el);
        if (m == null && el.isSpace()) {
            m = names.check(el, p, p.size() - 1);
        }
        return m instanceof Meaning.Value v ? v.decl() : null;
    }

    private void top() {
        put("drive", Sort.BLOCK, "a drive", "1", "drive ${1:name} \"${2:title}\" {\n  $0\n}", "drive ", "drive");
        put("use", Sort.KEYWORD, "another file", "1", "use \"$1\"", "use ", "use");
        put(
                "material",
                Sort.BLOCK,
                "a material of this file",
                "2",
                "material ${1:name} {\n  $0\n}",
                "material ",
                "material");
        put(
                "lubricant",
                Sort.BLOCK,
                "an oil of this file",
                "2",
                "lubricant ${1:name} {\n  $0\n}",
                "lubricant ",
                "lubricant");
        put("let", Sort.KEYWORD, "a name for a value", "2", "let ${1:name} = $0", "let ", "let");
        put(
                "variant",
                Sort.BLOCK,
                "a drive that changes another one",
                "3",
                "variant ${1:name} of ${2:drive} {\n  $0\n}",
                "variant ",
                "variant");
        put(
                "family",
                Sort.BLOCK,
                "a table of drives",
                "3",
                "family ${1:name} of ${2:drive} {\n  size | ${3:path}\n  $0\n}",
                "family ",
                "family");
    }

    private void start(Spot spot, Names names, Element el) {
        Set<String> missing = new LinkedHashSet<>();
        Scene.Shown s = spot.drive() == null ? null : scene.drive(spot.drive());
        if (s != null) {
            for (RequirementAnswer r : s.answer().requirements()) {
                r.missing().forEach(m -> missing.add(m.path()));
            }
            s.answer().unrequired().forEach(c -> c.missing().forEach(m -> missing.add(m.path())));
        }
        String prefix = el.path().isEmpty() ? "" : el.path() + ".";
        if (el.isSpace()) {
            for (Map.Entry<String, Decl> c : names.checksOf(el).entrySet()) {
                put(
                        c.getKey(),
                        Sort.CHECK,
                        c.getValue().meaning == null ? "a check" : c.getValue().meaning,
                        "1",
                        c.getKey() + " >= ${1:1.0}",
                        c.getKey() + " >= ",
                        c.getKey());
            }
            put("use", Sort.KEYWORD, "another reading of an equation", "4");
        }
        for (Decl d : Names.declarations(el)) {
            if (d.how == Entry.Given.EQUALS || d.role != Decl.Role.QUANTITY || Names.isGiven(el, d)) {
                continue;
            }
            boolean needed = missing.contains(prefix + d.name);
            String order = needed ? "0" : d.how == Entry.Given.INPUT ? "2" : "3";
            String detail = (needed ? "missing: " : "") + (d.meaning == null ? "" : d.meaning);
            put(d.name, Sort.PROPERTY, detail, order, d.name + " = " + placeholder(d, names), d.name + " = ", d.name);
        }
        for (String b : names.blocks(el)) {
            KindDef k = library.kinds.get(b);
            boolean part = Names.isPart(el, b);
            boolean shaft = b.equals("pinion") || b.equals("wheel");
            String insert =
                    shaft ? b + " on ${1:shaft} {\n  $0\n}" : part ? b + " {\n  $0\n}" : b + " ${1:name} {\n  $0\n}";
            put(b, Sort.BLOCK, k == null || k.meaning() == null ? "a block" : k.meaning(), "3", insert, b + " ", b);
        }
        if (el.kind().equals("drive")) {
            put(
                    "rate",
                    Sort.KEYWORD,
                    "rates a mesh by a method",
                    "2",
                    "rate ${1:mesh} by ${2:method} {\n  $0\n}",
                    "rate ",
                    "rate");
            put("require", Sort.KEYWORD, "a requirement on any value", "2", "require $0", "require ", "require");
            put("assert", Sort.KEYWORD, "a fact that must not drift", "4", "assert $0", "assert ", "assert");
            put(
                    "accept",
                    Sort.KEYWORD,
                    "lowers one requirement until a day",
                    "5",
                    "accept ${1:requirement} >= ${2:1.0} until ${3:2027-01-31} by \"${4:name}\" because \"${5:reason}\"",
                    "accept ",
                    "accept");
            put(
                    "waive",
                    Sort.KEYWORD,
                    "silences one passed limit until a day",
                    "5",
                    "waive ${1:limit} until ${2:2027-01-31} by \"${3:name}\" because \"${4:reason}\"",
                    "waive ",
                    "waive");
        }
        put("let", Sort.KEYWORD, "a name for a value", "5", "let ${1:name} = $0", "let ", "let");
        put(
                "override",
                Sort.KEYWORD,
                "a value of your own for a computed one",
                "5",
                "override ${1:name} = ${2:value} because \"${3:reason}\"",
                "override ",
                "override");
    }

    private String placeholder(Decl d, Names names) {
        if (d.kind instanceof ValueKind.Choice c && c.kind().words().size() <= 40) {
            return "${1|" + String.join(",", c.kind().words().keySet()) + "|}";
        } else if (d.kind instanceof ValueKind.Reference r) {
            List<String> all = new ArrayList<>(names.elementsOf(r.kind()));
            all.addAll(names.topOf(r.kind()));
            return all.isEmpty() || all.size() > 60 ? "$1" : "${1|" + String.join(",", all) + "|}";
        } else if (d.kind instanceof ValueKind.Text) {
            return "\"$1\"";
        } else if (d.kind instanceof ValueKind.Quantity q) {
            String u = q.kind().shown().text();
            return "$1" + (u.equals("1") ? "" : " " + u);
        }
        return "$1";
    }

    private void value(Names names, Decl d) {
        if (d.kind instanceof ValueKind.Choice c) {
            words(c.kind(), "1");
        } else if (d.kind instanceof ValueKind.Reference r) {
            for (String n : names.elementsOf(r.kind())) {
                put(n, Sort.REFERENCE, r.kind(), "1");
            }
            for (String n : names.topOf(r.kind())) {
                put(n, Sort.REFERENCE, r.kind(), "1");
            }
        } else if (d.kind instanceof ValueKind.Text) {
            put("\"\"", Sort.VALUE, "a text", "1", "\"$1\"", "\"\"", "");
        }
        if (d.how == Entry.Given.DEFAULT && d.value != null && !(d.value instanceof Expr.Choose)) {
            put(Labels.text(scene, d.file, d.value.span()), Sort.VALUE, "what holds when nothing is given", "0");
        }
        if (d.offer != null) {
            put(Labels.text(scene, d.file, d.offer.span()), Sort.VALUE, "a usual value", "0");
        }
        if (d.kind instanceof ValueKind.Quantity q) {
            String range = d.range == null
                    ? ""
                    : ", " + Labels.text(scene, d.file, d.range.low().span()) + " to "
                            + Labels.text(scene, d.file, d.range.high().span());
            String u = q.kind().shown().text();
            if (!u.equals("1")) {
                put("… " + u, Sort.VALUE, q.kind().meaning() + range, "1", "$1 " + u, u, "");
            }
        }
    }

    private void words(ChoiceKind c, String order) {
        int n = 0;
        for (Map.Entry<String, @Nullable String> w : c.words().entrySet()) {
            put(
                    w.getKey(),
                    Sort.WORD,
                    w.getValue() == null ? c.name() : w.getValue(),
                    order + String.format(java.util.Locale.ROOT, "%03d", n++));
        }
    }

    private void units(@Nullable Decl d) {
        Units units = Units.standard();
        List<String> all = new ArrayList<>();
        if (d != null && d.kind instanceof ValueKind.Quantity q) {
            String first = q.kind().shown().text();
            if (!first.equals("1")) {
                all.add(first);
            }
            all.addAll(units.unitsOf(q.kind().shown().dimension(), q.kind().name()));
        } else if (d == null || d.kind instanceof ValueKind.Inferred) {
            all.addAll(List.of("mm", "deg", "N", "N*m", "MPa", "rpm", "kW", "m/s", "h", "%", "in", "lbf"));
        }
        int n = 0;
        for (String u : new LinkedHashSet<>(all)) {
            put(u, Sort.UNIT, units.describe(u), "1" + String.format(java.util.Locale.ROOT, "%03d", n++));
        }
    }

    private void notes() {
        put("per", Sort.KEYWORD, "where the value comes from", "7", "per \"$1\"", "per ", "per");
        put("because", Sort.KEYWORD, "the reason", "7", "because \"$1\"", "because ", "because");
        put(
                "assumed",
                Sort.KEYWORD,
                "an assumption, and why",
                "8",
                "assumed because \"$1\"",
                "assumed because ",
                "assumed");
        put("measured", Sort.KEYWORD, "a measured value", "8");
    }

    private void dotted(Names names, Element el, String path, String lead) {
        List<Name> p = path(path);
        Meaning m = names.path(p, p.size() - 1, el);
        Element at = m instanceof Meaning.Block b ? b.element() : null;
        if (at == null && m instanceof Meaning.Value v && v.slot() != null) {
            at = names.referred(v.slot());
        }
        if (at == null) {
            return;
        }
        boolean given = lead.isEmpty() || lead.equals("override");
        for (Map.Entry<String, Meaning> x : names.members(at).entrySet()) {
            if (x.getValue() instanceof Meaning.Value v) {
                boolean computed = v.decl().how == Entry.Given.EQUALS;
                put(
                        x.getKey(),
                        v.decl().role == Decl.Role.CHECK ? Sort.CHECK : Sort.PROPERTY,
                        v.decl().meaning == null ? "" : v.decl().meaning,
                        given && computed ? "3" : "2");
            } else {
                put(x.getKey(), Sort.BLOCK, "", "1");
            }
        }
        for (Map.Entry<String, Decl> c : names.checksIn(at).entrySet()) {
            put(c.getKey(), Sort.CHECK, c.getValue().meaning == null ? "" : c.getValue().meaning, "1");
        }
    }

    private void expression(Names names, Element el) {
        for (Map.Entry<String, Meaning> x : names.visible(el).entrySet()) {
            if (x.getValue() instanceof Meaning.Value v) {
                put(
                        x.getKey(),
                        v.decl().role == Decl.Role.LET ? Sort.VALUE : Sort.PROPERTY,
                        v.decl().meaning == null ? "" : v.decl().meaning,
                        v.decl().role == Decl.Role.LET ? "1" : "4");
            } else if (x.getValue() instanceof Meaning.Block b) {
                put(x.getKey(), Sort.BLOCK, b.element().kind(), "2");
            }
        }
        functions();
    }

    private void functions() {
        Map<String, String> all = new LinkedHashMap<>();
        for (FunctionDef f : library.functions.values()) {
            all.put(f.name(), f.syntax().meaning() == null ? "" : f.syntax().meaning());
        }
        Signatures.BUILT_IN.forEach((k, v) -> all.put(k, v.meaning()));
        all.forEach((k, v) -> put(k, Sort.FUNCTION, v, "6", k + "($1)", k + "(", k));
    }

    // ---- method files: symbols, as formulas are written

    private void method(String before) {
        if (NUMBER.matcher(before).matches()) {
            units(null);
            return;
        }
        if (before.matches(".*\\sin\\s+$")) {
            for (String u : Units.standard().words()) {
                put(u, Sort.UNIT, Units.standard().describe(u), "1");
            }
            return;
        }
        if (before.matches(".*:\\s*$")) {
            library.quantities.values().forEach(q -> put(q.name(), Sort.WORD, q.meaning(), "1"));
            library.choices
                    .values()
                    .forEach(c -> put(c.name(), Sort.WORD, c.meaning() == null ? "" : c.meaning(), "2"));
            return;
        }
        if (before.matches(".*\\sper\\s+$")) {
            library.sources.values().forEach(s -> put(s.name(), Sort.VALUE, s.text(), "1"));
            return;
        }
        if (before.isBlank()) {
            for (String w : Colours.keywords()) {
                if (!Keywords.of(w).isEmpty()) {
                    put(w, Sort.KEYWORD, "", "3");
                }
            }
        }
        for (Occurrence o : scene.occurrences().all()) {
            Target t = o.target();
            if (t.sort() == Target.Sort.PROPERTY || t.sort() == Target.Sort.CHECK || t.sort() == Target.Sort.TABLE) {
                String said = scene.text.substring(o.span().start(), o.span().end());
                put(
                        said,
                        t.sort() == Target.Sort.TABLE ? Sort.TABLE : Sort.PROPERTY,
                        t.meaning() == null ? "" : t.meaning(),
                        "2");
            }
        }
        for (KindDef k : library.kinds.values()) {
            for (Decl d : k.body().decls) {
                put(d.symbolOrName(), Sort.PROPERTY, d.meaning == null ? "" : d.meaning, "4");
            }
        }
        functions();
    }

    /** What a completion item says more of itself, as Markdown. */
    public static String about(Scene scene, Item item) {
        if (item.sort() == Sort.KEYWORD) {
            return Keywords.of(item.about());
        }
        if (item.sort() == Sort.UNIT) {
            return Hovers.escape(Units.standard().describe(item.label()));
        }
        if (item.about().isEmpty()) {
            return "";
        }
        List<String> page = new backcone.engine.answers.HandbookPages(scene.shapes, scene.texts).page(item.about());
        return page.isEmpty() ? "" : Hovers.code(String.join("\n", page.subList(0, Math.min(20, page.size()))));
    }
}
