package backcone.engine.editing;

import java.io.IOException;
import java.io.InputStream;
import java.io.UncheckedIOException;
import java.nio.charset.StandardCharsets;
import java.util.HashMap;
import java.util.Map;
import org.jspecify.annotations.Nullable;

/** What each keyword does, with an example. */
public final class Keywords {
    private static volatile @Nullable Map<String, String> texts;

    private Keywords() {}

    /** Markdown; empty for a word that is none. */
    public static String of(String word) {
        return all().getOrDefault(word, "");
    }

    static Map<String, String> all() {
        Map<String, String> t = texts;
        if (t == null) {
            t = read();
            texts = t;
        }
        return t;
    }

    private static Map<String, String> read() {
        Map<String, String> out = new HashMap<>();
        try (InputStream in = Keywords.class.getResourceAsStream("keywords.txt")) {
            String all = in == null ? "" : new String(in.readAllBytes(), StandardCharsets.UTF_8);
            for (String line : all.split("\n")) {
                if (line.isBlank() || line.startsWith("#")) {
                    continue;
                }
                String[] cells = line.split("\\|", 3);
                if (cells.length == 3) {
                    out.put(
                            cells[0].strip(),
                            "**" + cells[0].strip() + "**: " + cells[1].strip() + "\n\n```backcone\n" + cells[2].strip()
                                    + "\n```\n");
                }
            }
        } catch (IOException e) {
            throw new UncheckedIOException(e);
        }
        return out;
    }
}
