package backcone.engine.graph;

import backcone.engine.diagnostics.Code;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import java.util.ArrayList;
import java.util.HashSet;
import java.util.List;
import java.util.Set;

/** Findings of one build; the same finding at the same place is kept once. */
public final class Problems {
    private final List<Diagnostic> all = new ArrayList<>();
    private final Set<String> seen = new HashSet<>();

    public void add(Diagnostic d) {
        if (seen.add(d.code().id() + "@" + d.file().path() + ":" + d.span().start() + ":"
                + d.span().end())) {
            all.add(d);
        }
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
