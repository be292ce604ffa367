/** Tests of the engine through the door that users have: texts in, analyses out. */
@NullMarked
package backcone.engine;

import org.jspecify.annotations.NullMarked;
