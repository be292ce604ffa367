/** Dimensions, units and quantities. Computes in mm, N, s, rad and K. */
@NullMarked
package backcone.engine.units;

import org.jspecify.annotations.NullMarked;
