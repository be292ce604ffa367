package backcone.engine;

import backcone.engine.answers.DriveAnswer;
import backcone.engine.answers.Explanation;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.editing.Scene;
import backcone.engine.review.DriveReview;
import backcone.engine.syntax.FileSyntax;
import backcone.engine.text.FileId;
import java.util.List;
import java.util.Optional;
import java.util.Set;

/** Everything the engine knows about one text and the texts it uses. Immutable. */
public interface Analysis {
    FileId file();

    String text();

    FileSyntax syntax();

    /** The files that this one rests on, directly or through others. */
    Set<FileId> uses();

    /** Findings in this file, by place. */
    List<Diagnostic> diagnostics();

    /** The drives of this file, variants and rows of families included, in order. */
    List<DriveAnswer> drives();

    /** The same drives as a ledger keeps them. */
    List<DriveReview> reviews();

    /**
     * How {@code name} came about: {@code head.main.wheel.pitting}, {@code head.cone_distance}, or with the drive in front
     * ({@code transfer_car.head.ratio}) where the file holds more than one.
     */
    Optional<Explanation> explain(String name);

    /** A whole rating in calculation order, for {@code explain FILE mesh.rating}; empty if {@code name} is no rating. */
    Optional<List<Explanation>> explainRating(String name);

    /** What answers to editors are drawn from. */
    Scene scene();

    /** Names that {@link #explain} knows, for suggestions. */
    List<String> names();
}
