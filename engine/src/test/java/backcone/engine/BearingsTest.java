package backcone.engine;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import backcone.engine.answers.State;
import org.junit.jupiter.api.Test;

/** Life and static safety of a bearing, asked for in a drive. */
class BearingsTest {
    private static final String DRIVE = """
            drive head "a shaft in bearings" {
              shaft input { speed = 1450 rpm }
              bearing near on input {
                kind             = deep_groove
                dynamic_capacity = 48 kN
                static_capacity  = 33.5 kN
                factor_f0        = 14
                radial_load      = 6 kN
                axial_load       = 2 kN
              }
              require near.life >= %s
              require near.static_safety >= 1.5
            }
            """;

    // 6 kN radial, 2 kN axial: X 0.56, Y 1.641, 6642 N, 377.4 million turns
    @Test
    void lifeOfABearingInADrive() {
        Specs spec = Specs.of(DRIVE.formatted("4000 h"));
        assertThat(spec.messages()).isEmpty();
        assertThat(spec.value("near.life")).isCloseTo(4338, within(1.0));
        assertThat(spec.value("near.equivalent_load")).isCloseTo(6642, within(1.0));
    }

    @Test
    void aLifeWithoutThrustSaidStaysOpen() {
        Specs spec = Specs.of(DRIVE.formatted("4000 h").replace("axial_load       = 2 kN", ""));
        assertThat(spec.requirement("near.life").state()).isEqualTo(State.OPEN);
    }
}
