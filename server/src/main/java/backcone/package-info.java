/** Where the program starts. */
@NullMarked
package backcone;

import org.jspecify.annotations.NullMarked;
