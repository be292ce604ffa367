/** Tests of units: against definitions from outside, against another library, and on texts that are no units. */
@NullMarked
package backcone.engine.units;

import org.jspecify.annotations.NullMarked;
