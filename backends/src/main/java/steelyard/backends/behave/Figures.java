package steelyard.backends.behave;

/**
 * The accounts of one behaviour at one instant, over its whole life, kills included. Immutable.
 *
 * <p>At every instant {@code received = answered + turnedAway + failed + unanswered + lost + dropped + inService +
 * waiting}, and, by Little's law on a path cut at its end, {@code waitNanos + serviceNanos = heldIntegralNanos}, exactly:
 * the two sides are kept separately, one a request and one over time. Probes and readings of the load page are
 * counted apart and appear otherwise only in {@code busyWorkerNanos}.
 *
 * @param atNanos the instant
 * @param received requests read
 * @param answered requests answered after their work
 * @param turnedAway requests answered 503 because workers and queue were full
 * @param failed requests answered with the status of a fault
 * @param unanswered requests met with silence
 * @param lost requests that a kill took
 * @param abandoned requests whose connection closed while they waited or were in service
 * @param dropped those of the abandoned whose work has ended
 * @param inService requests that hold a worker now
 * @param waiting requests that wait for a worker now
 * @param peak the most requests in service and waiting at one instant
 * @param waitNanos sum over requests of the time spent waiting, up to now for those that still wait
 * @param serviceNanos sum over requests of the time spent in service, up to now for those still in it
 * @param heldIntegralNanos integral over time of the number in service and waiting
 * @param busyWorkerNanos integral over time of the number of busy workers, those of probes and readings included
 * @param workers workers there are
 * @param probes probes read
 * @param probesFailed probes answered outside 200..299, met with silence or lost
 * @param readings readings of the load page asked for
 * @param readingsFailed those that were not answered with the page
 * @param tunnelled upgraded connections ever; the behaviour knows of none, whoever carries out its plans counts them
 * @param tunnels those that are open now
 */
public record Figures(
        long atNanos,
        long received,
        long answered,
        long turnedAway,
        long failed,
        long unanswered,
        long lost,
        long abandoned,
        long dropped,
        int inService,
        int waiting,
        int peak,
        long waitNanos,
        long serviceNanos,
        long heldIntegralNanos,
        long busyWorkerNanos,
        int workers,
        long probes,
        long probesFailed,
        long readings,
        long readingsFailed,
        long tunnelled,
        int tunnels) {

    /**
     * Busy share of the workers since an earlier snapshot of the same behaviour, 0..1.
     *
     * @throws IllegalArgumentException if {@code earlier} is not earlier
     */
    public double utilisationSince(Figures earlier) {
        long spanNanos = atNanos - earlier.atNanos;
        if (spanNanos <= 0) {
            throw new IllegalArgumentException(
                    "utilisation needs a span of time above 0, but it is " + spanNanos + " ns");
        }
        return (double) (busyWorkerNanos - earlier.busyWorkerNanos) / spanNanos / workers;
    }

    /** The same with the upgraded connections, which their carrier knows. */
    public Figures withTunnels(long ever, int open) {
        return new Figures(
                atNanos,
                received,
                answered,
                turnedAway,
                failed,
                unanswered,
                lost,
                abandoned,
                dropped,
                inService,
                waiting,
                peak,
                waitNanos,
                serviceNanos,
                heldIntegralNanos,
                busyWorkerNanos,
                workers,
                probes,
                probesFailed,
                readings,
                readingsFailed,
                ever,
                open);
    }
}
