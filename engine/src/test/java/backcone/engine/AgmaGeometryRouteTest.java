package backcone.engine;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.ArrayList;
import java.util.List;
import java.util.Random;
import java.util.function.DoubleUnaryOperator;
import org.junit.jupiter.api.Test;

/**
 * Geometry factors against rolled teeth: of all parabolas with their apex at the load the one that just fits into the tooth,
 * and of all contact lines the one that is loaded worst.
 */
class AgmaGeometryRouteTest {
    private static final int DESIGNS = 150;
    private static final double EXACT = 1e-7;
    private static final List<String> MEMBERS = List.of("pinion", "wheel");

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
                face_width     = 40 mm
                pressure_angle = 20 deg
                helix_angle    = 15 deg
                load_sharing   = single_contact
                pinion on fast {
                  teeth              = 19
                  profile_shift      = 0.2
                  basic_rack         = own
                  rack_addendum      = 1
                  rack_dedendum      = 1.25
                  rack_fillet_radius = 0.3
                }
                wheel on slow {
                  teeth              = 46
                  profile_shift      = 0.1
                  basic_rack         = own
                  rack_addendum      = 1
                  rack_dedendum      = 1.25
                  rack_fillet_radius = 0.3
                }
              }
              rate head by agma_2101 as main
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
                tooth_form     = straight
                proportions    = traditional
                shaft_angle    = 90 deg
                outer_module   = 4 mm
                face_width     = 20 mm
                pressure_angle = 20 deg
                pinion on fast {
                  teeth = 15
                  tool { edge_radius = 0.4 mm }
                }
                wheel on slow {
                  teeth = 40
                  tool { edge_radius = 0.4 mm }
                }
              }
              rate head by agma_2003 as main
            }
            """;

    private static double between(Random r, double low, double high) {
        return low + (high - low) * r.nextDouble();
    }

    private static void same(Varied.Design d, String name, double expected, double exact) {
        assertThat(d.at(name)).as(name + " of " + d).isCloseTo(expected, within(exact * Math.abs(expected)));
    }

    /** Points where contact starts and ends on standard centres, and one base pitch on: radius of the load on the pinion. */
    private static double singleContact(double r1, double tip1, double r2, double tip2, double angle, double pitch) {
        double c = Math.cos(angle);
        double[][] path = Plane.path(r1 * c, tip1, r2 * c, tip2, r1 + r2);
        double length = Math.hypot(path[1][0] - path[0][0], path[1][1] - path[0][1]);
        double k = pitch * c / length;
        return Math.hypot(path[0][0] + (path[1][0] - path[0][0]) * k, path[0][1] + (path[1][1] - path[0][1]) * k);
    }

    @Test
    void bendingOfCylindricalTeeth() {
        List<String> reads = new ArrayList<>(List.of("head.eps_a", "head.main.m_N", "head.eps_b"));
        for (String m : MEMBERS) {
            reads.addAll(List.of("head." + m + ".d_a", "head." + m + ".d", "head." + m + ".h_a"));
            for (String n : List.of("s_F", "h_F", "rho_F", "K_f", "Y_J", "J_calc", "phi_L", "r_nL")) {
                reads.add("head.main." + m + "." + n);
            }
        }
        Varied drive = new Varied(CYLINDRICAL, reads.toArray(String[]::new));
        Random random = new Random(908);
        int made = 0;
        for (int i = 0; made < DESIGNS; i++) {
            assertThat(i).as("drawn for " + made).isLessThan(4 * DESIGNS);
            double[] z = {17 + random.nextInt(40), 0};
            z[1] = z[0] + random.nextInt(60);
            double shift = between(random, -0.1, 0.3);
            double[] x = {shift, -shift};
            double[] edge = {between(random, 0.2, 0.38), between(random, 0.2, 0.38)};
            double beta = i % 2 == 0 ? 0 : Math.toRadians(between(random, 10, 30));
            double angle = Math.toRadians(between(random, 18, 22));
            Varied.Design d = drive.design().set("head.helix_angle", beta).set("head.pressure_angle", angle);
            for (int k = 0; k < 2; k++) {
                d.set("head." + MEMBERS.get(k) + ".teeth", z[k])
                        .set("head." + MEMBERS.get(k) + ".profile_shift", x[k])
                        .set("head." + MEMBERS.get(k) + ".rack_fillet_radius", edge[k]);
            }
            double[] radius = new double[2];
            double[] tip = new double[2];
            for (int k = 0; k < 2; k++) {
                radius[k] = z[k] / (2 * Math.pow(Math.cos(beta), 3));
                tip[k] = radius[k] + 1 + x[k];
            }
            // teeth thinned for backlash by 0.024 modules, as the printed tables have them
            Tooth[] tooth = new Tooth[2];
            double[] at = new double[2];
            boolean valid = d.at("head.eps_a") > 1 && d.at("head.eps_a") < 2;
            for (int k = 0; k < 2; k++) {
                tooth[k] = new Tooth(2 * radius[k], angle, 1.25, edge[k], 0, x[k], -0.012);
                double load =
                        beta > 0 ? tip[k] : singleContact(radius[k], tip[k], radius[1 - k], tip[1 - k], angle, Math.PI);
                at[k] = tooth[k].rollAtRadius(load);
                valid &= tooth[k].toolIsPossible() && !Double.isNaN(tooth[k].rollAtParabola(height(tooth[k], at[k])));
            }
            if (!valid) {
                continue;
            }
            made++;
            for (int k = 0; k < 2; k++) {
                String m = "head.main." + MEMBERS.get(k) + ".";
                same(d, "head." + MEMBERS.get(k) + ".h_a", 1 + x[k], EXACT);
                double slope = tooth[k].flankSlope(at[k]);
                double load = height(tooth[k], at[k]);
                double roll = tooth[k].rollAtParabola(load);
                double[] p = tooth[k].fillet(roll);
                double thick = 2 * p[0];
                double arm = load - p[1];
                double least = tooth[k].radiusAtBottom();
                same(d, m + "phi_L", slope, EXACT);
                same(d, m + "r_nL", load, EXACT);
                same(d, m + "s_F", thick, EXACT);
                same(d, m + "h_F", arm, EXACT);
                same(d, m + "rho_F", least, EXACT);
                double correction = 0.331
                        - 0.436 * angle
                        + Math.pow(thick / least, 0.324 - 0.492 * angle) * Math.pow(thick / arm, 0.261 + 0.545 * angle);
                same(d, m + "K_f", correction, EXACT);
                double omega = Math.toDegrees(Math.atan(Math.tan(beta) * Math.sin(angle))) / 100;
                double helical = 1 / (1 - Math.sqrt(omega * (1 - omega)));
                // bending less pressure at the root of a tooth of unit pitch
                double stress = Math.cos(slope)
                        / Math.cos(angle)
                        * (6 * arm / (thick * thick * helical) - Math.tan(slope) / thick);
                double form = Math.pow(Math.cos(beta), 2) / stress;
                same(d, m + "Y_J", form, EXACT);
                same(d, m + "J_calc", form / correction / d.at("head.main.m_N"), EXACT);
            }
        }
    }

    /** Where the load at this point of the flank meets the middle of the tooth. */
    private static double height(Tooth tooth, double roll) {
        double[] q = tooth.flank(roll);
        return q[1] - q[0] * Math.tan(tooth.flankSlope(roll));
    }

    // ---- bevel

    private static final String[] OF_BEVEL = {"t_N", "h_N", "rho_f", "phi_h", "R_t", "J_calc"};

    private static Varied bevels() {
        List<String> reads =
                new ArrayList<>(List.of("head.R_m", "head.R_e", "head.m_mt", "head.main.m_o", "head.main.I_calc"));
        for (String m : MEMBERS) {
            reads.addAll(List.of(
                    "head." + m + ".h_am",
                    "head." + m + ".h_fm",
                    "head." + m + ".d_v",
                    "head." + m + ".d_e",
                    "head.main." + m + ".t_m"));
            for (String n : OF_BEVEL) {
                reads.add("head.main." + m + "." + n);
            }
        }
        return new Varied(BEVEL, reads.toArray(String[]::new));
    }

    private static Varied.Design drawn(Varied drive, Random random) {
        int z = 14 + random.nextInt(16);
        int z2 = z + 4 + random.nextInt(50);
        double module = between(random, 2, 6);
        double cone = module * Math.hypot(z, z2) / 2;
        return drive.design()
                .set("head.pinion.teeth", z)
                .set("head.wheel.teeth", z2)
                .set("head.outer_module", module)
                .set("head.face_width", cone * between(random, 0.2, 0.3))
                .set("head.pressure_angle", Math.toRadians(between(random, 20, 23)))
                .set("head.pinion.tool.edge_radius", module * between(random, 0.08, 0.2))
                .set("head.wheel.tool.edge_radius", module * between(random, 0.08, 0.2));
    }

    /** Chord of the ellipse in face width by length of action, along the face: by the circle that it is squeezed from. */
    private static double chord(double face, double action, double off) {
        double turn = Math.acos(Math.max(-1, Math.min(1, 2 * off / action)));
        return face * Math.sin(turn);
    }

    @Test
    void pittingOfStraightBevelTeeth() {
        Varied drive = bevels();
        Random random = new Random(2003);
        int made = 0;
        for (int i = 0; made < DESIGNS; i++) {
            assertThat(i).as("drawn for " + made).isLessThan(4 * DESIGNS);
            Varied.Design d = drawn(drive, random);
            double angle = d.written("head.pressure_angle");
            double face = d.written("head.face_width");
            double r1 = d.at("head.pinion.d_v") / 2;
            double r2 = d.at("head.wheel.d_v") / 2;
            double c = Math.cos(angle);
            double[][] path =
                    Plane.path(r1 * c, r1 + d.at("head.pinion.h_am"), r2 * c, r2 + d.at("head.wheel.h_am"), r1 + r2);
            double action = Math.hypot(path[1][0] - path[0][0], path[1][1] - path[0][1]);
            double pitch = Math.PI * d.at("head.m_mt") * c;
            double ratio = action / pitch;
            if (!(ratio > 1 && ratio < 2)) {
                continue;
            }
            made++;
            same(d, "head.main.m_o", ratio, 1e-9);
            double module = d.at("head.R_m") / d.at("head.R_e");
            DoubleUnaryOperator factor = off -> {
                double own = chord(face, action, off);
                double all = 0;
                for (int k = -2; k <= 2; k++) {
                    double at = off + k * pitch;
                    all += Math.abs(at) < action / 2 ? Math.pow(chord(face, action, at), 3) : 0;
                }
                double share = Math.pow(own, 3) / all;
                // the place on the line of action, and both radii of curvature there
                double t = (off + action / 2) / action;
                double px = path[0][0] + t * (path[1][0] - path[0][0]);
                double py = path[0][1] + t * (path[1][1] - path[0][1]);
                double one = Math.sqrt(px * px + py * py - r1 * c * r1 * c);
                double two = Math.sqrt(Math.pow(px - r1 - r2, 2) + py * py - r2 * c * r2 * c);
                double curved = one * two / (one + two);
                return own * curved * c / (face * d.at("head.pinion.d_e") * 2 / ratio * share) * module;
            };
            int n = 4000;
            double best = 0;
            for (int k = 1; k < n; k++) {
                double off = -action / 2 + action * k / n;
                if (best == 0 || factor.applyAsDouble(off) < factor.applyAsDouble(best)) {
                    best = off;
                }
            }
            double fine = best;
            for (double step = action / n; step > 1e-9 * action; step /= 2) {
                for (double off : new double[] {fine - step, fine + step}) {
                    if (Math.abs(off) < action / 2 && factor.applyAsDouble(off) < factor.applyAsDouble(fine)) {
                        fine = off;
                    }
                }
            }
            double least = factor.applyAsDouble(fine);
            same(d, "head.main.I_calc", least, EXACT);
        }
    }

    @Test
    void bendingOfStraightBevelTeeth() {
        Varied drive = bevels();
        Random random = new Random(2004);
        int made = 0;
        for (int i = 0; made < DESIGNS; i++) {
            assertThat(i).as("drawn for " + made).isLessThan(4 * DESIGNS);
            Varied.Design d = drawn(drive, random);
            double angle = d.written("head.pressure_angle");
            double face = d.written("head.face_width");
            double module = d.at("head.m_mt");
            double cone = d.at("head.R_m") / d.at("head.R_e");
            double[] radius = new double[2];
            double[] tip = new double[2];
            for (int k = 0; k < 2; k++) {
                radius[k] = d.at("head." + MEMBERS.get(k) + ".d_v") / 2 / module;
                tip[k] = radius[k] + d.at("head." + MEMBERS.get(k) + ".h_am") / module;
            }
            double c = Math.cos(angle);
            double ratio = Plane.contactRatio(
                    radius[0] * c, tip[0], radius[1] * c, tip[1], radius[0] + radius[1], 2 * radius[0]);
            Tooth[] tooth = new Tooth[2];
            double[] at = new double[2];
            boolean valid = ratio > 1 && ratio < 2;
            for (int k = 0; k < 2 && valid; k++) {
                String m = "head." + MEMBERS.get(k) + ".";
                double thicker = (d.at("head.main." + MEMBERS.get(k) + ".t_m") / module - Math.PI / 2) / 2;
                double edge = d.written(m + "tool.edge_radius") / module;
                tooth[k] = new Tooth(2 * radius[k], angle, d.at(m + "h_fm") / module, edge, 0, 0, thicker);
                at[k] = tooth[k].rollAtRadius(
                        singleContact(radius[k], tip[k], radius[1 - k], tip[1 - k], angle, Math.PI));
                valid = tooth[k].toolIsPossible() && !Double.isNaN(tooth[k].rollAtParabola(height(tooth[k], at[k])));
            }
            if (!valid) {
                continue;
            }
            made++;
            double action = ratio * Math.PI * c * module;
            // the line where this pair carries alone, half of the rest of a pitch from the middle of the zone
            double line = chord(face, action, Math.PI * c * module - action / 2);
            for (int k = 0; k < 2; k++) {
                String m = "head.main." + MEMBERS.get(k) + ".";
                double slope = tooth[k].flankSlope(at[k]);
                double load = height(tooth[k], at[k]);
                double[] p = tooth[k].fillet(tooth[k].rollAtParabola(load));
                double arm = load - p[1];
                double least = tooth[k].radiusAtBottom();
                same(d, m + "phi_h", slope, EXACT);
                same(d, m + "R_t", load * module, EXACT);
                same(d, m + "t_N", p[0] * module, EXACT);
                same(d, m + "h_N", arm * module, EXACT);
                same(d, m + "rho_f", least * module, EXACT);
                double degrees = Math.toDegrees(angle);
                double correction = 0.3255
                        - 0.0073 * degrees
                        + Math.pow(2 * p[0] / least, 0.3318 - 0.0091 * degrees)
                                * Math.pow(2 * p[0] / arm, 0.2682 + 0.0087 * degrees);
                double stress = arm / (p[0] * p[0]) - Math.tan(slope) / (3 * p[0]);
                // in outer pitches
                double form = 2 / 3.0 / correction / stress * cone;
                double depth = arm * module;
                double wide = 2 * depth * Math.atan((face - line) / (2 * depth)) + line;
                same(d, m + "J_calc", form * load / radius[k] * wide / face * ratio / 2 * cone, EXACT);
            }
        }
    }
}
