package backcone.engine;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import backcone.engine.answers.Sensitivities;
import backcone.engine.answers.Sensitivity;
import backcone.engine.eval.Derivatives;
import backcone.engine.eval.Run;
import backcone.engine.graph.DriveGraph;
import backcone.engine.graph.Element;
import backcone.engine.graph.Slot;
import backcone.engine.units.Dimension;
import backcone.engine.units.Unit;
import java.io.IOException;
import java.util.HashMap;
import java.util.List;
import java.util.Map;
import java.util.Objects;
import org.junit.jupiter.api.Test;

/** Sensitivities that mechanics and dimensions dictate. */
class SensitivitiesTest {
    private static final String PAIR = """
            drive lift {
              let more = 2
              case rated {
                at             = motor
                power          = 4 kW
                service_factor = 1.25
              }
              shaft motor { speed = 300 rpm }
              shaft drum
              bevel head {
                tooth_form     = straight
                outer_module   = 5 mm
                face_width     = 3 * 10 mm
                pressure_angle = 20 deg
                pinion on motor { teeth = 18 }
                wheel on drum { teeth = 45 }
              }
              oil {
                temperature = 60 degC
              }
              require drum.speed >= more * 50 rpm
            }
            """;

    private static List<Sensitivity> of(DriveGraph g, String name, int most) {
        Slot s = Objects.requireNonNull(g.find(name), name);
        g.demand(s);
        return Sensitivities.of(new Run(g), s.register(), most);
    }

    private static double one(List<Sensitivity> all, String name) {
        double sum = 0;
        for (Sensitivity s : all) {
            sum += s.name().equals(name) ? s.relative() : 0;
        }
        return sum;
    }

    @Test
    void torqueIsPowerOverSpeed() {
        DriveGraph g = SampleGraphs.only(PAIR);
        List<Sensitivity> torque = of(g, "head.wheel.torque", 10);
        assertThat(torque).hasSize(4);
        assertThat(one(torque, "rated.power")).isCloseTo(1, within(1e-14));
        assertThat(one(torque, "motor.speed")).isCloseTo(-1, within(1e-14));
        assertThat(one(torque, "head.wheel.teeth")).isCloseTo(1, within(1e-14));
        assertThat(one(torque, "head.pinion.teeth")).isCloseTo(-1, within(1e-14));
    }

    @Test
    void theLargestComeFirstAndSayWhereTheyAreWritten() {
        DriveGraph g = SampleGraphs.only(PAIR);
        // d_m = d_e − b sin δ with tan δ = 18/45: the face takes away 30 sin δ of 90 mm
        double taken = 30 * Math.sin(Math.atan(0.4));
        List<Sensitivity> all = of(g, "head.pinion.mean_pitch_diameter", 10);
        Sensitivity first = all.get(0);
        // teeth act on the diameter and on the angle: b cos δ dδ/d ln z with dδ/d ln z = sin δ cos δ
        double cosine = Math.cos(Math.atan(0.4));
        assertThat(first.name()).isEqualTo("head.outer_module");
        assertThat(first.relative()).isCloseTo(90 / (90 - taken), within(1e-13));
        assertThat(one(all, "head.pinion.teeth"))
                .isCloseTo((90 - taken * cosine * cosine) / (90 - taken), within(1e-13));
        assertThat(one(all, "head.wheel.teeth")).isCloseTo(taken * cosine * cosine / (90 - taken), within(1e-13));
        assertThat(first.sign()).isEqualTo(1);
        assertThat(first.written()).isEqualTo(5);
        assertThat(first.unit()).isEqualTo("mm");
        assertThat(first.file().path()).isEqualTo("a.drive");
        assertThat(PAIR.substring(first.span().start(), first.span().end())).isEqualTo("5 mm");
        // both numbers of 3 * 10 mm are numbers of the text
        List<Sensitivity> face =
                all.stream().filter(s -> s.name().equals("head.face_width")).toList();
        assertThat(face).hasSize(2).allSatisfy(s -> {
            assertThat(s.relative()).isCloseTo(-taken / (90 - taken), within(1e-13));
            assertThat(s.sign()).isEqualTo(-1);
        });
        assertThat(of(g, "head.pinion.mean_pitch_diameter", 2)).isEqualTo(all.subList(0, 2));
        assertThat(of(g, "head.pinion.mean_pitch_diameter", 0)).isEmpty();
        for (int i = 1; i < all.size(); i++) {
            assertThat(Math.abs(all.get(i).relative()))
                    .isLessThanOrEqualTo(Math.abs(all.get(i - 1).relative()));
        }
    }

    @Test
    void whatIsOpenOrNoNumberHasNone() {
        DriveGraph g = SampleGraphs.only(PAIR.replace("power          = 4 kW", ""));
        assertThat(of(g, "head.wheel.torque", 10)).isEmpty();
        assertThat(Sensitivities.of(new Run(g), -1, 10)).isEmpty();
        assertThat(Sensitivities.of(new Run(g), Integer.MAX_VALUE, 10)).isEmpty();
    }

    /** The tooth force of every sample is proportional to the load of its case. */
    @Test
    void forcesAreProportionalToTheLoad() throws IOException {
        int met = 0;
        for (SampleGraphs.Named n : SampleGraphs.all()) {
            DriveGraph g = n.graph();
            for (Element mesh : List.copyOf(g.elements())) {
                Slot s = mesh.path().isEmpty() ? null : g.find(mesh.path() + ".tangential_force");
                if (s == null || mesh.isSpace()) {
                    continue;
                }
                g.demand(s);
                Run run = new Run(g);
                double y = run.at(s.register());
                if (Double.isNaN(y)) {
                    continue;
                }
                if (run.loadActsOn(s.register())) {
                    Derivatives d = new Derivatives(run, s.register());
                    assertThat(d.byLoad(g) / y).as(n.name() + ": " + s).isCloseTo(1, within(1e-12));
                }
                List<Sensitivity> all = Sensitivities.of(run, s.register(), 1000);
                double load = 0;
                for (Sensitivity x : all) {
                    load += x.name().endsWith("power") || x.name().endsWith("torque") ? x.relative() : 0;
                }
                assertThat(load).as(n.name() + ": " + s).isCloseTo(1, within(1e-12));
                met++;
            }
        }
        assertThat(met).isGreaterThan(10);
    }

    private static final Dimension[] BASE = {
        Dimension.base("length"), Dimension.base("force"), Dimension.base("time"), Dimension.base("angle")
    };

    private static final Map<Dimension, int[]> EXPONENTS = new HashMap<>();

    private static int[] exponents(Dimension d) {
        return EXPONENTS.computeIfAbsent(d, k -> {
            for (int l = -4; l <= 4; l++) {
                for (int f = -2; f <= 2; f++) {
                    for (int t = -2; t <= 2; t++) {
                        for (int a = -2; a <= 2; a++) {
                            if (BASE[0].power(l, 1)
                                            .times(BASE[1].power(f, 1))
                                            .times(BASE[2].power(t, 1))
                                            .times(BASE[3].power(a, 1))
                                    == k) {
                                return new int[] {l, f, t};
                            }
                        }
                    }
                }
            }
            return new int[0];
        });
    }

    /**
     * Euler's theorem: a value of mechanics or of pure geometry scales with the units of length, force and time by its
     * own dimension, so the sensitivities, each times the exponent of its number's dimension, add up to the value's.
     */
    @Test
    void sensitivitiesAddUpToTheDimension() throws IOException {
        List<String> names = List.of(
                "tangential_force",
                "outer_cone_distance",
                "mean_cone_distance",
                "mean_transverse_module",
                "tight_centre_distance",
                "pinion.torque",
                "wheel.torque",
                "pinion.axial_force",
                "wheel.radial_force",
                "wheel.pitch_cone_angle",
                "pinion.pitch_angle",
                "normal_force");
        int met = 0;
        for (SampleGraphs.Named n : SampleGraphs.all()) {
            DriveGraph g = n.graph();
            for (Element mesh : List.copyOf(g.elements())) {
                for (String name : names) {
                    Slot s = mesh.path().isEmpty() || mesh.isSpace() ? null : g.find(mesh.path() + "." + name);
                    if (s == null) {
                        continue;
                    }
                    g.demand(s);
                    Run run = new Run(g);
                    double y = run.at(s.register());
                    Unit shown = g.shownUnit(s);
                    if (Double.isNaN(y) || y == 0 || shown == null) {
                        continue;
                    }
                    Derivatives d = new Derivatives(run, s.register());
                    double[] sum = new double[3];
                    for (DriveGraph.Input i : g.inputs()) {
                        double by = d.by(i) * run.at(i.register()) / y;
                        Unit u = i.unit();
                        int[] e = u == null ? new int[3] : exponents(u.dimension());
                        for (int k = 0; k < e.length; k++) {
                            sum[k] += e[k] * by;
                        }
                    }
                    int[] e = exponents(shown.dimension());
                    for (int k = 0; k < 3; k++) {
                        assertThat(sum[k]).as(n.name() + ": " + s + ", " + k).isCloseTo(e[k], within(1e-10));
                    }
                    met++;
                }
            }
        }
        assertThat(met).isGreaterThan(50);
    }
}
