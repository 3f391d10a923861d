package steelyard.harness.record;

import java.io.ByteArrayInputStream;
import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.util.HashMap;
import java.util.Map;
import org.HdrHistogram.AbstractHistogram;
import org.HdrHistogram.EncodableHistogram;
import org.HdrHistogram.Histogram;
import org.HdrHistogram.HistogramLogReader;
import org.jspecify.annotations.Nullable;

/**
 * The latencies of good answers of each slice of a play, read back from {@code latency.hlog}; so that a quantile of any
 * stretch is a true one. For one thread.
 */
public final class SliceLatencies {
    private static final long SLICE_MILLIS = Slice.NANOS / 1_000_000;

    private final Map<Integer, AbstractHistogram> slices;
    private final Map<String, SliceLatencies> tagged;

    private SliceLatencies(Map<Integer, AbstractHistogram> slices, Map<String, SliceLatencies> tagged) {
        this.slices = slices;
        this.tagged = tagged;
    }

    /** Nothing is known. */
    public static SliceLatencies none() {
        return new SliceLatencies(Map.of(), Map.of());
    }

    /**
     * Reads a folder's log. Nothing is known when there is none, or one that does not go slice by slice, as that of a
     * forecast. A last line that a kill cut short is left out.
     *
     * @throws FolderRefused when it cannot be read
     */
    public static SliceLatencies read(RunFolder folder) throws FolderRefused {
        if (!Files.exists(folder.file(RunFolder.LATENCY))) {
            return none();
        }
        try {
            String text = Files.readString(folder.file(RunFolder.LATENCY), StandardCharsets.UTF_8);
            return of(text.substring(0, text.lastIndexOf('\n') + 1));
        } catch (IOException e) {
            throw new FolderRefused(folder.file(RunFolder.LATENCY) + " cannot be read", e);
        }
    }

    private static SliceLatencies of(String log) {
        SliceLatencies all = new SliceLatencies(new HashMap<>(), new HashMap<>());
        try (HistogramLogReader reader =
                new HistogramLogReader(new ByteArrayInputStream(log.getBytes(StandardCharsets.UTF_8)))) {
            while (reader.hasNext()) {
                EncodableHistogram each = reader.nextIntervalHistogram();
                long span = each.getEndTimeStamp() - each.getStartTimeStamp();
                // The reader works times out in fractions of a second and cuts them off.
                if (Math.abs(span - SLICE_MILLIS) > 1 || !(each instanceof AbstractHistogram histogram)) {
                    return none();
                }
                SliceLatencies own = each.getTag() == null
                        ? all
                        : all.tagged.computeIfAbsent(
                                each.getTag(), none -> new SliceLatencies(new HashMap<>(), Map.of()));
                own.slices.put((int) StrictMath.round(each.getStartTimeStamp() / (double) SLICE_MILLIS), histogram);
            }
        }
        return all;
    }

    /** Those of one pool alone; nothing is known where there is one pool, or in a run of an earlier version. */
    public SliceLatencies ofPool(String name) {
        return tagged.getOrDefault(LatencyLog.tag(name), none());
    }

    /** Whether there is anything to tell. */
    public boolean known() {
        return !slices.isEmpty();
    }

    /** Of one slice, in nanoseconds; null when nothing is known of it or it had no good answer. */
    public @Nullable AbstractHistogram of(int slice) {
        return slices.get(slice);
    }

    /**
     * A quantile of the good answers of the slices from {@code from} to before {@code to}: the smallest that a share of
     * them is not above. In nanoseconds to three significant digits; NaN without one.
     *
     * @param share from 0 to 1
     */
    public double quantile(int from, int to, double share) {
        Histogram sum = new Histogram(3);
        for (int slice = from; slice < to; slice++) {
            AbstractHistogram each = slices.get(slice);
            if (each != null) {
                sum = sum.getTotalCount() == 0 ? like(each) : sum;
                sum.add(each);
            }
        }
        long good = sum.getTotalCount();
        if (good == 0) {
            return Double.NaN;
        }
        long rank = Math.max(1, (long) StrictMath.ceil(share * good));
        // Half a rank lower: the histogram rounds up, so that no rounding of the division can reach the next rank.
        return sum.getValueAtPercentile((rank - 0.5) / good * 100);
    }

    /** Of the same steps, so that nothing is rounded twice. */
    private static Histogram like(AbstractHistogram other) {
        Histogram histogram = new Histogram(
                other.getLowestDiscernibleValue(),
                other.getHighestTrackableValue(),
                other.getNumberOfSignificantValueDigits());
        histogram.setAutoResize(true);
        return histogram;
    }
}
