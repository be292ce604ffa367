package backcone.engine;

import static org.assertj.core.api.Assertions.assertThat;

import org.junit.jupiter.api.Test;

/** Miner's sum and the safety factor over a load spectrum, on the life lines of case-hardened steel after ISO 6336. */
class SpectraTest {
    private static final String LINES = """
            source own "own check figures"

            method house_lines for mesh "life lines of case-hardened steel" {
              include spectra
              let S_Hmin = 1
              let S_Fmin = 1
              each member {
                y_c1 "asked of the flank" : Ratio
                y_r1 "asked of the root" : Ratio
                let N_c1 = 1e5
                let Z_c1 = 1.6
                let N_c2 = 5e7
                let Z_c2 = 1
                let N_c3 = 1e10
                let Z_c3 = 0.85
                let N_r1 = 1e3
                let Y_r1 = 2.5
                let N_r2 = 3e6
                let Y_r2 = 1
                let N_r3 = 1e10
                let Y_r3 = 0.85
              }
              example "spectrum" per own {
                shaft motor { speed = 1200 rpm }
                pinion.n = 1200 rpm
                wheel.n = 400 rpm
                duty {
                  at = motor
            %s
                }
            %s
              }
            }
            """;

    private static String problems(String duty, String rest) {
        return Specs.method(LINES.formatted(duty, rest)).messages();
    }

    private static String bin(String name, String share, String torque, String more) {
        return "bin " + name + " {\n share = " + share + "\n torque = " + torque + "\n" + more + "}\n";
    }

    // 1155.7 MPa at 1000 N m against 1487.7 MPa, the other factors those of 800 N m
    @Test
    void flankUnderThreeLevels() {
        assertThat(problems(
                        "torque = 800 N*m\n required_life = 1.776e9 cycles\n" + bin("a", "5 %", "1000 N*m", "")
                                + bin("b", "25 %", "800 N*m", "") + bin("c", "70 %", "500 N*m", ""),
                        """
                        pinion.y_c1 = 1155.7 / sqrt(1.25) / 1487.7
                        gives pinion.U_c  = 5.3e-4    within 1 %
                        gives pinion.S_cs = 1.260     within 0.0005
                        gives pinion.T_ec = 720.4 N*m within 0.05 N*m
                        gives pinion.p_c2 = 13.222469 within 0.0001 %
                        gives pinion.p_c3 = 32.60123  within 0.0001 %
                        gives pinion.p_r2 = 8.73725   within 0.01 %
                        gives pinion.p_r3 = 49.9125   within 0.0001 %
                        """))
                .isEmpty();
    }

    // root stress 400 MPa at the nominal torque against 800 MPa
    @Test
    void rootUnderThreeLevels() {
        assertThat(problems(
                        "torque = 100 N*m\n required_life = 20000 h\n" + bin("start", "2 %", "180 N*m", "")
                                + bin("full", "58 %", "100 N*m", "")
                                + bin("idle", "40 %", "30 N*m", "speed = 600 rpm\n"),
                        """
                        pinion.y_r1 = 0.5
                        gives pinion.U_r  = 0.0499344 within 0.001 %
                        gives pinion.S_rs = 1.06189   within 0.001 %
                        """))
                .isEmpty();
    }

    // ten cycles above the static strength: each counts as the last; the static strength sets the safety factor
    @Test
    void aBinAboveTheStaticStrengthFails() {
        assertThat(problems(
                        "required_life = 1000000 cycles\n" + bin("crash", "0.001 %", "100 N*m", "")
                                + bin("run", "99.999 %", "10 N*m", ""),
                        """
                        pinion.y_r1 = 3
                        wheel.y_r1  = 2.4
                        gives pinion.U_r  = 10     within 0.0001 %
                        gives pinion.S_rs = 2.5 / 3 within 0.0001 %
                        gives wheel.S_rs  = 2.5 / 2.4 within 0.0001 %
                        gives wheel.N_L   = 1e6 / 3 within 0.0001 %
                        """))
                .isEmpty();
    }
}
