package backcone.engine.parse;

import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.text.FileId;
import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.stream.Collectors;
import java.util.stream.Stream;

/**
 * A step of the build: writes the tree of each handbook text beside it, {@code name.method} to {@code name.tree}. Stops
 * the build on a text with syntax errors.
 */
public final class HandbookCompiler {
    private HandbookCompiler() {}

    /** Arguments: the folder with the texts, the folder for the trees. */
    public static void main(String[] args) throws IOException {
        Path from = Path.of(args[0]);
        Path to = Path.of(args[1]);
        if (Files.isDirectory(from)) {
            compile(from, to);
        }
    }

    private static void compile(Path from, Path to) throws IOException {
        List<Path> texts;
        try (Stream<Path> files = Files.list(from)) {
            texts = files.filter(f -> f.getFileName().toString().endsWith(".method"))
                    .sorted()
                    .collect(Collectors.toList());
        }
        Files.createDirectories(to);
        StringBuilder wrong = new StringBuilder();
        for (Path file : texts) {
            String name = file.getFileName().toString();
            Parser.Parsed parsed =
                    Parser.parse(new FileId(FileId.HANDBOOK + name), Files.readString(file, StandardCharsets.UTF_8));
            for (Diagnostic d : parsed.problems()) {
                wrong.append('\n')
                        .append(name)
                        .append(" at ")
                        .append(d.span().start())
                        .append(": ")
                        .append(d.message());
            }
            Path tree = to.resolve(name.substring(0, name.length() - ".method".length()) + ".tree");
            Files.write(tree, TreeCodec.write(parsed.tree()));
        }
        if (wrong.length() > 0) {
            throw new IllegalStateException("handbook texts with syntax errors:" + wrong);
        }
    }
}
