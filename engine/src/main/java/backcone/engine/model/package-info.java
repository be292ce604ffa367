/** The handbook as symbols: kinds, chapters, methods, tables, functions, choices. */
@NullMarked
package backcone.engine.model;

import org.jspecify.annotations.NullMarked;
