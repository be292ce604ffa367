/** Tests of the whole: layers, and the command line as its users see it. */
@org.jspecify.annotations.NullMarked
package backcone;
