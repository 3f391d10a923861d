/**
 * Which settings?
 *
 * <p>Purpose: varies settings of a drill by their paths over a grid, forecasts every cell with the same seeds, marks the
 * settings that no other beats on both of two measures, and says which it would take; writes the grid's files. Allowed
 * dependencies: drills, harness.record, harness.judge, harness.forecast, harness.compare, the YAML library, Jackson; no
 * clock. Thread rule: everything is confined to the thread that calls it, but for {@link
 * steelyard.harness.tune.Tuning#cancel}. First class to read: {@link steelyard.harness.tune.Tuning}.
 */
@NullMarked
package steelyard.harness.tune;

import org.jspecify.annotations.NullMarked;
