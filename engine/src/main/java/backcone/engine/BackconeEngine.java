package backcone.engine;

import backcone.engine.fixes.Fix;
import backcone.engine.fixes.Fixes;
import backcone.engine.parse.Parser;
import backcone.engine.review.Comparison;
import backcone.engine.syntax.FileSyntax;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import java.time.LocalDate;
import java.util.List;
import java.util.Map;
import java.util.concurrent.ConcurrentHashMap;
import org.jspecify.annotations.Nullable;

/** The engine on the shipped handbook. Parsed texts are kept; analyses are computed anew. Safe for several threads. */
public final class BackconeEngine implements Engine {
    private final Loader loader;
    private final LocalDate today;
    private final Map<FileId, Object> texts = new ConcurrentHashMap<>();

    private BackconeEngine(Loader loader, LocalDate today) {
        this.loader = loader;
        this.today = today;
    }

    public static BackconeEngine create(Loader loader, LocalDate today) {
        return new BackconeEngine(loader, today);
    }

    @Override
    public Analysis analyse(FileId file) {
        Object o = load(file);
        if (!(o instanceof SourceText t)) {
            return FileAnalysis.unreadable(file, (Loader.Loaded) o);
        }
        return FileAnalysis.of(t, this::load, today);
    }

    /**
     * The analysis of a text that somebody is typing; with {@code newest} it takes the place of what the loader would give to
     * the files that use it. {@code before} is what was found out about an earlier text of the file: whatever still holds is
     * taken from there, and the answer is the same as without it.
     */
    public Analysis analyse(FileId file, String text, @Nullable Analysis before, boolean newest) {
        Parser.Parsed p = Parser.parse(file, text);
        SourceText t = new SourceText(file, text, p.tree(), p.problems());
        if (newest) {
            texts.put(file, t);
        }
        return FileAnalysis.of(
                t, this::load, Handbook.standard(), today, before instanceof FileAnalysis f ? f : null, true);
    }

    /** A shipped text as somebody reads it; there is nothing to find in it. */
    public Analysis handbook(FileId file) {
        String text = Handbook.text(file);
        return FileAnalysis.handbook(file, text == null ? "" : text);
    }

    /** Forgets a text that has changed. */
    public void forget(FileId file) {
        texts.remove(file);
    }

    /**
     * This state of a spec against another: {@code before} holds the earlier texts. Either file is null where the spec is new
     * or gone.
     */
    public Comparison compare(BackconeEngine before, @Nullable FileId oldFile, @Nullable FileId newFile) {
        return Comparer.compare(before, oldFile, this, newFile, today);
    }

    /**
     * What can be done at a place of a text that this engine has analysed: fixes first, the best of them in front, then what
     * says the same otherwise. Every fix that promises a result has been tried over the whole text.
     */
    public List<Fix> fixes(Analysis analysis, Span range) {
        return Fixes.at(new Bench(analysis, this::load, today), range);
    }

    Object load(FileId file) {
        Object known = texts.get(file);
        if (known != null) {
            return known;
        }
        Loader.Loaded loaded = loader.load(file);
        Object o = loaded;
        if (loaded instanceof Loader.Loaded.Text t) {
            Parser.Parsed p = Parser.parse(file, t.text());
            o = new SourceText(file, t.text(), p.tree(), p.problems());
        }
        texts.put(file, o);
        return o;
    }

    static FileSyntax empty() {
        return new FileSyntax(List.of(), List.of(), Span.NONE);
    }
}
