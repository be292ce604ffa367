package backcone.cli;

/** One line on a terminal for work longer than a second; silent elsewhere. */
final class Progress {
    private static final long PATIENCE = 1_000_000_000L;
    private static final long EVERY = 200_000_000L;
    private final String what;
    private final int all;
    private final long start = System.nanoTime();
    private long last;
    private int done;
    private boolean shown;

    Progress(String what, int all) {
        this.what = what;
        this.all = all;
    }

    void step() {
        done++;
        long now = System.nanoTime();
        if (Terminal.interactive() && now - start > PATIENCE && now - last > EVERY) {
            last = now;
            shown = true;
            System.err.print("\r" + what + " " + done + " of " + all + " ");
            System.err.flush();
        }
    }

    void done() {
        if (shown) {
            System.err.print("\r" + " ".repeat(what.length() + 30) + "\r");
            System.err.flush();
        }
    }
}
