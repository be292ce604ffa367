/** Traces a value back to what was given. */
@NullMarked
package backcone.engine.explain;

import org.jspecify.annotations.NullMarked;
