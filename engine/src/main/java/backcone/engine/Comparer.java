package backcone.engine;

import backcone.engine.answers.DriveAnswer;
import backcone.engine.answers.DriveResults;
import backcone.engine.answers.RequirementAnswer;
import backcone.engine.answers.State;
import backcone.engine.diagnostics.Code;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.diagnostics.Severity;
import backcone.engine.eval.Run;
import backcone.engine.graph.DriveBuilder;
import backcone.engine.graph.DriveGraph;
import backcone.engine.graph.DriveSource;
import backcone.engine.graph.Problems;
import backcone.engine.graph.Shapes;
import backcone.engine.parse.Parser;
import backcone.engine.review.Attribution;
import backcone.engine.review.Bars;
import backcone.engine.review.Comparison;
import backcone.engine.review.Comparison.DriveChange;
import backcone.engine.review.Comparison.Fate;
import backcone.engine.review.DriveReview;
import backcone.engine.review.Edit;
import backcone.engine.review.Groups;
import backcone.engine.review.TreeDiff;
import backcone.engine.syntax.Expr;
import backcone.engine.syntax.FileSyntax;
import backcone.engine.text.FileId;
import backcone.engine.units.Unit;
import java.time.LocalDate;
import java.util.ArrayList;
import java.util.BitSet;
import java.util.EnumSet;
import java.util.HashMap;
import java.util.HashSet;
import java.util.IdentityHashMap;
import java.util.LinkedHashMap;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;
import org.jspecify.annotations.Nullable;

/**
 * Two states of one spec: its edits, and every mixture of them on demand. A mixture is analysed by the same engine as any spec.
 * Edits of a number are inputs of one tape; the others build graphs of their own.
 */
final class Comparer {
    private static final int KEPT = 40;
    private final FileId file;
    private final LocalDate today;
    private final @Nullable FileAnalysis was;
    private final @Nullable FileAnalysis is;
    private final BackconeEngine before;
    private final BackconeEngine after;
    private final List<Edit> edits = new ArrayList<>();
    private final Map<FileId, TreeDiff> diffs = new LinkedHashMap<>();
    private final Map<FileId, String> combined = new HashMap<>();
    private final Map<String, String> formerNames = new HashMap<>();
    private final BitSet numeric = new BitSet();
    private final Map<Expr, Edit> literals = new IdentityHashMap<>();
    private final Map<BitSet, Base> bases = new LinkedHashMap<>(64, 0.75f, true) {
        @Override
        protected boolean removeEldestEntry(Map.Entry<BitSet, Base> eldest) {
            return size() > KEPT;
        }
    };

    /** A mixture of what is no number: its drives and the graphs built so far. */
    private record Base(
            Sources sources,
            Shapes shapes,
            Map<String, DriveSource> drives,
            Map<String, List<DriveGraph>> graphs,
            Map<String, List<Diagnostic>> problems,
            List<Diagnostic> own) {}

    /** What one mixture gives for a drive; {@code fault} is null where it has a meaning. */
    private record Outcome(
            Map<String, RequirementAnswer> requirements,
            @Nullable String fault) {}

    private Comparer(
            BackconeEngine before,
            @Nullable FileId oldFile,
            BackconeEngine after,
            @Nullable FileId newFile,
            LocalDate today) {
        this.before = before;
        this.after = after;
        this.today = today;
        this.was = oldFile == null ? null : (FileAnalysis) before.analyse(oldFile);
        this.is = newFile == null ? null : (FileAnalysis) after.analyse(newFile);
        this.file = newFile != null ? newFile : java.util.Objects.requireNonNull(oldFile);
    }

    static Comparison compare(
            BackconeEngine before,
            @Nullable FileId oldFile,
            BackconeEngine after,
            @Nullable FileId newFile,
            LocalDate today) {
        return new Comparer(before, oldFile, after, newFile, today).comparison(oldFile, newFile);
    }

    private Comparison comparison(@Nullable FileId oldFile, @Nullable FileId newFile) {
        List<String> remarks = new ArrayList<>();
        FileAnalysis w = was;
        FileAnalysis i = is;
        unread(w, "before", remarks);
        unread(i, "now", remarks);
        diff(w, i);
        List<DriveChange> drives = new ArrayList<>();
        Map<String, DriveAnswer> old = byName(w);
        Map<String, DriveAnswer> now = byName(i);
        Map<String, DriveReview> oldFacts = reviews(w);
        Map<String, DriveReview> newFacts = reviews(i);
        Set<String> followed = new HashSet<>();
        for (DriveAnswer d : now.values()) {
            String former = former(d.name());
            DriveAnswer o = old.get(former);
            if (o == null) {
                drives.add(alone(d, Fate.ADDED));
            } else {
                followed.add(former);
                drives.add(change(o, d, former, req(oldFacts, former), req(newFacts, d.name())));
            }
        }
        for (DriveAnswer o : old.values()) {
            if (!followed.contains(o.name())) {
                drives.add(alone(o, Fate.REMOVED));
            }
        }
        return new Comparison(oldFile, newFile, List.copyOf(edits), drives, remarks);
    }

    private static DriveReview req(Map<String, DriveReview> m, String name) {
        return java.util.Objects.requireNonNull(m.get(name));
    }

    private static Map<String, DriveAnswer> byName(@Nullable FileAnalysis a) {
        Map<String, DriveAnswer> out = new LinkedHashMap<>();
        if (a != null) {
            a.drives().forEach(d -> out.put(d.name(), d));
        }
        return out;
    }

    private static Map<String, DriveReview> reviews(@Nullable FileAnalysis a) {
        Map<String, DriveReview> out = new LinkedHashMap<>();
        if (a != null) {
            a.reviews().forEach(d -> out.put(d.answer().name(), d));
        }
        return out;
    }

    private static void unread(@Nullable FileAnalysis a, String when, List<String> remarks) {
        if (a == null) {
            return;
        }
        int n = 0;
        Diagnostic first = null;
        for (Diagnostic d : a.diagnostics()) {
            if (d.severity() == Severity.ERROR && !States.says(d.code())) {
                n++;
                first = first == null ? d : first;
            }
        }
        if (first != null) {
            remarks.add("The text " + (when.equals("now") ? "as it is now" : "as it was") + " has " + n
                    + (n == 1 ? " error" : " errors") + "; compared is what can be read. The first: "
                    + first.message());
        }
    }

    /** The former name of a drive, its own where it was not renamed; rows of a family follow their family. */
    private String former(String name) {
        String f = formerNames.get(name);
        return f == null ? name : f;
    }

    // ---- edits

    private void diff(@Nullable FileAnalysis w, @Nullable FileAnalysis i) {
        Map<FileId, SourceText> old = w == null ? Map.of() : w.texts();
        Map<FileId, SourceText> now = i == null ? Map.of() : i.texts();
        Set<FileId> all = new LinkedHashSet<>();
        all.add(file);
        all.addAll(now.keySet());
        for (FileId f : old.keySet()) {
            if (w == null || !f.equals(w.file())) {
                all.add(f);
            }
        }
        for (FileId f : all) {
            SourceText o = f.equals(file) && w != null ? old.get(w.file()) : old.get(f);
            SourceText n = now.get(f);
            String oldText = o == null ? "" : o.text();
            String newText = n == null ? "" : n.text();
            if (f.equals(file) && oldText.equals(newText) && n != null) {
                combined.put(f, newText);
                diffs.put(f, TreeDiff.of(f, n.tree(), n.tree(), newText, edits));
                continue;
            }
            if (oldText.equals(newText)) {
                continue;
            }
            // the old text stands behind the new one, so that every entry keeps a place of its own
            String both = newText + "\n" + oldText;
            FileSyntax ot = Parser.parse(f, " ".repeat(newText.length()) + "\n" + oldText)
                    .tree();
            FileSyntax nt = n == null ? BackconeEngine.empty() : n.tree();
            combined.put(f, both);
            TreeDiff d = TreeDiff.of(f, ot, nt, both, edits);
            diffs.put(f, d);
            formerNames.putAll(d.formerNames());
        }
        for (Edit e : edits) {
            if (e.from() != null
                    && e.to() != null
                    && (e.kind() == Edit.Kind.VALUE
                            || e.kind() == Edit.Kind.UNIT
                            || e.kind() == Edit.Kind.REQUIREMENT)) {
                numeric.set(e.id());
                literals.put(e.to(), e);
            }
        }
    }

    /** The edits that can reach a drive: its own, those of what it is built on, and those of names it uses. */
    private List<Edit> concerning(String name) {
        Set<String> layers = new LinkedHashSet<>();
        collectLayers(is, name, layers);
        collectLayers(was, former(name), layers);
        layers.add(name);
        int dot = name.indexOf('.');
        if (dot > 0) {
            layers.add(name.substring(0, dot));
        }
        Set<String> words = new HashSet<>();
        for (String l : layers) {
            words.addAll(wordsOf(is, l));
            words.addAll(wordsOf(was, former(l)));
        }
        List<Edit> out = new ArrayList<>();
        List<Edit> loose = new ArrayList<>();
        for (Edit e : edits) {
            String d = e.drive();
            if (d == null) {
                loose.add(e);
            } else if (layers.contains(d)) {
                out.add(e);
            }
        }
        Set<Edit> taken = new HashSet<>();
        boolean more = true;
        while (more) {
            more = false;
            for (Edit e : loose) {
                String root = e.path().indexOf('.') < 0
                        ? e.path()
                        : e.path().substring(0, e.path().indexOf('.'));
                if (!taken.contains(e)
                        && (e.file().isMethodFile() || e.path().startsWith("use ") || words.contains(root))) {
                    taken.add(e);
                    more |= words.addAll(tokens(e.after()));
                    more |= words.addAll(tokens(e.before()));
                }
            }
        }
        for (Edit e : loose) {
            if (taken.contains(e)) {
                out.add(e);
            }
        }
        return out;
    }

    private static void collectLayers(@Nullable FileAnalysis a, String name, Set<String> out) {
        if (a != null) {
            out.addAll(a.layersOf(name));
        }
    }

    private static Set<String> wordsOf(@Nullable FileAnalysis a, String name) {
        return a == null ? Set.of() : tokens(a.textOfDrive(name));
    }

    private static Set<String> tokens(@Nullable String text) {
        Set<String> out = new HashSet<>();
        if (text == null) {
            return out;
        }
        int i = 0;
        while (i < text.length()) {
            if (Character.isJavaIdentifierStart(text.charAt(i))) {
                int j = i;
                while (j < text.length() && Character.isJavaIdentifierPart(text.charAt(j))) {
                    j++;
                }
                out.add(text.substring(i, j));
                i = j;
            } else {
                i++;
            }
        }
        return out;
    }

    // ---- one drive

    private DriveChange alone(DriveAnswer d, Fate fate) {
        List<Comparison.StateChange> states = new ArrayList<>();
        for (RequirementAnswer r : d.requirements()) {
            states.add(
                    fate == Fate.ADDED
                            ? new Comparison.StateChange(r.id(), null, r.state(), null, r)
                            : new Comparison.StateChange(r.id(), r.state(), null, r, null));
        }
        List<Integer> mine = new ArrayList<>();
        for (Edit e : edits) {
            if (d.name().equals(e.drive())) {
                mine.add(e.id());
            }
        }
        return new DriveChange(
                d.name(), null, fate, mine, List.of(), states, List.of(), List.of(), List.of(), List.of());
    }

    private DriveChange change(
            DriveAnswer o, DriveAnswer d, String former, DriveReview oldFacts, DriveReview newFacts) {
        List<Edit> mine = concerning(d.name());
        Map<String, RequirementAnswer> w = ids(o);
        Map<String, RequirementAnswer> n = ids(d);
        List<Comparison.StateChange> states = new ArrayList<>();
        for (RequirementAnswer r : d.requirements()) {
            RequirementAnswer x = w.get(r.id());
            if (x == null || x.state() != r.state()) {
                states.add(new Comparison.StateChange(r.id(), x == null ? null : x.state(), r.state(), x, r));
            }
        }
        for (RequirementAnswer x : o.requirements()) {
            if (!n.containsKey(x.id())) {
                states.add(new Comparison.StateChange(x.id(), x.state(), null, x, null));
            }
        }
        List<String> moved = new ArrayList<>();
        for (RequirementAnswer r : d.requirements()) {
            RequirementAnswer x = w.get(r.id());
            if (x != null && moved(x.margin(), r.margin())) {
                moved.add(r.id());
            }
        }
        List<Comparison.Together> together = new ArrayList<>();
        List<String> remarks = new ArrayList<>();
        List<Comparison.Move> moves =
                moved.isEmpty() ? List.of() : moves(d.name(), mine, moved, w, n, together, remarks);
        List<Comparison.FactChange> facts = Bars.facts(oldFacts.facts(), newFacts.facts());
        List<Comparison.Lowered> lowered = Bars.lowered(mine, w, n);
        String approval = Bars.approval(mine, newFacts.answer().name(), approved(d));
        if (approval != null) {
            remarks.add(approval);
        }
        boolean same = mine.isEmpty() && states.isEmpty() && moves.isEmpty() && facts.isEmpty() && lowered.isEmpty();
        List<Integer> ids = new ArrayList<>();
        mine.forEach(e -> ids.add(e.id()));
        return new DriveChange(
                d.name(),
                former.equals(d.name()) ? null : former,
                same && former.equals(d.name()) ? Fate.SAME : Fate.CHANGED,
                ids,
                lowered,
                states,
                facts,
                moves,
                together,
                remarks);
    }

    private @Nullable String approved(DriveAnswer d) {
        return is == null ? null : is.factText(d.name(), "approved");
    }

    private static boolean moved(double a, double b) {
        return Double.isFinite(a) && Double.isFinite(b) && Math.abs(a - b) > 1e-9 * Math.max(1, Math.abs(a));
    }

    private static Map<String, RequirementAnswer> ids(DriveAnswer d) {
        Map<String, RequirementAnswer> out = new LinkedHashMap<>();
        d.requirements().forEach(r -> out.put(r.id(), r));
        return out;
    }

    // ---- shares

    private List<Comparison.Move> moves(
            String drive,
            List<Edit> mine,
            List<String> moved,
            Map<String, RequirementAnswer> w,
            Map<String, RequirementAnswer> n,
            List<Comparison.Together> together,
            List<String> remarks) {
        // whatever does not count, and the edits of other drives, is made in every mixture
        BitSet always = new BitSet();
        always.set(0, edits.size());
        List<BitSet> players = new ArrayList<>();
        List<Edit> counting = new ArrayList<>();
        for (Edit e : mine) {
            if (e.counts()) {
                always.clear(e.id());
                counting.add(e);
            }
        }
        // numbers first: neighbouring mixtures then share their graphs
        counting.sort(
                java.util.Comparator.comparing((Edit e) -> !numeric.get(e.id())).thenComparing(Edit::id));
        for (Edit e : counting) {
            BitSet b = new BitSet();
            b.set(e.id());
            players.add(b);
        }
        if (players.isEmpty()) {
            remarks.add("Margins moved without an edit of this drive or of anything it names.");
            return List.of();
        }
        Map<BitSet, Outcome> known = new HashMap<>();
        Groups.Mixture mixture = made -> {
            BitSet all = (BitSet) always.clone();
            all.or(made);
            Outcome x = known.computeIfAbsent(all, k -> outcome(drive, k, moved, w, n));
            return x.fault;
        };
        Groups.Result groups = Groups.of(players, edits, mixture, together);
        List<Comparison.Move> out = new ArrayList<>();
        for (String id : moved) {
            RequirementAnswer a = java.util.Objects.requireNonNull(w.get(id));
            RequirementAnswer b = java.util.Objects.requireNonNull(n.get(id));
            Attribution.Shares shares = Attribution.of(groups.players().size(), made -> {
                BitSet all = (BitSet) always.clone();
                for (int g = made.nextSetBit(0); g >= 0; g = made.nextSetBit(g + 1)) {
                    all.or(groups.players().get(g));
                }
                Outcome x = known.computeIfAbsent(all, k -> outcome(drive, k, moved, w, n));
                RequirementAnswer r = x.fault != null ? null : x.requirements.get(id);
                return r == null ? Double.NaN : r.margin();
            });
            List<Comparison.Share> list = new ArrayList<>();
            for (int g = 0; g < groups.players().size(); g++) {
                List<Integer> ids = new ArrayList<>();
                groups.players().get(g).stream().forEach(ids::add);
                double s = shares.share()[g];
                if (Math.abs(s) > 1e-12 || ids.size() == 1 && groups.players().size() == 1) {
                    list.add(new Comparison.Share(
                            ids, Groups.text(ids, edits), s, shares.error()[g], Bars.movesBarOnly(ids, edits)));
                }
            }
            list.sort(java.util.Comparator.comparingDouble((Comparison.Share s) -> -Math.abs(s.share())));
            out.add(new Comparison.Move(
                    id,
                    b.meaning(),
                    a.margin(),
                    b.margin(),
                    a.value(),
                    b.value(),
                    b.unit(),
                    a.state(),
                    b.state(),
                    list));
        }
        return out;
    }

    private Outcome outcome(
            String drive,
            BitSet made,
            List<String> moved,
            Map<String, RequirementAnswer> w,
            Map<String, RequirementAnswer> n) {
        BitSet structure = (BitSet) made.clone();
        structure.or(numeric);
        Base base = bases.get(structure);
        if (base == null) {
            base = build(structure);
            bases.put(structure, base);
        }
        DriveSource source = base.drives.get(drive);
        if (source == null) {
            return new Outcome(Map.of(), "the drive `" + drive + "` is not there");
        }
        List<DriveGraph> graphs = base.graphs.get(drive);
        if (graphs == null) {
            Problems p = new Problems();
            graphs = new ArrayList<>();
            for (String c : DriveBuilder.casesInUse(source)) {
                graphs.add(DriveBuilder.build(base.shapes, base.sources, source, c, p, false));
            }
            base.graphs.put(drive, graphs);
            List<Diagnostic> said = new ArrayList<>(base.own);
            said.addAll(p.all());
            base.problems.put(drive, said);
        }
        List<Run> runs = new ArrayList<>();
        for (DriveGraph g : graphs) {
            runs.add(new Run(g, inputs(g, made)));
        }
        Problems p = new Problems();
        DriveAnswer a = DriveResults.states(source, runs, today, p);
        List<Diagnostic> said = new ArrayList<>(java.util.Objects.requireNonNull(base.problems.get(drive)));
        said.addAll(p.all());
        Set<Code> usual = usualFaults();
        for (Diagnostic d : said) {
            if (d.severity() == Severity.ERROR && !States.says(d.code()) && !usual.contains(d.code())) {
                return new Outcome(Map.of(), d.message());
            }
        }
        Map<String, RequirementAnswer> answers = ids(a);
        for (String id : moved) {
            RequirementAnswer r = answers.get(id);
            if (r == null) {
                return new Outcome(Map.of(), "nothing is required of `" + id + "`");
            }
            if (Double.isNaN(r.margin())) {
                return new Outcome(Map.of(), "`" + id + "` is open" + (r.fault() == null ? "" : ": " + r.fault()));
            }
            if (r.state() == State.OUTSIDE
                    && java.util.Objects.requireNonNull(w.get(id)).state() != State.OUTSIDE
                    && java.util.Objects.requireNonNull(n.get(id)).state() != State.OUTSIDE) {
                return new Outcome(Map.of(), "`" + id + "` is outside the validity of its method");
            }
        }
        return new Outcome(answers, null);
    }

    /** Errors that stood before or stand now are no sign that a mixture has no meaning. */
    private Set<Code> usualFaults() {
        Set<Code> out = EnumSet.noneOf(Code.class);
        for (FileAnalysis a : new FileAnalysis[] {was, is}) {
            if (a != null) {
                a.diagnostics().forEach(d -> out.add(d.code()));
            }
        }
        return out;
    }

    private double[] inputs(DriveGraph g, BitSet made) {
        double[] v = g.inputValues();
        List<DriveGraph.Input> inputs = g.inputs();
        for (int k = 0; k < v.length; k++) {
            Expr.Num literal = inputs.get(k).literal();
            Edit e = literal == null ? null : literals.get(literal);
            if (e != null && !made.get(e.id())) {
                v[k] = base(java.util.Objects.requireNonNull(e.from()));
            }
        }
        return v;
    }

    private static double base(Expr.Num n) {
        if (n.unit() == null) {
            return n.value();
        }
        Unit u = backcone.engine.units.Units.standard().parse(n.unit().text())
                        instanceof backcone.engine.units.Units.Parse.Ok ok
                ? ok.unit()
                : null;
        return u == null ? Double.NaN : u.toBase(n.value());
    }

    private Base build(BitSet made) {
        Map<FileId, SourceText> mixed = new HashMap<>();
        diffs.forEach((f, d) -> mixed.put(
                f, new SourceText(f, java.util.Objects.requireNonNull(combined.get(f)), d.mixed(made), List.of())));
        SourceText main = java.util.Objects.requireNonNull(mixed.get(file));
        Sources sources = new Sources(main, f -> {
            SourceText t = mixed.get(f);
            if (t != null) {
                return t;
            }
            Object o = after.load(f);
            return o instanceof SourceText ? o : before.load(f);
        });
        Problems own = new Problems();
        Map<String, DriveSource> drives = new LinkedHashMap<>();
        FileAnalysis.driveSources(sources, main, own, drives);
        List<Diagnostic> said = new ArrayList<>(sources.problems());
        said.addAll(own.all());
        return new Base(
                sources,
                FileAnalysis.shapes(sources, Handbook.standard()),
                drives,
                new HashMap<>(),
                new HashMap<>(),
                said);
    }
}
