package backcone.engine.fixes;

import java.util.List;

/**
 * One thing that can be done, with what comes of it in its title. {@code preferred} marks the one to take without asking;
 * {@code codes} are the findings it mends ({@code BC5001}), empty for what mends nothing.
 */
public record Fix(String title, Kind kind, boolean preferred, List<TextEdit> edits, List<String> codes) {

    public enum Kind {
        /** Mends a finding. */
        QUICK_FIX,
        /** A name for what was written out. */
        EXTRACT,
        /** Written out what was a name. */
        INLINE,
        /** The same said otherwise. */
        REWRITE
    }
}
