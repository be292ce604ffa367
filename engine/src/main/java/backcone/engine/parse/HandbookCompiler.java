package backcone.engine.parse;

import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.syntax.Entry;
import backcone.engine.syntax.FileSyntax;
import backcone.engine.text.FileId;
import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Set;
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
        StringBuilder contents = new StringBuilder();
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
            String bare = name.substring(0, name.length() - ".method".length());
            Files.write(to.resolve(bare + ".tree"), TreeCodec.write(parsed.tree()));
            Files.write(to.resolve(bare + ".lean"), TreeCodec.write(lean(parsed.tree())));
            contents.append(line(bare, parsed.tree())).append('\n');
        }
        Files.writeString(to.resolve("contents.txt"), contents.toString(), StandardCharsets.UTF_8);
        if (wrong.length() > 0) {
            throw new IllegalStateException("handbook texts with syntax errors:" + wrong);
        }
    }

    /** The tree without its worked examples, which are of no use to a rating. */
    private static FileSyntax lean(FileSyntax tree) {
        return new FileSyntax(lean(tree.entries()), List.of(), tree.span());
    }

    private static List<Entry> lean(List<Entry> entries) {
        List<Entry> out = new ArrayList<>();
        for (Entry e : entries) {
            if (e instanceof Entry.Example) {
                continue;
            } else if (e instanceof Entry.Kind k) {
                out.add(new Entry.Kind(k.name(), k.parent(), k.meaning(), lean(k.body()), k.span()));
            } else if (e instanceof Entry.Chapter c) {
                out.add(new Entry.Chapter(c.name(), c.kind(), c.meaning(), lean(c.body()), c.span()));
            } else if (e instanceof Entry.Method m) {
                out.add(new Entry.Method(m.name(), m.kind(), m.meaning(), lean(m.body()), m.span()));
            } else {
                out.add(e);
            }
        }
        return out;
    }

    /**
     * A line of the table of contents: the file, {@code always} or {@code asked} (it holds nothing but methods, with their tables,
     * functions and choices), the methods that it declares, and behind a bar those that it includes.
     */
    private static String line(String name, FileSyntax tree) {
        boolean always = false;
        Set<String> methods = new LinkedHashSet<>();
        Set<String> included = new LinkedHashSet<>();
        for (Entry e : tree.entries()) {
            always |= e instanceof Entry.Kind || e instanceof Entry.Chapter || e instanceof Entry.Quantity;
            if (e instanceof Entry.Method m) {
                methods.add(m.name().text());
                for (Entry x : m.body()) {
                    if (x instanceof Entry.Include i) {
                        i.methods().forEach(n -> included.add(n.text()));
                    }
                }
            }
        }
        return name + (always ? " always " : " asked ") + String.join(" ", methods) + " | "
                + String.join(" ", included);
    }
}
