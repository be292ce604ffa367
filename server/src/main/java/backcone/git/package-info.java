/** Reads revisions through the user's own git. Never runs anything from the repository, never changes it. */
@NullMarked
package backcone.git;

import org.jspecify.annotations.NullMarked;
