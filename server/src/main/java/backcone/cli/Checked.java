package backcone.cli;

import backcone.engine.Analysis;
import backcone.engine.answers.DriveAnswer;
import backcone.engine.answers.RequirementAnswer;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.diagnostics.Severity;
import backcone.engine.text.FileId;
import java.nio.file.Path;
import java.util.List;
import org.jspecify.annotations.Nullable;

/** A file that was checked. {@code analysis} is null where the program failed on it, and {@code fault} says how. */
record Checked(
        Path file,
        String shown,
        @Nullable Analysis analysis,
        @Nullable Throwable fault,
        EngineFactory engine,
        Places places) {

    static Checked of(EngineFactory engine, Path file) {
        String shown = FileSet.shown(file);
        try {
            Analysis a = engine.analyse(file);
            return new Checked(file, shown, a, null, engine, new Places(a.text()));
        } catch (RuntimeException | StackOverflowError | OutOfMemoryError e) {
            return new Checked(file, shown, null, e, engine, new Places(""));
        }
    }

    List<Diagnostic> diagnostics() {
        return analysis == null
                ? List.of()
                : analysis.diagnostics().stream().map(engine.house()::of).toList();
    }

    List<DriveAnswer> drives() {
        return analysis == null ? List.of() : analysis.drives();
    }

    boolean isOwn(FileId id) {
        return analysis == null || analysis.file().equals(id);
    }

    /** The text that a span of {@code id} lies in. */
    Places places(FileId id) {
        return isOwn(id) ? places : engine.places(id);
    }

    String shown(FileId id) {
        return isOwn(id) ? shown : engine.shown(id);
    }

    /** {@code path:line:column}, which terminals and editors turn into a link. */
    String at(RequirementAnswer r) {
        return shown(r.file()) + ":" + places(r.file()).at(r.span().start());
    }

    /** 2 when the text is wrong, 1 when some requirement is not met, else 0. */
    int status() {
        if (fault != null) {
            return Status.INTERNAL;
        }
        for (Diagnostic d : diagnostics()) {
            if (d.severity() == Severity.ERROR && !aboutStates(d)) {
                return Status.WRONG_TEXT;
            }
        }
        for (DriveAnswer d : drives()) {
            for (RequirementAnswer r : d.requirements()) {
                if (!r.state().isMet()) {
                    return Status.NOT_MET;
                }
            }
        }
        return Status.FINE;
    }

    /** Findings that tell why a requirement is not met: the text itself is right. */
    static boolean aboutStates(Diagnostic d) {
        return switch (d.code()) {
            case SHORT, OUTSIDE, ASSERT_FAILED, ACCEPTANCE_EXPIRED, WAIVER_EXPIRED -> true;
            default -> false;
        };
    }
}
