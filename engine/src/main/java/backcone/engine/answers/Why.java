package backcone.engine.answers;

import backcone.engine.eval.Run;

/** Why a register has no value, in one line. */
public final class Why {
    private Why() {}

    /** Whether something went wrong, as opposed to something not being given yet. */
    public static boolean isFault(Run run, int register) {
        Reasons.Why w = new Reasons(run).of(register);
        return w.open().isEmpty();
    }

    public static String open(Run run, int register) {
        Reasons.Why w = new Reasons(run).of(register);
        StringBuilder b = new StringBuilder();
        w.open().forEach(s -> b.append(b.length() == 0 ? "needs " : ", ").append(s.path()));
        w.faults().forEach(f -> b.append(b.length() == 0 ? "" : "; ").append(f.message()));
        if (b.length() == 0 && w.broken()) {
            b.append("something above could not be understood");
        }
        return b.toString();
    }
}
