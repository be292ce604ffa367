package backcone.engine.answers;

import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import java.util.List;
import org.jspecify.annotations.Nullable;

/**
 * A drive with everything it requires. {@code governing} is the id of the requirement with the least load reserve.
 * {@code assumptions} lists what rests on an assumption ({@code path: reason}); {@code weakestTrust} the weakest word of
 * trust behind any verdict, with {@code recalled} naming the equations and tables that rest on memory.
 */
public record DriveAnswer(
        String name,
        @Nullable String title,
        FileId file,
        Span span,
        List<RequirementAnswer> requirements,
        List<CheckAnswer> unrequired,
        @Nullable String governing,
        List<String> assumptions,
        @Nullable String weakestTrust,
        List<String> recalled) {}
