package steelyard.harness.report;

import com.fasterxml.jackson.databind.node.ArrayNode;
import com.fasterxml.jackson.databind.node.JsonNodeFactory;
import com.fasterxml.jackson.databind.node.ObjectNode;
import java.util.ArrayList;
import java.util.List;
import org.HdrHistogram.AbstractHistogram;
import org.HdrHistogram.HistogramIterationValue;
import steelyard.harness.record.SliceLatencies;

/**
 * Latencies of each slice as counts in steps, small enough for a page, from which it takes the quantiles of any stretch.
 *
 * <p>Problem: a quantile of a stretch is no mean of its slices' quantiles. Choice: the steps of the histograms
 * themselves, 2^(bits-1) to each doubling above the first 2^bits units of 512 ns, so that with 11 bits the page says what
 * the measures say; fewer bits where a page would grow too large. A slice is a list of numbers: a step, then distances to
 * the next; a number below zero says how often the step before it was met, where that is not once.
 */
final class LatencySteps {
    private static final int FINEST_BITS = 11;
    private static final int COARSEST_BITS = 6;
    private static final int MOST_NUMBERS = 250_000;
    private static final int UNIT_BITS = 9;

    private LatencySteps() {}

    /** Of the first so many slices. */
    static ObjectNode json(SliceLatencies latencies, int slices) {
        int bits = FINEST_BITS;
        List<List<Integer>> steps = steps(latencies, slices, bits);
        while (bits > COARSEST_BITS && steps.stream().mapToInt(List::size).sum() > MOST_NUMBERS) {
            bits--;
            steps = steps(latencies, slices, bits);
        }
        ObjectNode node = JsonNodeFactory.instance.objectNode();
        node.put("bits", bits);
        ArrayNode rows = node.putArray("slices");
        for (List<Integer> each : steps) {
            ArrayNode row = rows.addArray();
            each.forEach(row::add);
        }
        return node;
    }

    private static List<List<Integer>> steps(SliceLatencies latencies, int slices, int bits) {
        List<List<Integer>> rows = new ArrayList<>();
        for (int slice = 0; slice < slices; slice++) {
            AbstractHistogram histogram = latencies.of(slice);
            rows.add(histogram == null ? List.of() : steps(histogram, bits));
        }
        return rows;
    }

    private static List<Integer> steps(AbstractHistogram histogram, int bits) {
        List<Integer> numbers = new ArrayList<>();
        int last = 0;
        int met = 0;
        for (HistogramIterationValue each : histogram.recordedValues()) {
            int step = step(each.getValueIteratedTo(), bits);
            if (met > 0 && step != last) {
                count(numbers, met);
                met = 0;
            }
            if (met == 0) {
                numbers.add(step - last);
                last = step;
            }
            met += (int) each.getCountAddedInThisIterationStep();
        }
        count(numbers, met);
        return numbers;
    }

    private static void count(List<Integer> numbers, int met) {
        if (met > 1) {
            numbers.add(-met);
        }
    }

    /** The step that a value lies in, counted from 0 without a gap. */
    static int step(long nanos, int bits) {
        long units = nanos >> UNIT_BITS;
        int doublings = Math.max(0, Long.SIZE - Long.numberOfLeadingZeros(units) - bits);
        return (doublings << (bits - 1)) + (int) (units >> doublings);
    }
}
