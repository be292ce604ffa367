package backcone.engine.graph;

import backcone.engine.syntax.Note;
import backcone.engine.text.FileId;
import java.util.List;
import org.jspecify.annotations.Nullable;

/** What an expression belongs to while it is compiled. */
final class Frame {
    static final List<Note.Taken> NOTHING = List.of();

    final @Nullable Slot slot;
    final FileId file;
    final List<Note.Taken> taking;

    /** Numbers of a drive are inputs of the tape; numbers of the handbook are constants. */
    final boolean drive;

    Frame(@Nullable Slot slot, FileId file, List<Note.Taken> taking, boolean drive) {
        this.slot = slot;
        this.file = file;
        this.taking = taking;
        this.drive = drive;
    }

    static Frame at(FileId file, boolean drive) {
        return new Frame(null, file, NOTHING, drive);
    }

    Frame bare() {
        return taking.isEmpty() ? this : new Frame(slot, file, NOTHING, drive);
    }
}
