package backcone.engine.diagnostics;

import java.io.IOException;
import java.io.InputStream;
import java.io.UncheckedIOException;
import java.nio.charset.StandardCharsets;

/** The explanation pages of the codes. */
public final class Pages {
    private Pages() {}

    /** Markdown; empty where a code has no page. */
    public static String of(Code code) {
        try (InputStream in = Pages.class.getResourceAsStream(code.id() + ".md")) {
            return in == null ? "" : new String(in.readAllBytes(), StandardCharsets.UTF_8);
        } catch (IOException e) {
            throw new UncheckedIOException(e);
        }
    }
}
