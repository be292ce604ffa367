package backcone.engine;

import backcone.engine.answers.DriveAnswer;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.fixes.Subject;
import backcone.engine.fixes.TextEdit;
import backcone.engine.graph.DriveGraph;
import backcone.engine.graph.DriveSource;
import backcone.engine.graph.Problems;
import backcone.engine.graph.Shapes;
import backcone.engine.parse.Parser;
import backcone.engine.syntax.FileSyntax;
import backcone.engine.text.FileId;
import java.time.LocalDate;
import java.util.ArrayList;
import java.util.Comparator;
import java.util.HashMap;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.function.Function;
import org.jspecify.annotations.Nullable;

/** An analysis as the search for fixes sees it. What it needs beyond the analysis is made when asked for. */
final class Bench implements Subject {
    private final Analysis analysis;
    private final Function<FileId, Object> load;
    private final LocalDate today;
    private @Nullable Sources sources;
    private @Nullable Shapes shapes;
    private @Nullable Map<String, DriveSource> drives;

    Bench(Analysis analysis, Function<FileId, Object> load, LocalDate today) {
        this.analysis = analysis;
        this.load = load;
        this.today = today;
    }

    @Override
    public FileId file() {
        return analysis.file();
    }

    @Override
    public String text() {
        return analysis.text();
    }

    @Override
    public FileSyntax syntax() {
        return analysis.syntax();
    }

    @Override
    public List<Diagnostic> diagnostics() {
        return analysis.diagnostics();
    }

    @Override
    public List<DriveAnswer> drives() {
        return analysis.drives();
    }

    private SourceText main() {
        return new SourceText(analysis.file(), analysis.text(), analysis.syntax(), List.of());
    }

    private Sources around() {
        Sources s = sources;
        if (s == null) {
            s = new Sources(main(), load);
            sources = s;
        }
        return s;
    }

    @Override
    public Map<String, DriveSource> sources() {
        Map<String, DriveSource> d = drives;
        if (d == null) {
            d = new LinkedHashMap<>();
            if (!file().isMethodFile()) {
                FileAnalysis.driveSources(around(), main(), new Problems(), d);
            }
            drives = d;
        }
        return d;
    }

    @Override
    public Shapes shapes() {
        Shapes s = shapes;
        if (s == null) {
            s = FileAnalysis.shapes(around(), Handbook.standard());
            shapes = s;
        }
        return s;
    }

    @Override
    public DriveGraph.Top top() {
        return around();
    }

    @Override
    public LocalDate today() {
        return today;
    }

    @Override
    public Map<FileId, FileSyntax> used() {
        Map<FileId, FileSyntax> out = new LinkedHashMap<>();
        around().used().forEach((f, t) -> out.put(f, t.tree()));
        return out;
    }

    @Override
    public @Nullable String textOf(FileId f) {
        return around().textOf(f);
    }

    @Override
    public Subject edited(List<TextEdit> edits) {
        Map<FileId, List<TextEdit>> byFile = new LinkedHashMap<>();
        for (TextEdit e : edits) {
            byFile.computeIfAbsent(e.file(), k -> new ArrayList<>()).add(e);
        }
        Map<FileId, SourceText> changed = new HashMap<>();
        byFile.forEach((f, list) -> {
            String old = textOf(f);
            StringBuilder b = new StringBuilder(old == null ? "" : old);
            list.sort(Comparator.comparingInt((TextEdit e) -> e.span().start()).reversed());
            for (TextEdit e : list) {
                b.replace(e.span().start(), e.span().end(), e.text());
            }
            Parser.Parsed p = Parser.parse(f, b.toString());
            changed.put(f, new SourceText(f, b.toString(), p.tree(), p.problems()));
        });
        Function<FileId, Object> other = f -> {
            SourceText t = changed.get(f);
            return t != null ? t : load.apply(f);
        };
        SourceText main = changed.getOrDefault(file(), null);
        if (main == null) {
            main = load.apply(file()) instanceof SourceText t ? t : main();
        }
        return new Bench(FileAnalysis.of(main, other, Handbook.standard(), today), other, today);
    }
}
