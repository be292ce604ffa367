package backcone.engine;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.ArrayList;
import java.util.List;
import java.util.Random;
import java.util.function.DoubleUnaryOperator;
import org.junit.jupiter.api.Test;

/** Lengths of contact lines against lines that are clipped to the zone of action in the plane. */
class ContactLineRouteTest {
    private static final int DESIGNS = 300;
    private static final double EXACT = 1e-9;

    /** Of a pitch; the mean of what grows and falls in straight pieces is then met to a millionth. */
    private static final int STEPS = 1000;

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
                mean_normal_module = 2 mm
                mean_spiral_angle  = 35 deg
                pressure_angle     = 20 deg
                face_width         = 20 mm
                addendum_factor    = 1.0
                dedendum_factor    = 1.25
                profile_shift      = 0.23
                thickness_shift    = 0.02
                contact_pattern {
                  effective_face_width = 17 mm
                  profile_crowning     = high
                }
                pinion on fast { teeth = 15 }
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
                face_width     = 20 mm
                pressure_angle = 20 deg
                helix_angle    = 15 deg
                pinion on fast {
                  teeth         = 19
                  profile_shift = 0.2
                  basic_rack    = iso53_A
                }
                wheel on slow {
                  teeth         = 46
                  profile_shift = 0.1
                  basic_rack    = iso53_A
                }
              }
              rate head by iso_6336_b edition 2019 as main
            }
            """;

    // ---- geometry in the plane

    /** The piece of a straight line inside a convex outline that runs counter-clockwise. */
    private static double clipped(double[][] outline, double[] at, double[] on) {
        double from = Double.NEGATIVE_INFINITY;
        double to = Double.POSITIVE_INFINITY;
        for (int i = 0; i < outline.length; i++) {
            double[] a = outline[i];
            double[] b = outline[(i + 1) % outline.length];
            // inside is to the left of the edge
            double nx = a[1] - b[1];
            double ny = b[0] - a[0];
            double inside = nx * (at[0] - a[0]) + ny * (at[1] - a[1]);
            double rate = nx * on[0] + ny * on[1];
            if (rate > 0) {
                from = Math.max(from, -inside / rate);
            } else if (rate < 0) {
                to = Math.min(to, -inside / rate);
            } else if (inside < 0) {
                return 0;
            }
        }
        return Math.max(0, to - from) * Math.hypot(on[0], on[1]);
    }

    /** The chord of a straight line in an ellipse, by walking along it. */
    private static double chord(double halfWidth, double halfHeight, double[] at, double[] on) {
        DoubleUnaryOperator out = t -> {
            double x = (at[0] + t * on[0]) / halfWidth;
            double y = (at[1] + t * on[1]) / halfHeight;
            return x * x + y * y - 1;
        };
        double far = 10 * (halfWidth + halfHeight);
        double low = -far;
        double high = far;
        for (int i = 0; i < 200; i++) {
            double a = low + (high - low) / 3;
            double b = high - (high - low) / 3;
            if (out.applyAsDouble(a) < out.applyAsDouble(b)) {
                high = b;
            } else {
                low = a;
            }
        }
        double middle = (low + high) / 2;
        if (out.applyAsDouble(middle) >= 0) {
            return 0;
        }
        return Tooth.bisect(out, middle, far) - Tooth.bisect(out, -far, middle);
    }

    private static double[][] rectangle(double width, double height) {
        double x = width / 2;
        double y = height / 2;
        return new double[][] {{-x, -y}, {x, -y}, {x, y}, {-x, y}};
    }

    private static double between(Random r, double low, double high) {
        return low + (high - low) * r.nextDouble();
    }

    // ---- bevel

    private static final String[] LINES = {"tip", "middle", "root"};

    private static String[] readOfBevel() {
        List<String> reads = new ArrayList<>(List.of(
                "head.p_vet",
                "head.g_va",
                "head.beta_vb",
                "head.b_eff",
                "head.eps_va",
                "head.eps_vb",
                "head.main.f_max"));
        reads.addAll(List.of("head.main.l_bm01", "head.main.Z_LS", "head.main.eps_vg"));
        for (String s : List.of("flank", "root_side")) {
            for (String l : LINES) {
                for (String v : List.of("f_l", "l_b0", "p_line", "l_b")) {
                    reads.add("head.main." + s + "." + l + "." + v);
                }
            }
            reads.add("head.main." + s + ".w_line");
        }
        return reads.toArray(String[]::new);
    }

    /** Pairs of straight to strongly spiral teeth, narrow to wide, as far as the method reaches. */
    private static Varied.Design drawn(Varied drive, Random random, int i) {
        while (true) {
            int z = 12 + random.nextInt(20);
            double face = between(random, 6, 26);
            Varied.Design d = drive.design()
                    .set("head.pinion.teeth", z)
                    .set("head.wheel.teeth", z + random.nextInt(60))
                    .set("head.mean_spiral_angle", i % 5 == 0 ? 0 : Math.toRadians(between(random, 1, 44)))
                    .set("head.pressure_angle", Math.toRadians(between(random, 18, 25)))
                    .set("head.shaft_angle", Math.toRadians(between(random, 60, 110)))
                    .set("head.profile_shift", between(random, 0, 0.4))
                    .set("head.face_width", face)
                    .set("head.contact_pattern.effective_face_width", face * between(random, 0.5, 1));
            double eps = d.at("head.eps_va");
            if (eps < 2 && (eps > 1 || d.at("head.eps_vb") >= 1)) {
                return d;
            }
        }
    }

    /** How high the middle line stands over the middle of the zone: where one pair carries alone, as far as teeth do not overlap. */
    private static double middleLine(double pitch, double action, double overlap, boolean root) {
        if (overlap >= 1) {
            return 0;
        }
        // a second pair meets at the one end of the path (flank), or leaves at the other (root): this one is a pitch
        // off
        double spur = root ? -action / 2 + pitch : action / 2 - pitch;
        return spur * (1 - overlap);
    }

    @Test
    void linesOfBevelPairs() {
        Varied drive = new Varied(BEVEL, readOfBevel());
        Random random = new Random(103001);
        int outside = 0;
        for (int i = 0; i < DESIGNS; i++) {
            Varied.Design d = drawn(drive, random, i);
            double slant = d.at("head.beta_vb");
            double pitch = d.at("head.p_vet");
            double action = d.at("head.g_va");
            double width = d.at("head.b_eff");
            double[][] zone = rectangle(width, action);
            double[] on = {Math.cos(slant), Math.sin(slant)};
            double corner = 0;
            for (double[] c : zone) {
                corner = Math.max(corner, Math.abs(c[1] * on[0] - c[0] * on[1]));
            }
            assertThat(d.at("head.main.f_max")).as(d.toString()).isCloseTo(corner, within(EXACT * corner));
            for (String side : List.of("flank", "root_side")) {
                double middle = middleLine(pitch, action, d.at("head.eps_vb"), side.equals("root_side"));
                double[] area = new double[3];
                for (int k = 0; k < 3; k++) {
                    String line = "head.main." + side + "." + LINES[k];
                    double[] at = {0, middle + (1 - k) * pitch};
                    // a line on the very edge of the zone has just left it, or is about to enter
                    boolean edge = Math.abs(at[1] * on[0]) > corner * (1 - EXACT);
                    double length = edge ? 0 : clipped(zone, at, on);
                    assertThat(d.at(line + ".l_b0")).as(line + " of " + d).isCloseTo(length, within(EXACT * width));
                    if (length == 0) {
                        outside++;
                    }
                    // the load stands over the line as half an ellipse
                    area[k] = Math.PI / 4 * d.at(line + ".p_line") * d.at(line + ".l_b");
                }
                assertThat(d.at("head.main." + side + ".w_line"))
                        .as(d.toString())
                        .isCloseTo(area[1] / (area[0] + area[1] + area[2]), within(EXACT));
            }
        }
        assertThat(outside).isBetween(DESIGNS, 4 * DESIGNS);
    }

    /** The edition of 2001 counts chords of the ellipse in the zone, and loads over them that fall from its middle. */
    @Test
    void chordsOfTheEllipse() {
        Varied drive = new Varied(BEVEL.replace("edition 2014", "edition 2001"), readOfBevel());
        Random random = new Random(1030012001);
        int shared = 0;
        for (int i = 0; i < DESIGNS; i++) {
            Varied.Design d = drawn(drive, random, i);
            double slant = d.at("head.beta_vb");
            double pitch = d.at("head.p_vet");
            double action = d.at("head.g_va");
            double width = d.at("head.b_eff");
            double[] on = {Math.cos(slant), Math.sin(slant)};
            double middle = middleLine(pitch, action, d.at("head.eps_vb"), false);
            double length = chord(width / 2, action / 2, new double[] {0, middle}, on);
            assertThat(d.at("head.main.l_bm01")).as(d.toString()).isCloseTo(length, within(1e-7 * width));
            // how far from the middle the last line still touches the ellipse
            double rim = Tooth.bisect(
                    y -> chord(width / 2, action / 2, new double[] {0, y}, on) > 0 ? -1 : 1, 0, width + action);
            double all = 0;
            for (int k = -3; k <= 3; k++) {
                double line = chord(width / 2, action / 2, new double[] {0, k * pitch}, on);
                all += line * Math.max(0, 1 - Math.pow(Math.abs(k * pitch) / rim, 1.5));
            }
            if (d.at("head.eps_vb") > 1) {
                // from four on, more than three lines stand in the zone and the closed form still counts three
                if (d.at("head.main.eps_vg") < 4) {
                    shared += d.at("head.main.eps_vg") > 2 ? 1 : 0;
                    double own = chord(width / 2, action / 2, new double[] {0, 0}, on);
                    assertThat(d.at("head.main.Z_LS")).as(d.toString()).isCloseTo(Math.sqrt(own / all), within(1e-6));
                }
            } else {
                assertThat(d.at("head.main.Z_LS")).isEqualTo(1);
            }
        }
        assertThat(shared).isGreaterThan(10);
    }

    // ---- cylindrical

    /** All contact lines in the zone, as the mesh moves on by a part of the pitch. */
    private static double together(double width, double action, double pitch, double slant, double phase) {
        double[][] zone = rectangle(width, action);
        double[] on = {Math.cos(slant), Math.sin(slant)};
        int reach = (int) ((action + width * Math.tan(slant)) / pitch) + 2;
        double sum = 0;
        for (int k = -reach; k <= reach; k++) {
            sum += clipped(zone, new double[] {0, (k + phase) * pitch}, on);
        }
        return sum;
    }

    @Test
    void linesOfHelicalPairs() {
        Varied drive =
                new Varied(CYLINDRICAL, "head.eps_a", "head.eps_b", "head.beta_b", "head.p_bt", "head.main.Z_eps");
        Random random = new Random(63362);
        int wide = 0;
        int narrow = 0;
        for (int i = 0; i < DESIGNS; i++) {
            int z = 17 + random.nextInt(40);
            double width = between(random, 5, 60);
            double beta = i % 5 == 0 ? 0 : Math.toRadians(between(random, 2, 30));
            Varied.Design d = drive.design()
                    .set("head.pinion.teeth", z)
                    .set("head.wheel.teeth", z + random.nextInt(60))
                    .set("head.helix_angle", beta)
                    .set("head.face_width", width)
                    .set("head.pinion.profile_shift", between(random, 0, 0.4))
                    .set("head.wheel.profile_shift", between(random, -0.2, 0.4));
            double overlap = d.at("head.eps_b");
            double[] lines = lines(d, width);
            double share = d.at("head.main.Z_eps") * d.at("head.main.Z_eps");
            // what the lines carry on the average is what a face of that length would; spur teeth carry more than their
            // mean
            double mean = width / lines[1];
            double fewest = width / lines[0];
            if (overlap >= 1) {
                wide++;
                assertThat(share).as(d.toString()).isCloseTo(mean, within(1e-5));
                // with a whole overlap they are of one length all the time
                double whole = width / overlap;
                assertThat(d.set("head.face_width", whole).at("head.eps_b")).isCloseTo(1, within(1e-12));
                double[] same = lines(d, whole);
                assertThat(same[0]).isCloseTo(same[1], within(1e-9 * whole));
                assertThat(d.at("head.main.Z_eps")).isCloseTo(Math.sqrt(whole / same[0]), within(1e-9));
            } else {
                narrow++;
                assertThat(share).as(d.toString()).isBetween(mean, 1.0);
                if (overlap == 0) {
                    assertThat(fewest).as("one tooth alone").isCloseTo(1, within(1e-12));
                } else {
                    // the rest is the value of the spur pair with the same path of contact
                    double spur = (share - overlap * mean) / (1 - overlap);
                    assertThat(spur)
                            .as(d.toString())
                            .isCloseTo((4 - d.at("head.eps_a")) / 3, within(1e-4 / (1 - overlap)));
                }
            }
        }
        assertThat(wide).isGreaterThan(DESIGNS / 4);
        assertThat(narrow).isGreaterThan(DESIGNS / 4);
    }

    /** The least and the mean length of all lines together, as the mesh moves on by a pitch; along the face. */
    private static double[] lines(Varied.Design d, double width) {
        double slant = d.at("head.beta_b");
        double pitch = d.at("head.p_bt");
        double sum = 0;
        double least = Double.POSITIVE_INFINITY;
        for (int k = 0; k < STEPS; k++) {
            double l = together(width, d.at("head.eps_a") * pitch, pitch, slant, (k + 0.5) / STEPS) * Math.cos(slant);
            sum += l;
            least = Math.min(least, l);
        }
        return new double[] {least, sum / STEPS};
    }

    // ---- curvature where the lines of the single pair stand

    /** Root of the product of both radii of curvature at a point of the line of action. */
    private static double curved(double[] at, double base1, double base2, double axes) {
        double one = Math.sqrt(at[0] * at[0] + at[1] * at[1] - base1 * base1);
        double two = Math.sqrt((at[0] - axes) * (at[0] - axes) + at[1] * at[1] - base2 * base2);
        return Math.sqrt(one * two);
    }

    private static double[] towards(double[] from, double[] to, double far) {
        double length = Math.hypot(to[0] - from[0], to[1] - from[1]);
        return new double[] {from[0] + (to[0] - from[0]) * far / length, from[1] + (to[1] - from[1]) * far / length};
    }

    /** The line of action meets the line of centres at the pitch point. */
    private static double[] pitchPoint(double base1, double base2, double axes) {
        return new double[] {axes * base1 / (base1 + base2), 0};
    }

    @Test
    void singleContactOfCylindricalPairs() {
        String[] reads = {
            "head.a_w",
            "head.p_bt",
            "head.pinion.d_b",
            "head.wheel.d_b",
            "head.pinion.d_a",
            "head.wheel.d_a",
            "head.main.M_1",
            "head.main.M_2"
        };
        Varied drive = new Varied(CYLINDRICAL, reads);
        Random random = new Random(63364);
        for (int i = 0; i < DESIGNS; i++) {
            int z = 17 + random.nextInt(40);
            Varied.Design d = drive.design()
                    .set("head.pinion.teeth", z)
                    .set("head.wheel.teeth", z + random.nextInt(60))
                    .set("head.helix_angle", i % 2 == 0 ? 0 : Math.toRadians(between(random, 2, 30)))
                    .set("head.pinion.profile_shift", between(random, 0, 0.4))
                    .set("head.wheel.profile_shift", between(random, 0, 0.4));
            double base1 = d.at("head.pinion.d_b") / 2;
            double base2 = d.at("head.wheel.d_b") / 2;
            double axes = d.at("head.a_w");
            double[][] path = Plane.path(base1, d.at("head.pinion.d_a") / 2, base2, d.at("head.wheel.d_a") / 2, axes);
            double pitch = curved(pitchPoint(base1, base2, axes), base1, base2, axes);
            // the pair before it leaves at the pinion's tip: this one has just come to be alone
            double inner = curved(towards(path[1], path[0], d.at("head.p_bt")), base1, base2, axes);
            double outer = curved(towards(path[0], path[1], d.at("head.p_bt")), base1, base2, axes);
            assertThat(d.at("head.main.M_1")).as(d.toString()).isCloseTo(pitch / inner, within(EXACT));
            assertThat(d.at("head.main.M_2")).as(d.toString()).isCloseTo(pitch / outer, within(EXACT));
        }
    }

    /** The bevel factor belongs to the place where the middle line crosses the line of action. */
    @Test
    void middleLineOfBevelPairs() {
        Varied drive = new Varied(
                BEVEL,
                "head.a_v",
                "head.p_vet",
                "head.beta_vb",
                "head.eps_va",
                "head.eps_vb",
                "head.pinion.d_vb",
                "head.wheel.d_vb",
                "head.pinion.d_va",
                "head.wheel.d_va",
                "head.main.Z_MB",
                "head.main.flank.f_m",
                "head.g_va");
        Random random = new Random(103004);
        for (int i = 0; i < DESIGNS; i++) {
            Varied.Design d = drawn(drive, random, i);
            double base1 = d.at("head.pinion.d_vb") / 2;
            double base2 = d.at("head.wheel.d_vb") / 2;
            double axes = d.at("head.a_v");
            double[][] path = Plane.path(base1, d.at("head.pinion.d_va") / 2, base2, d.at("head.wheel.d_va") / 2, axes);
            double action = Math.hypot(path[1][0] - path[0][0], path[1][1] - path[0][1]);
            assertThat(d.at("head.g_va")).isCloseTo(action, within(EXACT * axes));
            double middle = middleLine(d.at("head.p_vet"), action, d.at("head.eps_vb"), false);
            double[] at = towards(path[0], path[1], action / 2 + middle);
            double expected =
                    curved(pitchPoint(base1, base2, axes), base1, base2, axes) / curved(at, base1, base2, axes);
            assertThat(d.at("head.main.Z_MB")).as(d.toString()).isCloseTo(expected, within(EXACT * 10));
            assertThat(d.at("head.main.flank.f_m"))
                    .isCloseTo(middle * Math.cos(d.at("head.beta_vb")), within(EXACT * axes));
        }
    }
}
