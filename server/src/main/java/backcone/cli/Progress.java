package backcone.cli;

/** One line on a terminal for work longer than a second; silent elsewhere. */
final class Progress {
    private static final long PATIENCE = 1_000_000_000L;
    private static final long EVERY = 200_000_000L;
    private final String what;
    private final int all;
    private final boolean wanted;
    private final long start = System.nanoTime();
    private long last;
    private int done;
    private boolean shown;

    Progress(String what, int all, boolean wanted) {
        this.what = what;
        this.all = all;
        this.wanted = wanted;
    }

    void step() {
        done++;
        long now = System.nanoTime();
        if (wanted && now - start > PATIENCE && now - last > EVERY) {
            last = now;
            shown = true;
            System.err.print("\r" + what + " " + done + " of " + all + " ");
            System.err.flush();
        }
    }

    /** Wipes the line. */
    void done() {
        if (shown) {
            shown = false;
            System.err.print("\r" + " ".repeat(what.length() + 30) + "\r");
            System.err.flush();
        }
    }
}
