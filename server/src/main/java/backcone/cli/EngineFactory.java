package backcone.cli;

import backcone.engine.Analysis;
import backcone.engine.BackconeEngine;
import backcone.engine.Handbook;
import backcone.engine.Loader;
import backcone.engine.diagnostics.House;
import backcone.engine.text.FileId;
import java.nio.file.Path;
import java.time.LocalDate;
import java.util.Map;
import java.util.concurrent.ConcurrentHashMap;

/** The one place where the command line meets the engine: an engine on the texts below one folder. Safe for threads. */
final class EngineFactory {
    private final DiskLoader loader;
    private final BackconeEngine engine;
    private final Map<FileId, Places> places = new ConcurrentHashMap<>();
    private final House house;

    EngineFactory(Path root, LocalDate today) {
        this.loader = new DiskLoader(root);
        this.engine = BackconeEngine.create(loader, today);
        this.house =
                loader.load(new FileId(House.NAME)) instanceof Loader.Loaded.Text t ? House.read(t.text()) : House.NONE;
    }

    /** The severities of this house. */
    House house() {
        return house;
    }

    Analysis analyse(Path file) {
        return engine.analyse(loader.id(file));
    }

    /** Lets go of a text that is done with, so that a large folder needs no more memory than a small one. */
    void forget(Path file) {
        engine.forget(loader.id(file));
    }

    /** A file as a person here would write its path. */
    String shown(FileId file) {
        return file.isHandbook() ? file.path() : FileSet.shown(loader.path(file));
    }

    /** Lines and columns of a text other than the one at hand, such as that of a drive which a variant starts from. */
    Places places(FileId file) {
        return places.computeIfAbsent(file, this::read);
    }

    private Places read(FileId file) {
        String text = file.isHandbook()
                ? Handbook.text(file)
                : loader.load(file) instanceof Loader.Loaded.Text t ? t.text() : null;
        return new Places(text == null ? "" : text);
    }
}
