/** Texts, places in them and names of files. Knows nothing of the language. */
@NullMarked
package backcone.engine.text;

import org.jspecify.annotations.NullMarked;
