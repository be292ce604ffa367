/** What an author can do about a finding, or with the text at the cursor. Knows no protocol and does no input or output. */
@NullMarked
package backcone.engine.fixes;

import org.jspecify.annotations.NullMarked;
