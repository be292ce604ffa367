/**
 * Dimensions, units and the printing of numbers. Knows nothing of texts, drives or the handbook.
 *
 * <p>Invariants: computing units are mm, N, s, rad and K, whose scale is exactly 1, so that 36 mm comes back as 36.
 * Angle is a dimension of its own, and so is each hardness scale and each grading system: nothing is converted between
 * them. Scales are exact fractions with a power of pi and become doubles once. Which units there are stands in
 * {@code units.table}, not in code.
 */
@NullMarked
package backcone.engine.units;

import org.jspecify.annotations.NullMarked;
