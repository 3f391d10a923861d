package steelyard.harness.stage.live;

import io.netty.channel.EventLoop;
import java.util.List;
import java.util.concurrent.CompletableFuture;
import java.util.concurrent.TimeUnit;
import java.util.stream.IntStream;
import steelyard.backends.behave.Figures;
import steelyard.backends.fleet.Fleet;
import steelyard.balancer.live.Balancer;
import steelyard.balancer.live.guard.BackendReadings;
import steelyard.harness.record.Sample;

/**
 * Reads every backend at the end of each slice. Lives on the generator's loop.
 *
 * <p>A reading is taken a moment after the end of its slice; busy time is counted back to it, so that lateness does not
 * show as utilisation.
 */
final class Sampler {
    static final long SLICE_NANOS = TimeUnit.MILLISECONDS.toNanos(100);
    private static final long LONGEST_WAIT_SECONDS = 5;

    private final EventLoop loop;
    private final PlayClock clock;
    private final Account account;
    private final Balancer balancer;
    private final Fleet fleet;
    private final long lastsNanos;
    private final BackendReadings readings;
    private final int backends;
    private final int pools;
    private final long[] busyNanos;
    private final CompletableFuture<Void> last = new CompletableFuture<>();
    private long sliceEndNanos = SLICE_NANOS;
    private volatile boolean stopped;

    Sampler(
            EventLoop loop,
            PlayClock clock,
            Account account,
            Balancer balancer,
            Fleet fleet,
            int backends,
            int pools,
            long lastsNanos) {
        this.loop = loop;
        this.clock = clock;
        this.account = account;
        this.balancer = balancer;
        this.fleet = fleet;
        this.lastsNanos = lastsNanos;
        this.readings = new BackendReadings(backends, pools);
        this.backends = backends;
        this.pools = pools;
        this.busyNanos = new long[backends];
    }

    /** Samples from now to the end of the last slice. Any thread. */
    void start() {
        if (lastsNanos < SLICE_NANOS) {
            last.complete(null);
        }
        loop.execute(this::rest);
    }

    /** Returns when the last slice was told, or when that takes too long. Any thread but the loop's. */
    void awaitLast() {
        last.copy()
                .completeOnTimeout(null, LONGEST_WAIT_SECONDS, TimeUnit.SECONDS)
                .join();
    }

    /** No more samples. Any thread. */
    void stop() {
        stopped = true;
    }

    private void rest() {
        if (!stopped && sliceEndNanos <= lastsNanos) {
            loop.schedule(this::sample, Math.max(0, sliceEndNanos - clock.playNow()), TimeUnit.NANOSECONDS);
        }
    }

    private void sample() {
        if (stopped) {
            return;
        }
        long endNanos = sliceEndNanos;
        Sample sample = new Sample(backends, pools);
        balancer.sample(readings);
        for (int backend = 0; backend < backends; backend++) {
            sample.inFlight[backend] = readings.inFlight(backend);
            sample.standing[backend] = readings.standing(backend);
            sample.pickable[backend] = readings.pickable(backend);
            sample.setWeight[backend] = readings.weight(backend);
            sample.effectiveWeight[backend] = readings.effectiveWeight(backend);
            sample.entitledShare[backend] = readings.entitledShare(backend);
            sample.headroom[backend] = readings.headroom(backend);
        }
        for (int pool = 0; pool < pools; pool++) {
            sample.waitingForBackend[pool] = readings.waiting(pool);
        }
        List<CompletableFuture<Figures>> figures =
                IntStream.range(0, backends).mapToObj(fleet::figures).toList();
        CompletableFuture.allOf(figures.toArray(CompletableFuture<?>[]::new))
                .thenRunAsync(() -> tell(endNanos, sample, figures), loop);
        sliceEndNanos += SLICE_NANOS;
        rest();
    }

    private void tell(long endNanos, Sample sample, List<CompletableFuture<Figures>> figures) {
        for (int backend = 0; backend < backends; backend++) {
            Figures of = figures.get(backend).join();
            sample.waiting[backend] = of.waiting();
            sample.inService[backend] = of.inService();
            sample.spentNanos[backend] = of.waitNanos() + of.serviceNanos();
            sample.heldNanos[backend] = of.heldIntegralNanos();
            sample.busyNanos[backend] = busyNanos(backend, of, endNanos);
        }
        account.tell(Account.Source.SAMPLES, endNanos, (to, at) -> to.sampled(at, sample));
        if (endNanos > lastsNanos - SLICE_NANOS) {
            last.complete(null);
        }
    }

    private long busyNanos(int backend, Figures figures, long endNanos) {
        long since = Math.max(0, clock.playNanos(figures.atNanos()) - endNanos) * figures.inService();
        busyNanos[backend] = Math.max(busyNanos[backend], figures.busyWorkerNanos() - since);
        return busyNanos[backend];
    }
}
