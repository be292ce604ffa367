package backcone.engine;

import static org.assertj.core.api.Assertions.assertThat;

import backcone.engine.diagnostics.Code;
import backcone.engine.diagnostics.Diagnostic;
import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.stream.Stream;
import org.junit.jupiter.api.DynamicTest;
import org.junit.jupiter.api.TestFactory;

/** Every code has a page with a wrong and a right text; the wrong one gives the code, the right one does not. */
class DiagnosticPagesTest {
    private record Page(String title, Map<String, String> wrong, Map<String, String> right, Map<String, String> days) {}

    private static Page page(Code code) throws IOException {
        String text;
        try (var in = DiagnosticPagesTest.class.getResourceAsStream("diagnostics/" + code.id() + ".md")) {
            assertThat(in).as("page of " + code.id()).isNotNull();
            text = new String(in.readAllBytes(), StandardCharsets.UTF_8);
        }
        Page p = new Page(
                text.lines().findFirst().orElse(""),
                new LinkedHashMap<>(),
                new LinkedHashMap<>(),
                new LinkedHashMap<>());
        List<String> lines = text.lines().toList();
        for (int i = 0; i < lines.size(); i++) {
            String l = lines.get(i);
            if (l.startsWith("```drive ") || l.startsWith("```method ")) {
                StringBuilder body = new StringBuilder();
                while (!lines.get(++i).equals("```")) {
                    body.append(lines.get(i)).append('\n');
                }
                boolean method = l.startsWith("```method");
                int at = l.indexOf("file=");
                String file = at >= 0 ? l.substring(at + 5).split(" ")[0] : method ? "a.method" : "a.drive";
                (l.contains(" wrong") ? p.wrong : p.right).put(file, body.toString());
                int on = l.indexOf("on=");
                if (on >= 0) {
                    p.days.put(
                            l.contains(" wrong") ? "wrong" : "right",
                            l.substring(on + 3).split(" ")[0]);
                }
            }
        }
        return p;
    }

    private static List<String> codes(Map<String, String> files, String day) {
        Specs s = new Specs().on(day);
        files.forEach(s::with);
        List<String> out = new ArrayList<>();
        String first = files.keySet().stream()
                .filter(f -> f.endsWith(".drive"))
                .findFirst()
                .orElse(files.keySet().iterator().next());
        for (Diagnostic d : s.analyse(first).diagnostics()) {
            out.add(d.code().id());
        }
        return out;
    }

    @TestFactory
    Stream<DynamicTest> pagesAreTrue() {
        return Stream.of(Code.values())
                .map(c -> DynamicTest.dynamicTest(c.id() + " " + c.title(), () -> {
                    Page p = page(c);
                    assertThat(p.title()).startsWith("# " + c.id());
                    if (!p.wrong().isEmpty()) {
                        assertThat(codes(p.wrong(), p.days().getOrDefault("wrong", "2026-12-01")))
                                .as("wrong text of " + c.id())
                                .contains(c.id());
                    }
                    if (!p.right().isEmpty()) {
                        assertThat(codes(p.right(), p.days().getOrDefault("right", "2026-12-01")))
                                .as("right text of " + c.id())
                                .doesNotContain(c.id());
                    }
                }));
    }
}
