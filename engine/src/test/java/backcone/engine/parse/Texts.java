package backcone.engine.parse;

import backcone.engine.text.FileId;
import java.io.IOException;
import java.io.InputStream;
import java.io.UncheckedIOException;
import java.nio.charset.StandardCharsets;
import java.util.List;

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
