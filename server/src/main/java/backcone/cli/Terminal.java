package backcone.cli;

import java.io.Console;
import org.jspecify.annotations.Nullable;

/** Whether output goes to a person: colour and progress only then, and never colour with NO_COLOR. */
final class Terminal {
    /**
     * Which of standard output (1) and standard error (2) are terminals, as the launcher found; the program itself can
     * only ask for all streams at once.
     */
    private static final @Nullable String STREAMS = System.getProperty("backcone.terminals");

    private Terminal() {}

    static boolean colour() {
        String no = System.getenv("NO_COLOR");
        return out() && (no == null || no.isEmpty()) && !"dumb".equals(System.getenv("TERM"));
    }

    static boolean out() {
        String known = STREAMS;
        return known != null ? known.indexOf('1') >= 0 : console();
    }

    static boolean err() {
        String known = STREAMS;
        return known != null ? known.indexOf('2') >= 0 : console();
    }

    @SuppressWarnings("SystemConsoleNull") // asked further where null no longer tells
    private static boolean console() {
        Console c = System.console();
        if (c == null) {
            return false;
        }
        try {
            return (Boolean) Console.class.getMethod("isTerminal").invoke(c);
        } catch (ReflectiveOperationException e) {
            return true; // before Java 22 there is a console only where there is a terminal
        }
    }

    enum Ink {
        RED("31"),
        YELLOW("33"),
        GREEN("32"),
        CYAN("36"),
        BOLD("1"),
        DIM("2");

        private final String code;

        Ink(String code) {
            this.code = code;
        }

        String paint(String s, boolean colour) {
            return colour && !s.isEmpty() ? "\u001b[" + code + "m" + s + "\u001b[0m" : s;
        }
    }
}
