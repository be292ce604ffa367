package backcone.engine;

import backcone.engine.text.FileId;

/** The pure function from texts (and a date) to analyses. Texts it has parsed are kept and shared between analyses. */
public interface Engine {
    Analysis analyse(FileId file);
}
