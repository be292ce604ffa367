package backcone.lsp;

import com.google.gson.JsonElement;
import com.google.gson.JsonObject;
import org.jspecify.annotations.Nullable;

/** What a user has set. What is not said stays as it was: an empty object switches nothing off. */
record Settings(boolean requirementHints, boolean derivedHints, boolean lens) {
    static final Settings USUAL = new Settings(true, true, true);

    /** Reads {@code {hints: {requirements, derived}, lens}}, bare or below {@code backcone}. */
    Settings with(@Nullable Object said) {
        if (!(said instanceof JsonElement e) || !e.isJsonObject()) {
            return this;
        }
        JsonObject o = e.getAsJsonObject();
        if (o.has("backcone") && o.get("backcone").isJsonObject()) {
            o = o.getAsJsonObject("backcone");
        }
        JsonObject hints =
                o.has("hints") && o.get("hints").isJsonObject() ? o.getAsJsonObject("hints") : new JsonObject();
        return new Settings(
                flag(hints, "requirements", requirementHints),
                flag(hints, "derived", derivedHints),
                flag(o, "lens", lens));
    }

    private static boolean flag(JsonObject o, String name, boolean usual) {
        JsonElement e = o.get(name);
        return e != null && e.isJsonPrimitive() && e.getAsJsonPrimitive().isBoolean() ? e.getAsBoolean() : usual;
    }
}
