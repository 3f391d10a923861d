package steelyard.drills.model;

import java.util.List;
import org.jspecify.annotations.Nullable;

/** Makes a pool word by word; what is not said holds as in a drill that does not say it. For one thread. */
public final class PoolBuilder {
    private final String name;
    private Picking picking;
    private Health health = Health.NONE;
    private Reserve reserve = Reserve.NONE;
    private @Nullable InFlight inFlight;
    private Drain drain = Drain.USUAL;
    private @Nullable Retry retry;
    private Timeouts timeouts = Timeouts.USUAL;
    private Limits limits = Limits.USUAL;
    private Wire wire = Wire.USUAL;

    PoolBuilder(String name, Picking picking) {
        this.name = name;
        this.picking = picking;
    }

    /** All that a pool says, but its backends. */
    PoolBuilder(Pool pool) {
        this(pool.name(), pool.picking());
        health = pool.health();
        reserve = pool.reserve();
        inFlight = pool.inFlight();
        drain = pool.drain();
        retry = pool.retry();
        timeouts = pool.timeouts();
        limits = pool.limits();
        wire = pool.wire();
    }

    public PoolBuilder picking(Picking how) {
        picking = how;
        return this;
    }

    public PoolBuilder health(Health how) {
        health = how;
        return this;
    }

    public PoolBuilder reserve(Reserve how) {
        reserve = how;
        return this;
    }

    public PoolBuilder inFlight(@Nullable InFlight most) {
        inFlight = most;
        return this;
    }

    public PoolBuilder drain(Drain how) {
        drain = how;
        return this;
    }

    public PoolBuilder retry(@Nullable Retry how) {
        retry = how;
        return this;
    }

    public PoolBuilder timeouts(Timeouts limitsInTime) {
        timeouts = limitsInTime;
        return this;
    }

    public PoolBuilder limits(Limits sizes) {
        limits = sizes;
        return this;
    }

    public PoolBuilder wire(Wire how) {
        wire = how;
        return this;
    }

    /** The pool with those backends. */
    public Pool of(List<Backend> backends) {
        return new Pool(name, picking, health, reserve, inFlight, drain, retry, timeouts, limits, wire, backends);
    }
}
