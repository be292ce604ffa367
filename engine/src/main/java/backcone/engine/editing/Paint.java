package backcone.engine.editing;

import backcone.engine.parse.Colours;
import java.util.ArrayList;
import java.util.List;

/** The text in colours that know what names mean. */
public final class Paint {
    /** Classes in the order of the legend; the words are those of the protocol's own list. */
    public static final List<String> TYPES = List.of(
            "keyword",
            "number",
            "string",
            "comment",
            "type",
            "class",
            "property",
            "variable",
            "function",
            "method",
            "enumMember",
            "namespace",
            "operator");

    public static final List<String> MODIFIERS = List.of("declaration", "readonly", "defaultLibrary");

    /** A piece of text: its class (index in {@link #TYPES}) and its modifiers (bits by {@link #MODIFIERS}). */
    public record Stroke(int start, int end, int type, int modifiers) {}

    private Paint() {}

    public static List<Stroke> of(Scene scene, int from, int to) {
        List<Stroke> out = new ArrayList<>();
        List<Occurrence> names = scene.occurrences().around(from, to);
        int k = 0;
        for (Colours.Piece p : scene.pieces()) {
            if (p.end() < from || p.start() > to) {
                continue;
            }
            while (k < names.size() && names.get(k).span().start() < p.start()) {
                k++;
            }
            Occurrence o = k < names.size()
                            && names.get(k).span().start() == p.start()
                            && names.get(k).span().end() == p.end()
                    ? names.get(k)
                    : null;
            int type = type(p.sort(), o);
            if (type >= 0) {
                out.add(new Stroke(p.start(), p.end(), type, modifiers(o)));
            }
        }
        return out;
    }

    private static int modifiers(@org.jspecify.annotations.Nullable Occurrence o) {
        if (o == null || o.target().sort() == Target.Sort.UNIT) {
            return 0;
        }
        int m = o.declares() ? 1 : 0;
        if (o.target().decl() != null
                && o.target().decl().how == backcone.engine.syntax.Entry.Given.EQUALS
                && !o.writes()) {
            m |= 2;
        }
        return o.target().file().isHandbook() ? m | 4 : m;
    }

    private static int type(Colours.Sort sort, @org.jspecify.annotations.Nullable Occurrence o) {
        if (o != null) {
            return switch (o.target().sort()) {
                case UNIT, QUANTITY, CHOICE -> 4;
                case KIND, BLOCK, MATERIAL -> 5;
                case DRIVE -> 5;
                case PROPERTY -> 6;
                case CHECK -> 6;
                case LET -> 7;
                case FUNCTION, TABLE -> 8;
                case METHOD -> 9;
                case WORD, READING -> 10;
                case SOURCE, FILE -> 11;
            };
        }
        return switch (sort) {
            case KEYWORD -> 0;
            case NUMBER -> 1;
            case STRING -> 2;
            case COMMENT -> 3;
            case UNIT -> 4;
            default -> -1;
        };
    }
}
