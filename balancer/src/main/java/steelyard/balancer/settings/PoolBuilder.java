package steelyard.balancer.settings;

import java.util.List;
import org.jspecify.annotations.Nullable;

/** Puts a pool's settings together; what is left alone is the usual. Not thread-safe. */
public final class PoolBuilder {
    /** The usual drain limit. */
    private static final long DRAIN_NANOS = 30_000_000_000L;

    private final String name;
    private PickSettings pick;
    private @Nullable ProbeSettings probe;
    private @Nullable WarmUpSettings warmUp;
    private DrainSettings drain = new DrainSettings(DRAIN_NANOS, false);
    private @Nullable RetrySettings retry;
    private @Nullable LoadSettings load;
    private @Nullable AffinitySettings affinity;
    private @Nullable BenchSettings bench;
    private ReserveSettings reserve = ReserveSettings.NONE;
    private @Nullable InFlightSettings inFlight;
    private TimeoutSettings timeouts = TimeoutSettings.USUAL;
    private LimitSettings limits = LimitSettings.USUAL;
    private FrontSettings front = FrontSettings.USUAL;

    PoolBuilder(String name, PickSettings pick) {
        this.name = name;
        this.pick = pick;
    }

    public PoolBuilder pick(PickSettings set) {
        pick = set;
        return this;
    }

    public PoolBuilder probe(@Nullable ProbeSettings set) {
        probe = set;
        return this;
    }

    public PoolBuilder warmUp(@Nullable WarmUpSettings set) {
        warmUp = set;
        return this;
    }

    public PoolBuilder drain(DrainSettings set) {
        drain = set;
        return this;
    }

    public PoolBuilder retry(@Nullable RetrySettings set) {
        retry = set;
        return this;
    }

    public PoolBuilder load(@Nullable LoadSettings set) {
        load = set;
        return this;
    }

    public PoolBuilder affinity(@Nullable AffinitySettings set) {
        affinity = set;
        return this;
    }

    public PoolBuilder bench(@Nullable BenchSettings set) {
        bench = set;
        return this;
    }

    public PoolBuilder reserve(ReserveSettings set) {
        reserve = set;
        return this;
    }

    public PoolBuilder inFlight(@Nullable InFlightSettings set) {
        inFlight = set;
        return this;
    }

    public PoolBuilder timeouts(TimeoutSettings set) {
        timeouts = set;
        return this;
    }

    public PoolBuilder limits(LimitSettings set) {
        limits = set;
        return this;
    }

    public PoolBuilder front(FrontSettings set) {
        front = set;
        return this;
    }

    /** @throws IllegalArgumentException for settings that contradict each other */
    public PoolSettings of(List<BackendSettings> backends) {
        return new PoolSettings(
                name, pick, probe, warmUp, drain, retry, load, affinity, bench, reserve, inFlight, timeouts, limits,
                front, backends);
    }
}
