package backcone.cli;

import java.io.PrintWriter;
import org.jspecify.annotations.Nullable;

/** What is said when the program itself is at fault: which text led there, and what to send. */
final class Faults {
    private Faults() {}

    /** {@code file} is the text at hand as a person here would write it, null where there is none. */
    static void report(@Nullable String file, Throwable fault, PrintWriter err) {
        err.println("backcone: a fault of the program"
                + (file == null ? "" : " while it read `" + file + "`")
                + ", not of your text. No file was changed. Please report it with "
                + (file == null ? "what you asked for" : "that file")
                + " and the lines from here on:");
        err.println("backcone " + Version.TEXT + ", Java " + System.getProperty("java.version") + ", "
                + System.getProperty("os.name"));
        if (fault instanceof StackOverflowError || fault instanceof OutOfMemoryError) {
            err.println(fault); // its trace says nothing, and is long
            StackTraceElement[] trace = fault.getStackTrace();
            for (int i = 0; i < Math.min(8, trace.length); i++) {
                err.println("\tat " + trace[i]);
            }
        } else {
            fault.printStackTrace(err);
        }
        err.flush();
    }
}
