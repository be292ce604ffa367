package backcone.engine.model;

/** Small courtesies of the language that messages are written in. */
public final class English {
    private English() {}

    /** With its article: {@code a length}, {@code an angle}. */
    public static String a(String noun) {
        char c = noun.isEmpty() ? 'x' : Character.toLowerCase(noun.charAt(0));
        return ("aeio".indexOf(c) >= 0 ? "an " : "a ") + noun;
    }

    /** The first letter large, for the start of a sentence. */
    public static String capital(String s) {
        return s.isEmpty() ? s : Character.toUpperCase(s.charAt(0)) + s.substring(1);
    }

    /** {@code 1 file}, {@code 2 files}. */
    public static String count(int n, String noun) {
        return n + " " + noun + (n == 1 ? "" : "s");
    }
}
