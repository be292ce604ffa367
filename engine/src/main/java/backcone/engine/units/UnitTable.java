package backcone.engine.units;

import java.io.IOException;
import java.io.InputStream;
import java.io.UncheckedIOException;
import java.math.BigDecimal;
import java.nio.charset.StandardCharsets;
import java.util.ArrayList;
import java.util.Collections;
import java.util.HashMap;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import java.util.Set;
import org.jspecify.annotations.Nullable;

/**
 * The text {@code units.table}. Loading only notes where each line is; a definition is worked out when its unit is
 * first asked for, so that a start pays for the units in use.
 */
final class UnitTable {
    private final Map<String, Entry> units = new LinkedHashMap<>();
    private final List<Named> dimensions = new ArrayList<>();
    private final Map<String, Instead> instead = new HashMap<>();

    /** One unit: a line of the table. */
    static final class Entry {
        private final String word;
        private final String definition;
        private final @Nullable String kind;
        private final String meaning;

        /** Worked out at most a few times, with the same result. */
        private volatile @Nullable Scale scale;

        private Entry(String word, String definition, @Nullable String kind, String meaning) {
            this.word = word;
            this.definition = definition;
            this.kind = kind;
            this.meaning = meaning;
        }

        String word() {
            return word;
        }

        @Nullable
        String kind() {
            return kind;
        }

        String meaning() {
            return meaning;
        }
    }

    /** An everyday name of a dimension with the spellings to offer, commonest first. */
    record Named(String name, List<String> spellings) {}

    /** What is written by mistake or habit: the text that is meant, or null, and why. */
    record Instead(@Nullable String meant, String why) {}

    private UnitTable() {}

    static UnitTable load() {
        try (InputStream in = UnitTable.class.getResourceAsStream("units.table")) {
            if (in == null) {
                throw new IllegalStateException("units.table is missing");
            }
            return read(new String(in.readAllBytes(), StandardCharsets.UTF_8));
        } catch (IOException e) {
            throw new UncheckedIOException(e);
        }
    }

    static UnitTable read(String text) {
        UnitTable table = new UnitTable();
        String section = "";
        int at = 0;
        while (at < text.length()) {
            int end = text.indexOf('\n', at);
            end = end < 0 ? text.length() : end;
            String line = text.substring(at, end).strip();
            at = end + 1;
            if (line.isEmpty() || line.charAt(0) == '#') {
                continue;
            }
            if (line.charAt(0) == '[') {
                section = line;
                continue;
            }
            table.line(section, line);
        }
        return table;
    }

    private void line(String section, String line) {
        switch (section) {
            case "[units]" -> {
                String[] c = cells(line, 4);
                String kind = c[2].isEmpty() ? null : c[2];
                if (units.put(c[0], new Entry(c[0], c[1], kind, c[3])) != null) {
                    throw broken(line);
                }
            }
            case "[dimensions]" -> {
                String[] c = cells(line, 2);
                dimensions.add(new Named(c[0], words(c[1])));
            }
            case "[instead]" -> {
                String[] c = cells(line, 3);
                Instead i = new Instead(c[1].isEmpty() ? null : c[1], c[2]);
                for (String w : words(c[0])) {
                    instead.put(w, i);
                }
            }
            default -> throw broken(line);
        }
    }

    private static String[] cells(String line, int count) {
        String[] cells = new String[count];
        int at = 0;
        for (int i = 0; i < count; i++) {
            int bar = i == count - 1 ? line.length() : line.indexOf('|', at);
            if (bar < 0) {
                throw broken(line);
            }
            cells[i] = line.substring(at, bar).strip();
            at = bar + 1;
        }
        return cells;
    }

    /** The words of a cell, between blanks. */
    private static List<String> words(String cell) {
        List<String> out = new ArrayList<>();
        int start = 0;
        for (int i = 0; i <= cell.length(); i++) {
            if (i == cell.length() || cell.charAt(i) == ' ') {
                if (i > start) {
                    out.add(cell.substring(start, i));
                }
                start = i + 1;
            }
        }
        return out;
    }

    private static IllegalStateException broken(String what) {
        return new IllegalStateException("units.table: " + what);
    }

    // ---- definitions

    @Nullable
    Entry entry(String word) {
        return units.get(word);
    }

    /** The scale of a unit word, or null when there is no such word. */
    @Nullable
    Scale scale(String word) {
        Entry e = units.get(word);
        if (e == null) {
            return null;
        }
        Scale known = e.scale;
        if (known == null) {
            known = define(e.definition);
            e.scale = known;
        }
        return known;
    }

    /** A product of numbers, fractions, pi and unit texts, or {@code base NAME}; perhaps {@code shifted NUMBER}. */
    private Scale define(String definition) {
        List<String> words = words(definition);
        if (words.get(0).equals("base")) {
            return Scale.base(Dimension.base(words.get(1)));
        }
        Scale r = Scale.ONE;
        for (int i = 0; i < words.size(); i++) {
            String w = words.get(i);
            if (w.equals("shifted")) {
                return r.shifted(new BigDecimal(words.get(i + 1)));
            } else if (w.equals("pi")) {
                r = r.withPi();
            } else if (Character.isDigit(w.charAt(0))) {
                int slash = w.indexOf('/');
                r = r.times(Scale.number(new BigDecimal(slash < 0 ? w : w.substring(0, slash))));
                r = slash < 0 ? r : r.over(Scale.number(new BigDecimal(w.substring(slash + 1))));
            } else {
                try {
                    r = r.times(UnitText.read(w, this));
                } catch (UnitText.Unreadable e) {
                    throw new IllegalStateException("units.table: " + w, e);
                }
            }
        }
        return r;
    }

    // ---- the other sections

    /** In the order of the table. */
    Set<String> words() {
        return Collections.unmodifiableSet(units.keySet());
    }

    List<Named> dimensions() {
        return Collections.unmodifiableList(dimensions);
    }

    /** What is meant by a text that is no unit here, or by one that is but hardly ever means what it says. */
    @Nullable
    Instead instead(String text) {
        return instead.get(text);
    }

    /** The same, written with other capitals; only for texts that are no unit. */
    @Nullable
    Instead insteadInAnyCase(String text) {
        Instead exact = instead.get(text);
        return exact != null ? exact : instead.get(text.toLowerCase(Locale.ROOT));
    }
}
