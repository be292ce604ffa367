package backcone.engine.parse;

import backcone.engine.text.FileId;
import java.io.IOException;
import java.io.InputStream;
import java.io.UncheckedIOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.stream.Stream;

/** The texts that these tests share: between them they hold every form of the language. */
final class Texts {
    static final List<String> NAMES =
            List.of("feeder.drive", "materials.drive", "blocks.method", "bevel.method", "tables.method");

    private Texts() {}

    static String read(String name) {
        try (InputStream in = Texts.class.getResourceAsStream(name)) {
            if (in == null) {
                throw new IllegalArgumentException("no test text " + name);
            }
            return new String(in.readAllBytes(), StandardCharsets.UTF_8);
        } catch (IOException e) {
            throw new UncheckedIOException(e);
        }
    }

    /** The samples, and the libraries that they use as far as the first blocks: the rest is more of the same. */
    static List<String> samples() throws IOException {
        List<String> out = new ArrayList<>();
        Path samples = Path.of("..", "samples");
        for (Path folder : List.of(samples, samples.resolve("library"))) {
            try (Stream<Path> files = Files.list(folder)) {
                for (Path p : files.filter(f -> f.toString().endsWith(".drive"))
                        .sorted()
                        .toList()) {
                    String text = Files.readString(p);
                    int end = folder.equals(samples) ? -1 : text.indexOf("\n}\n", 1000);
                    out.add(end < 0 ? text : text.substring(0, end + 3));
                }
            }
        }
        return out;
    }

    static FileId id(String name) {
        return new FileId(name);
    }

    static Parser.Parsed parse(String text) {
        return Parser.parse(new FileId("text.drive"), text);
    }

    /** What stands in a drive, alone in its body. */
    static Parser.Parsed parseInDrive(String entries) {
        return parse("drive d {\n" + entries + "\n}\n");
    }
}
