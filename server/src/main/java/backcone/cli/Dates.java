package backcone.cli;

import java.time.LocalDate;
import java.time.format.DateTimeParseException;
import org.jspecify.annotations.Nullable;
import picocli.CommandLine.Model.CommandSpec;
import picocli.CommandLine.ParameterException;

/** The day a command judges by. */
final class Dates {
    private Dates() {}

    static LocalDate of(@Nullable String text, CommandSpec spec) {
        if (text == null) {
            return LocalDate.now(java.time.ZoneId.systemDefault());
        }
        try {
            return LocalDate.parse(text);
        } catch (DateTimeParseException e) {
            throw new ParameterException(spec.commandLine(), "`" + text + "` is no date; write it as 2027-06-30", e);
        }
    }
}
