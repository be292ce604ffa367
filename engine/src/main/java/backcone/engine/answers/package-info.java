/** Plain records that answer questions about an analysis. No protocol types. */
@NullMarked
package backcone.engine.answers;

import org.jspecify.annotations.NullMarked;
