/**
 * From characters to a token list in which every decision about words has been taken: what is a unit, which words are
 * keywords, which line ends count, where an entry starts and what it is, which brace closes which.
 *
 * <p>Findings are data (kind, place); the engine puts them into words. Nothing here knows what a name means.
 */
@NullMarked
package backcone.grammar;

import org.jspecify.annotations.NullMarked;
