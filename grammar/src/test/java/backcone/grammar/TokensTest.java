package backcone.grammar;

import static org.assertj.core.api.Assertions.assertThat;

import backcone.grammar.gen.BackconeLexer;
import java.util.Random;
import java.util.stream.Collectors;
import org.junit.jupiter.api.Test;

class TokensTest {

    @Test
    void aUnitIsOneTokenAndBelongsToTheNumberBeforeIt() {
        assertThat(units("a = 355 N/mm^2 + 8 1/in * 20 N/(mm*um) - 5 mm / t + 3 % + 20° + 15 m/"))
                .isEqualTo("N/mm^2 1/in N/(mm*um) mm % ° m");
    }

    @Test
    void wordsBehindANumberThatAreNeverUnits() {
        for (String word : Words.all()) {
            if (!word.equals("in") && Words.inside(word) != null) {
                assertThat(units("a = 3 " + word + " x")).as(word).isEmpty();
            }
        }
    }

    @Test
    void everyKeywordButTheReservedOnesMayBeAName() {
        for (String word : Words.all()) {
            if (!Words.reserved().contains(word)) {
                Tokens tokens = Tokens.of(word + " = 1\nx = " + word + " + 1\ny = a." + word + "\n");
                assertThat(tokens.list().stream().filter(t -> t.getText().equals(word)))
                        .as(word)
                        .hasSize(3)
                        .allMatch(t -> t.getType() == BackconeLexer.NAME);
            }
        }
    }

    /** Every character but blanks is in a token or a comment, in the order of the text, whatever the text is. */
    @Test
    void nothingIsLost() {
        Random random = new Random(20260305);
        String letters = "ab1.5 {}()=<>|:;,+-*/^\"#\n\r%°\uD83D\uDE00\u00E9";
        for (int k = 0; k < 3000; k++) {
            StringBuilder b = new StringBuilder();
            for (int i = random.nextInt(40); i > 0; i--) {
                b.append(letters.charAt(random.nextInt(letters.length())));
            }
            String text = b.toString();
            boolean[] covered = new boolean[text.length()];
            Tokens tokens = Tokens.of(text);
            tokens.list().forEach(t -> cover(covered, t));
            tokens.comments().forEach(t -> cover(covered, t));
            tokens.findings().forEach(f -> assertThat(f.end()).isLessThanOrEqualTo(text.length()));
            for (int i = 0; i < covered.length; i++) {
                // line ends that don't count, empty entries and braces without a partner leave no token
                assertThat(covered[i] || " \n\r;}".indexOf(text.charAt(i)) >= 0)
                        .as(text)
                        .isTrue();
            }
        }
    }

    private static void cover(boolean[] covered, Tok t) {
        for (int i = t.start(); i < Math.min(t.end(), covered.length); i++) {
            covered[i] = true;
        }
    }

    private static String units(String text) {
        return Tokens.of(text).list().stream()
                .filter(t -> t.getType() == BackconeLexer.UNIT)
                .map(Tok::getText)
                .collect(Collectors.joining(" "));
    }
}
