package backcone.cli;

import org.jspecify.annotations.Nullable;

/** A command line that says something this program does not know. Ends with status 64. */
final class WrongUsage extends Exception {
    private static final long serialVersionUID = 1L;
    private final @Nullable String command;

    /** {@code message} is a whole sentence and ends with the one next step. */
    WrongUsage(@Nullable Usage usage, String message) {
        super(message);
        this.command = usage == null ? null : usage.name();
    }

    String help() {
        return command == null ? "backcone --help" : "backcone " + command + " --help";
    }
}
