package steelyard.drills.read;

import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Expectation;
import steelyard.drills.model.Measure;

/**
 * An expectation as the file says it; what was left out, or could not be read and was noted, is null.
 *
 * @param worst where {@code worst:} is written
 */
record ExpectationDraft(
        Place place,
        Measure measure,
        @Nullable TargetDraft of,
        @Nullable Instant from,
        @Nullable Instant to,
        @Nullable Placed<String> after,
        @Nullable Place worst,
        Expectation.Options options,
        Expectation.Bound bound) {}
