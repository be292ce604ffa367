/** The engine: one pure function from texts and a date to an analysis. No input or output, no clock, no console. */
@NullMarked
package backcone.engine;

import org.jspecify.annotations.NullMarked;
