package backcone.engine.review;

import backcone.engine.syntax.Entry;
import backcone.engine.syntax.Expr;
import backcone.engine.syntax.FileSyntax;
import backcone.engine.syntax.Name;
import backcone.engine.syntax.Note;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import backcone.engine.units.Unit;
import backcone.engine.units.Units;
import java.util.ArrayList;
import java.util.BitSet;
import java.util.HashMap;
import java.util.HashSet;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Set;
import org.jspecify.annotations.Nullable;

/**
 * The edits between two trees of one file, and every mixture of the two: {@link #mixed} gives the tree in which some edits are
 * made and the others are not. Drives that were renamed are followed.
 */
public final class TreeDiff {
    private final FileId file;
    private final String combined;
    private final List<Edit> edits;
    private final List<Part> parts;
    private final Map<String, String> formerNames = new LinkedHashMap<>();

    private sealed interface Part {}

    private record Same(Entry entry) implements Part {}

    /** One edit: the old entry, the new one, or either of them missing. */
    private record Choice(
            int edit, @Nullable Entry before, @Nullable Entry after) implements Part {}

    /** A block in both: its head, perhaps with an edit, and what is inside. */
    private record Nested(int headEdit, Entry before, Entry after, List<Part> body) implements Part {}

    private TreeDiff(FileId file, String combined, List<Edit> edits, FileSyntax before, FileSyntax after) {
        this.file = file;
        this.combined = combined;
        this.edits = edits;
        this.parts = body(null, "", before.entries(), after.entries(), true);
    }

    /**
     * Edits are added to {@code edits}, their ids being their places there. A file that is new or gone is compared with an
     * empty one. The spans of both trees point into {@code text}, which holds both texts.
     */
    public static TreeDiff of(FileId file, FileSyntax before, FileSyntax after, String text, List<Edit> edits) {
        return new TreeDiff(file, text, edits, before, after);
    }

    /** New name of a drive by its former one, for those that were renamed. */
    public Map<String, String> formerNames() {
        return formerNames;
    }

    /** The tree with the edits in {@code made} made. */
    public FileSyntax mixed(BitSet made) {
        return new FileSyntax(mix(parts, made), List.of(), Span.NONE);
    }

    private static List<Entry> mix(List<Part> parts, BitSet made) {
        List<Entry> out = new ArrayList<>(parts.size());
        for (Part p : parts) {
            if (p instanceof Same s) {
                out.add(s.entry);
            } else if (p instanceof Choice c) {
                Entry e = made.get(c.edit) ? c.after : c.before;
                if (e != null) {
                    out.add(e);
                }
            } else if (p instanceof Nested n) {
                Entry head = n.headEdit < 0 || made.get(n.headEdit) ? n.after : n.before;
                out.add(with(head, mix(n.body, made)));
            }
        }
        return out;
    }

    // ---- matching

    private List<Part> body(@Nullable String drive, String path, List<Entry> before, List<Entry> after, boolean top) {
        Map<String, Entry> old = keyed(before, combined);
        Map<String, Entry> now = keyed(after, combined);
        if (top) {
            renames(old, now);
        }
        List<Part> out = new ArrayList<>();
        Set<String> done = new HashSet<>();
        for (Map.Entry<String, Entry> e : now.entrySet()) {
            Entry b = old.get(e.getKey());
            done.add(e.getKey());
            out.add(b == null ? added(drive, path, e.getValue()) : matched(drive, path, b, e.getValue()));
        }
        for (Map.Entry<String, Entry> e : old.entrySet()) {
            if (!done.contains(e.getKey())) {
                out.add(removed(drive, path, e.getValue()));
            }
        }
        return out;
    }

    private static Map<String, Entry> keyed(List<Entry> entries, String text) {
        Map<String, Entry> out = new LinkedHashMap<>();
        for (Entry e : entries) {
            String k = key(e, text);
            String unique = k;
            for (int i = 2; out.containsKey(unique); i++) {
                unique = k + "\u0000" + i;
            }
            out.put(unique, e);
        }
        return out;
    }

    private static String key(Entry e, String text) {
        if (e instanceof Entry.Fact f) {
            // a grade is given once per system
            String system = f.value() instanceof Expr.Num n
                            && n.unit() != null
                            && isGrade(n.unit().text())
                    ? " " + n.unit().text()
                    : "";
            return "fact " + f.path().text() + system;
        } else if (e instanceof Entry.Block b) {
            return "block " + b.head().text() + " "
                    + (b.name() == null ? "" : b.name().text());
        } else if (e instanceof Entry.Drive d) {
            return "drive " + d.name().text();
        } else if (e instanceof Entry.Variant v) {
            return "variant " + v.name().text();
        } else if (e instanceof Entry.Family f) {
            return "family " + f.name().text();
        } else if (e instanceof Entry.Rate r) {
            return "rate " + r.mesh().text() + " " + rateName(r);
        } else if (e instanceof Entry.Requirement r) {
            return "requirement " + r.path().text();
        } else if (e instanceof Entry.Require r) {
            return "require " + Words.of(text, r.subject());
        } else if (e instanceof Entry.Accept a) {
            return "accept " + a.path().text();
        } else if (e instanceof Entry.Waive w) {
            return "waive " + w.path().text();
        } else if (e instanceof Entry.Override o) {
            return "override " + o.path().text();
        } else if (e instanceof Entry.UseReading u) {
            return "reading " + u.target().text();
        } else if (e instanceof Entry.Let l) {
            return "let " + l.name().text();
        } else if (e instanceof Entry.Use u) {
            return "use " + u.path();
        } else if (e instanceof Entry.FactFor f) {
            return "factfor " + f.name().text() + " " + f.target().text();
        } else if (e instanceof Entry.Declaration d) {
            return "declaration " + d.name().text();
        } else if (e instanceof Entry.Method m) {
            return "method " + m.name().text() + " " + m.kind().text();
        } else if (e instanceof Entry.Chapter c) {
            return "chapter " + c.name().text() + " " + c.kind().text();
        } else if (e instanceof Entry.Kind k) {
            return "kind " + k.name().text();
        } else if (e instanceof Entry.Table t) {
            return "table " + t.name().text();
        } else if (e instanceof Entry.Function f) {
            return "function " + f.name().text();
        }
        return e.getClass().getSimpleName() + " " + Words.of(text, e);
    }

    private static boolean isGrade(String unit) {
        return unit.startsWith("ISO") || unit.startsWith("AGMA") || unit.startsWith("DIN");
    }

    static String rateName(Entry.Rate r) {
        return r.as() != null ? r.as().text() : r.method().text();
    }

    /** A drive of another name whose lines are mostly the same is the same drive. */
    private void renames(Map<String, Entry> old, Map<String, Entry> now) {
        List<String> gone = new ArrayList<>();
        for (String k : old.keySet()) {
            if (k.startsWith("drive ") && !now.containsKey(k)) {
                gone.add(k);
            }
        }
        for (String k : gone) {
            String best = null;
            double most = 0.5;
            for (String n : now.keySet()) {
                if (n.startsWith("drive ") && !old.containsKey(n)) {
                    double s = alike(
                            lines((Entry.Drive) req(old, k), combined), lines((Entry.Drive) req(now, n), combined));
                    if (s > most) {
                        most = s;
                        best = n;
                    }
                }
            }
            if (best != null) {
                Entry e = req(old, k);
                old.remove(k);
                old.put(best, e);
                formerNames.put(best.substring(6), k.substring(6));
            }
        }
    }

    private static Entry req(Map<String, Entry> m, String k) {
        return java.util.Objects.requireNonNull(m.get(k));
    }

    private static List<String> lines(Entry.Drive d, String text) {
        List<String> out = new ArrayList<>();
        for (String l : text.substring(d.span().start(), Math.min(d.span().end(), text.length()))
                .split("\n", -1)) {
            String s = Words.squeezed(l);
            if (!s.isEmpty()) {
                out.add(s);
            }
        }
        return out;
    }

    /** Share of lines in common, 0 to 1. */
    public static double alike(List<String> a, List<String> b) {
        Map<String, Integer> count = new HashMap<>();
        for (String s : a) {
            count.merge(s, 1, Integer::sum);
        }
        int common = 0;
        for (String s : b) {
            Integer c = count.get(s);
            if (c != null && c > 0) {
                common++;
                count.put(s, c - 1);
            }
        }
        return a.size() + b.size() == 0 ? 0 : 2.0 * common / (a.size() + b.size());
    }

    // ---- edits

    private Part matched(@Nullable String drive, String path, Entry b, Entry a) {
        if (b.getClass() == a.getClass() && hasBody(a) && hasBody(b)) {
            String inDrive = a instanceof Entry.Drive d
                    ? d.name().text()
                    : a instanceof Entry.Variant v ? v.name().text() : drive;
            String inside = a instanceof Entry.Drive || a instanceof Entry.Variant ? "" : join(path, label(a));
            int head = -1;
            String ob = head(b, combined);
            String nb = head(a, combined);
            if (!ob.equals(nb)) {
                head = edit(Edit.Kind.STRUCTURE, inDrive, join(path, label(a)), ob, nb, a.span(), null, null);
            } else if (!title(b).equals(title(a))) {
                edit(Edit.Kind.RECORD, inDrive, join(inside, "title"), title(b), title(a), a.span(), null, null);
            }
            return new Nested(head, b, a, body(inDrive, inside, bodyOf(b), bodyOf(a), false));
        }
        String was = Words.of(combined, b);
        String is = Words.of(combined, a);
        if (was.equals(is)) {
            return new Same(a);
        }
        return changed(drive, path, b, a, was, is);
    }

    private Part changed(@Nullable String drive, String path, Entry b, Entry a, String was, String is) {
        String name = join(path, label(a));
        Expr from = value(b);
        Expr to = value(a);
        String vb = from == null ? was : Words.of(combined, from);
        String va = to == null ? is : Words.of(combined, to);
        Edit.Kind kind = kindOf(a);
        Expr.Num nf = null;
        Expr.Num nt = null;
        if (from != null && to != null) {
            boolean words = (from instanceof Expr.Str || from instanceof Expr.Dated)
                    && (to instanceof Expr.Str || to instanceof Expr.Dated);
            boolean sameSense =
                    !(a instanceof Entry.Requirement ra && b instanceof Entry.Requirement rb) || ra.cmp() == rb.cmp();
            if (words || (vb.equals(va) && sameSense && kind == Edit.Kind.VALUE && sameAssumption(b, a))) {
                // the value stands; its source or reason is another
                kind = Edit.Kind.RECORD;
                vb = words ? vb : notes(b, combined);
                va = words ? va : notes(a, combined);
            } else if (from instanceof Expr.Num x && to instanceof Expr.Num y && sameSense) {
                Unit ux = unit(x);
                Unit uy = unit(y);
                boolean comparable = (x.unit() == null && y.unit() == null)
                        || (ux != null && uy != null && ux.dimension() == uy.dimension());
                if (comparable) {
                    nf = x;
                    nt = y;
                    if (kind == Edit.Kind.VALUE && ux != null && uy != null && sameWritten(x, ux, y, uy)) {
                        kind = Edit.Kind.UNIT;
                    }
                }
            }
            if (kind == Edit.Kind.VALUE && !sameAssumption(b, a)) {
                vb = vb + suffix(b, combined);
                va = va + suffix(a, combined);
            }
        }
        if (a instanceof Entry.Requirement || a instanceof Entry.Accept || a instanceof Entry.Require) {
            vb = was.substring(Math.min(was.length(), pathText(b).length())).strip();
            va = is.substring(Math.min(is.length(), pathText(a).length())).strip();
        }
        int id = edit(kind, drive, name, vb, va, a.span(), nf, nt);
        return new Choice(id, b, a);
    }

    private static boolean sameAssumption(Entry b, Entry a) {
        return assumed(b) == assumed(a);
    }

    static boolean assumed(Entry e) {
        for (Note n : notesOf(e)) {
            if (n instanceof Note.Assumed) {
                return true;
            }
        }
        return false;
    }

    private static String suffix(Entry e, String text) {
        String n = notes(e, text);
        return n.isEmpty() ? "" : " " + n;
    }

    private static String notes(Entry e, String text) {
        return Words.of(text, notesOf(e));
    }

    private static List<Note> notesOf(Entry e) {
        if (e instanceof Entry.Fact f) {
            return f.notes();
        } else if (e instanceof Entry.Let l) {
            return l.notes();
        } else if (e instanceof Entry.Override o) {
            return o.notes();
        }
        return List.of();
    }

    /** Whether the new number is the old one in another unit, to half of its last digit. */
    private static boolean sameWritten(Expr.Num x, Unit ux, Expr.Num y, Unit uy) {
        if (ux.text().equals(uy.text())) {
            return false;
        }
        double was = ux.toBase(x.value());
        double is = uy.toBase(y.value());
        double half = Math.abs(uy.toBase(y.value() + lastDigit(y.text()) / 2) - is);
        double halfOld = Math.abs(ux.toBase(x.value() + lastDigit(x.text()) / 2) - was);
        // the coarser of the two must not hide a change: half a digit of either, at most 0.1 %
        return Math.abs(was - is)
                <= Math.min(Math.max(half, Math.min(halfOld, half * 10)) * 1.000001, 1e-3 * Math.abs(was));
    }

    private static double lastDigit(String number) {
        String s = number.toLowerCase(java.util.Locale.ROOT);
        int e = s.indexOf('e');
        double scale = 1;
        if (e >= 0) {
            try {
                scale = Math.pow(10, Integer.parseInt(s.substring(e + 1)));
            } catch (NumberFormatException wrong) {
                return 0;
            }
            s = s.substring(0, e);
        }
        int dot = s.indexOf('.');
        return scale * (dot < 0 ? 1 : Math.pow(10, -(s.length() - dot - 1)));
    }

    private static @Nullable Unit unit(Expr.Num n) {
        if (n.unit() == null) {
            return null;
        }
        return Units.standard().parse(n.unit().text()) instanceof Units.Parse.Ok ok ? ok.unit() : null;
    }

    private Part added(@Nullable String drive, String path, Entry e) {
        int id = edit(
                whole(e, Edit.Kind.ADDED),
                driveOf(drive, e),
                join(path, label(e)),
                null,
                summary(e, combined),
                e.span(),
                null,
                null);
        return new Choice(id, null, e);
    }

    private Part removed(@Nullable String drive, String path, Entry e) {
        int id = edit(
                whole(e, Edit.Kind.REMOVED),
                driveOf(drive, e),
                join(path, label(e)),
                summary(e, combined),
                null,
                Span.NONE,
                null,
                null);
        return new Choice(id, e, null);
    }

    private static @Nullable String driveOf(@Nullable String drive, Entry e) {
        if (e instanceof Entry.Drive d) {
            return d.name().text();
        } else if (e instanceof Entry.Variant v) {
            return v.name().text();
        } else if (e instanceof Entry.Family f) {
            return f.name().text();
        }
        return drive;
    }

    private static Edit.Kind whole(Entry e, Edit.Kind otherwise) {
        Edit.Kind k = kindOf(e);
        if (k != Edit.Kind.VALUE && k != Edit.Kind.STRUCTURE) {
            return k;
        }
        Expr v = value(e);
        return v instanceof Expr.Str || v instanceof Expr.Dated ? Edit.Kind.RECORD : otherwise;
    }

    private static Edit.Kind kindOf(Entry e) {
        if (e instanceof Entry.Requirement || e instanceof Entry.Require || e instanceof Entry.Assert) {
            return Edit.Kind.REQUIREMENT;
        } else if (e instanceof Entry.Accept) {
            return Edit.Kind.ACCEPTANCE;
        } else if (e instanceof Entry.Waive) {
            return Edit.Kind.WAIVER;
        } else if (e instanceof Entry.Override) {
            return Edit.Kind.OVERRIDE;
        } else if (e instanceof Entry.UseReading) {
            return Edit.Kind.READING;
        } else if (e instanceof Entry.Fact || e instanceof Entry.Let || e instanceof Entry.FactFor) {
            return Edit.Kind.VALUE;
        } else if (e instanceof Entry.Source || e instanceof Entry.Example) {
            return Edit.Kind.RECORD;
        }
        return Edit.Kind.STRUCTURE;
    }

    private int edit(
            Edit.Kind kind,
            @Nullable String drive,
            String path,
            @Nullable String before,
            @Nullable String after,
            Span span,
            Expr.@Nullable Num from,
            Expr.@Nullable Num to) {
        int id = edits.size();
        edits.add(new Edit(id, kind, file, drive, path, before, after, span, from, to));
        return id;
    }

    // ---- parts of entries

    private static String join(String path, String name) {
        return path.isEmpty() ? name : name.isEmpty() ? path : path + "." + name;
    }

    private static @Nullable Expr value(Entry e) {
        if (e instanceof Entry.Fact f) {
            return f.value();
        } else if (e instanceof Entry.Let l) {
            return l.value();
        } else if (e instanceof Entry.FactFor f) {
            return f.value();
        } else if (e instanceof Entry.Override o) {
            return o.value();
        } else if (e instanceof Entry.Requirement r) {
            return r.bound();
        } else if (e instanceof Entry.Accept a) {
            return a.bound();
        }
        return null;
    }

    private String pathText(Entry e) {
        if (e instanceof Entry.Requirement r) {
            return r.path().text();
        } else if (e instanceof Entry.Accept a) {
            return "accept " + a.path().text();
        } else if (e instanceof Entry.Require r) {
            return "require " + Words.of(combined, r.subject());
        }
        return "";
    }

    private String label(Entry e) {
        if (e instanceof Entry.Fact f) {
            return f.path().text();
        } else if (e instanceof Entry.Block b) {
            return b.name() == null || b.name().isHole()
                    ? b.head().text()
                    : b.name().text();
        } else if (e instanceof Entry.Drive d) {
            return d.name().text();
        } else if (e instanceof Entry.Variant v) {
            return v.name().text();
        } else if (e instanceof Entry.Family f) {
            return f.name().text();
        } else if (e instanceof Entry.Rate r) {
            return r.mesh().text() + "." + rateName(r);
        } else if (e instanceof Entry.Requirement r) {
            return r.path().text();
        } else if (e instanceof Entry.Accept a) {
            return a.path().text();
        } else if (e instanceof Entry.Waive w) {
            return w.path().text();
        } else if (e instanceof Entry.Override o) {
            return o.path().text();
        } else if (e instanceof Entry.UseReading u) {
            return "reading of " + u.target().text();
        } else if (e instanceof Entry.Let l) {
            return l.name().text();
        } else if (e instanceof Entry.Use u) {
            return "use \"" + u.path() + "\"";
        } else if (e instanceof Entry.FactFor f) {
            return f.name().text() + " for " + f.target().text();
        } else if (e instanceof Entry.Require r) {
            return Words.of(combined, r.subject());
        } else if (e instanceof Entry.Assert) {
            return "assert";
        } else if (e instanceof Entry.Declaration d) {
            return d.name().text();
        } else if (e instanceof Entry.Method m) {
            return m.name().text();
        } else if (e instanceof Entry.Chapter c) {
            return c.name().text();
        } else if (e instanceof Entry.Kind k) {
            return k.name().text();
        } else if (e instanceof Entry.Table t) {
            return t.name().text();
        } else if (e instanceof Entry.Function f) {
            return f.name().text();
        }
        return e.getClass().getSimpleName().toLowerCase(java.util.Locale.ROOT);
    }

    private String summary(Entry e, String text) {
        Expr v = value(e);
        if (v != null && (e instanceof Entry.Fact || e instanceof Entry.Let || e instanceof Entry.Override)) {
            return Words.of(text, v);
        }
        if (hasBody(e) || e instanceof Entry.Family) {
            return head(e, text);
        }
        String all = Words.of(text, e);
        return all.length() > 120 ? all.substring(0, 119) + "…" : all;
    }

    private static boolean hasBody(Entry e) {
        return e instanceof Entry.Drive
                || e instanceof Entry.Variant
                || e instanceof Entry.Rate
                || (e instanceof Entry.Block b && b.body() != null)
                || e instanceof Entry.Method
                || e instanceof Entry.Chapter
                || e instanceof Entry.Kind;
    }

    private static List<Entry> bodyOf(Entry e) {
        if (e instanceof Entry.Drive d) {
            return d.body();
        } else if (e instanceof Entry.Variant v) {
            return v.body();
        } else if (e instanceof Entry.Rate r) {
            return r.body();
        } else if (e instanceof Entry.Block b && b.body() != null) {
            return b.body();
        } else if (e instanceof Entry.Method m) {
            return m.body();
        } else if (e instanceof Entry.Chapter c) {
            return c.body();
        } else if (e instanceof Entry.Kind k) {
            return k.body();
        }
        return List.of();
    }

    /** The head of a block without its title; what is inside comes apart. A drive's own name does not count. */
    private String head(Entry e, String text) {
        if (e instanceof Entry.Drive) {
            return "drive";
        } else if (e instanceof Entry.Variant v) {
            return "variant of " + present(v.base().text());
        } else if (e instanceof Entry.Family f) {
            return "family of " + present(f.base().text());
        } else if (e instanceof Entry.Block b) {
            return b.head().text() + named(" ", b.name()) + named(" on ", b.on());
        } else if (e instanceof Entry.Rate r) {
            return "rate " + r.mesh().text() + " by " + r.method().text()
                    + (r.edition() == null ? "" : " edition " + r.edition().text()) + named(" as ", r.as())
                    + named(" under ", r.under());
        }
        int brace = Words.of(text, e).indexOf('{');
        String all = Words.of(text, e);
        return brace < 0 ? all : all.substring(0, brace).strip();
    }

    /** The present name of a drive that was renamed. */
    private String present(String former) {
        for (Map.Entry<String, String> e : formerNames.entrySet()) {
            if (e.getValue().equals(former)) {
                return e.getKey();
            }
        }
        return former;
    }

    private static String named(String word, @Nullable Name n) {
        return n == null || n.isHole() ? "" : word + n.text();
    }

    private static String title(Entry e) {
        String t = e instanceof Entry.Drive d
                ? d.title()
                : e instanceof Entry.Variant v ? v.title() : e instanceof Entry.Block b ? b.title() : null;
        return t == null ? "" : t;
    }

    private static Entry with(Entry head, List<Entry> body) {
        if (head instanceof Entry.Drive d) {
            return new Entry.Drive(d.name(), d.title(), body, d.span());
        } else if (head instanceof Entry.Variant v) {
            return new Entry.Variant(v.name(), v.base(), v.title(), body, v.span());
        } else if (head instanceof Entry.Rate r) {
            return new Entry.Rate(r.mesh(), r.method(), r.edition(), r.as(), r.under(), body, r.span());
        } else if (head instanceof Entry.Block b) {
            return new Entry.Block(b.head(), b.name(), b.on(), b.title(), body, b.span());
        } else if (head instanceof Entry.Method m) {
            return new Entry.Method(m.name(), m.kind(), m.meaning(), body, m.span());
        } else if (head instanceof Entry.Chapter c) {
            return new Entry.Chapter(c.name(), c.kind(), c.meaning(), body, c.span());
        } else if (head instanceof Entry.Kind k) {
            return new Entry.Kind(k.name(), k.parent(), k.meaning(), body, k.span());
        }
        return head;
    }

    /** Every edit's new text has this file's name; for messages. */
    public FileId file() {
        return file;
    }
}
