package steelyard.balancer.live;

import static org.junit.jupiter.api.Assertions.assertThrows;

import java.io.IOException;
import java.net.InetAddress;
import java.net.InetSocketAddress;
import java.security.cert.X509Certificate;
import java.util.ArrayList;
import java.util.List;
import java.util.function.UnaryOperator;
import org.awaitility.Awaitility;
import steelyard.balancer.live.guard.BackendReadings;
import steelyard.balancer.settings.BackendSettings;
import steelyard.balancer.settings.BalancerSettings;
import steelyard.balancer.settings.HostSettings;
import steelyard.balancer.settings.PoolSettings;
import steelyard.balancer.settings.TimeoutSettings;

/**
 * A balancer of one pool of terns, in front of given addresses.
 *
 * <p>Closing it says that nothing is in flight and no buffer was left: every buffer of these tests is counted, not a
 * sample of them.
 */
final class LivePlay implements AutoCloseable {
    static final long SECOND = 1_000_000_000L;
    static final TimeoutSettings PATIENT = new TimeoutSettings(10 * SECOND, 30 * SECOND, 30 * SECOND);

    static {
        Leaks.watch();
    }

    final Decisions decisions = new Decisions();
    final Balancer balancer;
    private final BalancerSettings settings;

    private LivePlay(BalancerSettings settings, List<InetSocketAddress> addresses) throws CannotStart {
        this(settings, addresses::get, 0);
    }

    private LivePlay(BalancerSettings settings, BackendAddresses addresses, int port) throws CannotStart {
        this.settings = settings;
        balancer = Balancer.start(settings, addresses, pool -> port, System::nanoTime, (draw, a, b) -> 0, decisions);
    }

    private LivePlay begun() {
        balancer.begin(System.nanoTime());
        return this;
    }

    static LivePlay of(InetSocketAddress... addresses) throws CannotStart {
        return of(UnaryOperator.identity(), addresses);
    }

    static LivePlay of(UnaryOperator<Pool> with, InetSocketAddress... addresses) throws CannotStart {
        return new LivePlay(settings(1, with, addresses), List.of(addresses)).begun();
    }

    /** Backends that are believed when they show this certificate. */
    static LivePlay believing(X509Certificate shown, UnaryOperator<Pool> with, InetSocketAddress... addresses)
            throws CannotStart {
        BackendAddresses known = new BackendAddresses() {
            @Override
            public InetSocketAddress of(int backend) {
                return addresses[backend];
            }

            @Override
            public X509Certificate certificate(int backend) {
                return shown;
            }
        };
        return new LivePlay(settings(1, with, addresses), known, 0).begun();
    }

    static LivePlay onLoops(int loops, InetSocketAddress... addresses) throws CannotStart {
        return onLoops(loops, UnaryOperator.identity(), addresses);
    }

    static LivePlay onLoops(int loops, UnaryOperator<Pool> with, InetSocketAddress... addresses) throws CannotStart {
        return new LivePlay(settings(loops, with, addresses), List.of(addresses)).begun();
    }

    /** A balancer whose only backend is itself. */
    static LivePlay onItself(int port) throws CannotStart {
        InetSocketAddress self = new InetSocketAddress(InetAddress.getLoopbackAddress(), port);
        return new LivePlay(settings(1, UnaryOperator.identity(), self), List.of(self)::get, port).begun();
    }

    /** A balancer that has not begun. */
    static LivePlay waiting(InetSocketAddress... addresses) throws CannotStart {
        return new LivePlay(settings(1, UnaryOperator.identity(), addresses), List.of(addresses));
    }

    /** The exception of a balancer whose front is to listen on a port that is taken. */
    static CannotStart startOn(int port, InetSocketAddress address) {
        return assertThrows(
                CannotStart.class,
                () -> Balancer.start(
                        settings(1, UnaryOperator.identity(), address),
                        backend -> address,
                        pool -> port,
                        System::nanoTime,
                        (draw, a, b) -> 0,
                        new Decisions()));
    }

    private static BalancerSettings settings(int loops, UnaryOperator<Pool> with, InetSocketAddress... addresses) {
        List<BackendSettings> backends = new ArrayList<>();
        List<HostSettings> hosts = new ArrayList<>();
        for (int i = 0; i < addresses.length; i++) {
            backends.add(new BackendSettings("tern-" + (i + 1), 1, i, false));
            hosts.add(new HostSettings("quay-" + (i + 1), 1));
        }
        PoolSettings pool = with.apply(new Pool()).settings(backends);
        return new BalancerSettings("steelyard", loops, hosts, List.of(pool));
    }

    InetSocketAddress front() {
        return balancer.frontAddress(0);
    }

    /** Waits until nothing is in flight. */
    void settle() {
        Awaitility.await().until(() -> inFlight() == 0);
    }

    Wire client() throws IOException {
        return Wire.to(front());
    }

    /** Sends one request on a connection of its own and gives back the answer with its content. */
    String ask(String request) throws IOException {
        try (Wire wire = client()) {
            wire.send(request);
            return wire.readAnswer();
        }
    }

    int inFlight() {
        BackendReadings readings = new BackendReadings(settings.backends().size());
        balancer.sample(readings);
        int sum = 0;
        for (int backend = 0; backend < readings.backends(); backend++) {
            sum += readings.inFlight(backend);
        }
        return sum;
    }

    @Override
    public void close() {
        balancer.close();
        int left = inFlight();
        if (left != 0) {
            throw new AssertionError(left + " attempts are still in flight");
        }
        if (decisions.picks().size() != decisions.ends().size()) {
            throw new AssertionError(decisions.picks() + " picked, but ended " + decisions.ends());
        }
        Leaks.check();
    }
}
