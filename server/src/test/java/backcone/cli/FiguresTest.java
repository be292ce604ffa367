package backcone.cli;

import static org.assertj.core.api.Assertions.assertThat;

import backcone.engine.answers.RequirementAnswer;
import backcone.engine.answers.State;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import java.io.PrintWriter;
import java.io.StringWriter;
import java.util.List;
import org.junit.jupiter.api.Test;

/** Numbers as a table shows them. */
class FiguresTest {
    private static String value(double value, double required) {
        return Figures.value(new RequirementAnswer(
                "a.b",
                null,
                null,
                null,
                null,
                null,
                null,
                null,
                "",
                value,
                required,
                Double.NaN,
                ">=",
                "",
                0,
                1,
                State.SHORT,
                new FileId("a.drive"),
                Span.NONE,
                List.of(),
                List.of(),
                null,
                List.of(),
                null,
                null));
    }

    @Test
    void columnsOfFiguresHaveOneNumberOfDigits() {
        assertThat(Figures.fixed(3.6, 4)).isEqualTo("3.600");
        assertThat(Figures.fixed(37.3151, 4)).isEqualTo("37.32");
        assertThat(Figures.fixed(0.90949, 4)).isEqualTo("0.9095");
        assertThat(Figures.fixed(9.99996, 4)).isEqualTo("10.00");
        assertThat(Figures.fixed(16, 4)).isEqualTo("16");
        assertThat(Figures.fixed(123456.7, 4)).isEqualTo("123500");
        assertThat(Figures.fixed(1.2e-7, 4)).isEqualTo("1.2e-7");
    }

    @Test
    void aValueJustBelowItsBarLooksDifferentFromIt() {
        assertThat(value(0.99999, 1)).isEqualTo("0.99999");
        assertThat(value(1.0 - 1e-12, 1)).startsWith("1");
        assertThat(value(0.9123, 1)).isEqualTo("0.9123");
        assertThat(value(Double.NaN, 1)).isEqualTo("–");
    }

    @Test
    void marginsAndReservesAreShort() {
        assertThat(Figures.margin(0.0741, ">=")).isEqualTo("+7.4 %");
        assertThat(Figures.margin(-0.0949, ">=")).isEqualTo("−9.5 %");
        assertThat(Figures.margin(2.134, ">=")).isEqualTo("+213 %");
        assertThat(Figures.margin(-0.0002, ">=")).isEqualTo("−0.02 %");
        assertThat(Figures.margin(0, ">=")).isEqualTo("+0 %");
        assertThat(Figures.margin(Double.POSITIVE_INFINITY, ">=")).isEqualTo("ample");
        assertThat(Figures.margin(0, "==")).isEmpty();
        assertThat(Figures.reserve(0.9041)).isEqualTo("× 0.90");
        assertThat(Figures.reserve(12.34)).isEqualTo("× 12.3");
        assertThat(Figures.reserve(Double.NaN)).isEmpty();
    }

    @Test
    void numbersLineUpByTheirPoint() {
        Columns c = new Columns("", 3, 1);
        c.row("", "value", "");
        c.row("a", "3.600", "x");
        c.row("b", "37.32 rpm", "");
        c.row("c", "–", "y");
        StringWriter out = new StringWriter();
        c.print(new PrintWriter(out, true), (column, cell, row) -> cell);
        assertThat(out.toString().lines())
                .containsExactly("   value", "a   3.600     x", "b  37.32 rpm", "c   –         y");
    }

    @Test
    void longLinesBreakAtBlanksAndStayWhole() {
        StringWriter out = new StringWriter();
        PrintWriter w = new PrintWriter(out, true);
        Usage.wrap("one two three four five", 2, 4, 12, w);
        Usage.wrap("a_word_that_is_longer_than_any_line and more", 0, 2, 12, w);
        assertThat(out.toString().lines())
                .containsExactly(
                        "  one two",
                        "    three",
                        "    four",
                        "    five",
                        "a_word_that_is_longer_than_any_line",
                        "  and more");
    }
}
