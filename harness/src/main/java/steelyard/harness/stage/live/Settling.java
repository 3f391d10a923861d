package steelyard.harness.stage.live;

import java.util.concurrent.CompletableFuture;
import java.util.concurrent.TimeUnit;
import java.util.concurrent.locks.LockSupport;
import java.util.stream.IntStream;
import steelyard.backends.fleet.Fleet;
import steelyard.balancer.live.Balancer;
import steelyard.balancer.live.guard.BackendReadings;

/**
 * The moment after the last request of a play: attempts whose clients have gone end, and backends tell of what they sent.
 * The account should have both.
 *
 * <p>Waits in steps and not up to an instant: when the machine stops the whole process, the waiting stops with it.
 */
final class Settling {
    private static final long STEP_NANOS = TimeUnit.MILLISECONDS.toNanos(20);
    private static final int MOST_STEPS = 500;
    /** In a row: a request that its client has given up may still be on its way to the balancer. */
    private static final int QUIET_STEPS = 3;

    private static final long LONGEST_TELLING_SECONDS = 5;

    private final Balancer balancer;
    private final Fleet fleet;
    private final BackendReadings readings;

    Settling(Balancer balancer, Fleet fleet, int backends) {
        this.balancer = balancer;
        this.fleet = fleet;
        this.readings = new BackendReadings(backends);
    }

    /** Returns when nothing is in flight and all was told, or when that takes too long. Not for a loop's own thread. */
    void await() {
        int quiet = 0;
        for (int step = 0; quiet < QUIET_STEPS && step < MOST_STEPS; step++) {
            LockSupport.parkNanos(STEP_NANOS);
            balancer.sample(readings);
            quiet = backends().anyMatch(each -> readings.inFlight(each) > 0) ? 0 : quiet + 1;
        }
        awaitBackends();
    }

    /** A backend tells of an answer just after it was sent. Its figures come after what it had begun to tell. */
    private void awaitBackends() {
        CompletableFuture<?>[] figures = backends().mapToObj(fleet::figures).toArray(CompletableFuture<?>[]::new);
        CompletableFuture.allOf(figures)
                .completeOnTimeout(null, LONGEST_TELLING_SECONDS, TimeUnit.SECONDS)
                .exceptionally(unread -> null)
                .join();
    }

    private IntStream backends() {
        return IntStream.range(0, readings.backends());
    }
}
