/** The tree of a text: immutable values with holes where something is missing. No symbols, no types. */
@NullMarked
package backcone.engine.syntax;

import org.jspecify.annotations.NullMarked;
