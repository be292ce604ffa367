package backcone.cli;

import java.io.IOException;
import java.io.PrintWriter;

/** One command of the command line. */
interface Command {
    Usage usage();

    /** Runs and returns the exit status. */
    int run(Arguments arguments, PrintWriter out, PrintWriter err) throws WrongUsage, IOException, InterruptedException;
}
