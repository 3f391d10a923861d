package steelyard.balancer.live.guard;

import io.netty.util.concurrent.EventExecutor;
import java.util.concurrent.Future;
import java.util.concurrent.TimeUnit;
import org.jspecify.annotations.Nullable;

/**
 * The timer for one deadline that moves. Only an earlier deadline moves it; one that rings too early finds nothing to do and
 * is set again. Used inside the lock of {@link GuardedDecider}.
 */
final class Alarm {
    private final EventExecutor loop;
    private final Rung rung;
    private @Nullable Future<?> armed;
    private long armedFor;
    private long number;

    /** Told on the loop, outside the lock, that an alarm rings; it has to ask {@link #rings} inside. */
    @FunctionalInterface
    interface Rung {
        void at(long number);
    }

    Alarm(EventExecutor loop, Rung rung) {
        this.loop = loop;
        this.rung = rung;
    }

    /** Rings at {@code deadlineNanos} at the latest. */
    void set(long deadlineNanos, long nowNanos) {
        if (armed != null) {
            if (deadlineNanos - armedFor >= 0) {
                return;
            }
            armed.cancel(false);
        }
        armedFor = deadlineNanos;
        long set = ++number;
        armed = loop.schedule(() -> rung.at(set), Math.max(0, deadlineNanos - nowNanos), TimeUnit.NANOSECONDS);
    }

    /** Whether this is the alarm that was set last, and not one cancelled too late to keep it from ringing. */
    boolean rings(long set) {
        if (set != number) {
            return false;
        }
        armed = null;
        return true;
    }

    void stop() {
        number++;
        if (armed != null) {
            armed.cancel(false);
            armed = null;
        }
    }
}
