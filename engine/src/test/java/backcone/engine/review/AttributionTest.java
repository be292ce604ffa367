package backcone.engine.review;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.ArrayList;
import java.util.BitSet;
import java.util.List;
import java.util.Random;
import org.junit.jupiter.api.Test;

/** Shares against the definition itself: the average over all orders. */
class AttributionTest {
    private static Attribution.Game random(int n, long seed) {
        double[] v = new Random(seed).doubles(1L << n, -1, 1).toArray();
        return made -> v[made.isEmpty() ? 0 : (int) made.toLongArray()[0]];
    }

    @Test
    void exactSharesAreTheAverageOverAllOrders() {
        for (int n = 1; n <= 6; n++) {
            Attribution.Game game = random(n, n);
            double[] direct = new double[n];
            List<List<Integer>> orders = orders(n);
            for (List<Integer> order : orders) {
                BitSet made = new BitSet();
                for (int p : order) {
                    double before = game.value(made);
                    made.set(p);
                    direct[p] += (game.value(made) - before) / orders.size();
                }
            }
            double[] share = Attribution.of(n, game).share();
            for (int p = 0; p < n; p++) {
                assertThat(share[p]).isCloseTo(direct[p], within(1e-12));
            }
        }
    }

    private static List<List<Integer>> orders(int n) {
        List<List<Integer>> out = new ArrayList<>();
        out.add(new ArrayList<>());
        for (int p = 0; p < n; p++) {
            List<List<Integer>> next = new ArrayList<>();
            for (List<Integer> o : out) {
                for (int at = 0; at <= o.size(); at++) {
                    List<Integer> with = new ArrayList<>(o);
                    with.add(at, p);
                    next.add(with);
                }
            }
            out = next;
        }
        return out;
    }

    @Test
    void sharesAddUpToTheMove() {
        for (int n = 1; n <= 12; n++) {
            Attribution.Game game = random(n, 100 + n);
            BitSet all = new BitSet();
            all.set(0, n);
            double sum = 0;
            for (double s : Attribution.of(n, game).share()) {
                sum += s;
            }
            assertThat(sum).isCloseTo(game.value(all) - game.value(new BitSet()), within(1e-9));
        }
    }

    @Test
    void sampledSharesAddUpTooAndLieWithinTheirError() {
        int n = 14;
        double[] own = new Random(3).doubles(n, -1, 1).toArray();
        // what each adds, and a joint effect of the first two, which they halve
        Attribution.Game game = made -> {
            double v = made.get(0) && made.get(1) ? 2 : 0;
            for (int p = made.nextSetBit(0); p >= 0; p = made.nextSetBit(p + 1)) {
                v += own[p];
            }
            return v;
        };
        Attribution.Shares s = Attribution.of(n, game);
        double sum = 0;
        for (int p = 0; p < n; p++) {
            sum += s.share()[p];
            double exact = own[p] + (p < 2 ? 1 : 0);
            assertThat(s.share()[p]).isCloseTo(exact, within(4 * s.error()[p] + 1e-9));
        }
        BitSet all = new BitSet();
        all.set(0, n);
        assertThat(sum).isCloseTo(game.value(all), within(1e-9));
        assertThat(s.error()[2]).isCloseTo(0, within(1e-6)); // what adds the same in every order has no error
    }

    @Test
    void anEditWithoutEffectHasNoShare() {
        Attribution.Game game = made -> made.get(0) ? 1 : 0;
        assertThat(Attribution.of(3, game).share()).containsExactly(new double[] {1, 0, 0}, within(1e-12));
    }
}
