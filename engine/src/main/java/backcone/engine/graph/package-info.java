/** Drives as elements and slots, and their equations compiled to one register tape. */
@NullMarked
package backcone.engine.graph;

import org.jspecify.annotations.NullMarked;
