package backcone.engine;

import backcone.engine.diagnostics.Code;

/** Which findings only repeat the state of a requirement: the text itself is right. */
public final class States {
    private States() {}

    public static boolean says(Code code) {
        return switch (code) {
            case SHORT, OUTSIDE, ASSERT_FAILED, ACCEPTANCE_EXPIRED, WAIVER_EXPIRED -> true;
            default -> false;
        };
    }
}
