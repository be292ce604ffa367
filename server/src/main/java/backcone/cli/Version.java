package backcone.cli;

/** The version of this build, the same as in the build files. */
public final class Version {
    public static final String TEXT = "0.1.0";

    private Version() {}
}
