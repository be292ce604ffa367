package backcone.engine.parse;

import static org.assertj.core.api.Assertions.assertThat;

import backcone.engine.diagnostics.Code;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.text.Span;
import java.io.IOException;
import java.util.Random;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.FieldSource;
import org.junit.jupiter.params.provider.ValueSource;

/** Any text gives a tree and findings: no exception, no place outside, no endless depth. */
class HostileTextTest {
    private static final String[] BITS = {
        "{",
        "}",
        "(",
        ")",
        "\n",
        " ",
        "=",
        "=>",
        "==",
        ">=",
        "choose",
        "each",
        "each x",
        "table a by b",
        "|",
        ",",
        ";",
        "\"",
        "\"x\"",
        "#",
        "1",
        "1.5",
        "2027-01-01",
        " mm",
        "per",
        "because",
        "until",
        "a",
        "b.c",
        "limit x",
        "relation",
        ":",
        "+",
        "-",
        "*",
        "/",
        "^",
        "in",
        "not",
        "else",
        "use",
        "rate a by b",
        "drive x",
        "..",
        "tol",
        "\uD83D\uDE00",
        "\uD83D",
        "\u00B5",
        "\u00B0",
        "\r\n",
        "\r",
        "\t",
        "given",
        "root of",
        "settle",
        "at most",
        "cases a",
        "choice",
        "[",
        "\u0000",
        "\\",
        "1e999",
        "1,5",
        ".5",
        "5."
    };

    @ParameterizedTest
    @FieldSource("backcone.engine.parse.Texts#NAMES")
    void everyPrefix(String name) {
        String text = Texts.read(name);
        for (int end = 0; end <= text.length(); end++) {
            check(text.substring(0, end));
        }
    }

    /** Every place where the typing of a sample may have stopped. */
    @Test
    void everyPrefixOfEverySample() throws IOException {
        int prefixes = 0;
        for (String text : Texts.samples()) {
            for (int end = 0; end <= text.length(); end++) {
                Parser.Parsed parsed = Texts.parse(text.substring(0, end));
                for (Diagnostic d : parsed.problems()) {
                    if (d.span().end() > end) {
                        throw new AssertionError(d + " lies behind the end of\n" + text.substring(0, end));
                    }
                }
                prefixes++;
            }
        }
        assertThat(prefixes).isGreaterThan(50_000);
    }

    @Test
    void wordsOfTheLanguageInAnyOrder() {
        Random random = new Random(20260301);
        for (int k = 0; k < 3000; k++) {
            StringBuilder b = new StringBuilder();
            for (int i = random.nextInt(40); i > 0; i--) {
                b.append(BITS[random.nextInt(BITS.length)]).append(random.nextInt(3) == 0 ? " " : "");
            }
            check(b.toString());
        }
    }

    @Test
    void anyCharacters() {
        Random random = new Random(20260302);
        for (int k = 0; k < 3000; k++) {
            StringBuilder b = new StringBuilder();
            for (int i = random.nextInt(60); i > 0; i--) {
                b.append((char) (random.nextInt(10) == 0 ? random.nextInt(65536) : random.nextInt(128)));
            }
            check(b.toString());
        }
    }

    @Test
    void goodTextsWithABitTakenOutOrPutIn() {
        Random random = new Random(20260303);
        for (int k = 0; k < 1500; k++) {
            StringBuilder b = new StringBuilder(Texts.read(Texts.NAMES.get(random.nextInt(Texts.NAMES.size()))));
            for (int i = random.nextInt(4); i >= 0; i--) {
                int at = random.nextInt(b.length());
                if (random.nextBoolean()) {
                    b.deleteCharAt(at);
                } else {
                    b.insert(at, BITS[random.nextInt(BITS.length)]);
                }
            }
            check(b.toString());
        }
    }

    @ParameterizedTest
    @ValueSource(
            strings = {
                "{",
                "(",
                "x {\n",
                "x = (",
                "x = choose {\n a => ",
                "-",
                "x = - - ",
                "x = not ",
                "f(",
                "1 + 1 ",
                "{ (",
                "x = choose { a => choose {",
                "in mm ",
                "5 m*(",
                "table x by y {\n",
                "a = (\n",
                "^ 2 ",
                "x = a\n + b"
            })
    void tenThousandDeep(String unit) {
        String text = unit.repeat(10_000);
        Parser.Parsed parsed = check(text);
        assertThat(parsed.problems()).isNotEmpty();
        // the tree can be walked by recursion
        assertThat(parsed.tree().hashCode()).isEqualTo(parsed.tree().hashCode());
        assertThat(TreeCodec.read(TreeCodec.write(parsed.tree()))).isEqualTo(parsed.tree());
    }

    @Test
    void whatIsNestedTooDeepIsSaidOnce() {
        assertThat(check("x {\n".repeat(10_000)).problems())
                .singleElement()
                .extracting(Diagnostic::code)
                .isEqualTo(Code.TOO_DEEP);
        assertThat(check("x = " + "(".repeat(10_000) + "1" + ")".repeat(10_000)).problems())
                .singleElement()
                .extracting(Diagnostic::code)
                .isEqualTo(Code.TOO_DEEP);
    }

    @Test
    void whatFollowsABracketCutTooDeepIsRead() {
        Parser.Parsed parsed = check("a = " + "(".repeat(200) + "\nb = 2\n");
        assertThat(TreeText.of(parsed.tree())).contains("Fact(b, 2)");
    }

    @Test
    void fiveMegabytes() {
        String text = Texts.read("feeder.drive");
        StringBuilder big = new StringBuilder();
        while (big.length() < 5_000_000) {
            big.append(text);
        }
        assertThat(Texts.parse(big.toString()).problems()).isEmpty();
    }

    @Test
    void moreFindingsThanAnyoneReadsAreNotListed() {
        assertThat(check("x = \n".repeat(5000)).problems())
                .hasSize(1001)
                .last()
                .extracting(Diagnostic::code)
                .isEqualTo(Code.TOO_MANY);
    }

    private static Parser.Parsed check(String text) {
        Parser.Parsed parsed = Texts.parse(text);
        TreeText.walk(parsed.tree(), n -> inside(n.span(), text));
        for (Diagnostic d : parsed.problems()) {
            inside(d.span(), text);
            assertThat(d.message()).isNotBlank().doesNotContain("null");
            d.fixes().forEach(f -> inside(f.span(), text));
        }
        return parsed;
    }

    private static void inside(Span span, String text) {
        if (span.end() > text.length()) {
            throw new AssertionError(span + " lies outside of a text of " + text.length() + ": " + text);
        }
    }
}
