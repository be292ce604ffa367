package backcone.engine.diagnostics;

import java.util.ArrayList;
import java.util.EnumMap;
import java.util.List;
import java.util.Locale;
import java.util.Map;

/**
 * A house file: one line for each code that speaks louder or more quietly here than usual, {@code BC5010 information because
 * "…"}. It is kept in the repository as {@link #NAME} and reviewed like the rest.
 */
public final class House {
    public static final String NAME = "house.severities";
    public static final House NONE = new House(Map.of(), List.of());

    private final Map<Code, Severity> severities;
    private final List<String> problems;

    private House(Map<Code, Severity> severities, List<String> problems) {
        this.severities = severities;
        this.problems = problems;
    }

    /** Reads a house file; lines that mean nothing are told by {@link #problems}, the others hold. */
    public static House read(String text) {
        Map<Code, Severity> out = new EnumMap<>(Code.class);
        List<String> problems = new ArrayList<>();
        String[] lines = text.split("\r?\n", -1);
        for (int i = 0; i < lines.length; i++) {
            String line = lines[i].strip();
            if (line.startsWith("\uFEFF")) {
                line = line.substring(1).strip();
            }
            if (line.isEmpty() || line.startsWith("#")) {
                continue;
            }
            String[] words = line.split("\\s+", 3);
            Code code = code(words[0]);
            Severity severity = words.length < 2 ? null : severity(words[1]);
            String where = NAME + ":" + (i + 1) + ": ";
            if (code == null) {
                problems.add(where + "there is no code `" + words[0] + "`.");
            } else if (severity == null) {
                problems.add(where + "after the code stands `error`, `warning`, `information` or `hint`.");
            } else if (words.length < 3 || !words[2].matches("because\\s+\".+\"\\s*(#.*)?")) {
                problems.add(where + "another severity says why: `" + words[0] + " " + words[1] + " because \"…\"`.");
            } else {
                out.put(code, severity);
            }
        }
        return new House(out, List.copyOf(problems));
    }

    private static @org.jspecify.annotations.Nullable Code code(String id) {
        for (Code c : Code.values()) {
            if (c.id().equals(id)) {
                return c;
            }
        }
        return null;
    }

    private static @org.jspecify.annotations.Nullable Severity severity(String word) {
        for (Severity s : Severity.values()) {
            if (s.name().toLowerCase(Locale.ROOT).equals(word)) {
                return s;
            }
        }
        return null;
    }

    public List<String> problems() {
        return problems;
    }

    /** The finding with the severity that it has in this house. */
    public Diagnostic of(Diagnostic d) {
        Severity s = severities.get(d.code());
        return s == null || s == d.severity() ? d : d.at(s);
    }
}
