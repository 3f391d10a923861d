package steelyard.balancer.core.standing;

import java.util.Arrays;

/**
 * How many attempts ended within a window, and how many of them failed.
 *
 * <p>The window is kept as {@link #STEPS} counts that go out one by one, so what counts reaches back between nine tenths of
 * it and the whole. A list of instants would be exact, and as long as the traffic is fast.
 */
final class FailureWindow {
    static final int STEPS = 10;

    private final long stepNanos;
    private final int[] ended = new int[STEPS];
    private final int[] failed = new int[STEPS];
    private int step;
    private long beganNanos;
    private int allEnded;
    private int allFailed;

    /** @param overNanos above zero */
    FailureWindow(long overNanos) {
        stepNanos = Math.max(1, overNanos / STEPS);
    }

    int ended() {
        return allEnded;
    }

    int failed() {
        return allFailed;
    }

    void count(boolean failure, long nowNanos) {
        if (allEnded == 0) {
            beganNanos = nowNanos;
        }
        goOn(nowNanos);
        ended[step]++;
        allEnded++;
        if (failure) {
            failed[step]++;
            allFailed++;
        }
    }

    void clear() {
        Arrays.fill(ended, 0);
        Arrays.fill(failed, 0);
        allEnded = 0;
        allFailed = 0;
    }

    private void goOn(long nowNanos) {
        long steps = (nowNanos - beganNanos) / stepNanos;
        if (steps >= STEPS) {
            clear();
            beganNanos = nowNanos;
            return;
        }
        for (long i = 0; i < steps; i++) {
            step = (step + 1) % STEPS;
            allEnded -= ended[step];
            allFailed -= failed[step];
            ended[step] = 0;
            failed[step] = 0;
        }
        beganNanos += steps * stepNanos;
    }
}
