package backcone.engine.units;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.util.ArrayList;
import java.util.List;
import java.util.Random;
import java.util.concurrent.ExecutorService;
import java.util.concurrent.Executors;
import java.util.concurrent.Future;
import org.junit.jupiter.api.Test;

class DimensionTest {
    private static final String[] BASES = {"length", "time", "force", "angle", "temperature", "HBW", "ISO1328", "mass"};

    private static Dimension any(Random random) {
        Dimension d = Dimension.NONE;
        for (int i = random.nextInt(4); i > 0; i--) {
            int n = random.nextInt(61) - 30;
            d = d.times(Dimension.base(BASES[random.nextInt(BASES.length)]).power(n, 1 + random.nextInt(12)));
        }
        return d;
    }

    @Test
    void productsAndQuotientsFormAGroup() {
        Random random = new Random(20261201);
        for (int i = 0; i < 3000; i++) {
            Dimension a = any(random);
            Dimension b = any(random);
            Dimension c = any(random);
            assertThat(a.times(b)).isSameAs(b.times(a));
            assertThat(a.times(b).times(c)).isSameAs(a.times(b.times(c)));
            assertThat(a.times(Dimension.NONE)).isSameAs(a);
            assertThat(Dimension.NONE.times(a)).isSameAs(a);
            assertThat(a.over(a)).isSameAs(Dimension.NONE);
            assertThat(a.over(b)).isSameAs(a.times(b.power(-1, 1)));
            assertThat(a.times(b).over(b)).isSameAs(a);
        }
    }

    @Test
    void powersAreExact() {
        Random random = new Random(7);
        for (int i = 0; i < 3000; i++) {
            Dimension a = any(random);
            Dimension b = any(random);
            int n = random.nextInt(61) - 30;
            int m = 1 + random.nextInt(40);
            assertThat(a.power(n, m).power(m, 1)).isSameAs(a.power(n, 1));
            assertThat(a.times(b).power(n, m)).isSameAs(a.power(n, m).times(b.power(n, m)));
            assertThat(a.power(n, 1).times(a.power(m, 1))).isSameAs(a.power(n + m, 1));
            assertThat(a.power(-n, -m)).isSameAs(a.power(n, m));
        }
        Dimension length = Dimension.base("length");
        assertThat(length.power(0, 5)).isSameAs(Dimension.NONE);
        assertThat(length.power(2, 4)).isSameAs(length.power(1, 2));
        assertThat(length.power(1, 7).power(7, 1)).isSameAs(length);
    }

    @Test
    void exponentsNeverOverflow() {
        Dimension d = Dimension.base("length").over(Dimension.base("time"));
        for (int i = 0; i < 30; i++) {
            d = d.power(30, 1);
        }
        for (int i = 0; i < 30; i++) {
            d = d.power(1, 30);
        }
        assertThat(d).hasToString("length / time");
        Dimension far = Dimension.base("length").power(Integer.MIN_VALUE, 1);
        assertThat(far.times(far).over(far)).isSameAs(far);
        assertThat(Dimension.base("length").power(1, Integer.MIN_VALUE).power(Integer.MIN_VALUE, 1))
                .isSameAs(Dimension.base("length"));
        assertThatThrownBy(() -> Dimension.base("length").power(1, 0)).isInstanceOf(ArithmeticException.class);
    }

    @Test
    void massFollowsFromForce() {
        Dimension length = Dimension.base("length");
        Dimension time = Dimension.base("time");
        Dimension mass = Dimension.base("mass");
        assertThat(mass.times(length).over(time.power(2, 1))).isSameAs(Dimension.base("force"));
        assertThat(UnitsTest.unit("kg").dimension()).isSameAs(mass);
    }

    @Test
    void isPrintedInBaseNames() {
        assertThat(Dimension.NONE).hasToString("pure number");
        assertThat(Dimension.NONE.isNone()).isTrue();
        assertThat(dimension("mm^2/s")).hasToString("length^2 / time");
        assertThat(dimension("rpm")).hasToString("angle / time");
        assertThat(dimension("MPa")).hasToString("force / length^2");
        assertThat(dimension("kW")).hasToString("force length / time");
        assertThat(dimension("kg/dm^3")).hasToString("mass / length^3");
        assertThat(dimension("kg*m^2")).hasToString("length^2 mass");
        assertThat(dimension("W/(m^2*K)")).hasToString("force / (length temperature time)");
        assertThat(dimension("1/in")).hasToString("1 / length");
        assertThat(dimension("MPa").power(1, 2)).hasToString("force^(1/2) / length");
        assertThat(dimension("mm").power(-3, 2)).hasToString("1 / length^(3/2)");
        assertThat(dimension("HBW").times(dimension("HV"))).hasToString("HBW HV");
    }

    @Test
    void scalesOfHardnessAndGradesAreDimensionsOfTheirOwn() {
        String[] scales = {"HBW", "HV", "HRC", "HR15N", "ISO17485", "ISO1328", "AGMA_Q", "AGMA_A", "1", "rad", "Hz"};
        for (String a : scales) {
            for (String b : scales) {
                assertThat(dimension(a) == dimension(b)).as(a + " and " + b).isEqualTo(a.equals(b));
            }
        }
        assertThat(dimension("HB")).isSameAs(dimension("HBW"));
    }

    @Test
    void equalDimensionsAreOneObjectForAllThreads() throws Exception {
        ExecutorService pool = Executors.newFixedThreadPool(4);
        try {
            List<Future<Dimension>> found = new ArrayList<>();
            for (int t = 0; t < 8; t++) {
                found.add(pool.submit(() -> {
                    Dimension d = Dimension.NONE;
                    for (int i = 0; i < 500; i++) {
                        d = Dimension.base("fresh" + i)
                                .over(Dimension.base("other" + i))
                                .times(d.power(1, 2));
                    }
                    return d;
                }));
            }
            for (Future<Dimension> f : found) {
                assertThat(f.get()).isSameAs(found.get(0).get());
            }
        } finally {
            pool.shutdownNow();
        }
    }

    private static Dimension dimension(String unit) {
        return UnitsTest.unit(unit).dimension();
    }
}
