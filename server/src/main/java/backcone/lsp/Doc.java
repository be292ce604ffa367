package backcone.lsp;

import backcone.engine.Analysis;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import java.util.List;
import org.jspecify.annotations.Nullable;

/** An open text. Its text changes on the reading thread alone; everybody else works on a {@link Snapshot}. */
final class Doc {
    /** One version of a text. Immutable. */
    record Snapshot(Doc doc, int version, String text, Lines lines) {}

    final String uri;
    final Folder folder;
    final FileId id;
    volatile Snapshot now;

    /** The analysis of some version, and which; guarded by this. */
    private @Nullable Analysis analysis;

    private @Nullable Snapshot analysed;

    /** The last analysis of a text without syntax errors; guarded by this. */
    private @Nullable Analysis whole;

    /** Where the last change ended; −1 before the first. */
    volatile int typedAt = -1;

    volatile long typedWhen;

    /** What was last published, for what is held back while typing. */
    volatile List<backcone.engine.diagnostics.Diagnostic> published = List.of();

    /** Tokens last sent, for the difference to the next ones. */
    volatile @Nullable String tokensId;

    volatile int @Nullable [] tokens;

    Doc(String uri, Folder folder, FileId id, int version, String text, boolean utf8) {
        this.uri = uri;
        this.folder = folder;
        this.id = id;
        this.now = new Snapshot(this, version, text, new Lines(text, utf8));
    }

    /** The analysis of this version; it is made when first asked for. */
    synchronized Analysis analysis(Snapshot s, int stamp) {
        Analysis known = analysis;
        if (known != null && analysed == s && folder.stamp == stamp) {
            return known;
        }
        boolean newest = now == s;
        Analysis a = folder.analyse(id, s.text(), known, newest);
        if (newest) {
            analysis = a;
            analysed = s;
        }
        return a;
    }

    Analysis analysis(Snapshot s) {
        return analysis(s, analysedStamp(s));
    }

    private int lastStamp = -1;

    private synchronized int analysedStamp(Snapshot s) {
        int stamp = folder.stamp;
        if (lastStamp != stamp) {
            lastStamp = stamp;
            analysed = null; // another file has changed
        }
        return stamp;
    }

    synchronized @Nullable Analysis whole() {
        return whole;
    }

    synchronized void whole(Analysis a) {
        whole = a;
    }

    /** The word around the place of the last change. */
    static Span wordAt(String text, int offset) {
        int s = Math.max(0, Math.min(offset, text.length()));
        int e = s;
        while (s > 0 && wordly(text.charAt(s - 1))) {
            s--;
        }
        while (e < text.length() && wordly(text.charAt(e))) {
            e++;
        }
        return new Span(s, e);
    }

    private static boolean wordly(char c) {
        return Character.isLetterOrDigit(c) || c == '_' || c == '.';
    }
}
