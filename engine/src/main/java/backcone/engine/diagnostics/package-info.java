/** Findings and the registry of their codes. Words last: a finding is data until it is rendered. */
@NullMarked
package backcone.engine.diagnostics;

import org.jspecify.annotations.NullMarked;
