package backcone.engine.fixes;

import backcone.engine.Analysis;
import backcone.engine.BackconeEngine;
import backcone.engine.Loader;
import backcone.engine.answers.DriveAnswer;
import backcone.engine.answers.RequirementAnswer;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import java.io.IOException;
import java.io.UncheckedIOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.LocalDate;
import java.util.Comparator;
import java.util.HashMap;
import java.util.List;
import java.util.Map;

/** A text on the desk among the samples; what is not given by the test is read from there. */
final class Desk {
    static final LocalDate TODAY = LocalDate.of(2026, 12, 1);
    static final Path SAMPLES = Path.of("..", "samples");
    private final FileId file;
    private final Map<FileId, String> texts = new HashMap<>();
    private final BackconeEngine engine = BackconeEngine.create(this::load, TODAY);

    private Desk(String path) {
        this.file = new FileId(path);
    }

    static Desk sample(String path) {
        return new Desk(path);
    }

    static Desk of(String text) {
        return new Desk("a.drive").with("a.drive", text);
    }

    Desk with(String path, String text) {
        texts.put(new FileId(path), text);
        engine.forget(new FileId(path));
        return this;
    }

    /** The sample with another wording at one place. */
    Desk but(String old, String now) {
        String t = text();
        if (t.indexOf(old) < 0) {
            throw new AssertionError("there is no `" + old + "`");
        }
        return with(file.path(), t.replace(old, now));
    }

    private Loader.Loaded load(FileId f) {
        String t = texts.get(f);
        if (t != null) {
            return new Loader.Loaded.Text(t);
        }
        Path p = SAMPLES.resolve(f.path());
        try {
            return Files.isRegularFile(p) ? new Loader.Loaded.Text(Files.readString(p)) : new Loader.Loaded.Missing();
        } catch (IOException e) {
            throw new UncheckedIOException(e);
        }
    }

    String text() {
        return load(file) instanceof Loader.Loaded.Text t ? t.text() : "";
    }

    Analysis analyse() {
        return engine.analyse(file);
    }

    /** Fixes with the cursor on the first character of these words. */
    List<Fix> at(String words) {
        int at = text().indexOf(words);
        if (at < 0) {
            throw new AssertionError("there is no `" + words + "`");
        }
        return engine.fixes(analyse(), new Span(at, at));
    }

    List<Fix> over(String words) {
        int at = text().indexOf(words);
        return engine.fixes(analyse(), new Span(at, at + words.length()));
    }

    Fix fix(String words, String title) {
        return at(words).stream()
                .filter(f -> f.title().startsWith(title))
                .findFirst()
                .orElseThrow(() -> new AssertionError("no fix `" + title + "` but "
                        + at(words).stream().map(Fix::title).toList()));
    }

    /** The texts after a fix. */
    Desk after(Fix fix) {
        Desk d = new Desk(file.path());
        d.texts.putAll(texts);
        for (FileId f : fix.edits().stream().map(TextEdit::file).distinct().toList()) {
            StringBuilder b = new StringBuilder(load(f) instanceof Loader.Loaded.Text t ? t.text() : "");
            fix.edits().stream()
                    .filter(e -> e.file().equals(f))
                    .sorted(Comparator.comparingInt((TextEdit e) -> e.span().start())
                            .reversed())
                    .forEach(e -> b.replace(e.span().start(), e.span().end(), e.text()));
            d.with(f.path(), b.toString());
        }
        return d;
    }

    String text(String path) {
        return load(new FileId(path)) instanceof Loader.Loaded.Text t ? t.text() : "";
    }

    RequirementAnswer requirement(String id) {
        for (DriveAnswer d : analyse().drives()) {
            for (RequirementAnswer r : d.requirements()) {
                if (r.id().equals(id)) {
                    return r;
                }
            }
        }
        throw new AssertionError("no requirement " + id);
    }
}
