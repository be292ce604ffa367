package backcone.cli;

import backcone.engine.BackconeEngine;
import backcone.engine.Loader;
import backcone.engine.text.FileId;
import java.io.IOException;
import java.io.PrintWriter;
import java.io.StringWriter;
import java.nio.file.Path;
import java.time.LocalDate;
import java.util.List;
import java.util.concurrent.Callable;
import picocli.CommandLine.Command;

/** Walks through what a start-up archive should hold: parse, rate, print. Used by the launcher. */
@Command(name = "self-test", hidden = true)
final class SelfTestCommand implements Callable<Integer> {
    @Override
    public Integer call() throws IOException {
        StringWriter sink = new StringWriter();
        PrintWriter out = new PrintWriter(sink);
        for (String kind : StartCommand.kinds()) {
            String text = StartCommand.text(kind);
            FileId id = new FileId(kind + ".drive");
            BackconeEngine engine = BackconeEngine.create(
                    f -> f.equals(id) ? new Loader.Loaded.Text(text) : new Loader.Loaded.Missing(),
                    LocalDate.of(2026, 1, 1));
            List<CheckCommand.Checked> all = List.of(new CheckCommand.Checked(Path.of(id.path()), engine.analyse(id)));
            new TextReport(out, true, false).write(all);
            JsonReport.write(all, out);
        }
        Main.run(new String[] {"--help"}, out, out);
        return sink.getBuffer().length() > 0 ? 0 : Main.INTERNAL;
    }
}
