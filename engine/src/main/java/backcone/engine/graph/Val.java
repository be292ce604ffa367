package backcone.engine.graph;

import backcone.engine.model.ChoiceKind;
import backcone.engine.model.TableDef;
import backcone.engine.units.Dimension;
import java.util.List;
import org.jspecify.annotations.Nullable;

/** What an expression gives while a graph is built. Numbers are registers; everything else is settled then. */
public sealed interface Val {

    /** A register; an unknown dimension (null) absorbs. {@code constant} is its value where it is known already and is no number of the drive, else NaN. */
    record Num(int register, @Nullable Dimension dimension, double constant) implements Val {
        boolean isConstant() {
            return !Double.isNaN(constant);
        }
    }

    /** A truth in a register. */
    record Truth(int register) implements Val {}

    /** A truth settled while building. */
    record Fixed(boolean is) implements Val {}

    /** A word of a choice; {@code kind} may be null for a word whose list is not known. */
    record Word(String text, @Nullable ChoiceKind kind) implements Val {}

    /** A word (or element) picked by numbers: the register holds its index. */
    record Picked(
            int register, List<String> words, @Nullable ChoiceKind kind) implements Val {}

    record Ref(Element element) implements Val {}

    record Group(List<Element> elements, String collection, String kind) implements Val {}

    /** A row of a table: settled (index) or read at a key (register), or one of two rows by a condition. */
    record Row(TableDef table, int index, int key, Ctx scope) implements Val {}

    record RowOf(int condition, Val yes, Val no) implements Val {}

    record Text(String value) implements Val {}

    record Day(String value) implements Val {}

    /** Something that is not given: a reference, a word or a text. {@code slot} is what is missing. */
    record Open(@Nullable Slot slot) implements Val {}

    /** Something that could not be understood; the finding is made. It absorbs. */
    record Bad() implements Val {}
}
