/**
 * Judges a play while it is told: measures, expectations, and whether the play can be trusted at all.
 *
 * <p>Purpose: from a drill's expectations and the events of a play to a verdict. Each measure is one small class that
 * adds the events up; its window is known before the play, so nothing keeps a list of requests. Allowed dependencies:
 * the models of drills, the decision core's words, harness.record, HdrHistogram; no Netty, no clock. Thread rule: one
 * thread at a time, that of the play. First class to read: {@link steelyard.harness.judge.Judge}.
 */
@NullMarked
package steelyard.harness.judge;

import org.jspecify.annotations.NullMarked;
