package steelyard.backends.stub;

import io.netty.channel.EventLoop;
import io.netty.util.concurrent.Future;
import java.util.concurrent.TimeUnit;
import java.util.function.LongSupplier;
import org.jspecify.annotations.Nullable;

/**
 * One timer on an event loop for the next of many deadlines. It may fire early, when a deadline has moved or the loop's
 * clock runs ahead of the one handed in; whoever is called then looks at the time. On its event loop only.
 */
final class DeadlineTimer {

    private final EventLoop loop;
    private final LongSupplier clock;
    private final Runnable due;
    private @Nullable Future<?> armed;
    private long armedNanos;

    DeadlineTimer(EventLoop loop, LongSupplier clock, Runnable due) {
        this.loop = loop;
        this.clock = clock;
        this.due = due;
    }

    /** Sees to it that {@code due} runs at or soon after a deadline; one that is armed for an earlier time stays. */
    void arm(long deadlineNanos) {
        if (armed != null) {
            if (armedNanos - deadlineNanos <= 0) {
                return;
            }
            armed.cancel(false);
        }
        armedNanos = deadlineNanos;
        long delayNanos = Math.max(0, deadlineNanos - clock.getAsLong());
        armed = loop.schedule(this::fire, delayNanos, TimeUnit.NANOSECONDS);
    }

    void cancel() {
        if (armed != null) {
            armed.cancel(false);
            armed = null;
        }
    }

    private void fire() {
        armed = null;
        due.run();
    }
}
