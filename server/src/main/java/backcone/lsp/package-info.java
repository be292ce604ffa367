/** The door for editors: the language server protocol on standard streams. Handlers are thin; the engine knows the answers. */
@NullMarked
package backcone.lsp;

import org.jspecify.annotations.NullMarked;
