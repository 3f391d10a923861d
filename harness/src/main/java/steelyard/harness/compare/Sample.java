package steelyard.harness.compare;

import java.util.Arrays;
import steelyard.drills.model.Measure;
import steelyard.harness.record.RunData.FindingRow;

/**
 * One measure of one side.
 *
 * @param row as the first of its runs has it
 * @param expected whether it belongs to an expectation
 * @param values of each run, or of each play of a forecast; durations in seconds; NaN for none
 */
record Sample(FindingRow row, boolean expected, double[] values) {

    Measure measure() {
        return Arrays.stream(Measure.values())
                .filter(each -> each.word().equals(row.measure()))
                .findFirst()
                .orElseThrow(() -> new IllegalArgumentException("no measure " + row.measure()));
    }

    Direction direction() {
        return Direction.of(measure(), row.least(), row.most());
    }

    /** Values that there are. */
    double[] known() {
        return Arrays.stream(values).filter(each -> !Double.isNaN(each)).toArray();
    }

    int undefined() {
        return values.length - known().length;
    }

    /** The mean of those that there are; NaN without any. */
    double mean() {
        return Arrays.stream(known()).average().orElse(Double.NaN);
    }
}
