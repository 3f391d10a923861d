package steelyard.harness.judge;

import java.util.Arrays;
import java.util.Set;
import org.apache.commons.math3.stat.correlation.PearsonsCorrelation;
import steelyard.drills.model.Measure.Unit;
import steelyard.harness.record.Cast;
import steelyard.harness.record.Sample;
import steelyard.harness.record.Slice;
import steelyard.harness.record.Wording;

/**
 * {@code weight-lag}: how far the effective weight trails behind the utilisation that it answers to. Of the shifts from
 * none to five load-probe periods, a slice apart and at most half the window, it is the one at which weight and
 * utilisation correlate most negatively (Pearson's coefficient), the least of equal ones. Both are those of the slices:
 * the busy share of the workers over 100 ms, and the weight at its end. Of several backends, the one that trails most.
 */
final class WeightLag extends Meter {
    private static final int PERIODS = 5;
    private static final int LEAST_SLICES = 10;
    /** A timer that fires that little before the end of a slice still closes it. */
    private static final long EARLY_NANOS = 1_000_000L;

    private final Cast cast;
    private final int[] members;
    private final int[] workers;
    private final long firstSlice;
    private final double[][] weight;
    private final double[][] busy;
    private final long[] busyBefore;
    private long sampledTo;
    private long lastSampleNanos;
    private int known;

    WeightLag(Window window, int[] members, Cast cast) {
        this.cast = cast;
        this.members = members;
        workers = Arrays.stream(members)
                .map(backend -> cast.backends().get(backend).serves().workers())
                .toArray();
        firstSlice = (window.fromNanos() + Slice.NANOS - 1) / Slice.NANOS;
        int slices = (int) Math.max(0, window.toNanos() / Slice.NANOS - firstSlice);
        weight = new double[members.length][slices];
        busy = new double[members.length][slices];
        busyBefore = new long[members.length];
    }

    @Override
    Set<Hears> hears() {
        return Set.of(Hears.SAMPLES);
    }

    @Override
    public void sampled(long atNanos, Sample sample) {
        long slices = (atNanos + EARLY_NANOS) / Slice.NANOS;
        if (slices <= sampledTo) {
            return;
        }
        for (int member = 0; member < members.length; member++) {
            take(member, sample, slices, atNanos - lastSampleNanos);
        }
        if (weight.length > 0) {
            known = (int) Math.max(known, Math.min(slices - firstSlice, weight[0].length));
        }
        lastSampleNanos = atNanos;
        sampledTo = slices;
    }

    /** A sample that comes late stands for all slices that it closes. */
    private void take(int member, Sample sample, long slices, long spanNanos) {
        long busyNanos = sample.busyNanos[members[member]];
        double share = (double) (busyNanos - busyBefore[member]) / spanNanos / workers[member];
        busyBefore[member] = busyNanos;
        long begin = Math.max(sampledTo - firstSlice, 0);
        for (long place = begin; place < Math.min(slices - firstSlice, weight[member].length); place++) {
            weight[member][(int) place] = sample.effectiveWeight[members[member]];
            busy[member][(int) place] = Math.min(1, Math.max(0, share));
        }
    }

    @Override
    Reading read() {
        if (known < LEAST_SLICES) {
            return Reading.notMeasured("the window has fewer than " + LEAST_SLICES + " slices");
        }
        Reading worst = null;
        Reading unmeasured = Reading.notMeasured("no backend is looked at");
        for (int member = 0; member < members.length; member++) {
            Reading own = read(member);
            if (!own.hasValue()) {
                unmeasured = own;
            } else if (worst == null || own.value() > worst.value()) {
                worst = own;
            }
        }
        return worst == null ? unmeasured : worst;
    }

    private Reading read(int member) {
        String name = cast.backends().get(members[member]).name();
        long periodNanos = cast.loadPeriodNanos(cast.poolOf(members[member]));
        if (periodNanos == 0) {
            return Reading.notMeasured("nothing reads the load of " + name);
        }
        if (constant(weight[member])) {
            return Reading.notMeasured("the weight of " + name + " never changed");
        }
        if (constant(busy[member])) {
            return Reading.notMeasured("the utilisation of " + name + " never changed");
        }
        int most = (int) Math.min(PERIODS * periodNanos / Slice.NANOS, known / 2);
        int lag = 0;
        double least = 0;
        for (int shift = 0; shift <= most; shift++) {
            double correlation = correlation(member, shift);
            if (correlation < least) {
                lag = shift;
                least = correlation;
            }
        }
        if (least == 0) {
            return Reading.notMeasured("weight and utilisation of " + name + " never moved against each other");
        }
        String size = Wording.value(Unit.NUMBER, StrictMath.round(least * 100) / 100.0);
        return Reading.noted(lag * Slice.NANOS, "correlation " + size + (members.length > 1 ? " of " + name : ""));
    }

    /** Of each slice's utilisation with the weight so many slices later; not a number where one of them is constant. */
    private double correlation(int member, int shift) {
        return new PearsonsCorrelation()
                .correlation(
                        Arrays.copyOfRange(busy[member], 0, known - shift),
                        Arrays.copyOfRange(weight[member], shift, known));
    }

    private boolean constant(double[] values) {
        for (int at = 1; at < known; at++) {
            if (values[at] != values[0]) {
                return false;
            }
        }
        return true;
    }
}
