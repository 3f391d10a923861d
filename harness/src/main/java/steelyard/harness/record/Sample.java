package steelyard.harness.record;

import java.util.Arrays;
import steelyard.balancer.core.standing.Standing;

/**
 * State of every backend and pool at one instant; index: backend number, or pool number. One mutable object a stage,
 * refilled each slice.
 */
public final class Sample {
    /** In flight as the balancer counts it. */
    public final int[] inFlight;

    public final Standing[] standing;

    /** Whether new work may be given to it: by its standing, its tier and the last resort. */
    public final boolean[] pickable;

    /** The weight that was set. */
    public final int[] setWeight;

    /** Set weight times ramp and headroom (and, under host weights, the backend's part of its host's weight). */
    public final double[] effectiveWeight;

    /** From 0 to 1 within the pool. */
    public final double[] entitledShare;

    /** What the set weight is multiplied by for the backend's load, from 0 to 1; 1 where nothing fresh is known. */
    public final double[] headroom;

    /** Requests waiting in the backend's own queue. */
    public final int[] waiting;

    /** Requests in service in the backend. */
    public final int[] inService;

    /** Worker-time spent busy since the start of the play, in nanoseconds. */
    public final long[] busyNanos;

    /** Time that its requests have spent waiting and in service so far, added up over requests, in nanoseconds. */
    public final long[] spentNanos;

    /** The same as the integral of the number that waits or is in service; kept apart by the backend. */
    public final long[] heldNanos;

    /** By pool: requests waiting in the balancer for a backend to be free. */
    public final int[] waitingForBackend;

    /** Of a stage with one pool, or as many as there may be of that many backends. */
    public Sample(int backends) {
        this(backends, backends);
    }

    public Sample(int backends, int pools) {
        inFlight = new int[backends];
        standing = new Standing[backends];
        Arrays.fill(standing, Standing.UP);
        pickable = new boolean[backends];
        Arrays.fill(pickable, true);
        setWeight = new int[backends];
        effectiveWeight = new double[backends];
        entitledShare = new double[backends];
        headroom = new double[backends];
        Arrays.fill(headroom, 1);
        waiting = new int[backends];
        inService = new int[backends];
        busyNanos = new long[backends];
        spentNanos = new long[backends];
        heldNanos = new long[backends];
        waitingForBackend = new int[pools];
    }
}
