package backcone.engine.review;

import backcone.engine.answers.DriveAnswer;
import java.util.List;

/**
 * A drive as a ledger keeps it: its answer judged without a date, facts that others depend on, allowables of its ratings,
 * {@code ratings} in words, and {@code equations}, a short hash over the equations, constants and tables used.
 */
public record DriveReview(
        DriveAnswer answer,
        List<String> ratings,
        String equations,
        List<ReviewFact> facts,
        List<ReviewFact> allowables) {}
