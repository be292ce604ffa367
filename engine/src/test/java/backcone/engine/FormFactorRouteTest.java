package backcone.engine;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.Random;
import org.junit.jupiter.api.Test;

/**
 * Form factors against teeth that a rack tool is rolled over: the point of the 30 degree tangent is looked for on the curve,
 * and chord, fillet radius and bending arm are measured there.
 */
class FormFactorRouteTest {
    private static final int DESIGNS = 200;

    /** What differences leave of tangents and curvatures: 2e-9 of chords and arms, 1.2e-8 of the sharpest fillets. */
    private static final double EXACT = 1e-7;

    private static final String CYLINDRICAL = """
            drive d {
              case rated {
                at    = fast
                power = 2 kW
              }
              shaft fast { speed = 600 rpm }
              shaft slow
              cylindrical head {
                normal_module  = 1 mm
                face_width     = 10 mm
                pressure_angle = 20 deg
                helix_angle    = 15 deg
                pinion on fast {
                  teeth              = 19
                  profile_shift      = 0.2
                  basic_rack         = own
                  rack_addendum      = 1
                  rack_dedendum      = 1.25
                  rack_fillet_radius = 0.3
                  tool { protuberance = 0.01 mm }
                }
                wheel on slow {
                  teeth              = 46
                  profile_shift      = 0.1
                  basic_rack         = own
                  rack_addendum      = 1
                  rack_dedendum      = 1.25
                  rack_fillet_radius = 0.3
                  tool { protuberance = 0.01 mm }
                }
              }
              rate head by iso_6336_b edition 2006 as main
            }
            """;

    private static final String BEVEL = """
            drive d {
              case rated {
                at    = fast
                power = 2 kW
              }
              shaft fast { speed = 600 rpm }
              shaft slow
              bevel head {
                tooth_form         = spiral
                proportions        = iso_23509
                depth_taper        = uniform
                shaft_angle        = 90 deg
                mean_normal_module = 1 mm
                mean_spiral_angle  = 35 deg
                pressure_angle     = 20 deg
                face_width         = 5 mm
                addendum_factor    = 1.0
                dedendum_factor    = 1.25
                profile_shift      = 0.23
                thickness_shift    = 0.02
                pinion on fast {
                  teeth = 15
                  tool { edge_radius  = 0.3 mm
                         protuberance = 0.01 mm }
                }
                wheel on slow {
                  teeth = 40
                  tool { edge_radius  = 0.3 mm
                         protuberance = 0.01 mm }
                }
              }
              rate head by iso_10300_b1 edition 2014 as main
            }
            """;

    /** A section through the root as the standards describe it, measured on the tooth, lengths in modules. */
    private record Section(double chord, double fillet, double arm, double factor, double correction) {}

    private static Section measured(Tooth tooth, double tip, double turnedBack, double angle, String design) {
        double roll = tooth.rollAtSlope(Math.toRadians(30));
        double[] p = tooth.fillet(roll);
        double chord = 2 * p[0];
        double fillet = tooth.filletRadius(roll);
        double loaded = tooth.rollAtRadius(tip) - turnedBack;
        double[] q = tooth.flank(loaded);
        // the load stands square on the flank: down it goes, towards the middle
        double load = tooth.flankSlope(loaded);
        double arm = q[1] - q[0] * Math.tan(load) - p[1];
        // no other position of the tool takes the two points away
        for (double r = roll - 2; r <= roll + 2; r += 0.01) {
            assertThat(tooth.insideTool(p, r)).as(design).isLessThan(1e-9);
        }
        double factor = 6 * arm * Math.cos(load) / (chord * chord * Math.cos(angle));
        double slender = chord / arm;
        double notch = Math.min(8, Math.max(1, chord / (2 * fillet)));
        double correction = (1.2 + 0.13 * slender) * Math.pow(notch, 1 / (1.21 + 2.3 / slender));
        return new Section(chord, fillet, arm, factor, correction);
    }

    private static void compare(
            List<String> wrong, double[] worst, String where, String[] names, double[] got, double[] expected) {
        for (int i = 0; i < got.length; i++) {
            double off = Math.abs(got[i] / expected[i] - 1);
            worst[i] = Math.max(worst[i], off);
            if (!(off <= EXACT)) {
                wrong.add(names[i] + " = " + got[i] + ", measured " + expected[i] + ": " + where);
            }
        }
    }

    private static double between(Random r, double low, double high) {
        return low + (high - low) * r.nextDouble();
    }

    @Test
    void ofCylindricalGears() {
        List<String> reads = new ArrayList<>(List.of("head.a_w"));
        String[] names = {"s_Fn", "rho_F", "h_Fe", "Y_F", "Y_S"};
        for (String m : List.of("pinion", "wheel")) {
            reads.addAll(List.of("head." + m + ".d_a", "head." + m + ".s_an"));
            for (String n : names) {
                reads.add("head.main." + m + "." + n);
            }
        }
        Varied drive = new Varied(CYLINDRICAL, reads.toArray(String[]::new));
        Random random = new Random(63363);
        List<String> wrong = new ArrayList<>();
        double[] worst = new double[names.length];
        int made = 0;
        int drawn = 0;
        while (made < DESIGNS) {
            assertThat(++drawn).as("drawn for " + made).isLessThan(3 * DESIGNS);
            double[] z = {15 + random.nextInt(60), 0};
            z[1] = z[0] + random.nextInt(121 - (int) z[0]);
            double[] x = {between(random, -0.4, 0.8), between(random, -0.4, 0.8)};
            double[] edge = {between(random, 0.2, 0.38), between(random, 0.2, 0.38)};
            double[] out = {random.nextInt(3) > 0 ? 0 : between(random, 0, 0.05), 0};
            out[1] = random.nextInt(3) > 0 ? 0 : between(random, 0, 0.05);
            double beta = random.nextInt(4) == 0 ? 0 : Math.toRadians(between(random, 0, 30));
            double angle = Math.toRadians(random.nextInt(3) > 0 ? 20 : between(random, 17.5, 22.5));
            Varied.Design d = drive.design().set("head.helix_angle", beta).set("head.pressure_angle", angle);
            String[] member = {"pinion", "wheel"};
            for (int i = 0; i < 2; i++) {
                d.set("head." + member[i] + ".teeth", z[i])
                        .set("head." + member[i] + ".profile_shift", x[i])
                        .set("head." + member[i] + ".rack_fillet_radius", edge[i])
                        .set("head." + member[i] + ".tool.protuberance", out[i]);
            }
            // valid ones: no pointed teeth, no more than a pair and less than three in contact
            double baseHelix = Math.asin(Math.sin(beta) * Math.cos(angle));
            double base = Math.cos(Math.atan(Math.tan(angle) / Math.cos(beta))) / Math.cos(beta) / 2;
            double a = d.at("head.a_w");
            double eps = Plane.contactRatio(
                    base * z[0], d.at("head.pinion.d_a") / 2, base * z[1], d.at("head.wheel.d_a") / 2, a, z[0]);
            if (!(d.at("head.pinion.s_an") > 0.1 && d.at("head.wheel.s_an") > 0.1 && eps > 1)) {
                continue;
            }
            Tooth[] tooth = new Tooth[2];
            for (int i = 0; i < 2; i++) {
                double zn = z[i] / (Math.pow(Math.cos(baseHelix), 2) * Math.cos(beta));
                tooth[i] = new Tooth(zn, angle, 1.25, edge[i], out[i], x[i], 0);
            }
            if (!tooth[0].toolIsPossible() || !tooth[1].toolIsPossible()) {
                continue;
            }
            made++;
            double epsN = eps / Math.pow(Math.cos(baseHelix), 2);
            for (int i = 0; i < 2; i++) {
                double zn = z[i] / (Math.pow(Math.cos(baseHelix), 2) * Math.cos(beta));
                double tip = zn / 2 + (d.at("head." + member[i] + ".d_a") - z[i] / Math.cos(beta)) / 2;
                // from the tip, the gear is turned back until the pair before it has left
                Section s = measured(tooth[i], tip, (epsN - 1) * 2 * Math.PI / zn, angle, d.toString());
                double[] got = new double[names.length];
                for (int k = 0; k < names.length; k++) {
                    got[k] = d.at("head.main." + member[i] + "." + names[k]);
                }
                compare(wrong, worst, member[i] + " of " + d, names, got, new double[] {
                    s.chord(), s.fillet(), s.arm(), s.factor(), s.correction()
                });
            }
        }
        assertThat(wrong).as(Arrays.toString(worst)).isEmpty();
    }

    @Test
    void ofVirtualGearsOfBevelPairs() {
        String[] names = {"s_Fn", "rho_F", "h_Fa", "Y_Fa", "Y_Sa"};
        List<String> reads = new ArrayList<>();
        for (String m : List.of("pinion", "wheel")) {
            reads.addAll(List.of("head." + m + ".z_vn", "head." + m + ".d_va", "head." + m + ".d_v"));
            for (String n : names) {
                reads.add("head.main." + m + "." + n);
            }
        }
        Varied drive = new Varied(BEVEL, reads.toArray(String[]::new));
        Random random = new Random(103003);
        List<String> wrong = new ArrayList<>();
        double[] worst = new double[names.length];
        int made = 0;
        int drawn = 0;
        while (made < DESIGNS) {
            assertThat(++drawn).as("drawn for " + made).isLessThan(3 * DESIGNS);
            double[] z = {12 + random.nextInt(20), 0};
            z[1] = z[0] + random.nextInt(60);
            double shift = between(random, 0, 0.5);
            double thicker = between(random, -0.1, 0.1);
            double depth = between(random, 1.2, 1.35);
            double angle = Math.toRadians(between(random, 18, 25));
            Varied.Design d = drive.design()
                    .set("head.pinion.teeth", z[0])
                    .set("head.wheel.teeth", z[1])
                    .set("head.mean_spiral_angle", Math.toRadians(between(random, 0, 40)))
                    .set("head.pressure_angle", angle)
                    .set("head.shaft_angle", Math.toRadians(between(random, 60, 110)))
                    .set("head.profile_shift", shift)
                    .set("head.thickness_shift", thicker)
                    .set("head.dedendum_factor", depth);
            String[] member = {"pinion", "wheel"};
            Tooth[] tooth = new Tooth[2];
            double[] tip = new double[2];
            boolean valid = true;
            for (int i = 0; i < 2; i++) {
                double edge = between(random, 0.2, 0.34);
                double out = random.nextInt(3) > 0 ? 0 : between(random, 0, 0.04);
                d.set("head." + member[i] + ".tool.edge_radius", edge)
                        .set("head." + member[i] + ".tool.protuberance", out);
                double zn = d.at("head." + member[i] + ".z_vn");
                int sign = i == 0 ? 1 : -1;
                tooth[i] = new Tooth(zn, angle, depth, edge, out, sign * shift, sign * thicker);
                tip[i] = zn / 2 + (d.at("head." + member[i] + ".d_va") - d.at("head." + member[i] + ".d_v")) / 2;
                valid &= tooth[i].toolIsPossible() && tooth[i].flank(tooth[i].rollAtRadius(tip[i]))[0] > 0.05;
            }
            if (!valid) {
                continue;
            }
            made++;
            for (int i = 0; i < 2; i++) {
                Section s = measured(tooth[i], tip[i], 0, angle, d.toString());
                double[] got = new double[names.length];
                for (int k = 0; k < names.length; k++) {
                    got[k] = d.at("head.main." + member[i] + "." + names[k]);
                }
                compare(wrong, worst, member[i] + " of " + d, names, got, new double[] {
                    s.chord(), s.fillet(), s.arm(), s.factor(), s.correction()
                });
            }
        }
        assertThat(wrong).as(Arrays.toString(worst)).isEmpty();
    }
}
