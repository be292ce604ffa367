package backcone.engine.fixes;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import backcone.engine.Analysis;
import backcone.engine.answers.DriveAnswer;
import backcone.engine.answers.RequirementAnswer;
import backcone.engine.answers.State;
import backcone.engine.diagnostics.Code;
import backcone.engine.diagnostics.Severity;
import java.util.List;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

/** Fixes that write text for a person to fill in, and texts that say the same otherwise. */
class FactsTest {
    private static final String OPEN = """
            use "library/through-hardened-steels.drive"

            drive d "hand drive" {
              case rated {
                at             = crank
                torque         = 90 N*m
                service_factor = 1
              }
              shaft crank { speed = 25 rpm }
              shaft spindle
              bevel crown {
                tooth_form     = straight
                outer_module   = 5 mm
                pressure_angle = 20 deg
                proportions    = traditional
                tooth_making   = formed
                pinion on crank {
                  teeth   = 16
                  support = overhung
                  material {
                    designation      = "42CrMo4 +QT"
                    class            = V_alloy
                    static_stress    = 245 MPa
                    surface_hardness = 265 HBW
                  }
                }
                wheel on spindle { teeth = 37; support = overhung }
              }
              rate crown by lewis_buckingham under rated {
                bending >= 1.0
              }
            }
            """;

    // ---- missing inputs

    @Test
    void whatARequirementWaitsForIsWrittenAsFactsToFillIn() {
        Desk desk = Desk.of(OPEN);
        Fix f = desk.fix("bending >= 1.0", "add 3 missing inputs");
        assertThat(f.preferred()).isTrue();
        assertThat(f.codes()).containsExactly("BC4001");
        Desk after = desk.after(f);
        assertThat(after.text())
                .contains("    face_width     =     # in mm, 0.5 mm to 3000 mm: face width of the mesh\n")
                .contains("    tooth_system   =     # full_depth_20 or full_depth_14_5 or stub_20: ")
                .contains("    wheel on spindle { teeth = 37; support = overhung\n"
                        + "      material =     # a material by its name: material\n"
                        + "    }\n");
        // nothing is assumed: it stays open and the empty places are errors
        assertThat(after.analyse().diagnostics())
                .filteredOn(d -> d.code() == Code.MISSING_VALUE)
                .hasSize(3);
        assertThat(states(after)).containsOnly(State.OPEN);
        // and it computes once they are filled in
        Desk filled = after.but("face_width     = ", "face_width     = 30 mm")
                .but("tooth_system   = ", "tooth_system   = full_depth_20")
                .but("material = ", "material = steel_C45E_215");
        assertThat(filled.analyse().diagnostics())
                .filteredOn(d -> d.severity() == Severity.ERROR)
                .isEmpty();
        assertThat(states(filled)).doesNotContain(State.OPEN);
    }

    private static List<State> states(Desk d) {
        return d.analyse().drives().stream()
                .flatMap(x -> x.requirements().stream())
                .map(RequirementAnswer::state)
                .toList();
    }

    // ---- units

    @ParameterizedTest
    @CsvSource(
            delimiter = '|',
            value = {
                // defining values: 1 in = 25.4 mm, 1 lbf = 4.4482216152605 N
                "sluice_gate.drive | 30 mm     | in     | 1.181102",
                "sluice_gate.drive | 90 N*m    | lbf*in | 796.5671",
                "slat_conveyor.drive | 4.0 kW  | hp     | 5.364088",
                "beet_washer.drive | 65 degC   | degF   | 149",
                "slat_conveyor.drive | 20 deg  | rad    | 0.3490659",
            })
    void aQuantityIsWrittenInAnotherUnitOfItsKind(String sample, String at, String unit, String value) {
        Desk desk = Desk.sample(sample);
        Fix f = desk.fix(at, "write in " + unit + ": ");
        assertThat(f.title()).startsWith("write in " + unit + ": " + value + " " + unit);
        assertThat(f.kind()).isEqualTo(Fix.Kind.REWRITE);
        Desk after = desk.after(f);
        assertThat(after.text()).contains("= " + value + " " + unit);
        same(desk.analyse(), after.analyse(), 1e-6);
    }

    @Test
    void bothEndsOfARangeAreConvertedTogether() {
        Desk desk = Desk.sample("beet_washer.drive");
        Desk after = desk.after(desk.fix("0.70 mm", "write in in"));
        assertThat(after.text()).contains("case_depth   = 0.02755906 in .. 0.03543307 in");
    }

    @Test
    void unitsOfAGroupBelongTogether() {
        for (List<String> group : Steps.standard().units) {
            for (String u : group) {
                assertThat(java.util.Objects.requireNonNull(Axis.unit(u)).dimension())
                        .as(u)
                        .isEqualTo(java.util.Objects.requireNonNull(Axis.unit(group.get(0)))
                                .dimension());
            }
        }
    }

    private static void same(Analysis before, Analysis after, double tolerance) {
        for (int i = 0; i < before.drives().size(); i++) {
            DriveAnswer a = before.drives().get(i);
            DriveAnswer b = after.drives().get(i);
            for (int k = 0; k < a.requirements().size(); k++) {
                RequirementAnswer x = a.requirements().get(k);
                RequirementAnswer y = b.requirements().get(k);
                assertThat(y.id()).isEqualTo(x.id());
                assertThat(y.state()).isEqualTo(x.state());
                if (!Double.isNaN(x.value())) {
                    assertThat(y.value()).isCloseTo(x.value(), within(tolerance * Math.abs(x.value())));
                }
            }
        }
    }

    // ---- requirements and deviations

    @Test
    void aCheckThatNothingAsksForGetsALineWhoseBoundIsStillToBeTyped() {
        Desk desk = Desk.sample("sluice_gate.drive");
        Fix wear = desk.fix("rate crown by lewis_buckingham as jammed", "require `wear`");
        assertThat(wear.title()).isEqualTo("require `wear` (now 0.7648)");
        Desk after = desk.after(wear);
        assertThat(after.text()).contains("    wear >=     # now 0.7648: wear load over dynamic load\n  }\n");
        assertThat(after.analyse().diagnostics()).anyMatch(d -> d.severity() == Severity.ERROR);
        Desk typed = after.but("    wear >= ", "    wear >= 0.5");
        assertThat(typed.requirement("crown.jammed.wear").state()).isEqualTo(State.CLEAR);
        // more load asks for a harder pair: the bound is an upper one
        Fix hard = desk.fix("rate crown by lewis_buckingham as jammed", "require `hardness_needed`");
        assertThat(hard.edits().get(0).text()).contains("hardness_needed <=");
        assertThat(desk.at("rate crown by lewis_buckingham under"))
                .noneMatch(f -> f.title().startsWith("require `wear`"));
    }

    @Test
    void aDeviationIsTheLastOfAllAndCountsOnlyWhenAPersonHasSigned() {
        Desk desk = Desk.sample("sluice_gate.drive").but("90 N*m           measured", "300 N*m          measured");
        List<Fix> all = desk.at("wear >= 1.0");
        Fix last = all.get(all.size() - 1);
        assertThat(last.title()).startsWith("accept `wear` at 0.467 as a deviation");
        assertThat(last.preferred()).isFalse();
        assertThat(all.stream().filter(f -> f.title().startsWith("accept"))).hasSize(1);
        Desk after = desk.after(last);
        assertThat(after.requirement("crown.lewis_buckingham.wear").state()).isEqualTo(State.SHORT);
        assertThat(after.analyse().diagnostics())
                .anyMatch(d -> d.code() == Code.NEEDS_REASON)
                .anyMatch(d -> d.code() == Code.SYNTAX);
        String placeholders = "until  by \"\"\n      because \"\"";
        assertThat(after.text()).contains(placeholders);
        // each of the three is needed
        for (String half : List.of(
                "until 2027-01-31 by \"\"\n      because \"\"",
                "until 2027-01-31 by \"A. Brandt\"\n      because \"\"",
                "until 2027-01-31 by \"\"\n      because \"spare set ordered\"",
                "until  by \"A. Brandt\"\n      because \"spare set ordered\"")) {
            Desk part = desk.after(last).but(placeholders, half);
            assertThat(part.requirement("crown.lewis_buckingham.wear").state())
                    .as(half)
                    .isEqualTo(State.SHORT);
        }
        Desk signed = desk.after(last)
                .but(placeholders, "until 2027-01-31 by \"A. Brandt\"\n      because \"spare set ordered\"");
        assertThat(signed.requirement("crown.lewis_buckingham.wear").state()).isEqualTo(State.ACCEPTED);
    }

    @Test
    void whatIsMetNeedsNoDeviation() {
        for (String at : List.of("bending >= 1.0", "wear >= 1.0", "bending >= 1.5")) {
            assertThat(Desk.sample("sluice_gate.drive").at(at))
                    .noneMatch(f -> f.title().startsWith("accept"));
        }
    }

    // ---- names for values

    @Test
    void aRepeatedValueGetsANameAndBack() {
        Desk desk = Desk.sample("slat_conveyor.drive");
        Fix f = desk.fix("20 deg", "name 20 deg, written 2 times for `pressure_angle`");
        assertThat(f.kind()).isEqualTo(Fix.Kind.EXTRACT);
        Desk named = desk.after(f);
        assertThat(named.text())
                .contains("  let common_pressure_angle = 20 deg\n  document = ")
                .contains("pressure_angle = common_pressure_angle\n");
        same(desk.analyse(), named.analyse(), 0);
        Fix back = named.fix("common_pressure_angle = 20", "write out `common_pressure_angle` as 20 deg in 2 places");
        assertThat(back.kind()).isEqualTo(Fix.Kind.INLINE);
        assertThat(named.after(back).text()).isEqualTo(desk.text());
        assertThat(named.fix("common_pressure_angle\n", "write out").title()).isEqualTo(back.title());
    }

    @Test
    void aSumIsWrittenOutInBrackets() {
        Desk desk = Desk.sample("sluice_gate.drive")
                .but("  # 250 N at the rim", "  let pull = 200 N + 50 N\n\n  # 250 N at the rim")
                .but("90 N*m           measured \"ten trial lifts, 2026-02-18\"", "pull * 0.36 m");
        Fix f = desk.fix("pull = 200 N", "write out `pull`");
        assertThat(desk.after(f).text()).contains("= (200 N + 50 N) * 0.36 m");
        same(desk.analyse(), desk.after(f).analyse(), 0);
    }

    // ---- shared blocks

    @Test
    void aMaterialWrittenInsideAMemberMovesToTheLibraryOrBecomesAReference() {
        Desk desk = Desk.of(OPEN)
                .but(
                        "tooth_making   = formed",
                        "tooth_making   = formed\n    tooth_system   = stub_20\n    face_width = 30 mm")
                .but("support = overhung }", "support = overhung; material = steel_C45E_215 }");
        assertThat(states(desk)).doesNotContain(State.OPEN);
        Fix refer = desk.fix("material {", "refer to `steel_42CrMo4_265`");
        assertThat(desk.after(refer).text()).contains("      material = steel_42CrMo4_265\n    }\n");
        same(desk.analyse(), desk.after(refer).analyse(), 0);
        Fix move = desk.fix("material {", "move to library/through-hardened-steels.drive as `material_42CrMo4_QT`");
        Desk after = desk.after(move);
        assertThat(after.text()).contains("      material = material_42CrMo4_QT\n    }\n");
        assertThat(after.text("library/through-hardened-steels.drive"))
                .endsWith(
                        "}\n\nmaterial material_42CrMo4_QT {\n  designation      = \"42CrMo4 +QT\"\n"
                                + "  class            = V_alloy\n  static_stress    = 245 MPa\n  surface_hardness = 265 HBW\n}\n");
        same(desk.analyse(), after.analyse(), 0);
        // another strength is another state of the steel
        assertThat(desk.but("245 MPa", "250 MPa").at("material {"))
                .noneMatch(f -> f.title().startsWith("refer to"));
    }

    @Test
    void aNamedMaterialOfADriveMovesToTheLibrary() {
        String own = "material steel_own \"42CrMo4, 280 HBW\" {\n  class            = V_alloy\n"
                + "  static_stress    = 245 MPa\n  surface_hardness = 280 HBW\n}\n\n";
        Desk desk = Desk.sample("sluice_gate.drive")
                .but("drive sluice_gate \"", own + "drive sluice_gate \"")
                .but("material = steel_42CrMo4_265", "material = steel_own");
        Fix f = desk.fix("material steel_own", "move `steel_own` to library/through-hardened-steels.drive");
        Desk after = desk.after(f);
        assertThat(after.text()).doesNotContain("material steel_own");
        assertThat(after.text("library/through-hardened-steels.drive")).endsWith("}\n\n" + own.strip() + "\n");
        same(desk.analyse(), after.analyse(), 0);
    }
}
