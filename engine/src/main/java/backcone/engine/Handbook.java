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
import java.util.HashMap;
import java.util.LinkedHashMap;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;
import java.util.concurrent.ConcurrentHashMap;
import org.jspecify.annotations.Nullable;

/**
 * The shipped handbook: its texts are resources; their trees are precompiled, so that no text is parsed at start. A file that
 * holds nothing but methods is read only where one of them is asked for.
 */
public final class Handbook {
    private static final String FOLDER = "handbook/";
    private static @Nullable Handbook standard;
    private static @Nullable Handbook whole;
    private static @Nullable Contents contents;
    private static final Map<Set<String>, Handbook> SOME = new HashMap<>();

    /** Trees without worked examples, by the name of their file. */
    private static final Map<String, @Nullable FileSyntax> LEAN = new ConcurrentHashMap<>();

    private final Map<FileId, FileSyntax> trees = new LinkedHashMap<>();
    private final Shapes shapes;
    private final List<Diagnostic> problems;

    private Handbook(List<String> files, boolean examples) {
        LibraryBuilder builder = new LibraryBuilder();
        List<Diagnostic> found = new ArrayList<>();
        for (String name : files) {
            FileId id = new FileId(FileId.HANDBOOK + name + ".method");
            FileSyntax tree = tree(name, id, found, examples);
            trees.put(id, tree);
            builder.add(id, tree);
        }
        LibraryBuilder.Built built = builder.build();
        shapes = new Shapes(built.library());
        found.addAll(built.problems());
        problems = List.copyOf(found);
    }

    /** All files, without their worked examples. Loaded once per process and shared. */
    public static synchronized Handbook standard() {
        Handbook h = standard;
        if (h == null) {
            h = new Handbook(names(), false);
            standard = h;
        }
        return h;
    }

    /** All files with their worked examples, for pages and tests. */
    public static synchronized Handbook whole() {
        Handbook h = whole;
        if (h == null) {
            h = new Handbook(names(), true);
            whole = h;
        }
        return h;
    }

    /**
     * What a spec that rates by these methods needs: everything but the files of other methods. All files where one of the
     * methods is not known, since it could be meant for another.
     */
    static synchronized Handbook forMethods(Set<String> methods) {
        Contents c = contents();
        if (standard != null || !c.knows(methods)) {
            return standard();
        }
        Set<String> files = c.filesFor(methods);
        Handbook h = SOME.get(files);
        if (h == null) {
            List<String> all = new ArrayList<>(names());
            all.retainAll(files);
            h = new Handbook(all, false);
            SOME.put(files, h);
        }
        return h;
    }

    static synchronized Contents contents() {
        Contents c = contents;
        if (c == null) {
            c = Contents.read(resource(FOLDER + "contents.txt"));
            contents = c;
        }
        return c;
    }

    /** The table of contents that the build makes. */
    record Contents(Set<String> always, Map<String, Set<String>> files, Map<String, Set<String>> included) {
        static Contents read(@Nullable String text) {
            Set<String> always = new LinkedHashSet<>();
            Map<String, Set<String>> files = new HashMap<>();
            Map<String, Set<String>> included = new HashMap<>();
            for (String line : text == null ? new String[0] : text.split("\n")) {
                String[] halves = line.split("\\|", 2);
                String[] words = halves[0].strip().split(" +");
                if (halves.length < 2 || words.length < 2) {
                    continue;
                }
                if (words[1].equals("always")) {
                    always.add(words[0]);
                }
                for (int i = 2; i < words.length; i++) {
                    files.computeIfAbsent(words[i], k -> new LinkedHashSet<>()).add(words[0]);
                }
                for (String w : halves[1].strip().split(" +")) {
                    if (!w.isEmpty()) {
                        included.computeIfAbsent(words[0], k -> new LinkedHashSet<>())
                                .add(w);
                    }
                }
            }
            return new Contents(always, files, included);
        }

        boolean knows(Set<String> methods) {
            return !always.isEmpty() && files.keySet().containsAll(methods);
        }

        Set<String> filesFor(Set<String> methods) {
            Set<String> out = new LinkedHashSet<>(always);
            List<String> todo = new ArrayList<>(methods);
            Set<String> seen = new LinkedHashSet<>();
            while (!todo.isEmpty()) {
                String m = todo.remove(todo.size() - 1);
                if (!seen.add(m)) {
                    continue;
                }
                for (String f : files.getOrDefault(m, Set.of())) {
                    out.add(f);
                    todo.addAll(included.getOrDefault(f, Set.of()));
                }
            }
            return out;
        }
    }

    /**
     * Makes ready what a spec will need: the parser, what every spec reads of the handbook, and the files of the methods whose
     * names stand in {@code text}. It may run beside the parsing of that spec; whoever comes first to a file reads it.
     */
    public static void readAhead(String text) {
        Parser.prepare();
        Contents c = contents();
        Set<String> named = new LinkedHashSet<>();
        for (String method : c.files().keySet()) {
            if (text.contains(" " + method)) {
                named.add(method);
            }
        }
        for (String name : c.filesFor(named)) {
            tree(name, new FileId(FileId.HANDBOOK + name + ".method"), new ArrayList<>(), false);
        }
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
    private static FileSyntax tree(String name, FileId id, List<Diagnostic> found, boolean examples) {
        FileSyntax tree = examples ? decoded(name, ".tree") : LEAN.computeIfAbsent(name, n -> decoded(n, ".lean"));
        if (tree != null) {
            return tree;
        }
        String text = text(id);
        Parser.Parsed p = Parser.parse(id, text == null ? "" : text);
        found.addAll(p.problems());
        return p.tree();
    }

    private static @Nullable FileSyntax decoded(String name, String form) {
        byte[] compiled = bytes(FOLDER + name + form);
        return compiled == null ? null : TreeCodec.read(compiled);
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
