package backcone.git;

/** What git can't give, in words for the person who asked. */
public final class GitException extends Exception {
    private static final long serialVersionUID = 1;

    public GitException(String message) {
        super(message);
    }
}
