package backcone.engine;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.Random;
import org.junit.jupiter.api.Test;

/** What must hold of ratings whatever the numbers: limits that meet, units that do not matter, twins that are alike. */
class RatingIdentitiesTest {
    private static final double INCH = 25.4;

    private static final String HEAD = """
            material steel "case hardened" {
              class            = Eh
              treatment        = case_hardened
              quality          = MQ
              agma_grade       = 2
              surface_hardness = 700 HV
              core_hardness    = 32 HRC
              root_state       = unground
              tensile_strength = 1000 MPa
              yield_strength   = 750 MPa
              static_stress    = 350 MPa
            }
            lubricant vg_220 "mineral oil" {
              viscosity_40 = 220 mm^2/s
              base         = mineral
            }
            drive d {
              case rated {
                at                 = fast
                power              = 20 kW
                application_factor = 1.25
                overload_factor    = 1.25
                service_factor     = 1.25
                required_life      = 20000 h
                direction          = cw
                reversal           = one_way
              }
              shaft fast {
                speed                  = 900 rpm
                outer_diameter_at_mesh = 50 mm
              }
              shaft slow
              lubrication {
                lubricant       = vg_220
                method          = dip
                oil_temperature = 60 degC
              }
            """;

    private static final String BEVEL = HEAD + """
              bevel head {
                tooth_form        = spiral
                tooth_making      = face_milled
                proportions       = iso_23509
                depth_taper       = standard
                shaft_angle       = 90 deg
                outer_module      = 5 mm
                mean_spiral_angle = 35 deg
                pressure_angle    = 20 deg
                face_width        = 30 mm
                addendum_factor   = 1.0
                dedendum_factor   = 1.25
                profile_shift     = 0.2
                thickness_shift   = 0
                accuracy          = 6 ISO17485
                accuracy          = 9 AGMA_Q
                flank_roughness   = 4 um
                root_roughness    = 12 um
                tool { cutter_radius = 250 mm
                       edge_radius   = 1.1 mm }
                contact_pattern {
                  developed            = yes
                  verified             = each_set_light_load
                  use                  = industrial
                  effective_face_width = 26 mm
                  profile_crowning     = high
                }
                pinion on fast { teeth    = 17
                                 support  = straddled
                                 material = steel }
                wheel on slow { teeth    = 44
                                support  = straddled
                                material = steel }
              }
              rate head by iso_10300_b1 edition 2014 as iso { pitting_damage = none }
              rate head by iso_10300_b1 edition 2001 as iso01 { pitting_damage = none }
            }
            """;

    private static final String CYLINDRICAL = HEAD + """
              cylindrical head {
                normal_module        = 4 mm
                helix_angle          = 15 deg
                face_width           = 60 mm
                pressure_angle       = 20 deg
                accuracy             = 6 ISO1328
                accuracy             = 10 AGMA_Q
                flank_roughness      = 4 um
                root_roughness       = 14 um
                helix_modification   = crowning_full
                profile_modification = verified_3d
                contact_adjusted     = no
                load_sharing         = tip_loaded
                gearing_condition    = commercial_enclosed
                pinion on fast {
                  teeth               = 21
                  profile_shift       = 0.2
                  basic_rack          = iso53_B
                  tip_relief          = 0 um
                  root_relief         = 0 um
                  blank               = solid
                  bearing_span        = 150 mm
                  offset_from_centre  = 0 mm
                  arrangement         = case_a
                  stiffening          = slide_on
                  torque_side         = near_side
                  material            = steel
                }
                wheel on slow {
                  teeth         = 64
                  profile_shift = 0.1
                  basic_rack    = iso53_B
                  tip_relief    = 0 um
                  root_relief   = 0 um
                  blank         = solid
                  material      = steel
                }
              }
              rate head by iso_6336_b edition 2019 as iso { pitting_damage = none }
              rate head by agma_2101 as agma { reliability = 99 % }
            }
            """;

    private static final List<String> MEMBERS = List.of("pinion", "wheel");

    private static double between(Random r, double low, double high) {
        return low + (high - low) * r.nextDouble();
    }

    private static String[] safeties(String... ratings) {
        List<String> out = new ArrayList<>();
        for (String r : ratings) {
            for (String m : MEMBERS) {
                for (String c : List.of("pitting", "bending")) {
                    out.add("head." + r + "." + m + "." + c);
                }
            }
        }
        return out.toArray(String[]::new);
    }

    private static String[] and(String[] some, String... more) {
        List<String> out = new ArrayList<>(List.of(some));
        out.addAll(List.of(more));
        return out.toArray(String[]::new);
    }

    // ---- elasticity

    /** Two bodies of 206 GPa and 0.3: what every table of elasticity factors prints for steel on steel. */
    @Test
    void steelOnSteel() {
        double printed = Math.sqrt(206000 / (2 * Math.PI * (1 - 0.09)));
        assertThat(printed).isCloseTo(189.8, within(0.05));
        Varied.Design c = new Varied(CYLINDRICAL, "head.iso.Z_E").design();
        assertThat(Math.sqrt(c.at("head.iso.Z_E"))).isCloseTo(189.8, within(0.05));
        Varied.Design b = new Varied(BEVEL, "head.iso.Z_E").design();
        assertThat(Math.sqrt(b.at("head.iso.Z_E"))).isCloseTo(189.8, within(0.05));
        // 30 million psi: 2290 in the root of psi, 190 to 191 in the root of MPa
        String inch = CYLINDRICAL.replace("class            = Eh", "class = Eh\n modulus = 30e6 psi\n poisson = 0.3");
        double squared = new Varied(inch, "head.agma.E_c").design().at("head.agma.E_c");
        assertThat(Math.sqrt(squared)).isCloseTo(190.2, within(0.1));
        double psi = 4.4482216152605 / (INCH * INCH);
        assertThat(Math.sqrt(squared / psi)).isCloseTo(2290, within(1.0));
    }

    // ---- overlap of none and of one

    private static final double NEARLY = 1e-7;

    @Test
    void factorsMeetWhereOverlapBeginsAndIsWhole() {
        String[] factors = {
            "iso.Z_eps",
            "iso.f_eps",
            "iso.Y_beta",
            "iso.pinion.Z_BD",
            "iso.wheel.Z_BD",
            "iso.Z_beta",
            "iso.pinion.Y_F",
            "iso.wheel.Y_S",
            "iso.pinion.sigma_H",
            "iso.wheel.sigma_F"
        };
        String[] names = new String[factors.length];
        for (int i = 0; i < factors.length; i++) {
            names[i] = "head." + factors[i];
        }
        Varied drive = new Varied(CYLINDRICAL, and(names, "head.eps_b", "head.eps_an"));
        Random random = new Random(1);
        for (int i = 0; i < 50; i++) {
            Varied.Design d = drive.design()
                    .set("head.pinion.teeth", 18 + random.nextInt(20))
                    .set("head.wheel.teeth", 40 + random.nextInt(60))
                    .set("head.pinion.profile_shift", between(random, 0, 0.4));
            // from a helix of none to one that can't be told from none
            meet(d.set("head.helix_angle", 0), names, "head.helix_angle", 0, NEARLY, 1e-5);
            assertThat(d.set("head.helix_angle", 0).at("head.iso.Z_beta")).isEqualTo(1);
            assertThat(d.at("head.iso.Y_beta")).isEqualTo(1);
            assertThat(d.at("head.iso.f_eps")).isEqualTo(1);
            // from just less than a whole overlap to just more
            double beta = Math.toRadians(between(random, 8, 28));
            double whole = Math.PI * 4 / Math.sin(beta);
            d.set("head.helix_angle", beta);
            meet(d, names, "head.face_width", whole * (1 - NEARLY), whole * (1 + NEARLY), 1e-5);
            assertThat(d.at("head.iso.f_eps")).isCloseTo(Math.sqrt(1 / d.at("head.eps_an")), within(1e-6));
        }
    }

    private static void meet(Varied.Design d, String[] names, String by, double one, double other, double exact) {
        d.set(by, one);
        double[] at = new double[names.length];
        for (int i = 0; i < names.length; i++) {
            at[i] = d.at(names[i]);
        }
        d.set(by, other);
        for (int i = 0; i < names.length; i++) {
            assertThat(at[i]).as(names[i] + " of " + d).isPositive().isNotNaN();
            assertThat(d.at(names[i]))
                    .as(names[i] + " at " + by + " = " + other + " of " + d)
                    .isCloseTo(at[i], within(exact * Math.abs(at[i])));
        }
    }

    @Test
    void bevelFactorsMeetWhereOverlapBeginsAndIsWhole() {
        String[] names = {
            "head.iso.F_1",
            "head.iso.F_2",
            "head.iso.Z_MB",
            "head.iso.Y_eps",
            "head.iso.l_bm",
            "head.iso.Z_LS",
            "head.iso.Y_LS",
            "head.iso01.l_bm",
            "head.iso.sigma_H",
            "head.iso.pinion.sigma_F",
            "head.iso.wheel.sigma_F",
            "head.iso01.sigma_H"
        };
        Varied drive = new Varied(BEVEL, and(names, "head.eps_vb", "head.eps_va", "head.m_mn"));
        Varied straight = new Varied(
                BEVEL.replace("= spiral\n", "= straight\n")
                        .replace("mean_spiral_angle = 35 deg", "mean_spiral_angle = 0 deg")
                        .replace("tooth_making      = face_milled\n", ""),
                and(names, "head.eps_vb"));
        Random random = new Random(2);
        for (int i = 0; i < 50; i++) {
            int z1 = 14 + random.nextInt(15);
            int z2 = 40 + random.nextInt(30);
            double shift = between(random, 0.05, 0.35);
            Varied.Design s = straight.design()
                    .set("head.pinion.teeth", z1)
                    .set("head.wheel.teeth", z2)
                    .set("head.profile_shift", shift);
            Varied.Design d = drive.design()
                    .set("head.pinion.teeth", z1)
                    .set("head.wheel.teeth", z2)
                    .set("head.profile_shift", shift)
                    .set("head.mean_spiral_angle", NEARLY);
            for (String n : names) {
                assertThat(d.at(n)).as(n + " of " + d).isCloseTo(s.at(n), within(1e-5 * Math.abs(s.at(n))));
            }
            assertThat(s.at("head.iso.F_1")).isEqualTo(2);
            double beta = Math.toRadians(between(random, 20, 40));
            d.set("head.mean_spiral_angle", beta);
            // the width that overlaps once, at the module that mid-face has
            double whole = Math.PI * d.at("head.m_mn") / Math.sin(beta);
            meet(
                    d,
                    names,
                    "head.contact_pattern.effective_face_width",
                    whole * (1 - NEARLY),
                    whole * (1 + NEARLY),
                    1e-5);
            assertThat(d.at("head.iso.F_1")).isCloseTo(d.at("head.iso.F_2"), within(1e-6));
        }
    }

    // ---- AGMA in two systems of units

    private static String number(double v) {
        return String.format(Locale.ROOT, "%.17g", v);
    }

    private record Pair(String us, String si, double power, double speed, double width, double pitch, double quality) {}

    private static Pair pair(Random random, boolean bevel) {
        String text = (bevel ? BEVEL : CYLINDRICAL)
                .replaceAll("(?m)^ *rate head.*\\n", "")
                .replaceAll("effective_face_width = .*", "effective_face_width = 85 %");
        if (bevel) {
            text = text.replace("= spiral\n", "= straight\n")
                    .replaceAll(
                            "(mean_spiral_angle|tooth_making|proportions|depth_taper|addendum_factor|dedendum_factor|"
                                    + "profile_shift|tool \\{ cutter_radius|edge_radius) .*\\n",
                            "")
                    .replace("bevel head {", "bevel head {\n proportions = traditional");
        }
        int z1 = (bevel ? 16 : 22) + random.nextInt(10);
        int z2 = z1 + random.nextInt(40);
        double power = between(random, 2, 30);
        double speed = between(random, 300, 1200);
        double pitch = between(random, 4, 10);
        double width = between(random, 8, 10) / pitch;
        int quality = 7 + random.nextInt(5);
        text = text.replaceAll("teeth( *)= (17|21)\\b", "teeth = " + z1)
                .replaceAll("teeth( *)= (44|64)\\b", "teeth = " + z2)
                .replaceAll("speed( *)= 900 rpm", "speed = " + number(speed) + " rpm")
                .replaceAll("accuracy( *)= .* AGMA_Q", "accuracy = " + quality + " AGMA_Q")
                .replaceAll(
                        "(?s)\\}\\s*$",
                        "rate head by " + (bevel ? "agma_2003" : "agma_2101")
                                + " as main { reliability = 99.5 % }\n}\n");
        String size = bevel ? "outer_module *= .*" : "normal_module *= .*";
        String us = text.replaceAll("power( *)= .*", "power = " + number(power) + " hp")
                .replaceAll(
                        size,
                        (bevel ? "outer_diametral_pitch = " : "normal_diametral_pitch = ") + number(pitch) + " 1/in")
                .replaceAll("(?m)^( *)face_width .*", "face_width = " + number(width) + " in")
                .replaceAll("bearing_span( *)= .*", "bearing_span = 6 in")
                .replaceAll("outer_diameter_at_mesh = 50 mm", "outer_diameter_at_mesh = 2 in")
                .replaceAll("oil_temperature = .*", "oil_temperature = 302 degF")
                .replaceAll("class            = Eh", "class = Eh\n modulus = 30e6 psi\n poisson = 0.3");
        double pound = 4.4482216152605;
        String si = text.replaceAll("power( *)= .*", "power = " + number(power * 550 * 12 * INCH * pound / 1e6) + " kW")
                .replaceAll(size, (bevel ? "outer_module = " : "normal_module = ") + number(INCH / pitch) + " mm")
                .replaceAll("(?m)^( *)face_width .*", "face_width = " + number(width * INCH) + " mm")
                .replaceAll("bearing_span( *)= .*", "bearing_span = " + number(6 * INCH) + " mm")
                .replaceAll("outer_diameter_at_mesh = 50 mm", "outer_diameter_at_mesh = " + number(2 * INCH) + " mm")
                .replaceAll("oil_temperature = .*", "oil_temperature = 150 degC")
                .replaceAll(
                        "class            = Eh",
                        "class = Eh\n modulus = " + number(30e6 * pound / INCH / INCH / 1000) + " GPa\n poisson = 0.3");
        return new Pair(
                us, si, power * 550 * 12 * INCH * pound, speed * 2 * Math.PI / 60, width * INCH, INCH / pitch, quality);
    }

    /** Twenty pairs each, told in inches and in millimetres; and the equations of the metric print, put in by hand. */
    @Test
    void bevelPairsInInchesAndMillimetres() {
        Random random = new Random(3);
        String[] names = and(
                safeties("main"),
                "head.main.s_c",
                "head.main.pinion.s_t",
                "head.main.wheel.s_t",
                "head.main.pinion.s_wc",
                "head.main.wheel.s_wt");
        for (int i = 0; i < 20; i++) {
            Pair p = pair(random, true);
            Varied.Design us = new Varied(p.us(), names).design();
            Varied.Design si = new Varied(
                            p.si(),
                            and(
                                    names,
                                    "head.main.I",
                                    "head.main.pinion.J",
                                    "head.main.E_c",
                                    "head.pinion.T",
                                    "head.pinion.d_e"))
                    .design();
            for (String n : names) {
                assertThat(si.at(n)).as(n + "\n" + p.si()).isCloseTo(us.at(n), within(1e-9 * us.at(n)));
            }
            double b = p.width();
            double m = p.pitch();
            double d = si.at("head.pinion.d_e");
            double torque = p.power() / p.speed();
            double kv = metricDynamic(p.quality(), d / 2 * p.speed() / 1000);
            double kh = 1 + 5.6e-6 * b * b;
            double zx = Math.max(0.5, Math.min(1, 0.00492 * b + 0.4375));
            double yx = m < 1.6 ? 0.5 : 0.4867 + 0.008399 * m;
            double load = 2 * torque / d * 1.25 * kv * kh;
            double contact = Math.sqrt(si.at("head.main.E_c") * load * zx * 1.5 / (b * d * si.at("head.main.I")));
            double root = load * yx / (b * m * si.at("head.main.pinion.J"));
            assertThat(si.at("head.main.s_c")).isCloseTo(contact, within(0.003 * contact));
            assertThat(si.at("head.main.pinion.s_t")).isCloseTo(root, within(0.004 * root));
        }
    }

    private static double metricDynamic(double quality, double speed) {
        double b = 0.25 * Math.pow(12 - Math.min(quality, 11), 2 / 3.0);
        double a = 50 + 56 * (1 - b);
        return Math.pow((a + Math.sqrt(200 * speed)) / a, b);
    }

    @Test
    void cylindricalPairsInInchesAndMillimetres() {
        Random random = new Random(4);
        String[] names = and(
                safeties("main"),
                "head.main.pinion.s_c",
                "head.main.pinion.s_t",
                "head.main.wheel.s_t",
                "head.main.I",
                "head.main.pinion.J");
        for (int i = 0; i < 20; i++) {
            Pair p = pair(random, false);
            // the temperature factor is not printed above 250 degF
            String us = p.us().replace("302 degF", "176 degF");
            String si = p.si().replace("150 degC", "80 degC");
            Varied.Design u = new Varied(us, names).design();
            Varied.Design s = new Varied(
                            si,
                            and(
                                    names,
                                    "head.main.E_c",
                                    "head.main.K_m",
                                    "head.pinion.d_w",
                                    "head.m_t",
                                    "head.pinion.T"))
                    .design();
            for (String n : names) {
                assertThat(s.at(n)).as(n + "\n" + si).isCloseTo(u.at(n), within(1e-9 * u.at(n)));
                assertThat(u.at(n)).isPositive();
            }
            double d = s.at("head.pinion.d_w");
            double kv = metricDynamic(p.quality(), d / 2 * p.speed() / 1000);
            double load = 2 * p.power() / p.speed() / d * 1.25 * kv * s.at("head.main.K_m");
            double contact = Math.sqrt(s.at("head.main.E_c") * load / (d * p.width() * s.at("head.main.I")));
            double root = load / (p.width() * s.at("head.m_t") * s.at("head.main.pinion.J"));
            assertThat(s.at("head.main.pinion.s_c")).isCloseTo(contact, within(0.003 * contact));
            assertThat(s.at("head.main.pinion.s_t")).isCloseTo(root, within(0.004 * root));
        }
    }

    // ---- twins

    @Test
    void bothMembersOfAPairOfTwinsAreRatedAlike() {
        Varied drive = new Varied(CYLINDRICAL, safeties("iso", "agma"));
        Random random = new Random(5);
        for (int i = 0; i < 50; i++) {
            int z = 18 + random.nextInt(40);
            double shift = between(random, 0, 0.3);
            Varied.Design d = drive.design()
                    .set("head.pinion.teeth", z)
                    .set("head.wheel.teeth", z)
                    .set("head.pinion.profile_shift", shift)
                    .set("head.wheel.profile_shift", shift)
                    .set("head.helix_angle", Math.toRadians(i % 2 == 0 ? 0 : between(random, 13, 28)));
            alike(d, "iso", "agma");
        }
        Varied bevel = new Varied(BEVEL, safeties("iso", "iso01"));
        for (int i = 0; i < 50; i++) {
            int z = 16 + random.nextInt(30);
            Varied.Design d = bevel.design()
                    .set("head.pinion.teeth", z)
                    .set("head.wheel.teeth", z)
                    .set("head.profile_shift", 0)
                    .set("head.shaft_angle", Math.toRadians(between(random, 60, 110)))
                    .set("head.mean_spiral_angle", Math.toRadians(between(random, 10, 40)));
            alike(d, "iso", "iso01");
        }
        for (int i = 0; i < 10; i++) {
            Pair p = pair(random, true);
            String same = p.si().replaceAll("teeth = \\d+", "teeth = 22");
            alike(new Varied(same, safeties("main")).design(), "main");
        }
    }

    private static void alike(Varied.Design d, String... ratings) {
        for (String r : ratings) {
            for (String c : List.of("pitting", "bending")) {
                double pinion = d.at("head." + r + ".pinion." + c);
                assertThat(pinion).as(r + " " + c + " of " + d).isPositive();
                assertThat(d.at("head." + r + ".wheel." + c))
                        .as(r + " " + c + " of " + d)
                        .isCloseTo(pinion, within(1e-9 * pinion));
            }
        }
    }

    /** Power that comes from the wheel's end, without loss, loads the teeth the same. */
    @Test
    void theEndThatDrivesMakesNoDifference() {
        for (String text : List.of(BEVEL, CYLINDRICAL)) {
            String[] names = text.equals(BEVEL) ? safeties("iso", "iso01") : safeties("iso", "agma");
            Varied.Design by = new Varied(text, names).design();
            Varied.Design from = new Varied(text.replaceAll("at( *)= fast", "at = slow"), names).design();
            for (String n : names) {
                assertThat(from.at(n)).as(n).isCloseTo(by.at(n), within(1e-9 * by.at(n)));
                assertThat(by.at(n)).isPositive();
            }
        }
    }
}
