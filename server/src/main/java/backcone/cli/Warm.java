package backcone.cli;

import backcone.engine.Handbook;
import backcone.engine.Loader;
import java.nio.file.Path;
import java.util.List;

/** Work that a command will need, begun beside the reading of the first spec where there is a second core. */
final class Warm {
    private Warm() {}

    static void up(List<Path> files) {
        if (Runtime.getRuntime().availableProcessors() > 1) {
            Thread t = new Thread(null, () -> read(files), "ahead", 4L << 20);
            t.setDaemon(true);
            t.start();
        }
    }

    /** A fault here comes again, and is told, where the text or the handbook is asked for. */
    private static void read(List<Path> files) {
        try {
            Loader.Loaded read = files.size() == 1 ? DiskLoader.read(files.get(0)) : new Loader.Loaded.Missing();
            Handbook.readAhead(read instanceof Loader.Loaded.Text t ? t.text() : "");
        } catch (RuntimeException e) {
            return;
        }
    }
}
