package steelyard.harness.judge;

import java.util.Arrays;
import java.util.BitSet;
import java.util.stream.IntStream;
import steelyard.harness.record.Cast;
import steelyard.harness.record.Slice;

/**
 * Whether each second of a pool keeps every backend's share near what is due to it: within 3 points or 3 standard
 * errors of a share of that many attempts (binomial), whichever is wider.
 *
 * <p>What is due is the time average, over the second, of the shares that full set weights give among the backends that
 * are admitted and can truly serve at each instant. A second in which nobody could serve misses; one without attempts
 * holds. One bit a second is all that is kept.
 */
final class Settling extends SlidingSecond {
    private static final double POINTS = 0.03;
    private static final double ERRORS = 3;
    private static final int ONE_MISS_IN = 100;

    private final Truth truth;
    private final int[] backends;
    /** Column of each backend of the stage. */
    private final int[] columnOf;

    private final double[][] dueNanos;
    private final BitSet misses = new BitSet();
    private long integratedNanos;
    private int tenth;
    private int seconds;
    private boolean any;

    Settling(Cast cast, int pool, Truth truth) {
        super((int) IntStream.range(0, cast.backends().size())
                .filter(each -> cast.poolOf(each) == pool)
                .count());
        this.truth = truth;
        backends = IntStream.range(0, cast.backends().size())
                .filter(each -> cast.poolOf(each) == pool)
                .toArray();
        columnOf = new int[cast.backends().size()];
        for (int column = 0; column < backends.length; column++) {
            columnOf[backends[column]] = column;
        }
        dueNanos = new double[TENTHS][backends.length];
    }

    void picked(long atNanos, int backend) {
        advance(atNanos);
        any = true;
        add(columnOf[backend]);
    }

    /** Time has come to that instant, and nothing about the truth has changed before it. */
    void upTo(long atNanos) {
        advance(atNanos);
        integrate(atNanos);
    }

    @Override
    void begin(long atNanos) {
        super.begin(atNanos);
        integratedNanos = atNanos;
    }

    @Override
    void tenthEnds(int number, long atNanos) {
        integrate(atNanos);
    }

    @Override
    void tenthBegins(int number) {
        tenth = number % TENTHS;
        Arrays.fill(dueNanos[tenth], 0);
    }

    @Override
    void secondEnds(int number) {
        seconds = number + 1;
        if (!keeps()) {
            misses.set(number);
        }
    }

    Reading read(String pool) {
        if (seconds == 0) {
            return Reading.notMeasured("the next cue, or the end of the play, came within 1 s");
        }
        if (!any) {
            return Reading.notMeasured("nothing was picked for pool " + pool);
        }
        int first = -1;
        int missed = 0;
        for (int second = seconds - 1; second >= 0; second--) {
            missed += misses.get(second) ? 1 : 0;
            if (!misses.get(second) && missed * ONE_MISS_IN <= seconds - second) {
                first = second;
            }
        }
        return first < 0
                ? Reading.never("the shares of pool " + pool + " were still off at the next cue or the end")
                : Reading.of((double) first * Slice.NANOS);
    }

    private void integrate(long atNanos) {
        long spanNanos = atNanos - integratedNanos;
        if (spanNanos <= 0) {
            return;
        }
        integratedNanos = atNanos;
        long sum = 0;
        for (int backend : backends) {
            sum += truth.weight(backend);
        }
        if (sum > 0) {
            for (int column = 0; column < backends.length; column++) {
                dueNanos[tenth][column] += (double) truth.weight(backends[column]) / sum * spanNanos;
            }
        }
    }

    private boolean keeps() {
        long picked = 0;
        double due = 0;
        for (int column = 0; column < backends.length; column++) {
            picked += sum(column);
            due += due(column);
        }
        for (int column = 0; column < backends.length && picked > 0 && due > 0; column++) {
            if (!near((double) sum(column) / picked, due(column) / due, picked)) {
                return false;
            }
        }
        return picked == 0 || due > 0;
    }

    private double due(int column) {
        double sum = 0;
        for (double[] each : dueNanos) {
            sum += each[column];
        }
        return sum;
    }

    private static boolean near(double share, double due, long picked) {
        double error = StrictMath.sqrt(due * (1 - due) / picked);
        return Math.abs(share - due) <= Math.max(POINTS, ERRORS * error);
    }
}
