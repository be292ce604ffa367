package backcone.engine.editing;

import static org.assertj.core.api.Assertions.assertThat;

import backcone.engine.Analysis;
import backcone.engine.BackconeEngine;
import backcone.engine.text.FileId;
import java.util.List;
import java.util.Random;
import java.util.stream.Collectors;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

/** What is taken over from an earlier text gives the same answers as a text opened afresh. */
class TypingTest {
    private static final String[] BITS = {
        " ",
        "\n",
        "{",
        "}",
        "\"",
        "=",
        "1",
        "7",
        ".",
        ",",
        "mm",
        "rpm",
        "#",
        "teeth",
        "material",
        "per",
        "\u03B2",
        "(",
        "drive x {",
        "-"
    };

    @ParameterizedTest
    @ValueSource(longs = {1, 2, 3, 4, 5, 6})
    void afterAnyEditsTheAnswersAreThoseOfAFreshText(long seed) {
        Random random = new Random(seed);
        List<FileId> files = SamplesOnDisk.files();
        for (int round = 0; round < 2; round++) {
            FileId file = files.get(random.nextInt(files.size()));
            BackconeEngine engine = SamplesOnDisk.engine();
            String text = doubled(file, random);
            Analysis now = engine.analyse(file, text, null, true);
            for (int k = 0; k < 25; k++) {
                text = edited(text, random);
                now = engine.analyse(file, text, now, true);
                if (random.nextInt(3) == 0) {
                    now.scene().occurrences().all(); // so that there is something to take over
                }
                Analysis fresh = SamplesOnDisk.engine().analyse(file, text, null, true);
                same(now, fresh, "seed " + seed + ", " + file + ", edit " + k);
            }
        }
    }

    @Test
    void aNumberThatChangesMovesItsMarginsAndPlaces() {
        FileId file = new FileId("slat_conveyor.drive");
        BackconeEngine engine = SamplesOnDisk.engine();
        String text = SamplesOnDisk.text(file);
        Analysis now = engine.analyse(file, text, null, true);
        for (String with : List.of("35 mm", "5 mm", "125.5 mm", "30 mm")) {
            int at = text.indexOf("face_width");
            int start = text.indexOf("= ", at) + 2;
            int end = text.indexOf(" mm", start) + 3;
            text = text.substring(0, start) + with + text.substring(end);
            now = engine.analyse(file, text, now, true);
            same(now, SamplesOnDisk.engine().analyse(file, text, null, true), with);
        }
    }

    /** A sample, and half of the time the sample twice with other names. */
    private static String doubled(FileId file, Random random) {
        String text = SamplesOnDisk.text(file);
        int at = text.indexOf("\ndrive ");
        if (at < 0 || random.nextBoolean()) {
            return text;
        }
        String drive = text.substring(at);
        return text + drive.replaceFirst("drive (\\w+)", "drive $1_again");
    }

    private static String edited(String text, Random random) {
        int n = text.length();
        switch (random.nextInt(5)) {
            case 0: { // a digit becomes another
                for (int tries = 0; tries < 50; tries++) {
                    int at = random.nextInt(n);
                    if (Character.isDigit(text.charAt(at))) {
                        return text.substring(0, at) + (char) ('1' + random.nextInt(9)) + text.substring(at + 1);
                    }
                }
                return text;
            }
            case 1: { // a digit more or less
                for (int tries = 0; tries < 50; tries++) {
                    int at = random.nextInt(n);
                    if (Character.isDigit(text.charAt(at))) {
                        return random.nextBoolean()
                                ? text.substring(0, at) + "2" + text.substring(at)
                                : text.substring(0, at) + text.substring(at + 1);
                    }
                }
                return text;
            }
            case 2: {
                int at = random.nextInt(n + 1);
                return text.substring(0, at) + BITS[random.nextInt(BITS.length)] + text.substring(at);
            }
            case 3: {
                int at = random.nextInt(n);
                int end = Math.min(n, at + 1 + random.nextInt(12));
                return text.substring(0, at) + text.substring(end);
            }
            default: { // a line comes again somewhere else
                int a = text.lastIndexOf('\n', random.nextInt(n)) + 1;
                int b = text.indexOf('\n', a);
                String line = b < 0 ? text.substring(a) : text.substring(a, b + 1);
                int at = text.lastIndexOf('\n', random.nextInt(n)) + 1;
                return text.substring(0, at) + line + text.substring(at);
            }
        }
    }

    private static void same(Analysis a, Analysis b, String where) {
        assertThat(a.diagnostics().stream().map(Object::toString).collect(Collectors.joining("\n")))
                .as(where)
                .isEqualTo(b.diagnostics().stream().map(Object::toString).collect(Collectors.joining("\n")));
        assertThat(a.drives().toString()).as(where).isEqualTo(b.drives().toString());
        int n = a.text().length();
        assertThat(Hints.between(a.scene(), 0, n, true, true))
                .as(where)
                .isEqualTo(Hints.between(b.scene(), 0, n, true, true));
        assertThat(Paint.of(a.scene(), 0, n)).as(where).isEqualTo(Paint.of(b.scene(), 0, n));
        assertThat(Lenses.of(a.scene())).as(where).isEqualTo(Lenses.of(b.scene()));
        List<String> x = new java.util.ArrayList<>(places(a));
        List<String> y = new java.util.ArrayList<>(places(b));
        List<String> both = new java.util.ArrayList<>(x);
        both.retainAll(y);
        x.removeAll(both);
        y.removeAll(both);
        assertThat(x).as(where).isEqualTo(y);
    }

    private static List<String> places(Analysis a) {
        return a.scene().occurrences().all().stream()
                .map(o -> o.span() + " " + o.target().sort() + " " + o.target().name() + " "
                        + o.target().file() + o.target().span() + o.target().givenAt())
                .toList();
    }
}
