/** Text to syntax tree and findings. The only package that sees ANTLR. Never throws. */
@NullMarked
package backcone.engine.parse;

import org.jspecify.annotations.NullMarked;
