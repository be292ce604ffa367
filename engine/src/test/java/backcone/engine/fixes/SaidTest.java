package backcone.engine.fixes;

import static org.assertj.core.api.Assertions.assertThat;

import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

/** Fixes that a finding proposes: the nearest name, the unit that was meant. */
class SaidTest {

    @ParameterizedTest
    @CsvSource(
            delimiter = '|',
            value = {
                "face_width     = 30 | face_widht     = 30 | face_widht",
                "material = steel_42CrMo4_265 | material = steel_42CrMo4_256 | steel_42CrMo4_256",
                "25 rpm | 25 rpn | rpn",
                "carefully_cut | carefuly_cut | carefuly_cut",
                "by lewis_buckingham under rated | by lewis_bukingham under rated | lewis_bukingham",
                "endurance_strength >= 1.25 | endurence_strength >= 1.25 | endurence_strength",
            })
    void theNearestNameIsOneStepAway(String right, String wrong, String at) {
        Desk desk = Desk.sample("sluice_gate.drive");
        Desk broken = Desk.sample("sluice_gate.drive").but(right, wrong);
        Fix f = broken.at(at).stream()
                .filter(x -> x.title().startsWith("write "))
                .findFirst()
                .orElseThrow(() -> new AssertionError(broken.at(at)));
        assertThat(f.preferred()).isTrue();
        assertThat(f.kind()).isEqualTo(Fix.Kind.QUICK_FIX);
        Desk after = broken.after(f);
        for (int i = 0; i < 20 && after.text().contains(at); i++) {
            after = after.after(after.at(at).get(0));
        }
        assertThat(after.text()).isEqualTo(desk.text());
    }

    @Test
    void whereNothingIsWrongAndNothingShortNothingIsMended() {
        assertThat(Desk.sample("sluice_gate.drive").at("document")).noneMatch(f -> f.kind() == Fix.Kind.QUICK_FIX);
    }
}
