/**
 * Plays the traffic and the cues of a drill through the stage port.
 *
 * <p>Purpose: one order of what is to happen, the same on every stage, with cues of the file and cues sent by hand on
 * one path. Allowed dependencies: drills.model, backends.behave, harness.stage (the port), harness.traffic,
 * harness.record. Thread rule: one thread at a time; only {@code byHand} and {@code idle} of the conductor may be
 * called from others, if the queue it was given allows that. First class to read: {@link
 * steelyard.harness.conduct.Conductor}.
 */
@NullMarked
package steelyard.harness.conduct;

import org.jspecify.annotations.NullMarked;
