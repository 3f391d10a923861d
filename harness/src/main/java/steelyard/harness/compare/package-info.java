/**
 * What changed from one run to another, and whether chance explains it.
 *
 * <p>Purpose: puts two runs, or two sets of runs, side by side: settings that differ, and each measure with its
 * difference, an interval and a plain word. Allowed dependencies: drills.model, drills.read, harness.record, harness.forecast,
 * the statistics library, the YAML library, Jackson; no clock. Thread rule: confined to the thread that calls. First class
 * to read: {@link steelyard.harness.compare.Comparison}.
 */
@NullMarked
package steelyard.harness.compare;

import org.jspecify.annotations.NullMarked;
