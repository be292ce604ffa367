package backcone.engine.graph;

import backcone.engine.diagnostics.Code;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import java.util.ArrayList;
import java.util.HashSet;
import java.util.List;
import java.util.Set;

/**
 * Findings of one build; the same finding at the same place is kept once. Two findings are the same when their code, their place
 * and the first place that explains them are: two limits passed by one block are two findings.
 */
public final class Problems {
    private final List<Diagnostic> all = new ArrayList<>();
    private final Set<String> seen = new HashSet<>();

    public void add(Diagnostic d) {
        String key = d.code().id() + "@" + place(d.file(), d.span());
        if (!d.related().isEmpty()) {
            Diagnostic.Related first = d.related().get(0);
            key += " by " + place(first.file(), first.span());
        }
        if (seen.add(key)) {
            all.add(d);
        }
    }

    private static String place(FileId file, Span span) {
        return file.path() + ":" + span.start() + ":" + span.end();
    }

    public void add(Code code, FileId file, Span span, String message) {
        add(Diagnostic.of(code, file, span, message));
    }

    public List<Diagnostic> all() {
        return all;
    }

    public boolean isEmpty() {
        return all.isEmpty();
    }
}
