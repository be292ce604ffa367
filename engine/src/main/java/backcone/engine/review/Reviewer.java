package backcone.engine.review;

import backcone.engine.answers.DriveAnswer;
import backcone.engine.eval.Run;
import backcone.engine.graph.DriveGraph;
import backcone.engine.graph.Element;
import backcone.engine.graph.RequirementUse;
import backcone.engine.graph.Slot;
import backcone.engine.graph.Val;
import backcone.engine.model.Decl;
import backcone.engine.model.TableDef;
import backcone.engine.syntax.Entry;
import backcone.engine.syntax.Note;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import backcone.engine.units.Unit;
import backcone.engine.units.Units;
import java.nio.charset.StandardCharsets;
import java.security.MessageDigest;
import java.security.NoSuchAlgorithmException;
import java.util.ArrayList;
import java.util.HashSet;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Set;
import java.util.TreeSet;
import java.util.concurrent.ConcurrentHashMap;
import java.util.function.Function;
import java.util.function.Supplier;
import org.jspecify.annotations.Nullable;

/** Gathers from the graphs of a drive what a reviewer looks at. */
public final class Reviewer {
    private record Place(FileId file, Span at) {}

    private static final Map<Place, String> KNOWN = new ConcurrentHashMap<>();

    private Reviewer() {}

    /** {@code texts} gives the text of a handbook or library file, null where there is none. */
    public static DriveReview review(
            DriveAnswer answer, List<DriveGraph> graphs, Function<FileId, @Nullable String> texts) {
        Map<String, ReviewFact> facts = new LinkedHashMap<>();
        Map<String, ReviewFact> allowables = new LinkedHashMap<>();
        List<String> ratings = new ArrayList<>();
        TreeSet<String> used = new TreeSet<>();
        for (DriveGraph g : graphs) {
            used(g, texts, used);
            for (DriveGraph.RateUse r : g.rates()) {
                ratings.add(rating(r));
            }
            Map<String, Slot> wanted = new LinkedHashMap<>();
            facts(g, wanted);
            Map<String, Slot> stresses = allowables(g);
            List<Slot> all = new ArrayList<>(wanted.values());
            all.addAll(stresses.values());
            g.demand(all);
            Run run = new Run(g);
            wanted.forEach((path, s) -> put(facts, path, s, run));
            stresses.forEach((path, s) -> put(allowables, path, s, run));
        }
        return new DriveReview(
                answer,
                List.copyOf(ratings),
                hash(used),
                List.copyOf(facts.values()),
                List.copyOf(allowables.values()));
    }

    private static void facts(DriveGraph g, Map<String, Slot> out) {
        for (ReviewWords.Named n : ReviewWords.standard().facts) {
            for (Element e : List.copyOf(g.elements())) {
                if (!e.isSpace() && !e.path().isEmpty() && g.shapes().library().isKind(e.kind(), n.kind())) {
                    String path = e.path() + "." + n.name();
                    Slot s = g.find(path);
                    if (s != null) {
                        out.putIfAbsent(path, s);
                    }
                }
            }
        }
    }

    private static Map<String, Slot> allowables(DriveGraph g) {
        Map<String, Slot> out = new LinkedHashMap<>();
        for (DriveGraph.RateUse r : g.rates()) {
            for (ReviewWords.Named n : ReviewWords.standard().allowables) {
                if (r.space() != null && r.syntax().method().text().equals(n.kind())) {
                    String path = r.id() + "." + n.name();
                    Slot s = g.find(path);
                    if (s == null) {
                        path = r.mesh().path() + "." + n.name();
                        s = g.find(path);
                    }
                    if (s != null) {
                        out.putIfAbsent(path, s);
                    }
                }
            }
        }
        return out;
    }

    private static void put(Map<String, ReviewFact> out, String path, Slot s, Run run) {
        double v = run.at(s.register());
        if (Double.isNaN(v)) {
            return;
        }
        Unit u = run.graph.shownUnit(s);
        if (u != null && isUs(run.graph)) {
            u = Units.standard().parse(ReviewWords.standard().us(u.text())) instanceof Units.Parse.Ok ok
                    ? ok.unit()
                    : u;
        }
        out.putIfAbsent(
                path,
                new ReviewFact(
                        path,
                        s.decl.meaning == null ? s.decl.name : s.decl.meaning,
                        u == null ? v : u.fromBase(v),
                        u == null || u.text().equals("1") ? "" : u.text()));
    }

    private static boolean isUs(DriveGraph g) {
        Slot s = g.find("units");
        return s != null && s.value() instanceof Val.Word w && w.text().equals("us_customary");
    }

    private static String rating(DriveGraph.RateUse r) {
        Entry.Rate s = r.syntax();
        return r.id() + " by " + s.method().text()
                + (s.edition() == null ? "" : " edition " + s.edition().text())
                + (s.under() == null || s.under().isHole()
                        ? ""
                        : " under " + s.under().text());
    }

    // ---- equations in use

    private static void used(DriveGraph g, Function<FileId, @Nullable String> texts, TreeSet<String> out) {
        Set<Decl> decls = new HashSet<>();
        for (int r = 0; r < g.tape().size(); r++) {
            Slot s = g.ownerOf(r);
            if (s != null && s.factSpan() == null) {
                decls.add(s.decl);
            }
        }
        for (RequirementUse u : g.requirements()) {
            if (u.slot != null) {
                decls.add(u.slot.decl);
            }
        }
        for (Decl d : decls) {
            if (d.value != null) {
                add(d.span, d.file, () -> equation(d, texts), out);
            }
        }
        for (TableDef t : g.usedTables()) {
            add(t.syntax.span(), t.file, () -> table(t, texts), out);
        }
    }

    /** What stands in the handbook is the same for every drive, so it is spelled out once. */
    private static void add(Span at, FileId file, Supplier<String> words, TreeSet<String> out) {
        String s = file.isHandbook() ? KNOWN.computeIfAbsent(new Place(file, at), k -> words.get()) : words.get();
        if (!s.isEmpty()) {
            out.add(s);
        }
    }

    private static String equation(Decl d, Function<FileId, @Nullable String> texts) {
        String text = texts.apply(d.file);
        if (text == null || d.value == null) {
            return "";
        }
        StringBuilder b = new StringBuilder(d.toString()).append(' ').append(Words.of(text, d.value));
        for (Note n : d.notes) {
            if (n instanceof Note.Taking) {
                b.append(' ').append(Words.of(text, n));
            } else if (n instanceof Note.Reading r) {
                b.append(' ').append(r.name()).append(' ').append(Words.of(text, r.value()));
            }
        }
        return b.toString();
    }

    private static String table(TableDef t, Function<FileId, @Nullable String> texts) {
        String text = texts.apply(t.file);
        if (text == null) {
            return "";
        }
        StringBuilder b = new StringBuilder(t.owner).append(' ').append(t.name());
        for (Entry.Row r : t.syntax.rows()) {
            b.append('\n').append(Words.of(text, r));
        }
        return b.append(t.between).append(t.below).append(t.above).toString();
    }

    private static String hash(TreeSet<String> used) {
        try {
            MessageDigest d = MessageDigest.getInstance("SHA-256");
            for (String s : used) {
                d.update(s.getBytes(StandardCharsets.UTF_8));
                d.update((byte) 0);
            }
            StringBuilder b = new StringBuilder();
            byte[] bytes = d.digest();
            for (int i = 0; i < 6; i++) {
                b.append(Character.forDigit(bytes[i] >> 4 & 15, 16)).append(Character.forDigit(bytes[i] & 15, 16));
            }
            return b.toString();
        } catch (NoSuchAlgorithmException e) {
            throw new IllegalStateException("every Java has SHA-256", e);
        }
    }
}
