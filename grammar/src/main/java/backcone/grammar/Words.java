package backcone.grammar;

import backcone.grammar.gen.BackconeLexer;
import java.util.HashMap;
import java.util.Map;
import java.util.Set;
import java.util.TreeSet;
import org.jspecify.annotations.Nullable;

/** Every keyword of the language. Only {@link #RESERVED} words can't be names. */
public final class Words {
    /** Words that start an entry when what follows fits. */
    private static final Map<String, Integer> ENTRY = new HashMap<>();

    /** Words that are keywords when they stand behind an operand. */
    private static final Map<String, Integer> INSIDE = new HashMap<>();

    private static final Map<String, Integer> RESERVED = Map.of(
            "in", BackconeLexer.IN,
            "and", BackconeLexer.AND,
            "or", BackconeLexer.OR,
            "not", BackconeLexer.NOT,
            "else", BackconeLexer.ELSE,
            "each", BackconeLexer.EACH,
            "choose", BackconeLexer.CHOOSE);

    /** Units that hold an underscore. Any other word with one is a name, so an operator is missing before it. */
    static final Set<String> UNDERSCORED_UNITS = Set.of("AGMA_Q", "AGMA_A");

    /** What may stand behind a slash that follows a number: {@code 8 /in}. */
    static final Set<String> RECIPROCAL_UNITS =
            Set.of("in", "mm", "cm", "m", "um", "ft", "s", "min", "h", "rad", "rev");

    static {
        ENTRY.put("drive", BackconeLexer.DRIVE);
        ENTRY.put("use", BackconeLexer.USE);
        ENTRY.put("let", BackconeLexer.LET);
        ENTRY.put("rate", BackconeLexer.RATE);
        ENTRY.put("require", BackconeLexer.REQUIRE);
        ENTRY.put("assert", BackconeLexer.ASSERT);
        ENTRY.put("override", BackconeLexer.OVERRIDE);
        ENTRY.put("accept", BackconeLexer.ACCEPT);
        ENTRY.put("waive", BackconeLexer.WAIVE);
        ENTRY.put("variant", BackconeLexer.VARIANT);
        ENTRY.put("family", BackconeLexer.FAMILY);
        ENTRY.put("quantity", BackconeLexer.QUANTITY);
        ENTRY.put("source", BackconeLexer.SOURCE);
        ENTRY.put("choice", BackconeLexer.CHOICE);
        ENTRY.put("kind", BackconeLexer.KIND);
        ENTRY.put("chapter", BackconeLexer.CHAPTER);
        ENTRY.put("method", BackconeLexer.METHOD);
        ENTRY.put("include", BackconeLexer.INCLUDE);
        ENTRY.put("function", BackconeLexer.FUNCTION);
        ENTRY.put("table", BackconeLexer.TABLE);
        ENTRY.put("parts", BackconeLexer.PARTS);
        ENTRY.put("part", BackconeLexer.PART);
        ENTRY.put("role", BackconeLexer.ROLE);
        ENTRY.put("collect", BackconeLexer.COLLECT);
        ENTRY.put("cases", BackconeLexer.CASES);
        ENTRY.put("edition", BackconeLexer.EDITIONS);
        ENTRY.put("relation", BackconeLexer.RELATION);
        ENTRY.put("check", BackconeLexer.CHECK);
        ENTRY.put("limit", BackconeLexer.LIMIT);
        ENTRY.put("applies", BackconeLexer.APPLIES);
        ENTRY.put("example", BackconeLexer.EXAMPLE);
        ENTRY.put("gives", BackconeLexer.GIVES);

        INSIDE.put("of", BackconeLexer.OF);
        INSIDE.put("to", BackconeLexer.TO);
        INSIDE.put("until", BackconeLexer.UNTIL);
        INSIDE.put("by", BackconeLexer.BY);
        INSIDE.put("within", BackconeLexer.WITHIN);
        INSIDE.put("taking", BackconeLexer.TAKING);
        INSIDE.put("for", BackconeLexer.FOR);
        INSIDE.put("from", BackconeLexer.FROM);
        INSIDE.put("between", BackconeLexer.BETWEEN);
        INSIDE.put("at", BackconeLexer.AT);
        INSIDE.put("reading", BackconeLexer.READING);
        INSIDE.put("default", BackconeLexer.DEFAULT);
        INSIDE.put("relation", BackconeLexer.RELATED);
        INSIDE.put("range", BackconeLexer.RANGE);
        INSIDE.put("edition", BackconeLexer.EDITION);
        INSIDE.put("as", BackconeLexer.AS);
        INSIDE.put("on", BackconeLexer.ON);
        INSIDE.put("rows", BackconeLexer.ROWS);
        INSIDE.put("per", BackconeLexer.PER);
        INSIDE.put("measured", BackconeLexer.MEASURED);
        INSIDE.put("assumed", BackconeLexer.ASSUMED);
        INSIDE.put("because", BackconeLexer.BECAUSE);
        INSIDE.put("is", BackconeLexer.IS);
        INSIDE.put("worst", BackconeLexer.WORST);
        INSIDE.put("needed", BackconeLexer.NEEDED);
        INSIDE.put("offer", BackconeLexer.OFFER);
        INSIDE.put("tol", BackconeLexer.TOL);
        INSIDE.put("under", BackconeLexer.UNDER);
        INSIDE.put("where", BackconeLexer.WHERE);
        INSIDE.put("when", BackconeLexer.WHEN);
        INSIDE.put("unlike", BackconeLexer.UNLIKE);
        INSIDE.put("whole", BackconeLexer.WHOLE);
    }

    private Words() {}

    /** All keywords in alphabetical order, for editors and for the test that compares them with highlighting files. */
    public static Set<String> all() {
        Set<String> all = new TreeSet<>(ENTRY.keySet());
        all.addAll(INSIDE.keySet());
        all.addAll(RESERVED.keySet());
        all.addAll(Set.of("given", "root", "settle", "most"));
        return all;
    }

    /** Words that can never be names. */
    public static Set<String> reserved() {
        return RESERVED.keySet();
    }

    /** Words that start an entry. */
    public static Set<String> entryWords() {
        Set<String> words = new TreeSet<>(ENTRY.keySet());
        words.add("each");
        return words;
    }

    static @Nullable Integer entry(String word) {
        return ENTRY.get(word);
    }

    static @Nullable Integer inside(String word) {
        return INSIDE.get(word);
    }

    static @Nullable Integer reserved(String word) {
        return RESERVED.get(word);
    }

    /** Words that may follow a number and are never its unit. {@code in} is not among them: there it is the inch. */
    static boolean neverUnit(String word) {
        return INSIDE.containsKey(word) || (RESERVED.containsKey(word) && !word.equals("in"));
    }
}
