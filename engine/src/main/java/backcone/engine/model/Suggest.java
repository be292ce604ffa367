package backcone.engine.model;

import java.util.Collection;
import org.jspecify.annotations.Nullable;

/** The nearest of the names that exist, for "did you mean". */
public final class Suggest {
    private Suggest() {}

    /** The nearest name, or null when none is near enough to be meant. */
    public static @Nullable String nearest(String typed, Collection<String> names) {
        String best = null;
        int bestCost = Math.max(1, Math.min(4, (typed.length() + 1) / 3)) * 2 + 1;
        for (String n : names) {
            int cost = cost(typed, n, bestCost);
            if (cost < bestCost) {
                bestCost = cost;
                best = n;
            }
        }
        return best;
    }

    /** {@code " Did you mean `rpm`?"} or nothing. */
    public static String sentence(String typed, Collection<String> names) {
        String n = nearest(typed, names);
        return n == null ? "" : " Did you mean `" + n + "`?";
    }

    /** Twice the edit distance, a swap of neighbours being one step and a change of case half a step. */
    private static int cost(String a, String b, int limit) {
        int n = a.length();
        int m = b.length();
        if (Math.abs(n - m) * 2 > limit) {
            return Integer.MAX_VALUE;
        }
        int[][] d = new int[n + 1][m + 1];
        for (int i = 0; i <= n; i++) {
            d[i][0] = i * 2;
        }
        for (int j = 0; j <= m; j++) {
            d[0][j] = j * 2;
        }
        for (int i = 1; i <= n; i++) {
            for (int j = 1; j <= m; j++) {
                char x = a.charAt(i - 1);
                char y = b.charAt(j - 1);
                int change = x == y ? 0 : Character.toLowerCase(x) == Character.toLowerCase(y) ? 1 : 2;
                int v = Math.min(Math.min(d[i - 1][j], d[i][j - 1]) + 2, d[i - 1][j - 1] + change);
                if (i > 1 && j > 1 && x == b.charAt(j - 2) && a.charAt(i - 2) == y) {
                    v = Math.min(v, d[i - 2][j - 2] + 2);
                }
                d[i][j] = v;
            }
        }
        return d[n][m];
    }
}
