package backcone.engine;

import static org.assertj.core.api.Assertions.assertThat;

import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

/** What the geometry of a pair says of itself: every impossible, unsound or unusual pair gets its line, a sound one none. */
class GeometryLimitsTest {
    /** A sound straight bevel pair of our own: 17/32 teeth, module 4. */
    private static final String BEVEL = """
            drive d {
              case rated {
                at    = fast
                power = 2 kW
              }
              shaft fast { speed = 600 rpm }
              shaft slow
              bevel head {
                tooth_form     = straight
                shaft_angle    = 90 deg
                outer_module   = 4 mm
                face_width     = 20 mm
                pressure_angle = 20 deg
                proportions    = traditional
                pinion on fast {
                  teeth        = 17
                  support      = overhung
                  overhang     = 30 mm
                  bearing_span = 80 mm
                }
                wheel on slow { teeth = 32 }
              }
            }
            """;

    /** A sound helical pair of our own: 19/46 teeth, module 3. */
    private static final String HELICAL = """
            drive d {
              case rated {
                at    = fast
                power = 2 kW
              }
              shaft fast { speed = 600 rpm }
              shaft slow
              cylindrical head {
                normal_module  = 3 mm
                face_width     = 40 mm
                pressure_angle = 20 deg
                helix_angle    = 15 deg
                pinion on fast {
                  teeth         = 19
                  hand          = left
                  profile_shift = 0.2
                  basic_rack    = iso53_A
                }
                wheel on slow {
                  teeth         = 46
                  profile_shift = 0
                  basic_rack    = iso53_A
                }
              }
            }
            """;

    private static String messages(String base, String from, String to) {
        assertThat(base).contains(from);
        return Specs.of(base.replace(from, to.replace(";", "\n"))).messages();
    }

    @Test
    void soundPairsGetNoLine() {
        assertThat(Specs.of(BEVEL).messages()).isEmpty();
        assertThat(Specs.of(HELICAL).messages()).isEmpty();
    }

    /** The drive has a text called `standard`; the depth taper of that name is a word all the same. */
    @Test
    void aBlankOfStandardTaperIsComputed() {
        String text = BEVEL.replace("proportions    = traditional", "proportions = iso_23509\n depth_taper = standard");
        assertThat(Specs.of(text).value("head.pinion.delta_a"))
                .isEqualTo(Specs.of(text.replace("drive d {", "drive d {\n standard = \"ours\""))
                        .value("head.pinion.delta_a"))
                .isPositive();
    }

    @ParameterizedTest(name = "{2}")
    @CsvSource(
            delimiter = '|',
            value = {
                "face_width     = 20 mm   | face_width     = 24 mm                          | BC5010 .*the face is wider than customary",
                "outer_module   = 4 mm    | outer_module   = 4.2 mm                         | BC5014 .*not a standard module",
                "teeth        = 17        | teeth        = 8                                | BC5010 .*the teeth are undercut at mid-face",
                "teeth        = 17        | teeth        = 12                               | BC5014 .*undercut with so few teeth",
                "wheel on slow { teeth = 32 } | wheel on slow { teeth = 17 }                | BC5014 .*outside the usual pinion teeth",
                "wheel on slow { teeth = 32 } | wheel on slow { teeth = 119 }               | BC5014 .*at most 6 to 1",
                "speed = 600 rpm          | speed = 1500 rpm                                | BC5014 .*usual up to 5 m/s",
                "bearing_span = 80 mm     | bearing_span = 60 mm                            | BC5014 .*a short span",
                "proportions    = traditional | proportions = traditional ; outer_normal_backlash = 0.5 mm | BC5014 .*backlash recommended",
                "overhang     = 30 mm     | overhang = 30 mm ; outer_dedendum = 2 mm       | BC5011 .*touches the bottom",
                "overhang     = 30 mm     | overhang = 30 mm ; outer_addendum = 14 mm      | BC5011 .*come to a point",
                "shaft_angle    = 90 deg  | shaft_angle    = 130 deg                        | BC5011 .*crown or internal gear",
            })
    void aBevelPairOutsideGetsItsLine(String from, String to, String line) {
        assertThat(messages(BEVEL, from, to)).containsPattern(line);
    }

    @ParameterizedTest(name = "{2}")
    @CsvSource(
            delimiter = '|',
            value = {
                "normal_module  = 3 mm    | normal_module  = 3.2 mm                         | BC5014 .*no module of ISO 54",
                "face_width     = 40 mm   | face_width     = 80 mm                          | BC5014 .*wider than is customary",
                "face_width     = 40 mm   | face_width     = 15 mm                          | BC5014 .*customary 6 to 30 modules",
                "hand          = left     | hand = left ; tip_diameter = 80 mm              | BC5011 .*the tooth is pointed",
                "profile_shift = 0.2      | profile_shift = -0.6                            | BC5010 .*the root is undercut",
                "profile_shift = 0.2      | profile_shift = -0.6                            | BC5014 .*usual range from -0.5 to 1",
                "teeth         = 46       | teeth         = 160                             | BC5014 .*at most 8 to 1",
                "face_width     = 40 mm   | face_width = 20 mm ; pinion.tip_diameter = 58 mm | BC5011 .*teeth lose contact",
                "hand          = left     | hand = left ; root_diameter = 56 mm            | BC5011 .*touches the bottom",
                "teeth         = 46       | teeth         = 46 ; hand = left               | BC5011 .*opposite hands",
                "helix_angle    = 15 deg  | helix_angle    = 15 deg ; centre_distance = 100.9 mm | BC5011 .*the teeth are too thick",
            })
    void aCylindricalPairOutsideGetsItsLine(String from, String to, String line) {
        assertThat(messages(HELICAL, from, to)).containsPattern(line);
    }

    // that the tips of 30 in 38 strike was seen by turning both outlines through the mesh
    @Test
    void tipsOfAnInternalPairMayStrike() {
        String internal = HELICAL.replace("helix_angle    = 15 deg", "internal = yes")
                .replace("profile_shift = 0.2", "profile_shift = 0")
                .replace("teeth         = 19", "teeth         = 30");
        assertThat(Specs.of(internal.replace("= 46", "= 38")).messages()).containsPattern("BC5011 .*strike each other");
        assertThat(Specs.of(internal.replace("= 46", "= 60")).messages()).doesNotContain("strike each other");
    }

    @Test
    void theTipsOfAnInternalWheelEndAtItsBaseCircle() {
        String internal = HELICAL.replace("helix_angle    = 15 deg", "internal = yes")
                .replace("profile_shift = 0.2", "profile_shift = 0");
        assertThat(Specs.of(internal.replace("= 46", "= 30")).messages())
                .containsPattern("BC5011 .*lies inside the base circle");
    }

    @Test
    void everyLimitOfOneBlockIsTold() {
        String m = Specs.of(BEVEL.replace("face_width     = 20 mm", "face_width     = 24 mm")
                        .replace("outer_module   = 4 mm", "outer_module   = 4.2 mm")
                        .replace("speed = 600 rpm", "speed = 1500 rpm"))
                .messages();
        assertThat(m).contains("not a standard module", "usual up to 5 m/s");
    }
}
