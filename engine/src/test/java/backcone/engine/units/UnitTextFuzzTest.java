package backcone.engine.units;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.ArrayList;
import java.util.List;
import java.util.Random;
import org.junit.jupiter.api.Test;

/** Any text gives a unit or a message, and what is offered instead can be read. */
class UnitTextFuzzTest {
    private static final Units UNITS = Units.standard();
    private static final String SIGNS = "*/^()-.1230 °%'²·µ_\u0000\uD835\uDED1";

    private static void probe(String text) {
        Units.Parse p = UNITS.parse(text);
        assertThat(UNITS.parse(text)).isEqualTo(p);
        String said = UNITS.describe(text);
        if (p instanceof Units.Parse.Ok ok) {
            Unit u = ok.unit();
            assertThat(u.text()).isEqualTo(text);
            assertThat(u.numerator()).isPositive().isFinite();
            assertThat(u.denominator()).isPositive().isFinite();
            assertThat(UNITS.nameOf(u.dimension())).isNotEmpty();
            assertThat(UNITS.unitsOf(u.dimension())).doesNotHaveDuplicates();
        } else if (p instanceof Units.Parse.Bad bad) {
            assertThat(bad.message()).isNotBlank();
            if (UnitTable.load().entry(text) == null) {
                assertThat(said).isEmpty();
            }
            if (bad.nearest() != null) {
                assertThat(bad.nearest()).isNotEqualTo(text);
                assertThat(UNITS.parse(bad.nearest())).as(text).isInstanceOf(Units.Parse.Ok.class);
            }
        }
    }

    @Test
    void randomSignsAndWords() {
        Random random = new Random(20261201);
        List<String> words = new ArrayList<>(UNITS.words());
        for (int i = 0; i < 20_000; i++) {
            StringBuilder b = new StringBuilder();
            for (int n = random.nextInt(9); n > 0; n--) {
                if (random.nextBoolean()) {
                    b.append(words.get(random.nextInt(words.size())));
                } else {
                    b.append(SIGNS.charAt(random.nextInt(SIGNS.length())));
                }
            }
            probe(b.toString());
        }
    }

    @Test
    void randomCharacters() {
        Random random = new Random(5);
        for (int i = 0; i < 5_000; i++) {
            StringBuilder b = new StringBuilder();
            for (int n = random.nextInt(130); n > 0; n--) {
                b.append((char) (random.nextInt(4) == 0 ? random.nextInt(0x10000) : 32 + random.nextInt(95)));
            }
            probe(b.toString());
        }
    }

    @Test
    void goodTextsWithOneFault() {
        Random random = new Random(11);
        List<String> good = new ArrayList<>(UNITS.words());
        for (UnitTable.Named n : UnitTable.load().dimensions()) {
            good.addAll(n.spellings());
        }
        for (String text : good) {
            for (int i = 0; i <= text.length(); i++) {
                probe(text.substring(0, i));
                probe(text.substring(i));
                char c = (char) (33 + random.nextInt(94));
                probe(text.substring(0, i) + c + text.substring(i));
                if (i + 2 <= text.length()) {
                    probe(text.substring(0, i) + text.charAt(i + 1) + text.charAt(i) + text.substring(i + 2));
                }
            }
        }
    }

    @Test
    void productsOfAnySize() {
        Random random = new Random(30);
        List<String> words = new ArrayList<>(UNITS.words());
        for (int i = 0; i < 3_000; i++) {
            StringBuilder b = new StringBuilder("1");
            while (b.length() < 90) {
                b.append(random.nextBoolean() ? '*' : '/').append(words.get(random.nextInt(words.size())));
                if (random.nextInt(3) == 0) {
                    b.append('^').append(random.nextInt(61) - 30);
                }
            }
            probe(b.toString());
        }
    }
}
