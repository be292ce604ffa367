package backcone.engine;

import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.graph.Shapes;
import backcone.engine.model.LibraryBuilder;
import backcone.engine.parse.Parser;
import backcone.engine.parse.TreeCodec;
import backcone.engine.syntax.FileSyntax;
import backcone.engine.text.FileId;
import java.io.IOException;
import java.io.InputStream;
import java.io.UncheckedIOException;
import java.nio.charset.StandardCharsets;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import org.jspecify.annotations.Nullable;

/** The shipped handbook: its texts are resources; their trees are precompiled, so that no text is parsed at start. */
public final class Handbook {
    private static final String FOLDER = "handbook/";
    private static @Nullable Handbook standard;
    private final Map<FileId, FileSyntax> trees = new LinkedHashMap<>();
    private final Shapes shapes;
    private final List<Diagnostic> problems;

    private Handbook() {
        LibraryBuilder builder = new LibraryBuilder();
        List<Diagnostic> found = new ArrayList<>();
        for (String name : names()) {
            FileId id = new FileId(FileId.HANDBOOK + name + ".method");
            FileSyntax tree = tree(name, id, found);
            trees.put(id, tree);
            builder.add(id, tree);
        }
        LibraryBuilder.Built built = builder.build();
        shapes = new Shapes(built.library());
        found.addAll(built.problems());
        problems = List.copyOf(found);
    }

    /** Loaded once per process and shared. */
    public static synchronized Handbook standard() {
        Handbook h = standard;
        if (h == null) {
            h = new Handbook();
            standard = h;
        }
        return h;
    }

    /** The names of the shipped files, in the order in which they are read. */
    public static List<String> names() {
        List<String> out = new ArrayList<>();
        String index = resource(FOLDER + "index.txt");
        if (index != null) {
            for (String line : index.split("\n")) {
                String name = line.strip();
                if (!name.isEmpty() && !name.startsWith("#")) {
                    out.add(name);
                }
            }
        }
        return out;
    }

    /** The tree made by the build; parsed afresh where there is none of this version, as in a half-built project. */
    private static FileSyntax tree(String name, FileId id, List<Diagnostic> found) {
        byte[] compiled = bytes(FOLDER + name + ".tree");
        FileSyntax tree = compiled == null ? null : TreeCodec.read(compiled);
        if (tree != null) {
            return tree;
        }
        String text = text(id);
        Parser.Parsed p = Parser.parse(id, text == null ? "" : text);
        found.addAll(p.problems());
        return p.tree();
    }

    /** The text of a shipped file, for explanations and for reading it. */
    public static @Nullable String text(FileId id) {
        return id.isHandbook() ? resource(FOLDER + id.path().substring(FileId.HANDBOOK.length())) : null;
    }

    private static @Nullable String resource(String path) {
        byte[] bytes = bytes(path);
        return bytes == null ? null : new String(bytes, StandardCharsets.UTF_8);
    }

    private static byte @Nullable [] bytes(String path) {
        try (InputStream in = Handbook.class.getResourceAsStream(path)) {
            return in == null ? null : in.readAllBytes();
        } catch (IOException e) {
            throw new UncheckedIOException(e);
        }
    }

    public Shapes shapes() {
        return shapes;
    }

    public Map<FileId, FileSyntax> trees() {
        return trees;
    }

    /** What is wrong in the shipped texts; a test keeps it empty. */
    public List<Diagnostic> problems() {
        return problems;
    }
}
