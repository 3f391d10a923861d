package steelyard.harness.judge;

import java.util.Arrays;
import java.util.Set;
import steelyard.harness.record.Cast;
import steelyard.harness.record.Sample;
import steelyard.harness.record.Slice;

/**
 * {@code peak-utilisation}: the greatest busy share of the workers over 1 s, one such stretch beginning each slice, of
 * the busiest of the target's backends. A window shorter than 1 s is one stretch.
 */
final class PeakUtilisation extends Meter {
    private static final int SECOND = (int) (1_000_000_000L / Slice.NANOS);

    private final Window window;
    private final int[] members;
    /** By place among the members, as the columns of {@link #busyNanos} are: what a stage of thousands needs no more of. */
    private final int[] workers;

    private final long[] sampleNanos = new long[SECOND + 1];
    private final long[][] busyNanos;
    private int samples;
    private double peak = Double.NaN;

    PeakUtilisation(Window window, int[] members, Cast cast) {
        this.window = window;
        this.members = members;
        workers = Arrays.stream(members)
                .map(backend -> cast.backends().get(backend).serves().workers())
                .toArray();
        busyNanos = new long[SECOND + 1][members.length];
        if (window.fromNanos() == 0) {
            samples = 1; // All were idle at the start of the play, and no sample says so.
        }
    }

    @Override
    Set<Hears> hears() {
        return Set.of(Hears.SAMPLES);
    }

    @Override
    public void sampled(long atNanos, Sample sample) {
        // A sample comes when its timer fires, a little behind the end of its slice.
        long sliceEnd = atNanos - atNanos % Slice.NANOS;
        if (sliceEnd < window.fromNanos() || sliceEnd > window.toNanos()) {
            return;
        }
        int place = samples % (SECOND + 1);
        sampleNanos[place] = atNanos;
        for (int member = 0; member < members.length; member++) {
            busyNanos[place][member] = sample.busyNanos[members[member]];
        }
        samples++;
        boolean shortWindow = window.toNanos() - window.fromNanos() < SECOND * Slice.NANOS;
        if (shortWindow && samples > 1) {
            peak = Double.NaN;
            stretch(0, place);
        } else if (samples > SECOND) {
            stretch(samples % (SECOND + 1), place);
        }
    }

    @Override
    Reading read() {
        return Double.isNaN(peak) ? Reading.notMeasured("fewer than two samples in the window") : Reading.of(peak);
    }

    private void stretch(int begin, int end) {
        long spanNanos = sampleNanos[end] - sampleNanos[begin];
        for (int member = 0; member < members.length; member++) {
            double busy = (double) (busyNanos[end][member] - busyNanos[begin][member]);
            double share = Math.min(1, busy / spanNanos / workers[member]);
            peak = Double.isNaN(peak) ? share : Math.max(peak, share);
        }
    }
}
