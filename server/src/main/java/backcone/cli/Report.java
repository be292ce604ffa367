package backcone.cli;

import java.io.IOException;
import java.util.List;

/** Takes checked files one by one, in order, so that no more than a few are held at a time. */
interface Report {
    void file(Checked checked) throws IOException;

    /** {@code unreachable}: what was asked for and could not be reached, each as the end of a sentence. */
    void end(List<String> unreachable) throws IOException;
}
