package steelyard.balancer.live;

import java.util.List;
import java.util.Set;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.settings.BackendSettings;
import steelyard.balancer.settings.DrainSettings;
import steelyard.balancer.settings.FrontSettings;
import steelyard.balancer.settings.PickSettings;
import steelyard.balancer.settings.PoolSettings;
import steelyard.balancer.settings.ProbeSettings;
import steelyard.balancer.settings.RetrySettings;
import steelyard.balancer.settings.TimeoutSettings;

/** A pool in the making, for tests: round robin, no probes, no retries, patient. */
final class Pool {
    private PoolSettings.Count count = PoolSettings.Count.REQUESTS;
    private @Nullable ProbeSettings probe;
    private @Nullable RetrySettings retry;
    private TimeoutSettings timeouts = LivePlay.PATIENT;
    private boolean forwarded;
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
        forwarded = true;
        return this;
    }

    PoolSettings settings(List<BackendSettings> backends) {
        return PoolSettings.named(
                        "terns",
                        PickSettings.of(PoolSettings.Method.ROUND_ROBIN).with(count))
                .probe(probe)
                .drain(new DrainSettings(drainLimitNanos, false))
                .retry(retry)
                .timeouts(timeouts)
                .front(new FrontSettings(
                        0,
                        FrontSettings.Kind.HTTP,
                        null,
                        false,
                        forwarded ? FrontSettings.Forwarded.SHOWN : FrontSettings.Forwarded.NOT))
                .of(backends);
    }
}
