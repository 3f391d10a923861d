package steelyard.balancer.live.guard;

import java.util.Arrays;
import steelyard.balancer.core.decide.Decider;
import steelyard.balancer.core.standing.Standing;

/**
 * Figures of every backend at one instant, in arrays that are filled again and again.
 *
 * <p>Not thread-safe: whoever made it fills and reads it.
 */
public final class BackendReadings {
    private final int[] inFlight;
    private final Standing[] standing;
    private final double[] effectiveWeight;
    private final double[] entitledShare;
    private final int[] weight;
    private final boolean[] pickable;
    private final double[] headroom;
    private final int[] waiting;
    private long atNanos;

    /** Without what waits by pool. */
    public BackendReadings(int backends) {
        this(backends, 0);
    }

    /**
     * @param backends how many the balancer has
     * @param pools how many of its pools are looked at, from the first on
     */
    public BackendReadings(int backends, int pools) {
        inFlight = new int[backends];
        standing = new Standing[backends];
        Arrays.fill(standing, Standing.UP);
        effectiveWeight = new double[backends];
        entitledShare = new double[backends];
        weight = new int[backends];
        pickable = new boolean[backends];
        headroom = new double[backends];
        waiting = new int[pools];
    }

    void take(Decider decider, long nowNanos) {
        atNanos = nowNanos;
        for (int backend = 0; backend < inFlight.length; backend++) {
            inFlight[backend] = decider.inFlight(backend);
            standing[backend] = decider.standing(backend);
            effectiveWeight[backend] = decider.effectiveWeight(backend, nowNanos);
            entitledShare[backend] = decider.entitledShare(backend, nowNanos);
            weight[backend] = decider.weight(backend);
            pickable[backend] = decider.pickable(backend);
            headroom[backend] = decider.headroom(backend) / 1e3;
        }
        for (int pool = 0; pool < waiting.length; pool++) {
            waiting[pool] = decider.waiting(pool);
        }
    }

    /** The instant of the last filling, on the balancer's clock. */
    public long atNanos() {
        return atNanos;
    }

    public int backends() {
        return inFlight.length;
    }

    /** Attempts in flight. */
    public int inFlight(int backend) {
        return inFlight[backend];
    }

    public Standing standing(int backend) {
        return standing[backend];
    }

    /** Whether new work may be given to it, by its standing, its tier and the last resort. */
    public boolean pickable(int backend) {
        return pickable[backend];
    }

    /** What it weighs, ramp, host and headroom included, whether or not it may be picked. */
    public double effectiveWeight(int backend) {
        return effectiveWeight[backend];
    }

    /** From 0 to 1: its part of the effective weights of its pool. */
    public double entitledShare(int backend) {
        return entitledShare[backend];
    }

    /** From 0 to 1: what the set weight is multiplied by for its load. */
    public double headroom(int backend) {
        return headroom[backend];
    }

    /** Tries of a pool that wait for a backend to be free. */
    public int waiting(int pool) {
        return waiting[pool];
    }

    /** The set weight. */
    public int weight(int backend) {
        return weight[backend];
    }
}
