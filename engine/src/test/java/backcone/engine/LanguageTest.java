package backcone.engine;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import backcone.engine.answers.Explanation;
import backcone.engine.answers.RequirementAnswer;
import backcone.engine.answers.State;
import org.junit.jupiter.api.Test;

/** What the language means, on a small method of our own: limits, readings, editions, includes, roots, iterations, deviations. */
class LanguageTest {
    private static final String HOUSE = """
            source own "own check figures"

            method house_part for mesh "a building block" {
              loss_factor "a factor" : Ratio = 2 * k_in      per own, derived
              k_in "its input" : Ratio default 3
            }

            method house for bevel "a method of the house" {
              edition 2020, 2010
              include house_part
              applies when shaft_angle == 90 deg    else "the house rates right angles only"

              strength "allowed force" : Force
              use_factor "factor of use" : Ratio = choose edition {
                  2020 => 1.0
                  2010 => 1.25
                }                                    per own, derived
              slope "slope" : Ratio = 2.0            per own, derived
                  reading steep = 1.2                per own, derived
              F_house "force" : Force = 2 * pinion.T / (m_et * pinion.z)     per own, derived
              hot "temperature that feeds itself" : Temperature
                  = settle 300 K + 0.2 * (hot - 300 K) + 8 K from 300 K within 0.000001 K at most 200     per own, derived
              corner "where x squared is two" : Ratio = root of corner^2 == loss_factor / 3 between 0.5 and 3     else "no corner"     per own, derived
              limit slow "pitch line speed" : rim_speed(m_et * pinion.z, pinion.n) <= 2 m/s      else "the house rates slow pairs only"
              limit only_a "width" for F_house : face_width >= 5 mm      else "too narrow for the force"
              each member {
                safety "safety" : Ratio = strength * slope / (F_house * use_factor * loss_factor)     per own, derived
                check holds "strength over force" = safety
              }
              check warm "how warm" : Temperature = hot
            }
            """;

    private static String drive(String mesh, String rest) {
        return """
               use "house.method"
               drive d "a drive" {
                 case rated { at = motor
                              power = 1 kW
                            }
                 shaft motor { speed = 100 rpm }
                 shaft out
                 bevel head {
                   outer_module = 5 mm
                   face_width = 20 mm
               %s
                   pinion on motor { teeth = 20 }
                   wheel on out { teeth = 40 }
                 }
               %s
               }
               """.formatted(mesh, rest);
    }

    private static Specs specs(String mesh, String rest) {
        return Specs.of(drive(mesh, rest)).with("house.method", HOUSE);
    }

    private static final String RATE = "rate head by house edition 2020 as main { strength = 60 kN\n holds >= 5 }";

    // 1 kW at 100 rpm is 95.493 Nm, on 100 mm diameter 1909.86 N; 60000 * 2 / (1909.86 * 1 * 6) = 10.472
    @Test
    void aMethodIsRatedWithWhatItIncludes() {
        RequirementAnswer r = specs("", RATE).requirement("head.main.pinion.holds");
        assertThat(r.value()).isCloseTo(10.47198, within(1e-4));
        assertThat(r.state()).isEqualTo(State.CLEAR);
        assertThat(r.margin()).isCloseTo(10.47198 / 5 - 1, within(1e-4));
        assertThat(r.loadReserve()).isCloseTo(10.47198 / 5, within(1e-4));
    }

    @Test
    void theEditionPicks() {
        assertThat(specs("", RATE.replace("2020", "2010"))
                        .requirement("head.main.wheel.holds")
                        .value())
                .isCloseTo(10.47198 / 1.25, within(1e-4));
    }

    @Test
    void anEditionIsNeverAssumed() {
        assertThat(specs("", RATE.replace("edition 2020 ", "")).errors()).containsExactly("BC2012");
        assertThat(specs("", RATE.replace("2020", "1999")).errors()).containsExactly("BC2011");
    }

    @Test
    void anIterationSettles() {
        // x = 308 + 0.2 (x - 300) at x = 310
        assertThat(specs("", RATE).value("head.main.hot")).isCloseTo(310 - 273.15, within(1e-4));
    }

    @Test
    void aRootIsFoundInItsBracket() {
        assertThat(specs("", RATE).value("head.main.corner")).isCloseTo(Math.sqrt(2), within(1e-12));
    }

    @Test
    void aRootOutsideItsBracketIsNamed() {
        Explanation e =
                specs("", RATE.replace("strength", "k_in = 100\n strength")).explain("head.main.corner");
        assertThat(e.value()).isNaN();
        assertThat(e.remark()).contains("no corner");
    }

    @Test
    void anotherReadingThatTurnsTheStateIsTold() {
        RequirementAnswer silent = specs("", RATE).requirement("head.main.pinion.holds");
        assertThat(silent.bands()).isEmpty();
        RequirementAnswer r = specs("", RATE.replace(">= 5", ">= 9")).requirement("head.main.pinion.holds");
        assertThat(r.state()).isEqualTo(State.CLEAR);
        assertThat(r.bands()).hasSize(1);
        assertThat(r.bands().get(0).reading()).isEqualTo("steep");
        assertThat(r.bands().get(0).state()).isEqualTo(State.SHORT);
        assertThat(r.bands().get(0).value()).isCloseTo(10.47198 * 0.6, within(1e-4));
    }

    @Test
    void aDriveMayTakeAnotherReading() {
        RequirementAnswer r =
                specs("", RATE.replace("holds", "use steep for slope\n holds")).requirement("head.main.pinion.holds");
        assertThat(r.value()).isCloseTo(10.47198 * 0.6, within(1e-4));
        assertThat(specs("", RATE.replace("holds", "use flat for slope\n holds"))
                        .errors())
                .containsExactly("BC2013");
    }

    @Test
    void aDifferenceOfTemperaturesIsExplainedAsADifference() {
        String method = HOUSE + """
            method warmth for bevel "how warm" {
              rise "rise" : TemperatureDifference = 2 K * pinion.z     per own, derived
              check warmest "warmest" : Temperature = 20 degC + rise     per own, derived
            }
            """;
        Explanation e = specs("", "rate head by warmth { warmest <= 90 degC }")
                .with("house.method", method)
                .explain("head.warmth.warmest");
        assertThat(e.value()).isCloseTo(60, within(1e-9));
        assertThat(e.numbers()).endsWith("+ 40 K");
    }

    @Test
    void aShaftIsRatedSectionBySectionByAMethodForShafts() {
        String method = HOUSE + """
            method slender for shaft "a method for shafts" {
              each section {
                pull "pull" : Force
                check stress_left "stress to spare" = 10 MPa * d_sec^2 / pull     per own, derived
              }
            }
            """;
        Specs d = specs("", """
                shaft third { section seat { diameter = 20 mm
                  }
                  section end { diameter = 10 mm
                  }
                }
                rate third by slender { seat.pull = 1000 N
                  end.pull = 500 N
                  stress_left >= 1.5
                  end.stress_left >= 1 }
                """).with("house.method", method);
        assertThat(d.requirement("third.slender.seat.stress_left").value()).isCloseTo(4, within(1e-9));
        assertThat(d.requirement("third.slender.end.stress_left").value()).isCloseTo(2, within(1e-9));
    }

    @Test
    void aReadingIsTakenForEveryCaseOfAnEquation() {
        String cases = HOUSE.replace("  check warm", """
                  cases place { near, far }
                  each place {
                    reach "reach" : Ratio = 1     per own, derived
                        reading long_arm = 3      per own, derived
                    each member {
                      lift "lift" : Ratio = 10     per own, derived
                          reading high = 20        per own, derived
                    }
                  }
                  each member {
                    check reached "reach of both" = near.reach + far.reach + sum(each place : lift)
                  }
                  check warm""");
        String rate = "rate head by house edition 2020 as main { %s reached >= 5 }";
        assertThat(specs("", rate.formatted(""))
                        .with("house.method", cases)
                        .requirement("head.main.pinion.reached")
                        .value())
                .isCloseTo(22, within(1e-9));
        assertThat(specs("", rate.formatted("use long_arm for reach\n use high for lift\n"))
                        .with("house.method", cases)
                        .requirement("head.main.pinion.reached")
                        .value())
                .isCloseTo(46, within(1e-9));
    }

    @Test
    void outsideALimitIsNeverClear() {
        RequirementAnswer r = specs("", RATE)
                .with("house.method", HOUSE.replace("2 m/s", "0.1 m/s"))
                .requirement("head.main.pinion.holds");
        assertThat(r.state()).isEqualTo(State.OUTSIDE);
        assertThat(r.outside().get(0).message()).contains("slow pairs only");
        assertThat(r.state().isMet()).isFalse();
    }

    @Test
    void aWaiverSilencesOneLimitUntilItsDay() {
        String waive = RATE + "\n waive head.main.limit.slow until 2027-01-31 by \"R. Falk\" because \"proved\"";
        Specs s = specs("", waive).with("house.method", HOUSE.replace("2 m/s", "0.1 m/s"));
        assertThat(s.requirement("head.main.pinion.holds").state()).isEqualTo(State.CLEAR);
        assertThat(s.on("2027-02-01").requirement("head.main.pinion.holds").state())
                .isEqualTo(State.OUTSIDE);
        assertThat(s.errors()).contains("BC5013");
    }

    @Test
    void aLimitForOneValueMarksWhatDependsOnIt() {
        Specs s = specs("", RATE).with("house.method", HOUSE.replace(">= 5 mm", ">= 50 mm"));
        assertThat(s.requirement("head.main.pinion.holds").state()).isEqualTo(State.OUTSIDE);
        Specs warm = specs("", RATE.replace("holds >= 5", "warm <= 40 degC"))
                .with("house.method", HOUSE.replace(">= 5 mm", ">= 50 mm"));
        assertThat(warm.requirement("head.main.warm").state()).isIn(State.CLEAR, State.TIGHT);
    }

    @Test
    void whereAMethodDoesNotApplyItsResultsAreOpenWithTheReason() {
        Specs s = specs("shaft_angle = 75 deg", RATE);
        RequirementAnswer r = s.requirement("head.main.pinion.holds");
        assertThat(r.state()).isEqualTo(State.OPEN);
        assertThat(r.fault()).contains("right angles only");
        assertThat(s.codes()).contains("BC5015");
    }

    @Test
    void aMissingInputIsSaidOnce() {
        Specs s = specs("", RATE.replace("strength = 60 kN", ""));
        RequirementAnswer r = s.requirement("head.main.pinion.holds");
        assertThat(r.state()).isEqualTo(State.OPEN);
        assertThat(r.missing()).extracting(RequirementAnswer.Missing::path).containsExactly("head.main.strength");
        assertThat(s.codes().stream().filter("BC4001"::equals)).hasSize(1);
    }

    @Test
    void aShortfallIsAcceptedUntilADay() {
        String accept = RATE.replace(">= 5", ">= 12")
                + "\n accept head.main.holds >= 10 until 2027-06-30 by \"R. Falk\" because \"prototype\"";
        assertThat(specs("", accept).requirement("head.main.wheel.holds").state())
                .isEqualTo(State.ACCEPTED);
        Specs late = specs("", accept).on("2027-07-01");
        assertThat(late.requirement("head.main.wheel.holds").state()).isEqualTo(State.SHORT);
        assertThat(late.errors()).contains("BC5006");
        assertThat(specs("", accept).on("2027-06-10").codes()).contains("BC5007");
        assertThat(specs("", accept.replace(">= 10 until", ">= 11 until"))
                        .requirement("head.main.wheel.holds")
                        .state())
                .isEqualTo(State.SHORT);
        assertThat(specs("", accept.replace(">= 12", ">= 5")).codes()).contains("BC5008");
    }

    @Test
    void aMemberLineReplacesThePairLine() {
        Specs s = specs("", RATE.replace("holds >= 5", "holds >= 5\n wheel.holds >= 11"));
        assertThat(s.requirement("head.main.pinion.holds").required()).isEqualTo(5);
        assertThat(s.requirement("head.main.wheel.holds").required()).isEqualTo(11);
        assertThat(s.requirement("head.main.wheel.holds").state()).isEqualTo(State.SHORT);
    }

    @Test
    void anOverrideNeedsItsReasonAndIsUsed() {
        String rest = RATE.replace("strength", "override loss_factor = 3 because \"test bench\"\n strength");
        assertThat(specs("", rest).requirement("head.main.pinion.holds").value())
                .isCloseTo(10.47198 * 2, within(1e-3));
        assertThat(specs("", rest).explain("head.main.loss_factor").status()).isEqualTo(Explanation.Status.OVERRIDDEN);
        assertThat(specs("", rest.replace(" because \"test bench\"", "")).errors())
                .containsExactly("BC4008");
        assertThat(specs("", RATE.replace("strength", "loss_factor = 3\n strength"))
                        .errors())
                .containsExactly("BC4002");
    }

    @Test
    void variantsAndFamiliesAreDrivesOfTheirOwn() {
        String text = drive("", RATE)
                + "variant v of d { head.outer_module = 10 mm }\n"
                + "family f of d {\n size | head.outer_module | rated.power\n small | 5 mm | 1 kW\n large | 10 mm | 4 kW\n}\n";
        Specs s = Specs.of(text).with("house.method", HOUSE);
        Analysis a = s.analyse();
        assertThat(a.drives()).extracting(d -> d.name()).containsExactly("d", "v", "f.small", "f.large");
        assertThat(a.explain("v.head.main.pinion.safety").orElseThrow().value()).isCloseTo(10.47198 * 2, within(1e-3));
        assertThat(a.explain("f.large.head.main.pinion.safety").orElseThrow().value())
                .isCloseTo(10.47198 * 2 / 4, within(1e-3));
    }

    @Test
    void relationsAreSolvedForTheirOneUnknown() {
        Specs s = Specs.of(drive("ratio = 2", RATE).replace("wheel on out { teeth = 40 }", "wheel on out"))
                .with("house.method", HOUSE);
        assertThat(s.value("head.wheel.teeth")).isEqualTo(40);
        assertThat(s.explain("head.wheel.teeth").status()).isEqualTo(Explanation.Status.SOLVED);
        assertThat(specs("ratio = 2.2", RATE).errors()).containsExactly("BC4003");
        Specs odd = Specs.of(drive("ratio = 2.03", RATE).replace("wheel on out { teeth = 40 }", "wheel on out"))
                .with("house.method", HOUSE);
        assertThat(odd.errors()).contains("BC3006");
    }

    @Test
    void aCircleOfNamesIsShown() {
        Specs s = specs("", RATE + "\n let a = b + 1\n let b = a * 2\n require a >= 3");
        assertThat(s.messages()).contains("BC4004").contains("`a`").contains("`b`");
    }

    @Test
    void namesOfADriveAreUsedInFacts() {
        Specs s = Specs.of(drive("", RATE)
                        .replace("power = 1 kW", "power = power_of(crank, motor.speed)")
                        .replace("case rated", "let crank = 95.4929658551372 Nm\n case rated"))
                .with("house.method", HOUSE);
        assertThat(s.requirement("head.main.pinion.holds").value()).isCloseTo(10.47198, within(1e-4));
    }

    @Test
    void aRangeIsTakenAtItsUnfavourableEnd() {
        Specs s = Specs.of("material m { surface_hardness = 58 HRC .. 62 HRC\n class = Eh }");
        assertThat(s.errors()).isEmpty();
        Specs d = Specs.of(drive("", RATE)
                        .replace(
                                "pinion on motor { teeth = 20 }",
                                "pinion on motor { teeth = 20\n surface_hardness = 58 HRC .. 62 HRC }"))
                .with("house.method", HOUSE);
        assertThat(d.value("head.pinion.HRC")).isEqualTo(58);
    }

    @Test
    void oneSpokenNameStandsForSeveralScalesAndTheUnitPicks() {
        Specs s = specs("accuracy = 7 ISO17485\n accuracy = 10 AGMA_Q", RATE);
        assertThat(s.errors()).isEmpty();
        assertThat(s.value("head.acc_17485")).isEqualTo(7);
        assertThat(s.value("head.acc_Q")).isEqualTo(10);
        assertThat(specs("accuracy = 7", RATE).errors()).containsExactly("BC3001");
        assertThat(specs("accuracy = 7 ISO17485\n accuracy = 6 ISO17485", RATE).errors())
                .containsExactly("BC2007");
    }

    @Test
    void inAnExampleOfAMethodAndInARatingTheUnitPicksAmongTheScalesOfThePair() {
        assertThat(Specs.method("""
                source own "own figures"
                method house for bevel "a method" {
                  fineness "steps above three" : Ratio = acc_Q in AGMA_Q - 3     per own, derived
                  example "eight" per own {
                    accuracy = 8 AGMA_Q
                    gives fineness = 5
                  }
                }
                """).messages()).isEmpty();
        assertThat(specs("", RATE.replace("holds", "accuracy = 8 AGMA_Q\n holds"))
                        .messages())
                .contains("A rating by house has no property `accuracy`");
    }

    @Test
    void moreLoadNeverRaisesAMargin() {
        double before = Double.POSITIVE_INFINITY;
        for (int kw = 1; kw <= 40; kw++) {
            double m = Specs.of(drive("", RATE).replace("1 kW", kw + " kW"))
                    .with("house.method", HOUSE)
                    .requirement("head.main.pinion.holds")
                    .margin();
            assertThat(m).isLessThan(before);
            before = m;
        }
    }

    @Test
    void otherUnitsGiveTheSamePhysics() {
        String us = drive("", RATE)
                .replace("1 kW", "1.3410220895950279 hp")
                .replace("5 mm", "0.19685039370078738 in")
                .replace("20 mm", "0.78740157480314954 in")
                .replace("60 kN", "13488.536591 lbf");
        assertThat(Specs.of(us)
                        .with("house.method", HOUSE)
                        .requirement("head.main.pinion.holds")
                        .value())
                .isCloseTo(10.471976, within(1e-6));
    }
}
