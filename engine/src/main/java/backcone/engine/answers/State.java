package backcone.engine.answers;

/** The state of a requirement. */
public enum State {
    CLEAR,
    TIGHT,
    SHORT,
    OPEN,
    OUTSIDE,
    ACCEPTED;

    public String word() {
        return name().toLowerCase(java.util.Locale.ROOT);
    }

    /** Whether it counts as met for exit statuses. */
    public boolean isMet() {
        return this == CLEAR || this == TIGHT || this == ACCEPTED;
    }
}
