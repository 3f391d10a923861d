/** Forecasts from a drill to their files: the same on any number of threads, and what single plays say. */
@NullMarked
package steelyard.forecast;

import org.jspecify.annotations.NullMarked;
