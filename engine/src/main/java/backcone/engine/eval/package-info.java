/** Runs tapes: values, faults, derivatives. */
@NullMarked
package backcone.engine.eval;

import org.jspecify.annotations.NullMarked;
