/** The command line as its users see it. */
@org.jspecify.annotations.NullMarked
package backcone.cli;
