package backcone.cli;

import org.jspecify.annotations.Nullable;

/** Whether output goes to a person: colour and progress only then, and never with NO_COLOR. */
final class Terminal {
    private static final boolean INTERACTIVE = System.console() != null;

    private Terminal() {}

    static boolean colour() {
        @Nullable String no = System.getenv("NO_COLOR");
        @Nullable String term = System.getenv("TERM");
        return INTERACTIVE && (no == null || no.isEmpty()) && !"dumb".equals(term);
    }

    static boolean interactive() {
        return INTERACTIVE;
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
