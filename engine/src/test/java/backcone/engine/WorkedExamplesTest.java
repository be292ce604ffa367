package backcone.engine;

import static org.assertj.core.api.Assertions.assertThat;

import backcone.engine.answers.Examples;
import backcone.engine.graph.Checker;
import backcone.engine.graph.Shapes;
import backcone.engine.model.LibraryBuilder;
import backcone.engine.parse.Parser;
import backcone.engine.text.FileId;
import backcone.engine.units.Numbers;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.stream.Stream;
import org.junit.jupiter.api.DynamicTest;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.TestFactory;

/**
 * Published examples, written as Backcone text and met through the engine that users call. Each text names its source beside
 * the check and says whether the figures were read or remembered; {@code WORKED-EXAMPLES.md} lists them with the worst
 * deviation of each.
 */
class WorkedExamplesTest {
    private static final Path FOLDER = Path.of("src/test/resources/backcone/worked");
    private static final Path TABLE = Path.of("WORKED-EXAMPLES.md");

    private record Text(String name, String text) {}

    private static List<Text> texts() throws IOException {
        List<Text> out = new ArrayList<>();
        try (Stream<Path> files = Files.list(FOLDER)) {
            for (Path p : files.sorted().toList()) {
                if (p.toString().endsWith(".method")) {
                    out.add(new Text(p.getFileName().toString(), Files.readString(p)));
                }
            }
        }
        return out;
    }

    private static Examples.Report run(Text t) {
        FileId id = new FileId(t.name());
        Parser.Parsed p = Parser.parse(id, t.text());
        assertThat(p.problems()).as(t.name()).isEmpty();
        LibraryBuilder.Built built = new LibraryBuilder(
                        Handbook.whole().shapes().library())
                .add(id, p.tree())
                .build();
        assertThat(built.problems()).as(t.name()).isEmpty();
        Shapes shapes = new Shapes(built.library());
        assertThat(Checker.check(shapes)).as(t.name()).isEmpty();
        Examples.Report r = Examples.run(shapes, id::equals);
        assertThat(r.problems()).as(t.name()).isEmpty();
        return r;
    }

    @TestFactory
    Stream<DynamicTest> figuresAreMet() throws IOException {
        List<DynamicTest> out = new ArrayList<>();
        for (Text t : texts()) {
            for (Examples.Outcome o : run(t).outcomes()) {
                out.add(DynamicTest.dynamicTest(
                        t.name() + " / " + o.path(),
                        () -> assertThat(o.met())
                                .as(
                                        "%s: got %s, printed %s %s, tolerance %s %s",
                                        o.path(), o.got(), o.expected(), o.unit(), o.tolerance(), o.why())
                                .isTrue()));
            }
        }
        return out.stream();
    }

    /** The table is kept in the repository; run with {@code -Dbackcone.update=true} to write it anew. */
    @Test
    void tableOfDeviationsIsCurrent() throws IOException {
        StringBuilder b = new StringBuilder();
        b.append("# Published examples met by the handbook\n\n");
        b.append(
                "Written by `WorkedExamplesTest`. \"memory\" means that the printed figures were remembered, not read again.\n\n");
        b.append("| example | source | obtained | figures | worst deviation |\n|---|---|---|---|---|\n");
        for (Text t : texts()) {
            Examples.Report r = run(t);
            double worst = 0;
            for (Examples.Outcome o : r.outcomes()) {
                worst = Math.max(worst, Double.isNaN(o.deviation()) ? 0 : o.deviation());
            }
            b.append("| ")
                    .append(t.name().replace(".method", ""))
                    .append(" | ")
                    .append(header(t, "# source:"))
                    .append(" | ")
                    .append(header(t, "# obtained:"))
                    .append(" | ")
                    .append(r.outcomes().size())
                    .append(" | ")
                    .append(Numbers.format(worst * 100, 2))
                    .append(" % |\n");
        }
        System.out.println(b);
        if (Boolean.getBoolean("backcone.update")) {
            Files.writeString(TABLE, b.toString());
        }
        assertThat(Files.readString(TABLE)).isEqualTo(b.toString());
    }

    private static String header(Text t, String key) {
        for (String line : t.text().split("\n")) {
            if (line.startsWith(key)) {
                return line.substring(key.length()).strip();
            }
        }
        throw new AssertionError(t.name() + " says nothing after `" + key + "`");
    }
}
