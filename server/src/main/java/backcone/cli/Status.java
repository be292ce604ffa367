package backcone.cli;

/** Exit statuses. */
final class Status {
    static final int FINE = 0;
    /** Some requirement is short, outside or open; with {@code format --check}, some file would change. */
    static final int NOT_MET = 1;
    /** A text is wrong or can't be read. */
    static final int WRONG_TEXT = 2;

    static final int WRONG_USAGE = 64;
    static final int INTERNAL = 70;

    private Status() {}
}
