package backcone.engine;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.ArrayList;
import java.util.List;
import java.util.Random;
import java.util.function.DoubleFunction;
import java.util.function.DoubleUnaryOperator;
import org.junit.jupiter.api.Test;

/** Sizes, angles and forces against points and vectors: rolling cones, cutters in the crown gear, generated flanks. */
class GeometryRouteTest {
    private static final int DESIGNS = 200;
    private static final double EXACT = 1e-9;

    private static final String BEVEL = """
            drive d {
              case rated {
                at    = fast
                power = 2 kW
              }
              shaft fast { speed = 600 rpm }
              shaft slow
              bevel head {
                tooth_form        = spiral
                tooth_making      = face_milled
                proportions       = iso_23509
                depth_taper       = standard
                clearance_taper   = parallel
                shaft_angle       = 90 deg
                outer_module      = 4 mm
                mean_spiral_angle = 35 deg
                pressure_angle    = 20 deg
                face_width        = 20 mm
                addendum_factor   = 1.0
                dedendum_factor   = 1.25
                profile_shift     = 0.23
                thickness_shift   = 0.02
                tool { cutter_radius = 88 mm
                       blade_groups  = 5 }
                contact_pattern { effective_face_width = 85 % }
                pinion on fast { teeth = 15
                                 hand  = right }
                wheel on slow { teeth = 40 }
              }
              rate head by iso_10300_b1 edition 2014 as main
            }
            """;

    private static final String CYLINDRICAL = """
            drive d {
              case rated {
                at    = fast
                power = 2 kW
              }
              shaft fast { speed = 600 rpm }
              shaft slow
              cylindrical head {
                normal_module  = 2 mm
                face_width     = 40 mm
                pressure_angle = 20 deg
                helix_angle    = 15 deg
                pinion on fast {
                  teeth         = 19
                  hand          = right
                  profile_shift = 0.2
                  basic_rack    = iso53_B
                  ball_diameter = 3.6 mm
                }
                wheel on slow {
                  teeth         = 46
                  profile_shift = 0.1
                  basic_rack    = iso53_B
                  ball_diameter = 3.6 mm
                }
              }
            }
            """;

    private static final List<String> MEMBERS = List.of("pinion", "wheel");

    // ---- vectors

    private static double[] sum(double a, double[] x, double b, double[] y) {
        return new double[] {a * x[0] + b * y[0], a * x[1] + b * y[1], a * x[2] + b * y[2]};
    }

    private static double dot(double[] x, double[] y) {
        return x[0] * y[0] + x[1] * y[1] + x[2] * y[2];
    }

    private static double[] cross(double[] x, double[] y) {
        return new double[] {x[1] * y[2] - x[2] * y[1], x[2] * y[0] - x[0] * y[2], x[0] * y[1] - x[1] * y[0]};
    }

    private static double length(double[] x) {
        return Math.sqrt(dot(x, x));
    }

    private static double[] unit(double[] x) {
        return sum(1 / length(x), x, 0, x);
    }

    private static double angle(double[] x, double[] y) {
        return Math.atan2(length(cross(x, y)), dot(x, y));
    }

    private static double between(Random r, double low, double high) {
        return low + (high - low) * r.nextDouble();
    }

    private static void same(Varied.Design d, String name, double expected, double scale) {
        same(d, name, expected, scale, EXACT);
    }

    private static void same(Varied.Design d, String name, double expected, double scale, double exact) {
        assertThat(d.at(name)).as(name + " of " + d).isCloseTo(expected, within(exact * Math.abs(scale)));
    }

    private static String[] reads(List<String> ofPair, List<String> ofMember) {
        List<String> out = new ArrayList<>();
        for (String n : ofPair) {
            out.add("head." + n);
        }
        for (String m : MEMBERS) {
            for (String n : ofMember) {
                out.add("head." + m + "." + n);
            }
        }
        return out.toArray(String[]::new);
    }

    private static Varied.Design bevel(Varied drive, Random random) {
        while (true) {
            int z = 10 + random.nextInt(25);
            double module = between(random, 2, 6);
            double sigma = Math.toRadians(between(random, 50, 115));
            int z2 = z + random.nextInt(60);
            Varied.Design d = drive.design()
                    .set("head.pinion.teeth", z)
                    .set("head.wheel.teeth", z2)
                    .set("head.shaft_angle", sigma)
                    .set("head.outer_module", module)
                    .set("head.pressure_angle", Math.toRadians(between(random, 18, 25)))
                    .set("head.profile_shift", between(random, 0, 0.4))
                    .set("head.thickness_shift", between(random, -0.05, 0.05))
                    .set("head.mean_spiral_angle", Math.toRadians(between(random, 5, 40)));
            // a wheel that is a cone, and a face of a quarter to a third of it
            double cone = module * Math.hypot(z + z2 * Math.cos(sigma), z2 * Math.sin(sigma)) / 2 / Math.sin(sigma);
            if (z2 * Math.cos(sigma) + z > 0 && z * Math.cos(sigma) + z2 > 0 && z2 * Math.cos(sigma) > -0.9 * z) {
                return d.set("head.face_width", cone * between(random, 0.2, 0.33))
                        .set("head.tool.cutter_radius", cone * between(random, 0.75, 1.5));
            }
        }
    }

    // ---- bevel: the cones roll on the axis about which one turns against the other

    @Test
    void conesAndBlank() {
        Varied drive = new Varied(
                BEVEL,
                reads(
                        List.of("R_e", "R_m", "R_i", "a_v", "m_mt", "m_mn", "u_v"),
                        List.of(
                                "delta", "d_e", "d_m", "d_pi", "d_v", "d_va", "z_v", "z_vn", "delta_a", "delta_f",
                                "d_ae", "t_xo", "d_ai", "t_xi", "h_ae", "h_ai", "h_fe", "h_fi", "h_am", "h_fm")));
        Random random = new Random(23509);
        for (int i = 0; i < DESIGNS; i++) {
            Varied.Design d = bevel(drive, random);
            double[] z = {number(d, "pinion.teeth"), number(d, "wheel.teeth")};
            double sigma = number(d, "shaft_angle");
            double module = number(d, "outer_module");
            double face = number(d, "face_width");
            double[][] axis = {{0, 0, 1}, {Math.sin(sigma), 0, Math.cos(sigma)}};
            // seen from their backs the members turn in opposite senses, teeth against teeth
            double[] rolling = unit(sum(z[1], axis[0], z[0], axis[1]));
            double outer = z[0] * module / 2 / length(cross(axis[0], rolling));
            same(d, "head.R_e", outer, outer);
            double mid = outer - face / 2;
            double[][] back = new double[2][];
            double slant = number(d, "mean_spiral_angle");
            for (int k = 0; k < 2; k++) {
                String m = "head." + MEMBERS.get(k) + ".";
                same(d, m + "delta", angle(axis[k], rolling), 1);
                // circles: twice the distance from the axis
                same(d, m + "d_e", z[k] * module, outer);
                same(d, m + "d_e", 2 * outer * length(cross(axis[k], rolling)), outer);
                same(d, m + "d_m", 2 * mid * length(cross(axis[k], rolling)), outer);
                same(d, m + "d_pi", 2 * (outer - face) * length(cross(axis[k], rolling)), outer);
                // out of the pitch cone, in the plane of its axis
                double[] out = unit(sum(1, axis[k], -dot(axis[k], rolling), rolling));
                out = sum(-1, out, 0, out);
                double[] mean = sum(mid, rolling, 0, rolling);
                // the back cone at mid-face: where the normal of the pitch cone meets the axis
                double far = mid / dot(axis[k], rolling);
                back[k] = sum(far, axis[k], 0, axis[k]);
                double radius = length(sum(1, mean, -1, back[k]));
                assertThat(angle(sum(1, mean, -1, back[k]), out)).isCloseTo(0, within(1e-7));
                same(d, m + "d_v", 2 * radius, outer);
                same(d, m + "z_v", 2 * Math.PI * radius / (Math.PI * module * mid / outer), z[1]);
                same(d, m + "d_va", 2 * length(sum(1, sum(1, mean, d.at(m + "h_am"), out), -1, back[k])), outer);
                // the virtual cylinder cut square to the base helix: an ellipse, and the teeth on its curvature circle
                double base = Math.asin(Math.sin(slant) * Math.cos(number(d, "pressure_angle")));
                double curved =
                        curvature(t -> new double[] {radius * Math.cos(t), radius / Math.cos(base) * Math.sin(t), 0});
                same(d, m + "z_vn", 2 * curved / d.at("head.m_mn"), z[1] * 4, 1e-8);
                // points of the blank
                double[] outerTip = sum(outer, rolling, d.at(m + "h_ae"), out);
                double[] innerTip = sum(outer - face, rolling, d.at(m + "h_ai"), out);
                double[] outerRoot = sum(outer, rolling, -d.at(m + "h_fe"), out);
                double[] innerRoot = sum(outer - face, rolling, -d.at(m + "h_fi"), out);
                same(d, m + "d_ae", 2 * length(cross(axis[k], outerTip)), outer);
                same(d, m + "d_ai", 2 * length(cross(axis[k], innerTip)), outer);
                same(d, m + "t_xo", dot(axis[k], outerTip), outer);
                same(d, m + "t_xi", dot(axis[k], innerTip), outer);
                same(d, m + "delta_a", angle(axis[k], sum(1, outerTip, -1, innerTip)), 1);
                same(d, m + "delta_f", angle(axis[k], sum(1, outerRoot, -1, innerRoot)), 1);
                // heights at mid-face lie half-way
                same(d, m + "h_am", (d.at(m + "h_ae") + d.at(m + "h_ai")) / 2, outer);
                same(d, m + "h_fm", (d.at(m + "h_fe") + d.at(m + "h_fi")) / 2, outer);
            }
            same(d, "head.a_v", length(sum(1, back[0], -1, back[1])), outer);
            same(d, "head.u_v", d.at("head.wheel.d_v") / d.at("head.pinion.d_v"), 10);
            // a pitch across the teeth at mid-face
            same(d, "head.m_mn", module * mid / outer * Math.cos(slant), module);
        }
    }

    /** Radius of curvature where t = 0, by differences. */
    private static double curvature(DoubleFunction<double[]> curve) {
        double h = 1e-3;
        double[] a = curve.apply(-h);
        double[] m = curve.apply(0);
        double[] b = curve.apply(h);
        double[] aa = curve.apply(-2 * h);
        double[] bb = curve.apply(2 * h);
        double[] first = new double[3];
        double[] second = new double[3];
        for (int i = 0; i < 3; i++) {
            first[i] = (8 * (b[i] - a[i]) - (bb[i] - aa[i])) / (12 * h);
            second[i] = (16 * (a[i] + b[i]) - aa[i] - bb[i] - 30 * m[i]) / (12 * h * h);
        }
        return Math.pow(length(first), 3) / length(cross(first, second));
    }

    private static double number(Varied.Design d, String name) {
        return d.written("head." + name);
    }

    // ---- bevel: spiral angles by the path of the blade over the plane of the crown gear

    /** Angle between a path and the ray from the apex, where the path is that far from the apex. */
    private static double slant(DoubleFunction<double[]> path, double[] around, double distance) {
        double t = Tooth.bisect(v -> length(path.apply(v)) - distance, around[0], around[1]);
        double h = 1e-4;
        double[] p = path.apply(t);
        double[] a = path.apply(t - h);
        double[] b = path.apply(t + h);
        double[] aa = path.apply(t - 2 * h);
        double[] bb = path.apply(t + 2 * h);
        double[] on = sum(8, sum(1, b, -1, a), -1, sum(1, bb, -1, aa));
        if (dot(on, p) < 0) {
            on = sum(-1, on, 0, on);
        }
        return Math.atan2(p[0] * on[1] - p[1] * on[0], dot(p, on));
    }

    @Test
    void spiralAnglesOfFaceMilledTeeth() {
        Varied drive = new Varied(BEVEL, reads(List.of("R_e", "R_m", "R_i", "beta_e", "beta_i"), List.of()));
        Random random = new Random(17);
        for (int i = 0; i < DESIGNS; i++) {
            Varied.Design d = bevel(drive, random);
            double slant = number(d, "mean_spiral_angle");
            double cutter = number(d, "tool.cutter_radius");
            // the cutter's centre stands square to the tooth at the mean point, on the side to which it bends
            double[] centre = {d.at("head.R_m") - cutter * Math.sin(slant), cutter * Math.cos(slant), 0};
            DoubleFunction<double[]> blade = t ->
                    new double[] {centre[0] + cutter * Math.sin(slant + t), centre[1] - cutter * Math.cos(slant + t), 0
                    };
            double[] outward = {0, far(blade, 1)};
            double[] inward = {far(blade, -1), 0};
            assertThat(slant(blade, new double[] {-0.01, 0.01}, d.at("head.R_m")))
                    .isCloseTo(slant, within(EXACT));
            same(d, "head.beta_e", slant(blade, outward, d.at("head.R_e")), 1);
            same(d, "head.beta_i", slant(blade, inward, d.at("head.R_i")), 1);
        }
    }

    /** How far a path may be followed before it turns back towards (or away from) the apex. */
    private static double far(DoubleFunction<double[]> path, int side) {
        double t = 0;
        double step = 0.002 * side;
        while (Math.abs(t) < 2 && (length(path.apply(t + step)) - length(path.apply(t))) * side > 0) {
            t += step;
        }
        return t;
    }

    @Test
    void spiralAnglesOfFaceHobbedTeeth() {
        Varied drive = new Varied(
                BEVEL.replace("face_milled", "face_hobbed"),
                reads(List.of("R_e", "R_m", "R_i", "beta_e", "beta_i", "rho_P0", "m_mn"), List.of("delta")));
        Random random = new Random(18);
        int met = 0;
        for (int i = 0; i < DESIGNS; i++) {
            Varied.Design d = bevel(drive, random);
            double slant = number(d, "mean_spiral_angle");
            double cutter = number(d, "tool.cutter_radius");
            int groups = 3 + random.nextInt(9);
            d.set("head.tool.blade_groups", groups);
            double mid = d.at("head.R_m");
            // crown gear and cutter turn as the teeth of the one and the blade groups of the other ask for
            double crown = number(d, "wheel.teeth") / Math.sin(d.at("head.wheel.delta"));
            double rate = crown / groups;
            // where the cutter must stand for the path to have the mean spiral angle
            DoubleUnaryOperator off =
                    where -> slant(hobbed(mid, cutter, where, rate), new double[] {-1e-3, 1e-3}, mid) - slant;
            double tilt = Math.asin(Math.min(1, groups * d.at("head.m_mn") / (2 * cutter)));
            double where = Tooth.bisect(off, tilt - 0.2, tilt + 0.2);
            if (Double.isNaN(where)) {
                continue;
            }
            DoubleFunction<double[]> path = hobbed(mid, cutter, where, rate);
            double[] centre = centre(mid, cutter, where);
            int side = length(path.apply(1e-4)) > length(path.apply(-1e-4)) ? 1 : -1;
            double up = far(t -> path.apply(side * t), 1);
            double down = far(t -> path.apply(side * t), -1);
            DoubleFunction<double[]> outward = t -> path.apply(side * t);
            // paths that turn round within the face are no teeth
            if (length(outward.apply(up)) < d.at("head.R_e") || length(outward.apply(down)) > d.at("head.R_i")) {
                continue;
            }
            met++;
            same(d, "head.rho_P0", length(centre), mid, 1e-8);
            same(d, "head.beta_e", slant(outward, new double[] {0, up}, d.at("head.R_e")), 1, 1e-7);
            same(d, "head.beta_i", slant(outward, new double[] {down, 0}, d.at("head.R_i")), 1, 1e-7);
        }
        assertThat(met).isGreaterThan(DESIGNS / 3);
    }

    /** The cutter's centre, seen from the mean point at the angle {@code where} to the circle around the apex, inward. */
    private static double[] centre(double mid, double cutter, double where) {
        return new double[] {mid - cutter * Math.sin(where), cutter * Math.cos(where), 0};
    }

    /** The path of a blade over the crown gear: the cutter goes round the apex and turns faster in the same sense. */
    private static DoubleFunction<double[]> hobbed(double mid, double cutter, double where, double rate) {
        double[] c = centre(mid, cutter, where);
        double bx = mid - c[0];
        double by = -c[1];
        return t -> {
            double turn = t / (1 + rate);
            double own = t;
            double x = c[0] * Math.cos(turn) - c[1] * Math.sin(turn);
            double y = c[0] * Math.sin(turn) + c[1] * Math.cos(turn);
            return new double[] {
                x + bx * Math.cos(own) - by * Math.sin(own), y + bx * Math.sin(own) + by * Math.cos(own), 0
            };
        };
    }

    // ---- bevel: forces

    /**
     * The force on a tooth at a point of the pitch surface, from the torque on the gear. It stands square on the flank that
     * carries; {@code out} leads out of the gear, {@code along} along the tooth.
     */
    private static double[] force(
            double[] axis, double[] at, double[] out, double[] along, double pressure, double torque) {
        double[] way = unit(cross(axis, at));
        double sense = Math.signum(torque);
        // across the tooth in the pitch surface, the way the force pushes
        double[] across = unit(sum(1, way, -dot(way, along), along));
        // the carrying flank faces the other way and falls back as it goes out
        double[] profile = sum(Math.cos(pressure), out, sense * Math.sin(pressure), across);
        double[] square = unit(cross(profile, along));
        double lever = dot(cross(at, square), axis);
        return sum(torque / lever, square, 0, square);
    }

    @Test
    void forcesOfBevelTeeth() {
        Varied drive = new Varied(
                BEVEL,
                reads(
                        List.of("R_m", "F_mt", "F_n"),
                        List.of("delta", "T", "F_a_cw", "F_a_ccw", "F_r_cw", "F_r_ccw", "F_a", "F_r")));
        Random random = new Random(26);
        for (int i = 0; i < DESIGNS; i++) {
            Varied.Design d = bevel(drive, random);
            double slant = number(d, "mean_spiral_angle");
            double pressure = number(d, "pressure_angle");
            double sigma = number(d, "shaft_angle");
            double[][] axis = {{0, 0, 1}, {Math.sin(sigma), 0, Math.cos(sigma)}};
            double[] rolling = unit(sum(number(d, "wheel.teeth"), axis[0], number(d, "pinion.teeth"), axis[1]));
            double[] at = sum(d.at("head.R_m"), rolling, 0, rolling);
            for (int turns : new int[] {1, -1}) {
                double[][] forces = new double[2][];
                for (int k = 0; k < 2; k++) {
                    String m = "head." + MEMBERS.get(k) + ".";
                    double[] out = sum(-1, unit(sum(1, axis[k], -dot(axis[k], rolling), rolling)), 0, rolling);
                    double[] way = unit(cross(axis[k], at));
                    // from the apex, the outer half of a right-hand tooth leans clockwise: with the turn about the axis
                    double hand = k == 0 ? 1 : -1;
                    double[] along = sum(Math.cos(slant), rolling, hand * Math.sin(slant), way);
                    // clockwise as seen from the large end: about the axis backwards. The pinion's tooth is held back
                    // by
                    // its mate, the wheel's is pushed on; it turns the other way
                    boolean clockwise = turns > 0;
                    double motion = (clockwise ? -1 : 1) * (k == 0 ? 1 : -1);
                    double torque = (k == 0 ? -1 : 1) * motion * d.at(m + "T");
                    double[] f = force(axis[k], at, out, along, pressure, torque);
                    forces[k] = f;
                    String sense = clockwise == (k == 0) ? "_cw" : "_ccw";
                    double size = d.at("head.F_n");
                    assertThat(length(f)).as(d.toString()).isCloseTo(size, within(EXACT * size));
                    same(d, "head.F_mt", Math.abs(dot(f, way)), size);
                    same(d, m + "F_a" + sense, dot(f, axis[k]), size);
                    double[] inward = unit(sum(-1, at, dot(at, axis[k]), axis[k]));
                    same(d, m + "F_r" + sense, dot(f, inward), size);
                }
                // the mates push each other; one number of torque by speed belongs to both
                assertThat(length(sum(1, forces[0], 1, forces[1])))
                        .as(d.toString())
                        .isLessThan(EXACT * length(forces[0]));
            }
        }
    }

    // ---- curvature of involute helicoids

    /** The greater curvature of the flank of a helical gear at a point of the line of action; the other one is none. */
    private static double flankCurvature(double base, double helix, double pressure) {
        double lead = base / Math.tan(helix);
        double u = Math.tan(pressure);
        double h = 1e-3;
        double[] su = new double[3];
        double[] sv = new double[3];
        double[] suu = new double[3];
        double[] svv = new double[3];
        double[] suv = new double[3];
        double[] w = {1 / 12.0, -8 / 12.0, 0, 8 / 12.0, -1 / 12.0};
        double[] ww = {-1 / 12.0, 16 / 12.0, -30 / 12.0, 16 / 12.0, -1 / 12.0};
        for (int i = 0; i < 5; i++) {
            double a = (i - 2) * h;
            su = sum(1, su, w[i] / h, helicoid(base, lead, u + a, 0));
            sv = sum(1, sv, w[i] / h, helicoid(base, lead, u, a));
            suu = sum(1, suu, ww[i] / (h * h), helicoid(base, lead, u + a, 0));
            svv = sum(1, svv, ww[i] / (h * h), helicoid(base, lead, u, a));
            for (int j = 0; j < 5; j++) {
                suv = sum(1, suv, w[i] * w[j] / (h * h), helicoid(base, lead, u + a, (j - 2) * h));
            }
        }
        double[] n = unit(cross(su, sv));
        double e = dot(su, su);
        double f = dot(su, sv);
        double g = dot(sv, sv);
        double l = dot(suu, n);
        double m = dot(suv, n);
        double nn = dot(svv, n);
        // a developable surface: the product of both curvatures is nothing, their sum is the one
        return Math.abs((e * nn - 2 * f * m + g * l) / (e * g - f * f));
    }

    private static double[] helicoid(double base, double lead, double u, double v) {
        double t = u + v;
        return new double[] {base * (Math.cos(t) + u * Math.sin(t)), base * (Math.sin(t) - u * Math.cos(t)), lead * v};
    }

    @Test
    void curvatureAcrossTheContactLine() {
        List<String> names = new ArrayList<>(List.of(reads(List.of("alpha_vt", "beta_vb"), List.of("d_vb"))));
        names.add("head.main.rho_rel");
        Varied drive = new Varied(BEVEL, names.toArray(String[]::new));
        Random random = new Random(27);
        for (int i = 0; i < DESIGNS; i++) {
            Varied.Design d = bevel(drive, random);
            double both = 0;
            for (String m : MEMBERS) {
                both += flankCurvature(d.at("head." + m + ".d_vb") / 2, d.at("head.beta_vb"), d.at("head.alpha_vt"));
            }
            same(d, "head.main.rho_rel", 1 / both, 1 / both, 1e-6);
        }
    }

    // ---- cylindrical

    private static Varied.Design cylindrical(Varied drive, Random random) {
        int z = 14 + random.nextInt(40);
        double module = between(random, 1, 8);
        return drive.design()
                .set("head.pinion.teeth", z)
                .set("head.wheel.teeth", z + random.nextInt(60))
                .set("head.normal_module", module)
                .set("head.helix_angle", random.nextInt(4) == 0 ? 0 : Math.toRadians(between(random, 2, 35)))
                .set("head.pressure_angle", Math.toRadians(between(random, 17.5, 25)))
                .set("head.pinion.profile_shift", between(random, 0, 0.5))
                .set("head.wheel.profile_shift", between(random, -0.2, 0.5))
                .set("head.pinion.ball_diameter", module * between(random, 1.65, 1.9))
                .set("head.wheel.ball_diameter", module * between(random, 1.65, 1.9));
    }

    @Test
    void contactOfCylindricalGears() {
        Varied drive = new Varied(
                CYLINDRICAL,
                reads(
                        List.of("a_w", "alpha_wt", "eps_a", "beta_b", "p_bt", "p_t", "g_a"),
                        List.of(
                                "d", "d_b", "d_a", "d_w", "d_Nf", "L_Nf", "s_wt", "s_an", "W_k", "k_W", "eps_tip",
                                "z_n")));
        Random random = new Random(21771);
        for (int i = 0; i < DESIGNS; i++) {
            Varied.Design d = cylindrical(drive, random);
            double beta = number(d, "helix_angle");
            double across = number(d, "normal_module") / Math.cos(beta);
            double pressure = Math.atan(Math.tan(number(d, "pressure_angle")) / Math.cos(beta));
            double axes = d.at("head.a_w");
            Tooth[] tooth = new Tooth[2];
            double[] z = new double[2];
            double[] rolling = new double[2];
            for (int k = 0; k < 2; k++) {
                z[k] = number(d, MEMBERS.get(k) + ".teeth");
                rolling[k] = axes * z[k] / (number(d, "pinion.teeth") + number(d, "wheel.teeth"));
                // the transverse section: a spur gear of the transverse module, cut by the transverse rack
                double shift = number(d, MEMBERS.get(k) + ".profile_shift") * Math.cos(beta);
                tooth[k] = new Tooth(z[k], pressure, 1.25 * Math.cos(beta), 0.3 * Math.cos(beta), 0, shift, 0);
            }
            double thick = 0;
            for (int k = 0; k < 2; k++) {
                String m = "head." + MEMBERS.get(k) + ".";
                same(d, m + "d_w", 2 * rolling[k], axes);
                double wide = 2 * rolling[k] * tooth[k].halfAngle(rolling[k] / across);
                same(d, m + "s_wt", wide, axes);
                thick += wide;
                double tip = d.at(m + "d_a") / 2;
                // square to the helix that the tip corner runs on
                double steep = Math.cos(Math.atan(Math.tan(beta) * tip / (z[k] * across / 2)));
                same(d, m + "s_an", 2 * tip * tooth[k].halfAngle(tip / across) * steep, axes);
                // two planes touch the flanks of the teeth that they span
                double spread = (d.at(m + "k_W") - 1) * Math.PI / z[k];
                same(d, m + "W_k", tooth[k].span(spread) * across * Math.cos(d.at("head.beta_b")), axes, 1e-8);
                double base = Math.asin(Math.sin(beta) * Math.cos(number(d, "pressure_angle")));
                double radius = z[k] * across / 2;
                double curved =
                        curvature(t -> new double[] {radius * Math.cos(t), radius / Math.cos(base) * Math.sin(t), 0});
                same(d, m + "z_n", 2 * curved / number(d, "normal_module"), z[k], 1e-8);
            }
            // tight mesh: both thicknesses fill the pitch
            assertThat(thick).as(d.toString()).isCloseTo(2 * Math.PI * rolling[0] / z[0], within(EXACT * axes));
            double base1 = d.at("head.pinion.d_b") / 2;
            double base2 = d.at("head.wheel.d_b") / 2;
            double tip1 = d.at("head.pinion.d_a") / 2;
            double tip2 = d.at("head.wheel.d_a") / 2;
            same(d, "head.eps_a", Plane.contactRatio(base1, tip1, base2, tip2, axes, z[0]), 2);
            double[][] path = Plane.path(base1, tip1, base2, tip2, axes);
            same(d, "head.g_a", Math.hypot(path[1][0] - path[0][0], path[1][1] - path[0][1]), axes);
            if (d.at("head.pinion.L_Nf") > 0) {
                same(d, "head.pinion.d_Nf", 2 * Math.hypot(path[0][0], path[0][1]), axes);
            }
            if (d.at("head.wheel.L_Nf") > 0) {
                same(d, "head.wheel.d_Nf", 2 * Math.hypot(path[1][0] - axes, path[1][1]), axes);
            }
        }
    }

    /** Measure over balls: a ball comes down between the flanks until it touches them. */
    @Test
    void ballsBetweenFlanks() {
        Varied drive = new Varied(CYLINDRICAL, reads(List.of("beta_b"), List.of("M_dK", "d_b", "d", "d_a")));
        Random random = new Random(7);
        for (int i = 0; i < 20; i++) {
            Varied.Design d = cylindrical(drive, random);
            double beta = number(d, "helix_angle");
            double across = number(d, "normal_module") / Math.cos(beta);
            double pressure = Math.atan(Math.tan(number(d, "pressure_angle")) / Math.cos(beta));
            for (String m : MEMBERS) {
                double z = number(d, m + ".teeth");
                Tooth tooth = new Tooth(z, pressure, 1.25, 0.1, 0, number(d, m + ".profile_shift") * Math.cos(beta), 0);
                double ball = number(d, m + ".ball_diameter") / 2;
                // how a ball at this distance from the axis, in the middle of a space, clears the flank beside it
                double twist = Math.tan(beta) / (z * across / 2);
                double turned = Math.PI / z;
                DoubleUnaryOperator clear = r -> {
                    DoubleUnaryOperator atHeight = v -> {
                        double c = Math.cos(turned + v * twist);
                        double s = Math.sin(turned + v * twist);
                        return least(
                                roll -> {
                                    double[] p = tooth.flank(roll);
                                    double x = across * (p[0] * c - p[1] * s);
                                    double y = across * (p[0] * s + p[1] * c);
                                    return x * x + (y - r) * (y - r) + v * v;
                                },
                                tooth.rollAtBase(),
                                tooth.rollAtBase() + 1.2);
                    };
                    return Math.sqrt(least(atHeight, -2 * ball, 2 * ball)) - ball;
                };
                double centre =
                        Tooth.bisect(clear, d.at("head." + m + ".d_b") / 2, d.at("head." + m + ".d_a") / 2 + 2 * ball);
                // the other ball stands opposite, in an odd gear half a pitch aside
                double chord = z % 2 == 0 ? 2 * centre : 2 * centre * Math.cos(Math.PI / z / 2);
                same(d, "head." + m + ".M_dK", chord + 2 * ball, centre, 1e-6);
            }
        }
    }

    /** The least value of a function with one dip. */
    private static double least(DoubleUnaryOperator f, double from, double to) {
        double ratio = (Math.sqrt(5) - 1) / 2;
        double a = from;
        double b = to;
        double c = b - ratio * (b - a);
        double e = a + ratio * (b - a);
        double fc = f.applyAsDouble(c);
        double fe = f.applyAsDouble(e);
        for (int i = 0; i < 45; i++) {
            if (fc < fe) {
                b = e;
                e = c;
                fe = fc;
                c = b - ratio * (b - a);
                fc = f.applyAsDouble(c);
            } else {
                a = c;
                c = e;
                fc = fe;
                e = a + ratio * (b - a);
                fe = f.applyAsDouble(e);
            }
        }
        return Math.min(fc, fe);
    }

    @Test
    void contactOfInternalGears() {
        Varied drive = new Varied(
                CYLINDRICAL.replace("helix_angle    = 15 deg", "helix_angle    = 15 deg\n    internal = yes"),
                reads(List.of("a_w", "eps_a", "g_a"), List.of("d_b", "d_a", "d_Nf", "L_Nf")));
        Random random = new Random(21772);
        int met = 0;
        for (int i = 0; i < DESIGNS; i++) {
            Varied.Design d = cylindrical(drive, random);
            double z = number(d, "pinion.teeth");
            d.set("head.wheel.teeth", z + 15 + random.nextInt(50)).set("head.pinion.profile_shift", 0.2);
            double axes = d.at("head.a_w");
            double base1 = d.at("head.pinion.d_b") / 2;
            double base2 = d.at("head.wheel.d_b") / 2;
            double tip2 = d.at("head.wheel.d_a") / 2;
            if (Double.isNaN(axes) || tip2 < base2) {
                continue;
            }
            met++;
            double[][] path = Plane.innerPath(base1, d.at("head.pinion.d_a") / 2, base2, tip2, axes);
            double action = Math.hypot(path[1][0] - path[0][0], path[1][1] - path[0][1]);
            same(d, "head.g_a", action, axes);
            same(d, "head.eps_a", action / (2 * Math.PI * base1 / z), 2);
            if (d.at("head.pinion.L_Nf") > 0) {
                same(d, "head.pinion.d_Nf", 2 * Math.hypot(path[0][0], path[0][1]), axes);
            }
            same(d, "head.wheel.d_Nf", 2 * Math.hypot(path[1][0] + axes, path[1][1]), axes);
        }
        assertThat(met).isGreaterThan(DESIGNS / 3);
    }

    @Test
    void forcesOfCylindricalTeeth() {
        for (String internal : List.of("no", "yes")) {
            Varied drive = new Varied(
                    CYLINDRICAL.replace(
                            "helix_angle    = 15 deg", "helix_angle    = 15 deg\n    internal = " + internal),
                    reads(
                            List.of("a_w", "alpha_wt", "F_tw", "F_n", "beta_b"),
                            List.of("T", "d_b", "d_w", "F_r", "F_a_cw", "F_a_ccw", "F_a")));
            Random random = new Random(28);
            for (int i = 0; i < DESIGNS; i++) {
                Varied.Design d = cylindrical(drive, random);
                double z = number(d, "pinion.teeth");
                d.set("head.wheel.teeth", z + 15 + random.nextInt(50));
                boolean inside = internal.equals("yes");
                double size = d.at("head.F_n");
                if (Double.isNaN(size)) {
                    continue;
                }
                for (int turns : new int[] {1, -1}) {
                    double[][] forces = new double[2][];
                    for (int k = 0; k < 2; k++) {
                        String m = "head." + MEMBERS.get(k) + ".";
                        double radius = d.at(m + "d_w") / 2;
                        // both axes run away from the one who looks; the pitch point lies at +x of the pinion
                        double[] axis = {0, 0, 1};
                        double[] at = {k == 0 || inside ? radius : -radius, 0, 0};
                        double[] out = {k == 1 && !inside ? -1 : 1, 0, 0};
                        // on the working cylinder the tooth climbs one turn in its lead; right-hand: with the turn
                        double hand = k == 0 || inside ? 1 : -1;
                        double lead = Math.PI * z * number(d, "normal_module") / Math.sin(number(d, "helix_angle"));
                        if (k == 1) {
                            lead *= number(d, "wheel.teeth") / z;
                        }
                        double[] way = cross(axis, out);
                        double[] along = unit(sum(lead, axis, hand * 2 * Math.PI * radius, way));
                        if (number(d, "helix_angle") == 0) {
                            along = axis;
                        }
                        double motion = turns * (k == 0 || inside ? 1 : -1);
                        double torque = (k == 0 ? -1 : 1) * motion * d.at(m + "T");
                        // the profile in the transverse plane: teeth thin towards their tips, a ring's towards the axis
                        double pressure = Math.acos(d.at(m + "d_b") / 2 / radius);
                        double back = Math.signum(torque) * (k == 1 && inside ? -1 : 1);
                        double[] profile = sum(Math.cos(pressure), out, back * Math.sin(pressure), way);
                        double[] square = unit(cross(profile, along));
                        double[] f = sum(torque / dot(cross(at, square), axis), square, 0, square);
                        forces[k] = f;
                        String sense = motion > 0 ? "_cw" : "_ccw";
                        assertThat(length(f)).as(d.toString()).isCloseTo(size, within(EXACT * size));
                        same(d, "head.F_tw", Math.abs(dot(f, way)), size);
                        same(d, m + "F_r", -dot(f, out), size);
                        same(d, m + "F_a" + sense, dot(f, axis), size);
                        same(d, m + "F_a", Math.abs(dot(f, axis)), size);
                    }
                    assertThat(length(sum(1, forces[0], 1, forces[1])))
                            .as(d.toString())
                            .isLessThan(EXACT * size);
                }
            }
        }
    }

    /** Bevel tips: the tooth of the normal section ends in a land. */
    @Test
    void tipsOfBevelTeeth() {
        Varied drive = new Varied(BEVEL, reads(List.of("m_mn"), List.of("z_vn", "h_am", "s_an", "s_mn")));
        Random random = new Random(10);
        for (int i = 0; i < DESIGNS; i++) {
            Varied.Design d = bevel(drive, random);
            double module = d.at("head.m_mn");
            for (int k = 0; k < 2; k++) {
                String m = "head." + MEMBERS.get(k) + ".";
                int sign = k == 0 ? 1 : -1;
                double z = d.at(m + "z_vn");
                Tooth tooth = new Tooth(
                        z,
                        number(d, "pressure_angle"),
                        1.25,
                        0.2,
                        0,
                        sign * number(d, "profile_shift"),
                        sign * number(d, "thickness_shift"));
                double tip = z / 2 + d.at(m + "h_am") / module;
                same(d, m + "s_an", module * 2 * tip * tooth.halfAngle(tip), module);
                same(d, m + "s_mn", module * z * tooth.halfAngle(z / 2), module);
            }
        }
    }
}
