package steelyard.balancer.live;

import java.io.IOException;
import java.net.InetSocketAddress;
import java.util.List;
import java.util.concurrent.atomic.AtomicLong;
import java.util.function.LongSupplier;
import steelyard.balancer.core.decide.Chance;
import steelyard.balancer.core.decide.DecisionSink;
import steelyard.balancer.core.decide.Orders;
import steelyard.balancer.live.guard.GuardedDecider;
import steelyard.balancer.live.guard.WaitingRooms;
import steelyard.balancer.live.http.Forwarding;
import steelyard.balancer.live.probe.Probes;
import steelyard.balancer.live.probe.Readings;
import steelyard.balancer.live.tcp.TcpFronts;
import steelyard.balancer.live.tcp.Transport;
import steelyard.balancer.settings.BalancerSettings;
import steelyard.balancer.settings.PoolSettings;

/** The moving parts of a balancer, made to fit each other. They carry out the core's orders on the home loop. */
final class Works {
    private final BalancerSettings settings;
    private final Certificates certificates;
    private final Transport transport;
    private final GuardedDecider decider;
    private final WaitingRooms rooms;
    private final Forwarding forwarding;
    private final TcpFronts tcpFronts;
    private final Probes probes;
    private final Readings readings;

    /**
     * @param addresses by backend number
     * @param sink told every decision
     */
    Works(
            BalancerSettings settings,
            List<InetSocketAddress> addresses,
            Certificates certificates,
            LongSupplier nanoClock,
            Chance chance,
            DecisionSink sink) {
        this.settings = settings;
        this.certificates = certificates;
        this.transport = Transport.open(settings.loops());
        this.decider = new GuardedDecider(settings, nanoClock, chance, sink, transport.home(), new CarryOut());
        this.rooms = new WaitingRooms(transport.loops());
        AtomicLong numbers = new AtomicLong();
        this.forwarding =
                new Forwarding(settings, decider, transport, rooms, addresses, certificates::backends, numbers);
        this.tcpFronts = new TcpFronts(decider, transport, rooms, addresses, numbers);
        this.probes = new Probes(settings, decider, transport, addresses, certificates::backends);
        this.readings = new Readings(settings, decider, transport, addresses, certificates::backends);
    }

    Transport transport() {
        return transport;
    }

    GuardedDecider decider() {
        return decider;
    }

    /** Binds the front of a pool, which answers after {@link #begin}. */
    InetSocketAddress bind(int pool, int port) throws IOException {
        PoolSettings of = settings.pools().get(pool);
        return switch (of.front().kind()) {
            case HTTP -> forwarding.bind(pool, certificates.front(pool), port);
            case TCP -> tcpFronts.bind(pool, of, certificates.front(pool), certificates.backends(pool), port);
        };
    }

    /** Starts to decide and to answer. */
    void begin(long nowNanos) {
        decider.begin(nowNanos);
        forwarding.begin();
        tcpFronts.begin();
    }

    /** What has to be done, in this order, before the transport may be closed. */
    List<Runnable> stops() {
        return List.of(
                forwarding::close,
                tcpFronts::close,
                decider::end,
                () -> transport.home().submit(probes::close).awaitUninterruptibly(),
                () -> transport.home().submit(readings::close).awaitUninterruptibly());
    }

    /** The core's orders, on the home loop. */
    private final class CarryOut implements Orders {
        @Override
        public void startProbe(int backend, long probe) {
            probes.start(backend, probe);
        }

        @Override
        public void dropProbe(int backend, long probe) {
            probes.drop(backend, probe);
        }

        @Override
        public void startReading(int backend, long number) {
            readings.start(backend, number);
        }

        @Override
        public void dropReading(int backend, long number) {
            readings.drop(backend, number);
        }

        @Override
        public void place(long ticket, int backend) {
            rooms.placed(ticket, backend);
        }

        @Override
        public void cut(int backend) {
            forwarding.cut(backend);
            tcpFronts.cut(backend);
        }
    }
}
