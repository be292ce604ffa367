package backcone.engine.parse;

import static org.assertj.core.api.Assertions.assertThat;

import backcone.engine.diagnostics.Code;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.text.FileId;
import java.util.Objects;
import java.util.Random;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.FieldSource;

class FormatterTest {
    private static final FileId FILE = new FileId("text.drive");

    @ParameterizedTest
    @FieldSource("backcone.engine.parse.Texts#NAMES")
    void formattingTwiceChangesNothingAndKeepsTheMeaning(String name) {
        check(Texts.read(name));
    }

    /** Blanks, blank lines and comments where they do no harm. */
    @ParameterizedTest
    @FieldSource("backcone.engine.parse.Texts#NAMES")
    void howeverItWasLaidOut(String name) {
        Random random = new Random(20260304);
        for (int k = 0; k < 20; k++) {
            StringBuilder b = new StringBuilder();
            for (String line : Texts.read(name).split("\n", -1)) {
                String shaken = line.indexOf('"') >= 0 || line.indexOf('#') >= 0
                        ? line
                        : line.replace(" = ", random.nextBoolean() ? " =   " : " = ")
                                .replace(" { ", "{")
                                .replace("(", "( ");
                b.append(" ".repeat(random.nextInt(4))).append(shaken);
                int extra = random.nextInt(8);
                if (extra == 0 && !line.contains("#")) {
                    b.append("   # a remark");
                } else if (extra == 1 && line.isBlank()) {
                    b.append("\n\n\n");
                } else if (extra == 2) {
                    b.append("\n   # on its own line");
                }
                b.append('\n');
            }
            check(b.toString());
        }
    }

    private static String check(String text) {
        Formatter.Result once = Formatter.format(FILE, text);
        assertThat(once.problems()).isEmpty();
        String formatted = Objects.requireNonNull(once.text());
        assertThat(TreeText.of(Texts.parse(formatted).tree()))
                .isEqualTo(TreeText.of(Texts.parse(text).tree()));
        assertThat(Formatter.format(FILE, formatted).text()).isEqualTo(formatted);
        return formatted;
    }

    @Test
    void oneEntryALineAndSignsInLine() {
        assertThat(check("""
                drive d "x" {


                duty { power=22 kW   per "sheet"; at = motor
                required_life= 25000h  because  "x" }
                   shaft motor{speed=1480rpm}
                   shaft c { speed = 5 rpm }
                # about the mesh

                # and more
                 bevel head{ pinion on motor { teeth=16 } # small
                 wheel on c { teeth=43
                 hand=left }
                 }
                }
                """)).isEqualTo("""
                drive d "x" {
                  duty {
                    power         = 22 kW       per "sheet"
                    at            = motor
                    required_life = 25000 h     because "x"
                  }
                  shaft motor { speed = 1480 rpm }
                  shaft c     { speed = 5 rpm }
                  # about the mesh

                  # and more
                  bevel head {
                    pinion on motor { teeth = 16 }     # small
                    wheel on c {
                      teeth = 43
                      hand  = left
                    }
                  }
                }
                """);
    }

    @Test
    void choicesTablesAndContinuedLines() {
        assertThat(check("""
                method m for bevel {
                C_v "factor" : Ratio = choose finish { formed=>3/(3+v); else => choose {a>1=>2
                else=>-3^2} } taking v in m/s
                F : Force
                = 21*v*(b*C+F_t)
                per x, agreed
                y = f (a,b) - - c
                table t by a,b:Length in mm
                rows linear per x {
                a in mm|one|two
                4|0.1 mm|-20
                }
                cases c{u,v}
                }
                """)).isEqualTo("""
                method m for bevel {
                  C_v "factor" : Ratio = choose finish {
                      formed => 3 / (3 + v)
                      else => choose {
                          a > 1 => 2
                          else  => -3^2
                        }
                    }     taking v in m/s
                  F : Force
                      = 21 * v * (b * C + F_t)
                      per x, agreed
                  y = f(a, b) - -c
                  table t by a, b : Length in mm
                      rows linear     per x {
                    a in mm | one    | two
                    4       | 0.1 mm | -20
                  }
                  cases c { u, v }
                }
                """);
    }

    @Test
    void aPowerNeverTouchesAUnit() {
        assertThat(check("a = (5 mm) ^ 2 + 5 mm ^ 2\n")).isEqualTo("a = (5 mm)^2 + 5 mm ^ 2\n");
    }

    @Test
    void commentsStayWithTheirEntry() {
        assertThat(check("""
                # head


                # of the file
                a = 1 # one
                bb = 2   # two
                c = 1 # inside
                + 2   # behind
                shaft x # the shaft
                {
                # first
                d = 1
                # last
                }
                # end""")).isEqualTo("""
                # head

                # of the file
                a  = 1     # one
                bb = 2     # two
                c = 1     # inside
                    + 2     # behind
                shaft x {     # the shaft
                  # first
                  d = 1
                  # last
                }
                # end
                """);
    }

    @Test
    void lineEndsAndByteOrderMarkAreKept() {
        assertThat(check("\uFEFFa=1\r\n\r\n\r\nb =2")).isEqualTo("\uFEFFa = 1\r\n\r\nb = 2\r\n");
    }

    @Test
    void numbersAndTextsAreNeverRewritten() {
        assertThat(check("a = 5.00 mm\nb = 1E-3\nc = \"  a \\\" b  \"\n"))
                .isEqualTo("a = 5.00 mm\nb = 1E-3\nc = \"  a \\\" b  \"\n");
    }

    @Test
    void anEmptyTextStaysEmpty() {
        assertThat(check("")).isEmpty();
        assertThat(check("\n\n")).isEmpty();
    }

    @Test
    void aTextWithSyntaxErrorsIsLeftAlone() {
        Formatter.Result result = Formatter.format(FILE, "a = \nb=1\n");
        assertThat(result.text()).isNull();
        assertThat(result.problems())
                .singleElement()
                .extracting(Diagnostic::code)
                .isEqualTo(Code.MISSING_VALUE);
    }
}
