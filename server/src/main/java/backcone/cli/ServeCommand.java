package backcone.cli;

import java.io.PrintWriter;
import java.util.List;

/** {@code backcone serve}: what it is and how to get there; the serving itself is done by another part of the program. */
final class ServeCommand implements Command {
    @Override
    public Usage usage() {
        return new Usage(
                "serve",
                "the language server, for editors",
                List.of(),
                List.of(Usage.Option.flag("--stdio", "speak on standard streams; it always does")),
                List.of("It speaks the Language Server Protocol 3.17 on standard input and output; editors start it."
                        + " `editor-config` holds what to put into the settings of yours."),
                List.of("backcone serve"));
    }

    @Override
    public int run(Arguments a, PrintWriter out, PrintWriter err) {
        out.flush();
        return Main.server().getAsInt();
    }
}
