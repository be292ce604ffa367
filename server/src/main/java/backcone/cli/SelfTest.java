package backcone.cli;

import java.io.IOException;
import java.io.PrintWriter;
import java.io.StringWriter;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Comparator;
import java.util.List;
import java.util.stream.Stream;

/**
 * Walks through what a start-up archive should hold: commands run as a user runs them, on files on disk. The launcher
 * calls it in the background, once per build.
 */
final class SelfTest {
    private SelfTest() {}

    static int run() throws IOException {
        PrintWriter sink = new PrintWriter(new StringWriter());
        Path folder = Files.createTempDirectory("backcone");
        try {
            for (String kind : StartCommand.KINDS) {
                Files.writeString(folder.resolve(kind + ".drive"), StartCommand.text(kind));
            }
            Path one = folder.resolve("straight-bevel.drive");
            Path wrong = folder.resolve("wrong.drive");
            Files.writeString(wrong, StartCommand.text("straight-bevel").replace("rpm", "rmp") + "\n}\n");
            int status = 0;
            for (String[] line : List.of(
                    new String[] {"--help"},
                    new String[] {"check", "--help"},
                    new String[] {"check", one.toString()},
                    new String[] {"check", "--on", "2026-01-01", "--quiet", folder.toString()},
                    new String[] {"check", "--format", "json", folder.toString()},
                    new String[] {"explain", one.toString(), "head.ratio"},
                    new String[] {"explain", "--format", "json", one.toString(), "head.ratio"},
                    new String[] {"format", "--check", one.toString()},
                    new String[] {"handbook", "bevel"})) {
                status = Math.max(status, Main.run(line, sink, sink));
            }
            return status >= Status.WRONG_USAGE ? Status.INTERNAL : Status.FINE;
        } finally {
            try (Stream<Path> all = Files.walk(folder)) {
                for (Path p : all.sorted(Comparator.reverseOrder()).toList()) {
                    Files.deleteIfExists(p);
                }
            }
        }
    }
}
