/**
 * What happened in a play: the events as they are told, slices of 100 ms, and the run folder.
 *
 * <p>Purpose: one account of a play that conductor, recorder, judge and report share, whichever stage tells it.
 * Allowed dependencies: the models of drills, the decision core's words, HdrHistogram, Jackson; no Netty. Thread rule:
 * a listener is called by one thread at a time, in order of time. First class to read: {@link
 * steelyard.harness.record.PlayListener}.
 */
@NullMarked
package steelyard.harness.record;

import org.jspecify.annotations.NullMarked;
