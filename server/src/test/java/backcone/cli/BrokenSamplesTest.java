package backcone.cli;

import static org.assertj.core.api.Assertions.assertThat;

import backcone.engine.Analysis;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.diagnostics.Severity;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.LocalDate;
import java.util.List;
import java.util.Locale;
import java.util.stream.Collectors;
import java.util.stream.Stream;
import org.junit.jupiter.api.DynamicTest;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.TestFactory;

/**
 * One text per common mistake gives what stands beside it: {@code line:column severity CODE message}. The expected lines were
 * read by hand; with {@code -Dbackcone.update=true} they are written anew, to be read again.
 */
class BrokenSamplesTest {
    private static final Path ROOT = Path.of("..").toAbsolutePath().normalize();
    private static final Path FOLDER = ROOT.resolve("samples/broken");
    private static final LocalDate DAY = LocalDate.of(2026, 12, 1);

    private static List<Path> texts() throws IOException {
        try (Stream<Path> all = Files.list(FOLDER)) {
            return all.filter(f -> f.toString().endsWith(".drive")).sorted().toList();
        }
    }

    private static String said(Path file) {
        Analysis a = new EngineFactory(ROOT, DAY).analyse(file);
        Places places = new Places(a.text());
        return a.diagnostics().stream().map(d -> line(d, places)).collect(Collectors.joining("\n", "", "\n"));
    }

    private static String line(Diagnostic d, Places places) {
        return places.at(d.span().start()) + " " + d.severity().name().toLowerCase(Locale.ROOT) + " "
                + d.code().id() + " " + d.message();
    }

    @TestFactory
    Stream<DynamicTest> everyMistakeGivesItsMessage() throws IOException {
        return texts().stream()
                .map(f -> DynamicTest.dynamicTest(f.getFileName().toString(), () -> {
                    Path expected = f.resolveSibling(f.getFileName().toString().replace(".drive", ".expected"));
                    String said = said(f);
                    if (Boolean.getBoolean("backcone.update")) {
                        Files.writeString(expected, said);
                    }
                    assertThat(said).isEqualTo(Files.readString(expected));
                }));
    }

    @Test
    void oneCauseOneError() throws IOException {
        for (Path f : texts()) {
            long errors = new EngineFactory(ROOT, DAY)
                    .analyse(f).diagnostics().stream()
                            .filter(d -> d.severity() == Severity.ERROR && !Checked.aboutStates(d))
                            .count();
            assertThat(errors).as(f.getFileName().toString()).isLessThanOrEqualTo(1);
        }
    }
}
