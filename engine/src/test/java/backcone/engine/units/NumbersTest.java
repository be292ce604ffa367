package backcone.engine.units;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.Locale;
import java.util.Random;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

class NumbersTest {
    @ParameterizedTest
    @CsvSource({
        "3.14159265, 3, 3.14",
        "12500, 3, 12500",
        "12499.6, 4, 12500",
        "12345.678, 4, 12350",
        "0.000123, 3, 1.23e-4",
        "-0.000123, 3, -1.23e-4",
        "0.00123, 3, 0.00123",
        "0.0005, 3, 0.0005",
        "-0.0005, 3, -0.0005",
        "0.00051, 3, 5.1e-4",
        "1e-9, 3, 1e-9",
        "1234567, 4, 1235000",
        "9999999.9, 4, 1e7",
        "34200000, 4, 3.42e7",
        "2e30, 4, 2e30",
        "1.50, 4, 1.5",
        "100, 3, 100",
        "0.1, 17, 0.10000000000000001",
        "-0.0, 3, 0",
        "0, 3, 0",
        "5, 0, 5",
        "1.7976931348623157e308, 4, 1.798e308",
        "4.9e-324, 4, 4.941e-324"
    })
    void numbersAreRoundedAsAnEngineerWould(double value, int significant, String text) {
        assertThat(Numbers.format(value, significant)).isEqualTo(text);
    }

    @ParameterizedTest
    @CsvSource({
        "36, 36",
        "0.025, 0.025",
        "293.15, 293.15",
        "0.1, 0.1",
        "-0.0, 0",
        "1234567890, 1234567890",
        "20000000, 2e7",
        "2000000, 2000000",
        "123456789012, 123456789012",
        "0.000001, 0.000001",
        "0.0000000125, 1.25e-8",
        "1e23, 1e23",
        "2e-3, 0.002",
        "0.30000000000000004, 0.30000000000000004",
        "1e300, 1e300",
        "4.9e-324, 5e-324",
        "2.2250738585072014e-308, 2.2250738585072014e-308",
        "1.7976931348623157e308, 1.7976931348623157e308"
    })
    void exactTextsAreShort(double value, String text) {
        assertThat(Numbers.exact(value)).isEqualTo(text);
    }

    @Test
    void exactTextsReadBack() {
        Random random = new Random(3);
        for (int i = 0; i < 20_000; i++) {
            double any = Double.longBitsToDouble(random.nextLong());
            double usual = Math.scalb(random.nextDouble() - 0.5, random.nextInt(40) - 20);
            for (double v : new double[] {any, usual}) {
                if (!Double.isNaN(v) && !Double.isInfinite(v)) {
                    assertThat(Double.parseDouble(Numbers.exact(v))).isEqualTo(v);
                }
            }
        }
    }

    @Test
    void whatIsNoNumberIsShown() {
        assertThat(Numbers.format(Double.NaN, 3)).isEqualTo("–");
        assertThat(Numbers.format(Double.POSITIVE_INFINITY, 3)).isEqualTo("∞");
        assertThat(Numbers.exact(Double.NEGATIVE_INFINITY)).isEqualTo("-∞");
        assertThat(Numbers.exact(Double.NaN)).isEqualTo("–");
    }

    @Test
    void theCountryOfTheMachineDoesNotMatter() {
        Locale before = Locale.getDefault();
        try {
            for (Locale l :
                    new Locale[] {Locale.GERMANY, Locale.forLanguageTag("ar-EG"), Locale.forLanguageTag("tr-TR")}) {
                Locale.setDefault(l);
                assertThat(Numbers.format(1234.5, 5)).isEqualTo("1234.5");
                assertThat(Numbers.exact(0.5)).isEqualTo("0.5");
                assertThat(UnitsTest.unit("MPa*min/mm").text()).isEqualTo("MPa*min/mm");
            }
        } finally {
            Locale.setDefault(before);
        }
    }
}
