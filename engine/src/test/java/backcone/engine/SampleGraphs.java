package backcone.engine;

import backcone.engine.graph.DriveBuilder;
import backcone.engine.graph.DriveGraph;
import backcone.engine.graph.DriveSource;
import backcone.engine.graph.Problems;
import backcone.engine.graph.Shapes;
import backcone.engine.text.FileId;
import java.io.IOException;
import java.io.UncheckedIOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.stream.Stream;

/** The graphs of drives: of the sample files, variants and cases included, or of one text. */
final class SampleGraphs {
    private static final Path SAMPLES = Path.of("..", "samples");

    private SampleGraphs() {}

    record Named(String name, DriveGraph graph) {}

    static List<Named> all() throws IOException {
        List<Path> files;
        try (Stream<Path> s = Files.list(SAMPLES)) {
            files = s.filter(f -> f.toString().endsWith(".drive")).sorted().toList();
        }
        BackconeEngine engine = BackconeEngine.create(
                f -> {
                    Path p = SAMPLES.resolve(f.path());
                    try {
                        return Files.exists(p)
                                ? new Loader.Loaded.Text(Files.readString(p))
                                : new Loader.Loaded.Missing();
                    } catch (IOException e) {
                        throw new UncheckedIOException(e);
                    }
                },
                Specs.TODAY);
        List<Named> out = new ArrayList<>();
        for (Path f : files) {
            out.addAll(of(engine, new FileId(f.getFileName().toString())));
        }
        return out;
    }

    static DriveGraph only(String text) {
        FileId id = new FileId("a.drive");
        return of(BackconeEngine.create(f -> new Loader.Loaded.Text(text), Specs.TODAY), id)
                .get(0)
                .graph();
    }

    private static List<Named> of(BackconeEngine engine, FileId file) {
        return of(engine, file, false);
    }

    static List<Named> of(BackconeEngine engine, FileId file, boolean traced) {
        SourceText main = (SourceText) engine.load(file);
        Sources sources = new Sources(main, engine::load);
        Shapes shapes = FileAnalysis.shapes(sources, Handbook.standard());
        Map<String, DriveSource> drives = new LinkedHashMap<>();
        FileAnalysis.driveSources(sources, main, new Problems(), drives);
        List<Named> out = new ArrayList<>();
        for (DriveSource d : drives.values()) {
            for (String c : DriveBuilder.casesInUse(d)) {
                out.add(new Named(
                        file + ", " + d.name() + " under " + c,
                        DriveBuilder.build(shapes, sources, d, c, new Problems(), traced)));
            }
        }
        return out;
    }
}
