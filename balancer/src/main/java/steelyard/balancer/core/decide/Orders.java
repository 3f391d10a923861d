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

    /** Read the load page of a backend, reading {@code number} (from 0, per backend), and report what it says. */
    void startReading(int backend, long number);

    /** The time of a reading is over: stop waiting for it. A report that still comes is ignored. */
    void dropReading(int backend, long number);

    /**
     * A try that was waiting has its answer: the backend that was picked and counted for it, or {@link Decider#NOBODY}
     * when its time is over. It comes for every ticket for which {@link Decider#pick} said {@link Decider#WAITING} and
     * {@link Decider#leave} did not say that it was still waiting.
     */
    void place(long ticket, int backend);

    /** Cut every attempt in flight on a backend; each is then reported as ended with {@link Outcome#CUT}. */
    void cut(int backend);
}
