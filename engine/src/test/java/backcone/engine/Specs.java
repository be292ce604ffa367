package backcone.engine;

import backcone.engine.answers.DriveAnswer;
import backcone.engine.answers.Explanation;
import backcone.engine.answers.RequirementAnswer;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.text.FileId;
import java.time.LocalDate;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;

/** Texts of a test, and questions to their analysis. */
final class Specs {
    static final LocalDate TODAY = LocalDate.of(2026, 12, 1);
    private final Map<FileId, String> texts = new LinkedHashMap<>();
    private LocalDate today = TODAY;

    static Specs of(String text) {
        return new Specs().with("a.drive", text);
    }

    static Specs method(String text) {
        return new Specs().with("a.method", text);
    }

    Specs with(String path, String text) {
        texts.put(new FileId(path), text);
        return this;
    }

    Specs on(String day) {
        today = LocalDate.parse(day);
        return this;
    }

    Analysis analyse() {
        return analyse(texts.keySet().iterator().next().path());
    }

    Analysis analyse(String path) {
        return BackconeEngine.create(
                        f -> {
                            String t = texts.get(f);
                            return t == null ? new Loader.Loaded.Missing() : new Loader.Loaded.Text(t);
                        },
                        today)
                .analyse(new FileId(path));
    }

    /** Codes of all findings but hints and notes, in order. */
    List<String> errors() {
        return analyse().diagnostics().stream()
                .filter(d -> d.severity() == backcone.engine.diagnostics.Severity.ERROR)
                .map(d -> d.code().id())
                .toList();
    }

    List<String> codes() {
        return analyse().diagnostics().stream().map(d -> d.code().id()).toList();
    }

    String messages() {
        StringBuilder b = new StringBuilder();
        for (Diagnostic d : analyse().diagnostics()) {
            b.append(d.code().id()).append(' ').append(d.message()).append('\n');
        }
        return b.toString();
    }

    /** The value of a name in the unit it is shown in. */
    double value(String name) {
        return explain(name).value();
    }

    Explanation explain(String name) {
        return analyse()
                .explain(name)
                .orElseThrow(() -> new AssertionError("nothing is called " + name + "\n" + messages()));
    }

    RequirementAnswer requirement(String id) {
        for (DriveAnswer d : analyse().drives()) {
            for (RequirementAnswer r : d.requirements()) {
                if (r.id().equals(id)) {
                    return r;
                }
            }
        }
        throw new AssertionError("no requirement " + id + "\n" + messages());
    }
}
