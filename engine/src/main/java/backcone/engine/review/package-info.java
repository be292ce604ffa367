/**
 * What a reviewer asks: which facts changed between two states of a spec, which margins moved, and which edit moved them; what a
 * ledger holds. Texts come in as trees; nothing here reads files.
 */
@NullMarked
package backcone.engine.review;

import org.jspecify.annotations.NullMarked;
