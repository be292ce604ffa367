package backcone.engine.review;

import java.util.ArrayList;
import java.util.BitSet;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import org.jspecify.annotations.Nullable;

/**
 * Which edits are players of their own. Edits that have no meaning without each other (a contradiction, a name that nothing
 * declares, a requirement that falls open) become one; where there are still very many, those of one block become one.
 */
public final class Groups {
    /** Beyond so many edits those of one block are one. */
    private static final int MANY = 30;

    private Groups() {}

    /** What is wrong when exactly these edits are made; null when nothing is. */
    @FunctionalInterface
    public interface Mixture {
        @Nullable
        String fault(BitSet made);
    }

    public record Result(List<BitSet> players) {}

    public static Result of(
            List<BitSet> single, List<Edit> edits, Mixture mixture, List<Comparison.Together> together) {
        List<BitSet> groups = new ArrayList<>(single);
        Map<BitSet, String> reasons = new LinkedHashMap<>();
        boolean blocks = false;
        while (groups.size() > 1) {
            List<BitSet> wrong = new ArrayList<>();
            String why = null;
            for (BitSet made : probes(groups.size())) {
                String f = mixture.fault(union(groups, made));
                if (f != null) {
                    wrong.add(made);
                    why = why == null ? f : why;
                }
            }
            if (why == null) {
                if (groups.size() > MANY && !blocks) {
                    blocks = true;
                    groups = byBlock(groups, edits);
                    continue;
                }
                break;
            }
            int[] pair = best(wrong, groups.size());
            BitSet one = (BitSet) groups.get(pair[0]).clone();
            one.or(groups.get(pair[1]));
            groups.remove(pair[1]);
            groups.set(pair[0], one);
            reasons.put(one, why);
        }
        for (BitSet g : groups) {
            String why = reasons.get(g);
            if (why != null) {
                List<Integer> ids = new ArrayList<>();
                g.stream().forEach(ids::add);
                together.add(new Comparison.Together(ids, why));
            }
        }
        return new Result(groups);
    }

    /** Every mixture while there are few; else each edit alone and all without it. */
    private static List<BitSet> probes(int n) {
        List<BitSet> out = new ArrayList<>();
        if (n <= Attribution.EXACT) {
            for (long mask = 1; mask < (1L << n) - 1; mask++) {
                out.add(BitSet.valueOf(new long[] {mask}));
            }
            return out;
        }
        for (int i = 0; i < n; i++) {
            BitSet one = new BitSet();
            one.set(i);
            out.add(one);
            BitSet rest = new BitSet();
            rest.set(0, n);
            rest.clear(i);
            out.add(rest);
        }
        return out;
    }

    /** The two whose union would take away most of the wrong mixtures: one is made in them and the other is not. */
    private static int[] best(List<BitSet> wrong, int n) {
        int[][] parted = new int[n][n];
        for (BitSet made : wrong) {
            for (int i = made.nextSetBit(0); i >= 0; i = made.nextSetBit(i + 1)) {
                for (int j = made.nextClearBit(0); j < n; j = made.nextClearBit(j + 1)) {
                    parted[Math.min(i, j)][Math.max(i, j)]++;
                }
            }
        }
        int[] best = {0, 1};
        for (int i = 0; i < n; i++) {
            for (int j = i + 1; j < n; j++) {
                if (parted[i][j] > parted[best[0]][best[1]]) {
                    best = new int[] {i, j};
                }
            }
        }
        return best;
    }

    private static BitSet union(List<BitSet> groups, BitSet made) {
        BitSet out = new BitSet();
        for (int g = made.nextSetBit(0); g >= 0; g = made.nextSetBit(g + 1)) {
            out.or(groups.get(g));
        }
        return out;
    }

    private static List<BitSet> byBlock(List<BitSet> groups, List<Edit> edits) {
        Map<String, BitSet> blocks = new LinkedHashMap<>();
        for (BitSet g : groups) {
            Edit e = edits.get(g.nextSetBit(0));
            blocks.computeIfAbsent(e.file() + " " + block(e), k -> new BitSet()).or(g);
        }
        return new ArrayList<>(blocks.values());
    }

    private static String block(Edit e) {
        int dot = e.path().indexOf('.');
        return dot < 0 ? e.path() : e.path().substring(0, dot);
    }

    /** One edit as it is; several as a list of their paths. */
    public static String text(List<Integer> ids, List<Edit> edits) {
        if (ids.size() == 1) {
            return edits.get(ids.get(0)).text();
        }
        List<String> all = new ArrayList<>();
        for (int i = 0; i < ids.size() && i < 4; i++) {
            all.add(edits.get(ids.get(i)).text());
        }
        return String.join("; ", all) + (ids.size() > 4 ? "; and " + (ids.size() - 4) + " more" : "") + " (together)";
    }
}
