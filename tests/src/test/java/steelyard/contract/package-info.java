/**
 * One contract, several sides: tests that every implementation of a port has to pass.
 *
 * <p>Purpose: {@link steelyard.contract.StageContract} plays the same small drills on every stage. Allowed dependencies:
 * the stage port, conductor, record, judge and the drill reader. Thread rule: a test plays on its own thread; what was
 * heard is read after the play. First class to read: {@link steelyard.contract.StageContract}.
 */
@NullMarked
package steelyard.contract;

import org.jspecify.annotations.NullMarked;
