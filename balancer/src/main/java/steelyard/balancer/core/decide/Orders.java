package steelyard.balancer.core.decide;

/**
 * What the Decider wants done. Called inside a Decider's method, in decision order; an implementation must not call
 * the Decider back from here, but note the order and carry it out after the call returned.
 */
public interface Orders {
    /** Start probe number {@code probe} (from 0, per backend) of a backend and report its answer. */
    void startProbe(int backend, long probe);

    /** The time of a probe is over: stop waiting for it. A report that still comes is ignored. */
    void dropProbe(int backend, long probe);

    /** Cut every attempt in flight on a backend; each is then reported as ended with {@link Outcome#CUT}. */
    void cut(int backend);
}
