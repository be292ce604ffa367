package backcone.engine;

import static org.assertj.core.api.Assertions.assertThat;

import backcone.engine.answers.Examples;
import backcone.engine.graph.Checker;
import backcone.engine.graph.Shapes;
import backcone.engine.model.Decl;
import backcone.engine.model.LibraryBuilder;
import backcone.engine.parse.Parser;
import backcone.engine.syntax.Entry;
import backcone.engine.syntax.Expr;
import backcone.engine.syntax.FileSyntax;
import backcone.engine.syntax.Node;
import backcone.engine.syntax.Nodes;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.Collections;
import java.util.HashMap;
import java.util.LinkedHashMap;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Map;
import java.util.Objects;
import java.util.Random;
import java.util.Set;
import java.util.stream.Stream;
import org.jspecify.annotations.Nullable;
import org.junit.jupiter.api.Test;

/**
 * One sign of the handbook turned at a time, a product into a quotient or the other way round: either the dimensions no
 * longer fit, or an example is no longer met. A sample of them is tried in every run; {@code -Dbackcone.mutants=all} tries
 * all and writes {@code MUTATIONS.md}, {@code -Dbackcone.mutants=forces} tries those of one text.
 */
class HandbookMutationTest {
    private static final long SEED = 20261201;
    private static final int SAMPLE = 150;
    private static final double FLOOR = 0.9;
    private static final Set<String> PLUS_OR_MINUS_ONE = Set.of("s_g", "s_role", "s_hand", "i_g");
    private static final Path WORKED = Path.of("src/test/resources/backcone/worked");
    private static final Path REPORT = Path.of("MUTATIONS.md");

    /** A sign of an equation; {@code owner} is the entry that holds it. */
    private record Mutant(FileId file, int at, char sign, Entry owner) {
        String turned(String text) {
            return text.substring(0, at) + (sign == '*' ? '/' : '*') + text.substring(at + 1);
        }

        boolean inDeclaration() {
            return owner instanceof Entry.Declaration || owner instanceof Entry.Check;
        }
    }

    private enum Fate {
        DIMENSIONS,
        EXAMPLE,
        SURVIVED
    }

    /** An example by the file and the place where it stands. */
    private record Case(FileId file, Span span) {}

    private record Place(FileId file, Span span) {}

    private final Map<FileId, String> texts = new LinkedHashMap<>();
    private final Map<FileId, FileSyntax> handbook = new LinkedHashMap<>();
    private final Map<FileId, FileSyntax> published = new LinkedHashMap<>();
    private final Map<Place, Set<Case>> reachedBy = new HashMap<>();
    private final Set<Case> cases = new LinkedHashSet<>();

    @Test
    void turnedSignsAreNoticed() throws IOException {
        read();
        List<Mutant> mutants = mutants();
        assertThat(mutants).hasSizeGreaterThan(1500);
        String which = System.getProperty("backcone.mutants", "");
        boolean all = which.equals("all");
        if (which.isEmpty()) {
            Collections.shuffle(mutants, new Random(SEED));
            mutants = mutants.subList(0, SAMPLE);
        } else if (!all) {
            mutants.removeIf(m -> !name(m.file()).equals(which + ".method"));
        }
        examples();
        Map<Mutant, Fate> fates = new LinkedHashMap<>();
        for (Mutant m : mutants) {
            fates.put(m, fate(m));
        }
        if (all) {
            Files.writeString(REPORT, report(fates));
        }
        List<String> survivors = fates.entrySet().stream()
                .filter(e -> e.getValue() == Fate.SURVIVED)
                .map(e -> said(e.getKey()))
                .toList();
        if (!which.isEmpty()) {
            System.out.println(fates.size() + " signs, unnoticed:\n" + String.join("\n", survivors));
        }
        assertThat(1 - survivors.size() / (double) fates.size())
                .as("unnoticed:\n" + String.join("\n", survivors))
                .isGreaterThanOrEqualTo(FLOOR);
    }

    // ---- texts and signs

    private void read() throws IOException {
        for (String name : Handbook.names()) {
            FileId id = new FileId(FileId.HANDBOOK + name + ".method");
            add(id, Objects.requireNonNull(Handbook.text(id)));
        }
        try (Stream<Path> files = Files.list(WORKED)) {
            for (Path p :
                    files.filter(f -> f.toString().endsWith(".method")).sorted().toList()) {
                add(new FileId("worked/" + p.getFileName()), Files.readString(p));
            }
        }
    }

    private void add(FileId id, String text) {
        Parser.Parsed parsed = Parser.parse(id, text);
        assertThat(parsed.problems()).as(id.path()).isEmpty();
        texts.put(id, text);
        (id.isHandbook() ? handbook : published).put(id, parsed.tree());
    }

    private List<Mutant> mutants() {
        List<Mutant> out = new ArrayList<>();
        handbook.forEach((id, tree) -> tree.entries().forEach(e -> mutants(id, e, out)));
        return out;
    }

    private void mutants(FileId id, Entry e, List<Mutant> out) {
        List<Entry> body = Nodes.body(e);
        if (e instanceof Entry.Example || e instanceof Entry.Table) {
            return;
        }
        if (body != null) {
            body.forEach(x -> mutants(id, x, out));
            return;
        }
        Nodes.walk(e, (Node n) -> {
            if (n instanceof Expr.Binary b && (b.op() == Expr.Op.MUL || b.op() == Expr.Op.DIV) && !plusOrMinusOne(b)) {
                char sign = b.op() == Expr.Op.MUL ? '*' : '/';
                int at = sign(Objects.requireNonNull(texts.get(id)), b, sign);
                out.add(new Mutant(id, at, sign, e));
            }
        });
    }

    /** A product with plus or minus one is the quotient by it. */
    private static boolean plusOrMinusOne(Expr.Binary b) {
        return b.right() instanceof Expr.Path p
                && PLUS_OR_MINUS_ONE.contains(
                        p.names().get(p.names().size() - 1).text());
    }

    /** Between the operands stand the sign, brackets, blanks and remarks. */
    private static int sign(String text, Expr.Binary b, char sign) {
        int i = b.left().span().end();
        while (text.charAt(i) != sign) {
            i = text.charAt(i) == '#' ? text.indexOf('\n', i) : i + 1;
            assertThat(i).isLessThan(b.right().span().start());
        }
        return i;
    }

    // ---- what happens

    private static @Nullable Shapes shapes(Map<FileId, FileSyntax> trees) {
        LibraryBuilder b = new LibraryBuilder();
        trees.forEach(b::add);
        LibraryBuilder.Built built = b.build();
        return built.problems().isEmpty() ? new Shapes(built.library()) : null;
    }

    /** The handbook with one text of published examples: each declares helpers of its own. */
    private Shapes around(FileId file, Shapes shapes) {
        FileSyntax tree = published.get(file);
        return tree == null
                ? shapes
                : new Shapes(new LibraryBuilder(shapes.library())
                        .add(file, tree)
                        .build()
                        .library());
    }

    /** Which equations each example reaches, in the handbook as it is. */
    private void examples() {
        Shapes shapes = Objects.requireNonNull(shapes(handbook));
        assertThat(Checker.check(shapes)).isEmpty();
        Map<FileId, FileSyntax> all = new LinkedHashMap<>(handbook);
        all.putAll(published);
        all.forEach((id, tree) -> {
            Shapes own = around(id, shapes);
            Nodes.walk(tree, n -> {
                if (n instanceof Entry.Example x) {
                    Case c = new Case(id, x.span());
                    Examples.Report r = Examples.run(own, id::equals, x::equals);
                    assertThat(r.outcomes()).allMatch(Examples.Outcome::met);
                    cases.add(c);
                    for (Decl d : r.reachedEquations()) {
                        reachedBy
                                .computeIfAbsent(new Place(d.file, d.span), k -> new LinkedHashSet<>())
                                .add(c);
                    }
                }
            });
        });
    }

    /** Examples of the same file come first; where it is not known which ones reach the sign, all are asked. */
    private Fate fate(Mutant m) {
        Map<FileId, FileSyntax> turned = new LinkedHashMap<>(handbook);
        Parser.Parsed parsed = Parser.parse(m.file(), m.turned(Objects.requireNonNull(texts.get(m.file()))));
        assertThat(parsed.problems()).isEmpty();
        turned.put(m.file(), parsed.tree());
        Shapes shapes = shapes(turned);
        if (shapes == null || !Checker.check(shapes).isEmpty()) {
            return Fate.DIMENSIONS;
        }
        Set<Case> reaching = m.inDeclaration()
                ? reachedBy.getOrDefault(new Place(m.file(), m.owner().span()), Set.of())
                : cases;
        Set<Case> order = new LinkedHashSet<>();
        reaching.stream().filter(c -> c.file().equals(m.file())).forEach(order::add);
        order.addAll(reaching);
        Map<FileId, Shapes> own = new HashMap<>();
        for (Case c : order) {
            Examples.Report r = Examples.run(
                    own.computeIfAbsent(c.file(), f -> around(f, shapes)),
                    c.file()::equals,
                    x -> x.span().equals(c.span()));
            if (!r.problems().isEmpty() || !r.outcomes().stream().allMatch(Examples.Outcome::met)) {
                return Fate.EXAMPLE;
            }
        }
        return Fate.SURVIVED;
    }

    // ---- report

    private String said(Mutant m) {
        String text = Objects.requireNonNull(texts.get(m.file()));
        int start = text.lastIndexOf('\n', m.at()) + 1;
        int end = text.indexOf('\n', m.at());
        long line = text.substring(0, m.at()).chars().filter(c -> c == '\n').count() + 1;
        String shown = text.substring(start, m.at()) + "⟨" + m.sign() + "⟩" + text.substring(m.at() + 1, end);
        return name(m.file()) + ":" + line + "  " + shown.strip().replaceAll(" {2,}", " ");
    }

    private static String name(FileId id) {
        return id.path().substring(FileId.HANDBOOK.length());
    }

    private String report(Map<Mutant, Fate> fates) {
        StringBuilder b = new StringBuilder();
        b.append("# Turned signs in the handbook\n\n");
        b.append(
                "Written by `HandbookMutationTest` with `-Dbackcone.mutants=all`: in every equation each `*` is turned into `/`"
                        + " and each `/` into `*`, one at a time.\nA turned sign is noticed where dimensions no longer fit or a worked"
                        + " example is no longer met.\n\n");
        b.append("| file | signs | noticed by dimensions | by examples | unnoticed |\n|---|---|---|---|---|\n");
        Map<String, int[]> rows = new LinkedHashMap<>();
        int[] total = new int[4];
        fates.forEach((m, f) -> {
            int[] row = rows.computeIfAbsent(name(m.file()), k -> new int[4]);
            for (int[] r : List.of(row, total)) {
                r[0]++;
                r[1 + f.ordinal()]++;
            }
        });
        rows.put("all", total);
        rows.forEach((k, v) -> b.append("| ")
                .append(k)
                .append(" | ")
                .append(v[0])
                .append(" | ")
                .append(v[1])
                .append(" | ")
                .append(v[2])
                .append(" | ")
                .append(v[3])
                .append(" |\n"));
        b.append("\n## Unnoticed\n\n");
        fates.forEach((m, f) -> {
            if (f == Fate.SURVIVED) {
                b.append("    ").append(said(m)).append('\n');
            }
        });
        return b.toString();
    }
}
