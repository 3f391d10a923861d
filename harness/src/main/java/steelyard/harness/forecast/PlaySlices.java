package steelyard.harness.forecast;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import org.HdrHistogram.Histogram;
import org.HdrHistogram.HistogramIterationValue;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.standing.Standing;
import steelyard.balancer.core.standing.Transition;
import steelyard.drills.model.Cause;
import steelyard.drills.model.Cue;
import steelyard.harness.record.Cast;
import steelyard.harness.record.PlayListener;
import steelyard.harness.record.Sample;
import steelyard.harness.record.Slice;
import steelyard.harness.record.SliceBook;

/**
 * The slices of one play as columns of floats, its latencies second by second, its cues and its changes of standing.
 * Memory grows with slices times columns and with changes of standing, not with requests. Slices behind the play's
 * length, in which only what was open ends, are left out.
 */
final class PlaySlices implements PlayListener {
    private static final int STANDINGS = Standing.values().length;
    private static final int SLICES_A_SECOND = 10;

    private final BandColumns columns;
    private final SliceBook book;
    private final int slices;
    private final float[][] values;
    private final float[] row;
    /** By group, slice and standing: how many members had it. */
    private final int[][] standing;

    private final List<Second> seconds = new ArrayList<>();
    private final Histogram second = new Histogram(1_000, 1_000_000_000L, 3);
    private int secondNumber;
    private final List<Applied> cues = new ArrayList<>();
    private final List<Transition> changes = new ArrayList<>();

    /** A cue that was applied. */
    record Applied(long atNanos, long dueNanos, Cue cue, By by) {}

    /** Latencies of good answers by due second: distinct values in nanoseconds, and how often each came. */
    record Second(int number, long[] nanos, long[] counts) {}

    PlaySlices(Cast cast, BandColumns columns, int slices) {
        this.columns = columns;
        this.slices = slices;
        book = new SliceBook(cast, this::take);
        values = new float[columns.count()][slices];
        row = new float[columns.count()];
        standing = new int[columns.groups().size()][slices * STANDINGS];
        second.setAutoResize(true);
    }

    /** The slices of a column; null for nothing but zeros, which is what most causes of failure are. */
    float @Nullable [] column(int column) {
        float[] all = values[column];
        for (float each : all) {
            if (each != 0) {
                return all;
            }
        }
        return null;
    }

    /** By slice and standing, the standings of a slice side by side. */
    int[] standing(int group) {
        return standing[group];
    }

    List<Second> seconds() {
        return seconds;
    }

    List<Applied> cues() {
        return cues;
    }

    List<Transition> changes() {
        return changes;
    }

    private void take(Slice slice) {
        if (slice.index() >= slices) {
            return;
        }
        int at = (int) slice.index();
        columns.fill(slice, row);
        for (int column = 0; column < row.length; column++) {
            values[column][at] = row[column];
        }
        for (int group = 0; group < standing.length; group++) {
            for (int backend : columns.groups().get(group).members()) {
                standing[group][at * STANDINGS + slice.standing(backend).ordinal()]++;
            }
        }
        if (at / SLICES_A_SECOND != secondNumber) {
            endSecond();
            secondNumber = at / SLICES_A_SECOND;
        }
        slice.addLatencies(second);
    }

    private void endSecond() {
        int size = 0;
        long[] nanos = new long[64];
        long[] counts = new long[64];
        for (HistogramIterationValue each : second.recordedValues()) {
            if (size == nanos.length) {
                nanos = Arrays.copyOf(nanos, size * 2);
                counts = Arrays.copyOf(counts, size * 2);
            }
            nanos[size] = each.getValueIteratedTo();
            counts[size++] = each.getCountAtValueIteratedTo();
        }
        if (size > 0) {
            seconds.add(new Second(secondNumber, Arrays.copyOf(nanos, size), Arrays.copyOf(counts, size)));
            second.reset();
        }
    }

    @Override
    public void requestDue(long atNanos, long request, int traffic, int kind, int client) {
        book.requestDue(atNanos, request, traffic, kind, client);
    }

    @Override
    public void requestEnded(
            long atNanos, long request, long dueNanos, int traffic, int kind, @Nullable Cause cause, int status) {
        book.requestEnded(atNanos, request, dueNanos, traffic, kind, cause, status);
    }

    @Override
    public void tunnelEnded(
            long atNanos,
            long openedNanos,
            long request,
            long dueNanos,
            int traffic,
            int kind,
            @Nullable Cause cause,
            int status) {
        book.tunnelEnded(atNanos, openedNanos, request, dueNanos, traffic, kind, cause, status);
    }

    @Override
    public void attemptPicked(long atNanos, int pool, int backend, long request, int attempt, int inFlight) {
        book.attemptPicked(atNanos, pool, backend, request, attempt, inFlight);
    }

    @Override
    public void stood(Transition transition) {
        changes.add(transition);
    }

    @Override
    public void cueApplied(long atNanos, long dueNanos, Cue cue, By by) {
        cues.add(new Applied(atNanos, dueNanos, cue, by));
    }

    @Override
    public void sampled(long atNanos, Sample sample) {
        book.sampled(atNanos, sample);
    }

    @Override
    public void ended(long atNanos, boolean complete) {
        book.ended(atNanos, complete);
        endSecond();
    }
}
