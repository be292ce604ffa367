package backcone.engine;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import backcone.engine.answers.State;
import org.junit.jupiter.api.Test;

/** Where a bevel rating after AGMA 2003 ends: outside what is printed, and open where only a reading would do. */
class AgmaBevelTest {
    private static final String DRIVE = """
            drive d "a drive" {
              case rated {
                at              = motor
                power           = 10 hp
                overload_factor = 1
                required_life   = 5000 h
                reversal        = one_way
              }
              shaft motor { speed = 870 rpm }
              shaft out
              bevel head {
                tooth_form            = straight
                proportions           = traditional
                outer_diametral_pitch = 7 1/in
                face_width            = 1.15 in
                pressure_angle        = 20 deg
                accuracy              = 8 AGMA_Q
                contact_pattern { developed = yes }
                pinion on motor {
                  teeth    = 20
                  support  = overhung
                  material = steel
                }
                wheel on out {
                  teeth    = 50
                  support  = straddled
                  material = steel
                }
              }
              lubrication { oil_temperature = 180 degF }
              rate head by agma_2003 as main {
                pitting >= 1
                bending >= 1
              }
            }
            material steel "carburised" {
              class      = Eh
              treatment  = case_hardened
              agma_grade = 1
            }
            """;

    private static State state(String from, String to) {
        assertThat(DRIVE).contains(from);
        return Specs.of(DRIVE.replace(from, to))
                .requirement("head.main.pinion.bending")
                .state();
    }

    // tables of straight pairs at the full face of the charts, 20 to 50 teeth
    @Test
    void geometryFactorsOfAStraightPairNeedNoChart() {
        Specs s = Specs.of(DRIVE);
        assertThat(s.errors()).isEmpty();
        assertThat(s.value("head.main.I")).isCloseTo(0.0814, within(0.0003));
        assertThat(s.value("head.main.pinion.J")).isCloseTo(0.242, within(0.001));
        assertThat(s.value("head.main.wheel.J")).isCloseTo(0.204, within(0.001));
        assertThat(s.requirement("head.main.pinion.bending").state()).isEqualTo(State.CLEAR);
    }

    @Test
    void outsideWhatIsPrintedIsNeverClear() {
        assertThat(state("8 AGMA_Q", "4 AGMA_Q")).isEqualTo(State.OUTSIDE);
        assertThat(state("870 rpm", "9000 rpm")).isEqualTo(State.OUTSIDE);
        assertThat(state("5000 h", "500000 h")).isEqualTo(State.OUTSIDE);
        assertThat(state("180 degF", "20 degF")).isEqualTo(State.OUTSIDE);
        assertThat(state("pitting >= 1\n", "reliability = 80 %\n pitting >= 1\n"))
                .isEqualTo(State.OUTSIDE);
    }

    @Test
    void whatOnlyAReadingKnowsIsOpen() {
        String spiral = DRIVE.replace("straight", "spiral\n mean_spiral_angle = 35 deg");
        Specs s = Specs.of(spiral);
        assertThat(s.requirement("head.main.pinion.bending").state()).isEqualTo(State.OPEN);
        assertThat(s.messages()).contains("head.pinion.geometry_factor_I").contains("head.pinion.geometry_factor_J");
        assertThat(state("agma_grade = 1", "")).isEqualTo(State.OPEN);
        assertThat(state("straight", "skew\n mean_spiral_angle = 20 deg")).isEqualTo(State.OPEN);
    }
}
