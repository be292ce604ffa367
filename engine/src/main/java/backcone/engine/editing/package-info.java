/** What an editor asks of a text: what stands at a place, what a name means, what could be written here. */
@NullMarked
package backcone.engine.editing;

import org.jspecify.annotations.NullMarked;
