package steelyard.backends.stub;

import java.io.IOException;
import java.net.InetSocketAddress;
import java.time.Duration;
import java.util.List;
import java.util.concurrent.CompletableFuture;
import java.util.concurrent.ExecutionException;
import java.util.concurrent.TimeUnit;
import java.util.concurrent.TimeoutException;
import java.util.concurrent.atomic.AtomicLong;
import java.util.function.Predicate;
import steelyard.backends.behave.BehaviourSettings;
import steelyard.backends.behave.Change;
import steelyard.backends.behave.Figures;
import steelyard.backends.behave.ServiceTime;
import steelyard.backends.fleet.BackendSpec;
import steelyard.backends.fleet.CannotStart;
import steelyard.backends.fleet.EmbeddedFleet;

/**
 * A stub on real sockets under a clock that a test moves by hand, so that nothing here depends on how fast the machine
 * is: a request of 10 s is over when the test says so.
 */
final class OneStub implements AutoCloseable {

    static final BehaviourSettings TEN_SECONDS =
            BehaviourSettings.of(1, 1, new ServiceTime.Fixed(10_000_000_000L)).withAnswer(200, 40);
    static final BehaviourSettings NO_TIME =
            BehaviourSettings.of(8, 8, new ServiceTime.Fixed(0)).withAnswer(200, 40);

    private static final long LONGEST_WAIT_SECONDS = 20;

    final Heard heard = new Heard();
    final EmbeddedFleet fleet = new EmbeddedFleet();
    // Half of a plays' time before the clock turns over.
    final AtomicLong clock = new AtomicLong(Long.MAX_VALUE - 5_000_000_000L);

    OneStub(BackendSpec spec) throws CannotStart {
        fleet.start(List.of(spec), 1, clock::get, heard);
    }

    static OneStub of(BehaviourSettings settings) throws CannotStart {
        return new OneStub(new BackendSpec("gannet", settings, "/afloat", null));
    }

    InetSocketAddress address() {
        return fleet.address(0);
    }

    RawClient client() throws IOException {
        return new RawClient(address());
    }

    void apply(Change change) throws Exception {
        now(fleet.apply(0, change));
    }

    Figures figures() throws Exception {
        return now(fleet.figures(0));
    }

    /** Moves the clock and lets the stub do what has become due. */
    void pass(Duration time) throws Exception {
        clock.addAndGet(time.toNanos());
        figures();
    }

    /** Waits until the stub has got as far as the test needs, e.g. read a request that is under way. */
    void until(Predicate<Figures> reached) throws Exception {
        long deadline = System.nanoTime() + TimeUnit.SECONDS.toNanos(LONGEST_WAIT_SECONDS);
        Figures figures = figures();
        while (!reached.test(figures)) {
            if (System.nanoTime() - deadline > 0) {
                throw new AssertionError("not reached: " + figures);
            }
            Thread.sleep(2);
            figures = figures();
        }
    }

    /** Waits until the listener has heard this. */
    void untilHeard(String line) throws Exception {
        until(figures -> heard.lines.contains(line));
    }

    static <T> T now(CompletableFuture<T> step) throws InterruptedException, ExecutionException, TimeoutException {
        return step.get(LONGEST_WAIT_SECONDS, TimeUnit.SECONDS);
    }

    @Override
    public void close() {
        fleet.close();
    }
}
