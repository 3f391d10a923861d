package steelyard.balancer.live.tcp;

import io.netty.util.concurrent.EventExecutor;
import io.netty.util.concurrent.Future;
import java.util.concurrent.TimeUnit;
import org.jspecify.annotations.Nullable;

/**
 * A time limit that is moved with nearly every message and passes hardly ever.
 *
 * <p>Moving it later costs no timer: the one that is set finds, when it fires, that there is time left and is set again
 * for the rest. Used on its loop only.
 */
public final class Deadline {
    private final EventExecutor loop;
    private final Runnable passed;
    private long atNanos;
    private boolean set;
    private long armedFor;
    private @Nullable Future<?> armed;

    /** @param passed runs on the loop when the limit is over; the deadline is then clear */
    public Deadline(EventExecutor loop, Runnable passed) {
        this.loop = loop;
        this.passed = passed;
    }

    /** Sets or moves the limit to {@code nanos} from now. */
    public void in(long nanos) {
        atNanos = loop.ticker().nanoTime() + nanos;
        set = true;
        if (armed == null) {
            arm(nanos);
        } else if (armedFor - atNanos > 0) {
            armed.cancel(false);
            arm(nanos);
        }
    }

    /** There is no limit until it is set again. */
    public void clear() {
        set = false;
    }

    /** Clears the limit and gives back its timer. */
    public void stop() {
        set = false;
        if (armed != null) {
            armed.cancel(false);
            armed = null;
        }
    }

    private void arm(long nanos) {
        armedFor = atNanos;
        armed = loop.schedule(this::fire, nanos, TimeUnit.NANOSECONDS);
    }

    private void fire() {
        armed = null;
        if (!set) {
            return;
        }
        long left = atNanos - loop.ticker().nanoTime();
        if (left > 0) {
            arm(left);
        } else {
            set = false;
            passed.run();
        }
    }
}
