package backcone.engine.editing;

import backcone.engine.model.FunctionDef;
import backcone.engine.syntax.Entry;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import org.jspecify.annotations.Nullable;

/** What a function takes, while its arguments are typed. */
public final class Signatures {
    /** {@code active} is the argument at the cursor. */
    public record Signature(String label, List<String> parameters, String meaning, int active) {}

    record BuiltIn(List<String> parameters, String meaning) {}

    static final Map<String, BuiltIn> BUILT_IN = new LinkedHashMap<>();

    static {
        put("sqrt", "square root", "x");
        put("abs", "the value without its sign", "x");
        put("exp", "e to the power of a number", "x");
        put("ln", "natural logarithm of a number", "x");
        put("log", "decimal logarithm of a number", "x");
        put("sin", "sine of an angle", "angle");
        put("cos", "cosine of an angle", "angle");
        put("tan", "tangent of an angle", "angle");
        put("asin", "angle of a sine", "ratio");
        put("acos", "angle of a cosine", "ratio");
        put("atan", "angle of a tangent", "ratio");
        put("atan2", "angle of a point", "y", "x");
        put("least", "the least of its arguments, or over a collection", "a", "b");
        put("greatest", "the greatest of its arguments, or over a collection", "a", "b");
        put("sum", "the sum over a collection", "each COLLECTION : value");
        put("count", "how many there are", "each COLLECTION");
        put("clamp", "a value kept between two bounds", "x", "low", "high");
        put("sign", "minus one, zero or one", "x");
    }

    private Signatures() {}

    private static void put(String name, String meaning, String... parameters) {
        BUILT_IN.put(name, new BuiltIn(List.of(parameters), meaning));
    }

    public static @Nullable Signature at(Scene scene, int offset) {
        String text = scene.text;
        int depth = 0;
        int commas = 0;
        int stop = Math.max(0, offset - 2000);
        for (int i = Math.min(offset, text.length()) - 1; i >= stop; i--) {
            char c = text.charAt(i);
            if (c == ')') {
                depth++;
            } else if (c == ',' && depth == 0) {
                commas++;
            } else if (c == '{' || c == '}') {
                return null;
            } else if (c == '(' && depth > 0) {
                depth--;
            } else if (c == '(') {
                int end = i;
                int start = end;
                while (start > 0
                        && (Character.isLetterOrDigit(text.charAt(start - 1)) || text.charAt(start - 1) == '_')) {
                    start--;
                }
                return of(scene, text.substring(start, end), commas);
            }
        }
        return null;
    }

    private static @Nullable Signature of(Scene scene, String name, int active) {
        FunctionDef f = scene.library().functions.get(name);
        List<String> parameters = new ArrayList<>();
        String meaning;
        String result = "";
        if (f != null) {
            for (Entry.Parameter p : f.syntax().parameters()) {
                parameters.add(p.name() + " : " + p.kind());
            }
            meaning = f.syntax().meaning() == null ? "" : f.syntax().meaning();
            result = " : " + f.syntax().kind();
        } else if (BUILT_IN.containsKey(name)) {
            BuiltIn b = BUILT_IN.get(name);
            parameters.addAll(b.parameters());
            meaning = b.meaning();
        } else {
            var t = scene.library().tables.get(name);
            if (t == null) {
                return null;
            }
            t.syntax.keys().forEach(k -> parameters.add(k.text()));
            meaning = t.syntax.meaning() == null ? "a table" : t.syntax.meaning();
        }
        return new Signature(
                name + "(" + String.join(", ", parameters) + ")" + result,
                parameters,
                meaning,
                Math.min(active, Math.max(0, parameters.size() - 1)));
    }
}
