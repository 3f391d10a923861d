/**
 * The command line: wiring, exit status, and the only use of standard output and standard error.
 *
 * <p>Purpose: one class a command, {@link steelyard.harness.cli.Rehearsal} for putting a play together. Allowed
 * dependencies: everything of the harness, drills.read, picocli, JLine's signals. Thread rule: a command runs on the
 * main thread; {@link steelyard.harness.cli.Interrupts} is called by the JVM's signal thread. First class to read: {@link
 * steelyard.harness.cli.Main}.
 */
@NullMarked
package steelyard.harness.cli;

import org.jspecify.annotations.NullMarked;
