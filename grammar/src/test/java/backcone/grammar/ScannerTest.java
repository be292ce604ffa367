package backcone.grammar;

import static org.assertj.core.api.Assertions.assertThat;

import backcone.grammar.gen.BackconeLexer;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Random;
import java.util.stream.Stream;
import org.antlr.v4.runtime.Token;
import org.junit.jupiter.api.Test;

/** The scanner against the lexer that is generated from the grammar. */
class ScannerTest {

    @Test
    void theTextsOfTheProject() throws IOException {
        int seen = 0;
        for (String folder : List.of("../samples", "../engine/src/main/resources", "../engine/src/test/resources")) {
            try (Stream<Path> all = Files.walk(Path.of(folder))) {
                for (Path p : all.filter(ScannerTest::isOurs).toList()) {
                    same(Files.readString(p));
                    seen++;
                }
            }
        }
        assertThat(seen).isGreaterThan(50);
    }

    private static boolean isOurs(Path p) {
        return p.toString().endsWith(".drive") || p.toString().endsWith(".method");
    }

    @Test
    void anyLetters() {
        Random random = new Random(20261201);
        String letters =
                "aE_5019.--+\"\\#\n\r \t\f=<>!|:;,*/^%(){}\u00B0\u00B5\u03A2\u03A9\u03C9\u03D1\u03F5\u00A0\u202F\uD83D\uDE00\u00E9";
        for (int k = 0; k < 20_000; k++) {
            StringBuilder b = new StringBuilder();
            for (int i = random.nextInt(30); i > 0; i--) {
                b.append(letters.charAt(random.nextInt(letters.length())));
            }
            same(b.toString());
        }
    }

    @Test
    void datesNumbersAndStrings() {
        for (String text : List.of(
                "2027-06-30",
                "2027-06-3",
                "2027-6-30",
                "12027-06-30",
                "2027-06-301",
                "2027-06",
                "1.",
                "1..2",
                "1.5e",
                "1.5e+",
                "1.5e-3x",
                "1e5.5",
                "0x1",
                "\"a\\\"b\"",
                "\"a\\",
                "\"a\\\nb\"",
                "\"",
                "\"\\\\\" x",
                "\r\r\n\n\r",
                "\u00B0C\u00B0f")) {
            same(text);
        }
    }

    private static void same(String text) {
        BackconeLexer lexer = new BackconeLexer(new TextStream(text, 0));
        lexer.removeErrorListeners();
        Scanner scanner = new Scanner(text, 0);
        List<String> expected = new ArrayList<>();
        List<String> found = new ArrayList<>();
        Token t;
        do {
            t = lexer.nextToken();
            expected.add(say(t));
            found.add(say(scanner.next()));
        } while (t.getType() != Token.EOF);
        assertThat(found).as(text).isEqualTo(expected);
    }

    private static String say(Token t) {
        return t.getType() + " " + t.getChannel() + " " + t.getStartIndex() + " " + t.getStopIndex() + " " + t.getLine()
                + " " + t.getText();
    }
}
