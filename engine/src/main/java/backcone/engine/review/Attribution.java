package backcone.engine.review;

import java.util.ArrayList;
import java.util.BitSet;
import java.util.List;
import java.util.Random;

/**
 * Shares of a move among the edits that made it: the average, over all orders in which the edits could have been made, of what
 * each adds when its turn comes (the Shapley value). Shares add up to the whole move.
 */
public final class Attribution {
    /** Up to so many players every order is counted. */
    public static final int EXACT = 12;

    private static final int ORDERS = 120;

    private Attribution() {}

    /** The value when the players in {@code made} have made their edits; same answer for the same set. */
    @FunctionalInterface
    public interface Game {
        double value(BitSet made);
    }

    /** {@code error} is the standard error of each share, 0 where every order was counted. */
    public record Shares(double[] share, double[] error) {}

    public static Shares of(int players, Game game) {
        return players <= EXACT ? exact(players, game) : sampled(players, game);
    }

    static Shares exact(int n, Game game) {
        double[] v = new double[1 << n];
        for (int mask = 0; mask < v.length; mask++) {
            v[mask] = game.value(BitSet.valueOf(new long[] {mask}));
        }
        // weight of a set of size s that a player joins: s! (n - 1 - s)! / n!
        double[] weight = new double[n];
        for (int s = 0; s < n; s++) {
            double w = 1.0 / n;
            for (int k = 1; k <= s; k++) {
                w = w * k / (n - k);
            }
            weight[s] = w;
        }
        double[] share = new double[n];
        for (int mask = 0; mask < v.length; mask++) {
            int size = Integer.bitCount(mask);
            for (int p = 0; p < n; p++) {
                if ((mask & 1 << p) == 0) {
                    share[p] += weight[size] * (v[mask | 1 << p] - v[mask]);
                }
            }
        }
        return new Shares(share, new double[n]);
    }

    /** Orders drawn with a fixed seed, each with its reverse; every order adds up to the move, and so does the average. */
    static Shares sampled(int n, Game game) {
        Random random = new Random(20260301);
        double[] sum = new double[n];
        double[] squares = new double[n];
        List<Integer> order = new ArrayList<>();
        for (int i = 0; i < n; i++) {
            order.add(i);
        }
        int pairs = ORDERS / 2;
        for (int k = 0; k < pairs; k++) {
            java.util.Collections.shuffle(order, random);
            double[] there = walk(order, game);
            List<Integer> back = new ArrayList<>(order);
            java.util.Collections.reverse(back);
            double[] reverse = walk(back, game);
            for (int i = 0; i < n; i++) {
                double mean = (there[i] + reverse[i]) / 2;
                sum[i] += mean;
                squares[i] += mean * mean;
            }
        }
        double[] share = new double[n];
        double[] error = new double[n];
        for (int i = 0; i < n; i++) {
            share[i] = sum[i] / pairs;
            double variance = Math.max(0, squares[i] / pairs - share[i] * share[i]) / (pairs - 1);
            error[i] = Math.sqrt(variance);
        }
        return new Shares(share, error);
    }

    private static double[] walk(List<Integer> order, Game game) {
        double[] add = new double[order.size()];
        BitSet made = new BitSet();
        double before = game.value(new BitSet());
        for (int p : order) {
            made.set(p);
            double now = game.value((BitSet) made.clone());
            if (Double.isNaN(now)) {
                continue; // a mixture without meaning: what it moved shows with the next one
            }
            add[p] = now - before;
            before = now;
        }
        return add;
    }
}
