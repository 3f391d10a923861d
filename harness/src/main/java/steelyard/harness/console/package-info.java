/**
 * What a person sees of a play while it runs: a view that redraws itself on a terminal, and plain lines elsewhere.
 *
 * <p>Purpose: turns the {@link steelyard.harness.record.PlayBoard} of a play into a {@link
 * steelyard.harness.console.Scene}, a scene into lines of a given width and height, and shows them. Allowed
 * dependencies: the models of drills, harness.record, JLine; never {@code System.out}, a view is given where to write.
 * Thread rule: a view has one thread of its own, which reads the board and writes; the play never waits for it. First
 * class to read: {@link steelyard.harness.console.View}.
 */
@NullMarked
package steelyard.harness.console;

import org.jspecify.annotations.NullMarked;
