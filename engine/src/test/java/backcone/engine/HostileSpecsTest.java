package backcone.engine;

import static org.assertj.core.api.Assertions.assertThat;

import backcone.engine.answers.RequirementAnswer;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.text.FileId;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import java.util.Random;
import java.util.TreeMap;
import java.util.stream.Stream;
import org.junit.jupiter.api.Test;

/** Whatever the text is, the whole engine answers: no exception, no end that does not come, no NaN that claims to be clear. */
class HostileSpecsTest {
    private static final Path SAMPLES = Path.of("..", "samples");

    private static Map<String, String> samples() throws IOException {
        Map<String, String> out = new TreeMap<>();
        try (Stream<Path> all = Files.walk(SAMPLES)) {
            for (Path p : all.filter(f ->
                            f.toString().endsWith(".drive") && !f.toString().contains("broken"))
                    .toList()) {
                out.put(SAMPLES.relativize(p).toString().replace('\\', '/'), Files.readString(p));
            }
        }
        return out;
    }

    private static Analysis analyse(Map<String, String> library, String name, String text) {
        FileId id = new FileId(name);
        Analysis a = BackconeEngine.create(
                        f -> {
                            String t = f.equals(id) ? text : library.get(f.path());
                            return t == null ? new Loader.Loaded.Missing() : new Loader.Loaded.Text(t);
                        },
                        Specs.TODAY)
                .analyse(id);
        for (Diagnostic d : a.diagnostics()) {
            assertThat(d.message()).isNotBlank();
            assertThat(d.span().end()).isLessThanOrEqualTo(text.length());
        }
        a.drives().forEach(d -> {
            for (RequirementAnswer r : d.requirements()) {
                assertThat(Double.isNaN(r.value()) && r.state().isMet())
                        .as(r.id())
                        .isFalse();
            }
        });
        return a;
    }

    @Test
    void everyPrefixOfEverySample() throws IOException {
        Map<String, String> all = samples();
        for (Map.Entry<String, String> e : all.entrySet()) {
            String text = e.getValue();
            for (int end = 0; end < text.length(); end += 41) {
                analyse(all, e.getKey(), text.substring(0, end));
            }
            analyse(all, e.getKey(), text);
        }
    }

    @Test
    void linesCutAnywhere() throws IOException {
        Map<String, String> all = samples();
        Random random = new Random(7);
        for (Map.Entry<String, String> e : all.entrySet()) {
            String[] lines = e.getValue().split("\n", -1);
            for (int k = 0; k < 40; k++) {
                String[] cut = lines.clone();
                int i = random.nextInt(cut.length);
                if (!cut[i].isEmpty()) {
                    cut[i] = cut[i].substring(0, random.nextInt(cut[i].length()));
                }
                analyse(all, e.getKey(), String.join("\n", cut));
            }
        }
    }

    @Test
    void wordsExchangedAnywhere() throws IOException {
        Map<String, String> all = samples();
        Random random = new Random(11);
        List<String> words = new ArrayList<>();
        all.values().forEach(t -> words.addAll(List.of(t.split("\\s+", -1))));
        for (Map.Entry<String, String> e : all.entrySet()) {
            for (int k = 0; k < 60; k++) {
                String[] w = e.getValue().split("(?<=\\s)|(?=\\s)", -1);
                for (int n = 0; n < 3; n++) {
                    w[random.nextInt(w.length)] = words.get(random.nextInt(words.size()));
                }
                analyse(all, e.getKey(), String.join("", w));
            }
        }
    }

    @Test
    void numbersOfAnySize() throws IOException {
        Map<String, String> all = samples();
        String text = java.util.Objects.requireNonNull(all.get("water_wheel.drive"));
        for (String n :
                new String[] {"0", "1e999", "1e-999", "9e307", "1e-320", "-5", "99999999999999999999", "0.0", "1e5"}) {
            for (String was :
                    new String[] {"= 6 mm", "= 75 mm", "= 20 deg", "= 19", "= 98", "= 7.5 kW", "= 212 rpm", ">= 1.5"}) {
                String unit = was.replaceAll("[=>.0-9 ]", "");
                String sign = was.startsWith(">=") ? ">= " : "= ";
                analyse(all, "water_wheel.drive", text.replace(was, sign + n + (unit.isEmpty() ? "" : " " + unit)));
            }
        }
    }

    @Test
    void randomBytesAndDeepNesting() {
        Random random = new Random(5);
        for (int k = 0; k < 200; k++) {
            byte[] bytes = new byte[random.nextInt(400)];
            random.nextBytes(bytes);
            analyse(Map.of(), "x.drive", new String(bytes, java.nio.charset.StandardCharsets.ISO_8859_1));
        }
        analyse(Map.of(), "x.drive", "{".repeat(10_000));
        analyse(Map.of(), "x.drive", "drive d { ".repeat(10_000));
        analyse(Map.of(), "x.drive", "drive d { let a = " + "(".repeat(10_000) + "1" + ")".repeat(10_000) + " }");
        analyse(Map.of(), "x.drive", "drive d { let a = " + "1 + ".repeat(20_000) + "1 }");
        analyse(Map.of(), "x.drive", "drive d { let a = " + "-".repeat(10_000) + "1 }");
    }

    @Test
    void aLongChainOfNamesAndAWideFile() {
        StringBuilder chain = new StringBuilder("drive d {\n  let a0 = 1 mm\n");
        for (int i = 1; i < 3000; i++) {
            chain.append("  let a").append(i).append(" = a").append(i - 1).append(" + 1 mm\n");
        }
        chain.append("  require a2999 >= 1 mm\n}\n");
        Analysis a = analyse(Map.of(), "x.drive", chain.toString());
        assertThat(a.drives()).hasSize(1);
        StringBuilder ring = new StringBuilder("drive d {\n  let a0 = a999\n");
        for (int i = 1; i < 1000; i++) {
            ring.append("  let a").append(i).append(" = a").append(i - 1).append("\n");
        }
        ring.append("  require a999 >= 1 mm\n}\n");
        assertThat(analyse(Map.of(), "x.drive", ring.toString()).diagnostics()).isNotEmpty();
        StringBuilder wide = new StringBuilder();
        while (wide.length() < 5_000_000) {
            wide.append("# ").append("x".repeat(100)).append("\n");
        }
        analyse(Map.of(), "x.drive", wide.toString());
    }

    @Test
    void markAndLineEndsOfOtherSystems() throws IOException {
        Map<String, String> all = samples();
        String text = java.util.Objects.requireNonNull(all.get("water_wheel.drive"));
        List<String> plain = states(analyse(all, "water_wheel.drive", text));
        assertThat(states(analyse(all, "water_wheel.drive", "\uFEFF" + text))).isEqualTo(plain);
        assertThat(states(analyse(all, "water_wheel.drive", text.replace("\n", "\r\n"))))
                .isEqualTo(plain);
        assertThat(states(analyse(all, "water_wheel.drive", text.stripTrailing())))
                .isEqualTo(plain);
    }

    private static List<String> states(Analysis a) {
        List<String> out = new ArrayList<>();
        a.drives().forEach(d -> d.requirements().forEach(r -> out.add(r.id() + " " + r.value() + " " + r.state())));
        a.diagnostics().forEach(d -> out.add(d.code().id()));
        return out;
    }
}
