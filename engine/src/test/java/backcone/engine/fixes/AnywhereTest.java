package backcone.engine.fixes;

import static org.assertj.core.api.Assertions.assertThat;

import backcone.engine.Analysis;
import backcone.engine.BackconeEngine;
import backcone.engine.Loader;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.stream.Stream;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.MethodSource;

/** Fixes can be asked for anywhere in any text; edits stay inside their text and don't overlap. */
class AnywhereTest {
    static Stream<String> texts() throws IOException {
        try (Stream<Path> all = Files.walk(Desk.SAMPLES)) {
            List<String> found = all.filter(Files::isRegularFile)
                    .map(p -> Desk.SAMPLES.relativize(p).toString().replace('\\', '/'))
                    .filter(p -> p.endsWith(".drive") || p.endsWith(".method"))
                    .filter(p -> !p.startsWith("review/") && !p.startsWith("ci/"))
                    .sorted()
                    .toList();
            return found.stream();
        }
    }

    @ParameterizedTest
    @MethodSource("texts")
    void anyPlaceIsAnswered(String path) throws IOException {
        BackconeEngine engine = BackconeEngine.create(
                f -> {
                    try {
                        Path p = Desk.SAMPLES.resolve(f.path());
                        return Files.isRegularFile(p)
                                ? new Loader.Loaded.Text(Files.readString(p))
                                : new Loader.Loaded.Missing();
                    } catch (IOException e) {
                        return new Loader.Loaded.Unreadable("not text");
                    }
                },
                Desk.TODAY);
        Analysis a = engine.analyse(new FileId(path));
        int length = a.text().length();
        int by = Math.max(1, length / (path.startsWith("broken/") ? 6 : 20));
        for (int at = 0; at <= length; at += by) {
            for (Span range : List.of(new Span(at, at), new Span(at, Math.min(length, at + by)))) {
                for (Fix f : engine.fixes(a, range)) {
                    sound(a, f);
                }
            }
        }
    }

    private static void sound(Analysis a, Fix f) {
        assertThat(f.title()).isNotBlank();
        assertThat(f.edits()).as(f.title()).isNotEmpty();
        for (TextEdit e : f.edits()) {
            if (e.file().equals(a.file())) {
                assertThat(e.span().end())
                        .as(f.title())
                        .isLessThanOrEqualTo(a.text().length());
            }
            for (TextEdit other : f.edits()) {
                if (other != e && other.file().equals(e.file())) {
                    boolean apart = other.span().end() <= e.span().start()
                            || e.span().end() <= other.span().start();
                    assertThat(apart).as(f.title()).isTrue();
                }
            }
        }
    }
}
