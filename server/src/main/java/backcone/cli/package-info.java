/** The command line: reads files, asks the engine, prints. Knows nothing of the language server. */
@NullMarked
package backcone.cli;

import org.jspecify.annotations.NullMarked;
