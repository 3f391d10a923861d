package steelyard.balancer.live;

import java.util.List;
import java.util.Set;
import java.util.function.UnaryOperator;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.settings.BackendSettings;
import steelyard.balancer.settings.DrainSettings;
import steelyard.balancer.settings.FrontSettings;
import steelyard.balancer.settings.LimitSettings;
import steelyard.balancer.settings.PickSettings;
import steelyard.balancer.settings.PoolBuilder;
import steelyard.balancer.settings.PoolSettings;
import steelyard.balancer.settings.ProbeSettings;
import steelyard.balancer.settings.RetrySettings;
import steelyard.balancer.settings.TimeoutSettings;
import steelyard.balancer.settings.TlsSettings;

/** A pool in the making, for tests: round robin, no probes, no retries, patient. */
final class Pool {
    private PoolSettings.Count count = PoolSettings.Count.REQUESTS;
    private @Nullable ProbeSettings probe;
    private @Nullable RetrySettings retry;
    private TimeoutSettings timeouts = LivePlay.PATIENT;
    private FrontSettings.Forwarded forwarded = FrontSettings.Forwarded.NOT;
    private LimitSettings limits = LimitSettings.USUAL;
    private FrontSettings.Kind kind = FrontSettings.Kind.HTTP;
    private @Nullable TlsSettings tls;
    private boolean backendTls;
    private UnaryOperator<PoolBuilder> also = UnaryOperator.identity();
    private long drainLimitNanos = 30 * LivePlay.SECOND;

    Pool countingConnections() {
        count = PoolSettings.Count.CONNECTIONS;
        return this;
    }

    Pool probing(@Nullable String path, long everyMillis, long withinMillis) {
        probe = new ProbeSettings(path, everyMillis * 1_000_000, withinMillis * 1_000_000, 1, 1);
        return this;
    }

    Pool retrying(Integer... also) {
        retry = new RetrySettings(1, 1.0, 10, Set.of(also));
        return this;
    }

    /** Seconds. */
    Pool patience(double connect, double firstByte, double idle) {
        timeouts = new TimeoutSettings((long) (connect * LivePlay.SECOND), (long) (firstByte * LivePlay.SECOND), (long)
                (idle * LivePlay.SECOND));
        return this;
    }

    Pool drainingWithin(double seconds) {
        drainLimitNanos = (long) (seconds * LivePlay.SECOND);
        return this;
    }

    Pool forwarding() {
        forwarded = FrontSettings.Forwarded.SHOWN;
        return this;
    }

    Pool forwardingHidden() {
        forwarded = FrontSettings.Forwarded.HIDDEN;
        return this;
    }

    /** Octets. */
    Pool limited(int target, int head, long body) {
        limits = new LimitSettings(target, head, body);
        return this;
    }

    /** Seconds for a head, and for a further octet of content. */
    Pool clientsWithin(double head, double body) {
        timeouts = new TimeoutSettings(
                timeouts.connectNanos(),
                timeouts.firstByteNanos(),
                timeouts.idleNanos(),
                (long) (head * LivePlay.SECOND),
                (long) (body * LivePlay.SECOND));
        return this;
    }

    /** Everything else, in the words of the settings. */
    Pool with(UnaryOperator<PoolBuilder> more) {
        also = more;
        return this;
    }

    /** Octets are passed through, a connection as a whole. */
    Pool passing() {
        kind = FrontSettings.Kind.TCP;
        count = PoolSettings.Count.CONNECTIONS;
        return this;
    }

    /** Clients speak TLS. */
    Pool securedBy(TlsSettings settings) {
        tls = settings;
        return this;
    }

    /** Backends speak TLS. */
    Pool towardsTls() {
        backendTls = true;
        return this;
    }

    PoolSettings settings(List<BackendSettings> backends) {
        return also.apply(PoolSettings.named(
                                "terns",
                                PickSettings.of(PoolSettings.Method.ROUND_ROBIN).with(count))
                        .probe(probe)
                        .drain(new DrainSettings(drainLimitNanos, false))
                        .retry(retry)
                        .timeouts(timeouts)
                        .limits(limits)
                        .front(new FrontSettings(0, kind, tls, backendTls, forwarded)))
                .of(backends);
    }
}
