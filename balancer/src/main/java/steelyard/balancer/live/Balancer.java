package steelyard.balancer.live;

import java.io.IOException;
import java.net.InetSocketAddress;
import java.security.SecureRandom;
import java.security.cert.X509Certificate;
import java.util.ArrayList;
import java.util.HexFormat;
import java.util.List;
import java.util.Locale;
import java.util.function.LongSupplier;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.decide.Chance;
import steelyard.balancer.core.decide.DecisionSink;
import steelyard.balancer.live.control.ControlPage;
import steelyard.balancer.live.control.Counts;
import steelyard.balancer.live.control.CueTaker;
import steelyard.balancer.live.guard.BackendReadings;
import steelyard.balancer.live.guard.GuardedDecider;
import steelyard.balancer.live.tls.FrontTls;
import steelyard.balancer.settings.BalancerSettings;
import steelyard.balancer.settings.DrainSettings;
import steelyard.balancer.settings.PoolSettings;
import steelyard.balancer.settings.ProbeSettings;

/**
 * A running balancer: one front a pool on 127.0.0.1.
 *
 * <p>Methods may be called from any thread but the balancer's own event loops. Hand commands take effect before they
 * return; what follows from them on the wire (cutting, closing) comes a moment later.
 */
public final class Balancer implements AutoCloseable {
    private static final int TOKEN_BYTES = 24;

    private final BalancerSettings settings;
    private final Counts counts;
    private final Certificates certificates;
    private final Works works;
    private final GuardedDecider decider;
    private final List<InetSocketAddress> fronts = new ArrayList<>();
    private @Nullable ControlPage control;
    private boolean closed;

    private Balancer(
            BalancerSettings settings,
            List<InetSocketAddress> addresses,
            Certificates certificates,
            LongSupplier nanoClock,
            Chance chance,
            DecisionSink listener) {
        this.settings = settings;
        this.counts = new Counts(settings, listener);
        this.certificates = certificates;
        this.works = new Works(settings, addresses, certificates, nanoClock, chance, counts);
        this.decider = works.decider();
    }

    /**
     * Binds the fronts. They answer after {@link #begin}; connections that come earlier wait.
     *
     * @param nanoClock monotonic, in nanoseconds; read from several threads
     * @param listener is told every decision, in order, inside the balancer's lock: it must be quick and must not call
     *     back
     * @throws CannotStart when a port cannot be had or a certificate cannot be used; nothing is left open then
     */
    public static Balancer start(
            BalancerSettings settings,
            BackendAddresses backends,
            FrontPorts ports,
            LongSupplier nanoClock,
            Chance chance,
            DecisionSink listener)
            throws CannotStart {
        List<InetSocketAddress> addresses = new ArrayList<>();
        for (int backend = 0; backend < settings.backends().size(); backend++) {
            addresses.add(backends.of(backend));
        }
        Certificates certificates = Certificates.of(settings, backends);
        Balancer balancer = new Balancer(settings, addresses, certificates, nanoClock, chance, listener);
        try {
            for (int pool = 0; pool < settings.pools().size(); pool++) {
                balancer.bind(pool, ports.of(pool));
            }
        } catch (CannotStart e) {
            balancer.close();
            throw e;
        }
        return balancer;
    }

    private void bind(int pool, int port) throws CannotStart {
        try {
            fronts.add(works.bind(pool, port));
        } catch (IOException e) {
            String name = settings.pools().get(pool).name();
            throw new CannotStart("the front of pool " + name + " cannot listen: " + reason(port, e), e);
        }
    }

    /** The system's own words differ from one transport to the next. */
    private static String reason(int port, IOException refused) {
        String told = String.valueOf(refused.getMessage()).toLowerCase(Locale.ROOT);
        String why = told.contains("in use")
                ? " is taken: choose another one, or end what holds it"
                : told.contains("permission") || told.contains("denied")
                        ? " is kept for the system: choose one from 1024 on"
                        : " cannot be had: choose another one";
        return "port " + port + why;
    }

    /**
     * Starts to decide: probes are counted from {@code nowNanos}, the fronts answer. Once.
     *
     * @param nowNanos on the balancer's clock
     */
    public void begin(long nowNanos) {
        works.begin(nowNanos);
    }

    /** Where the front of a pool listens. */
    public InetSocketAddress frontAddress(int pool) {
        return fronts.get(pool);
    }

    /** The certificate that the front of a pool shows; null for a front without TLS. */
    public @Nullable X509Certificate frontCertificate(int pool) {
        FrontTls tls = certificates.front(pool);
        return tls == null ? null : tls.certificate();
    }

    /** Connections to the front of a pool that did not come to agree on keys. */
    public long failedHandshakes(int pool) {
        FrontTls tls = certificates.front(pool);
        return tls == null ? 0 : tls.failedHandshakes();
    }

    /**
     * Opens the control page: {@code GET /metrics} as OpenMetrics text and {@code GET /state} as JSON, both 503 before
     * {@link #begin}, and {@code POST /cues}. At most once.
     *
     * @param port of 127.0.0.1, or 0 for any that is free
     * @param cues takes what is sent to {@code /cues}
     * @throws CannotStart when the port cannot be had
     */
    public synchronized ControlAddress openControl(int port, CueTaker cues) throws CannotStart {
        if (control != null || closed) {
            throw new IllegalStateException("the control page opens once");
        }
        byte[] random = new byte[TOKEN_BYTES];
        new SecureRandom().nextBytes(random);
        String token = HexFormat.of().formatHex(random);
        ControlPage page = new ControlPage(settings, decider, counts, this::failedHandshakes, cues, token);
        try {
            InetSocketAddress address = page.bind(works.transport(), port);
            control = page;
            return new ControlAddress(address, token);
        } catch (IOException e) {
            page.close();
            throw new CannotStart("the control page cannot listen: " + reason(port, e), e);
        }
    }

    /**
     * Gives a backend no new work, lets what is in flight end, and cuts what is left at the limit.
     *
     * @param limitNanos above zero, or 0 for the limit of its pool
     */
    public void drain(int backend, long limitNanos) {
        decider.change((core, now) -> core.drain(backend, limitNanos, now));
    }

    /** Takes a drained or withdrawn backend back. */
    public void admit(int backend) {
        decider.change((core, now) -> core.admit(backend, now));
    }

    /** Takes a backend out at once; what is in flight goes on. */
    public void withdraw(int backend) {
        decider.change((core, now) -> core.withdraw(backend, now));
    }

    /** Sets the weight of a backend, from 0 to a million; another one is an {@link IllegalArgumentException}. */
    public void reweigh(int backend, int weight) {
        decider.change((core, now) -> core.reweigh(backend, weight, now));
    }

    /** Sets the weight of a host, from 0 to a million; another one is an {@link IllegalArgumentException}. */
    public void reweighHost(int host, int weight) {
        decider.change((core, now) -> core.reweighHost(host, weight, now));
    }

    /** Changes how the backends of a pool are probed; probes under way and runs so far go on. */
    public void retune(int pool, ProbeSettings probe) {
        decider.change((core, now) -> core.retune(pool, probe, now));
    }

    /** Changes what the drains of a pool keep to; one under way keeps its limit. */
    public void retune(int pool, DrainSettings drain) {
        decider.change((core, now) -> core.retune(pool, drain, now));
    }

    /** Changes how a pool picks; what is in flight goes on. */
    public void retune(int pool, PoolSettings.Method method) {
        decider.change((core, now) -> core.retune(pool, method, now));
    }

    /** Fills {@code readings}, made for as many backends as there are, with the figures of this instant. */
    public void sample(BackendReadings readings) {
        decider.read(readings);
    }

    /**
     * Closes fronts, connections, probes, the control page and the event loops, in this order. Attempts in flight end
     * as abandoned. A second call does nothing.
     *
     * @throws IllegalStateException with every failure of a step as its suppressed exceptions; later steps are made all
     *     the same
     */
    @Override
    public synchronized void close() {
        if (closed) {
            return;
        }
        closed = true;
        List<RuntimeException> failures = new ArrayList<>();
        works.stops().forEach(stop -> step(failures, stop));
        ControlPage page = control;
        if (page != null) {
            step(failures, page::close);
        }
        step(failures, works.transport()::close);
        if (!failures.isEmpty()) {
            IllegalStateException all = new IllegalStateException("the balancer did not close cleanly");
            failures.forEach(all::addSuppressed);
            throw all;
        }
    }

    private static void step(List<RuntimeException> failures, Runnable step) {
        try {
            step.run();
        } catch (RuntimeException e) {
            failures.add(e);
        }
    }
}
