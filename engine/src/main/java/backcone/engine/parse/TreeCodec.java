package backcone.engine.parse;

import backcone.engine.syntax.FileSyntax;
import org.jspecify.annotations.Nullable;

/**
 * A tree as bytes, so that shipped handbook texts need no parser at start. The bytes are made by the same build that
 * reads them; a file of another version is not read but parsed afresh.
 */
public final class TreeCodec {
    /** Changes with every change of the tree or of its bytes. */
    static final byte VERSION = 1;

    private static final byte[] MAGIC = {'B', 'C', 'T', VERSION};

    private TreeCodec() {}

    public static byte[] write(FileSyntax tree) {
        byte[] nodes = TreeWriter.write(tree);
        byte[] all = new byte[MAGIC.length + nodes.length];
        System.arraycopy(MAGIC, 0, all, 0, MAGIC.length);
        System.arraycopy(nodes, 0, all, MAGIC.length, nodes.length);
        return all;
    }

    /** The tree, or null when these bytes are none of this version: parse the text then. */
    public static @Nullable FileSyntax read(byte[] data) {
        if (data.length < MAGIC.length) {
            return null;
        }
        for (int i = 0; i < MAGIC.length; i++) {
            if (data[i] != MAGIC[i]) {
                return null;
            }
        }
        return TreeReader.read(data, MAGIC.length);
    }
}
