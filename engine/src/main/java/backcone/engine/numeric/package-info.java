/** Numerical methods that know nothing of gears: bracketed roots and interpolation. */
@NullMarked
package backcone.engine.numeric;

import org.jspecify.annotations.NullMarked;
