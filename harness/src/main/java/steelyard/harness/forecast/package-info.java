/**
 * Many plays of one drill in virtual time, and what they come to.
 *
 * <p>Purpose: plays a drill for one seed after the other, spreads the plays over the cores, and says of each measure where
 * it lies over plays and of each expectation in what share of plays it holds; writes the run folder of a forecast.
 * Allowed dependencies: drills.model, harness.record, harness.stage and its virtual side, harness.conduct, harness.judge,
 * the statistics library, HdrHistogram, Jackson; no clock. Thread rule: only {@link
 * steelyard.harness.forecast.Plays} has threads; everything else is confined to the thread that calls it. What comes
 * out never depends on the number of threads. First class to read: {@link steelyard.harness.forecast.Plays}.
 */
@NullMarked
package steelyard.harness.forecast;

import org.jspecify.annotations.NullMarked;
