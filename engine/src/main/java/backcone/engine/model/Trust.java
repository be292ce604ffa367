package backcone.engine.model;

import java.util.Locale;
import org.jspecify.annotations.Nullable;

/** How far a constant or equation can be trusted, strongest first. */
public enum Trust {
    CONFIRMED,
    DERIVED,
    AGREED,
    RECALLED,
    UNCERTAIN;

    public String word() {
        return name().toLowerCase(Locale.ROOT);
    }

    public static @Nullable Trust of(String word) {
        for (Trust t : values()) {
            if (t.word().equals(word)) {
                return t;
            }
        }
        return null;
    }

    public static Trust weaker(Trust a, Trust b) {
        return a.compareTo(b) >= 0 ? a : b;
    }
}
