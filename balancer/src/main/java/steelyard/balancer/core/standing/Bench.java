package steelyard.balancer.core.standing;

import java.util.function.BooleanSupplier;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.settings.BenchSettings;

/**
 * Whether live failures have set one backend aside, and for how long.
 *
 * <pre>
 * state    | failure, not enough  | failure, enough: room | no room  | success    | time over
 * free     | counted              | benched               | counted  | counted    | impossible
 * benched  | -                    | -                     | -        | -          | free, nothing counted
 * </pre>
 *
 * Enough is a run of failures, or a share of failures among enough attempts; only a failure benches, since a success makes
 * neither worse. Without room under the pool's cap the counts stay as they are, so the next failure asks again. What ends
 * while benched was picked before, or as a last resort, and says nothing new.
 *
 * <p>Each bench time is twice the one before, up to the most; for each whole quiet time since it was freed the next one is
 * a doubling shorter.
 */
final class Bench {
    private final @Nullable BenchSettings settings;
    private final FailureWindow window;
    private int failuresInARow;
    private boolean benched;
    private long untilNanos;
    private int doublings;
    private long freedNanos;

    /** @param settings null for a backend that is never benched */
    Bench(@Nullable BenchSettings settings) {
        this.settings = settings;
        window = new FailureWindow(settings == null ? 1 : settings.overNanos());
    }

    boolean benched() {
        return benched;
    }

    /** When the bench time is over; only while {@link #benched}. */
    long deadlineNanos() {
        return untilNanos;
    }

    /**
     * An attempt ended.
     *
     * @param room asked only when there are failures enough: whether the pool's cap allows one more
     * @return whether that benched the backend
     */
    boolean ended(boolean failure, BooleanSupplier room, long nowNanos) {
        if (settings == null || benched) {
            return false;
        }
        window.count(failure, nowNanos);
        failuresInARow = failure ? Math.min(failuresInARow + 1, settings.after()) : 0;
        if (!failure || !enough(settings) || !room.getAsBoolean()) {
            return false;
        }
        long time = nextTime(settings, nowNanos);
        benched = true;
        untilNanos = nowNanos + time;
        doublings += time < settings.mostNanos() ? 1 : 0;
        return true;
    }

    /** Frees the backend when its time is over; whether it did. */
    boolean frees(long nowNanos) {
        if (!benched || nowNanos - untilNanos < 0) {
            return false;
        }
        benched = false;
        freedNanos = nowNanos;
        failuresInARow = 0;
        window.clear();
        return true;
    }

    private boolean enough(BenchSettings by) {
        return failuresInARow >= by.after()
                || (by.share() > 0 && window.ended() >= by.least() && window.failed() >= by.share() * window.ended());
    }

    private long nextTime(BenchSettings by, long nowNanos) {
        if (doublings > 0) {
            doublings = (int) Math.max(0, doublings - (nowNanos - freedNanos) / by.quietNanos());
        }
        long time = by.timeNanos();
        for (int i = 0; i < doublings; i++) {
            time = time > by.mostNanos() / 2 ? by.mostNanos() : 2 * time;
        }
        return time;
    }
}
