package steelyard.harness.compare;

import org.jspecify.annotations.Nullable;

/**
 * One measure of both sides.
 *
 * @param text what is measured
 * @param expected whether it belongs to an expectation
 * @param unit {@code share}, {@code duration}, {@code count} or {@code number}
 * @param first mean of the first side, durations in seconds; NaN without a value
 * @param second the same of the second side
 * @param difference second minus first, or null where none can be given
 * @param note why it cannot be told, or what has to be said beside the word; null for nothing
 */
public record Line(
        String text,
        boolean expected,
        String unit,
        double first,
        double second,
        @Nullable Difference difference,
        Word word,
        @Nullable String note) {}
