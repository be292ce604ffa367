package backcone.engine.fixes;

import java.io.IOException;
import java.io.InputStream;
import java.io.UncheckedIOException;
import java.nio.charset.StandardCharsets;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.HashSet;
import java.util.List;
import java.util.Set;

/** What a search may change, from {@code fixes.txt}. */
final class Steps {
    /** One line: the block, the property, how dear a change is, and the words behind. */
    record Step(Way way, String kind, String name, String second, double cost, List<String> words) {
        double number(int i) {
            String w = words.get(i);
            return w.endsWith("%") ? Double.parseDouble(w.substring(0, w.length() - 1)) / 100 : Double.parseDouble(w);
        }

        int count(int i) {
            return Integer.parseInt(words.get(i));
        }
    }

    enum Way {
        SERIES,
        LIST,
        GRID,
        SHIFT,
        GRADE,
        PAIR,
        SWAP
    }

    private static final Steps STANDARD = read();

    final List<Step> all = new ArrayList<>();
    final Set<String> never = new HashSet<>();

    /** Groups of units of one kind that a quantity can be written in. */
    final List<List<String>> units = new ArrayList<>();

    private Steps() {}

    static Steps standard() {
        return STANDARD;
    }

    private static Steps read() {
        Steps s = new Steps();
        String text;
        try (InputStream in = Steps.class.getResourceAsStream("fixes.txt")) {
            if (in == null) {
                throw new IllegalStateException("fixes.txt is missing from the program");
            }
            text = new String(in.readAllBytes(), StandardCharsets.UTF_8);
        } catch (IOException e) {
            throw new UncheckedIOException(e);
        }
        text.lines()
                .map(String::strip)
                .filter(l -> !l.isEmpty() && l.charAt(0) != '#')
                .map(l -> Arrays.asList(l.split(" +", -1)))
                .forEach(s::line);
        for (Step x : s.all) {
            if (s.never.contains(x.name) || s.never.contains(x.second)) {
                throw new IllegalStateException("fixes.txt: `" + x.name + "` is both searched and never touched");
            }
        }
        return s;
    }

    private void line(List<String> word) {
        if (word.get(0).equals("never")) {
            never.addAll(word.subList(1, word.size()));
            return;
        }
        if (word.get(0).equals("units")) {
            units.add(List.copyOf(word.subList(1, word.size())));
            return;
        }
        Way way = Way.valueOf(word.get(0).toUpperCase(java.util.Locale.ROOT));
        int n = way == Way.PAIR ? 1 : 0;
        all.add(new Step(
                way,
                word.get(1),
                word.get(2),
                n == 0 ? "" : word.get(3),
                Double.parseDouble(word.get(3 + n)),
                List.copyOf(word.subList(4 + n, word.size()))));
    }
}
