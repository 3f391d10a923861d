package steelyard.outside.stage;

import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Cause;
import steelyard.drills.model.Drill;
import steelyard.harness.record.PlayListener;

/**
 * A pool of equal backends under Poisson traffic, played whole: empty at the start, a warm-up dropped, then so many
 * requests measured. Probes go on beside, and cost nothing.
 */
final class OpenStage implements PlayListener {
    private static final double LOAD_OF_LONGEST_WARM_UP = 0.95;

    private final int workers;
    private final long fromNanos;
    private final double longNanos;
    private long picked;
    private long waiting;
    private long ended;
    private long took;

    private OpenStage(int workers, long fromNanos, double longNanos) {
        this.workers = workers;
        this.fromNanos = fromNanos;
        this.longNanos = longNanos;
    }

    /**
     * What stands there.
     *
     * @param method by which a backend is picked
     * @param load arrivals in one mean service time, of all backends together
     * @param time the law of service, with a mean of 10 ms
     * @param requests about how many are measured
     * @param longSojourn counts requests that take longer, in mean service times
     */
    record Setting(
            String method,
            int backends,
            int workers,
            int queue,
            double load,
            String time,
            long requests,
            double longSojourn) {
        static final int UNLIMITED = 10_000_000;

        static Setting oneBackend(int workers, int queue, double load, String time, long requests) {
            return new Setting("round-robin", 1, workers, queue, load, time, requests, Double.POSITIVE_INFINITY);
        }
    }

    /** What came out; times in mean service times. */
    record Measured(double meanSojourn, double failed, double shareThatWaits, double shareThatTakesLong) {}

    static Measured run(Setting set, long seed) {
        double rho = Math.min(LOAD_OF_LONGEST_WARM_UP, set.load / set.backends / set.workers);
        long fromNanos = Math.round(20 / ((1 - rho) * (1 - rho)) * WholeStage.SERVICE_NANOS);
        double perSecond = set.load * 1e9 / WholeStage.SERVICE_NANOS;
        long lastsNanos = fromNanos + Math.round(set.requests * 1e9 / perSecond);
        OpenStage stage = new OpenStage(set.workers, fromNanos, set.longSojourn * WholeStage.SERVICE_NANOS);
        double[] values = WholeStage.measure(drill(set, perSecond, fromNanos, lastsNanos), seed, stage);
        return new Measured(
                values[0] / WholeStage.SERVICE_NANOS,
                values[1],
                (double) stage.waiting / stage.picked,
                (double) stage.took / stage.ended);
    }

    private static Drill drill(Setting set, double perSecond, long fromNanos, long lastsNanos) {
        return WholeStage.read("""
                drill: Equal backends
                about: Nothing goes wrong, so that what comes out is what queueing theory says.
                stage:
                  pools:
                    seats:
                      method: %s
                      probe: {path: /afloat, every: 1s, within: 500ms}
                      timeouts: {first-byte: 1h}
                      serves: {workers: %d, queue: %d, time: %s}
                      backends: {fulmar: {times: %d}}
                traffic: [{to: seats, arrivals: poisson, rate: %.6f/s, clients: 64, give-up: 1h}]
                lasts: %s
                expect:
                  - {measure: latency, quantile: mean, from: %s, at-most: 1h}
                  - {measure: failed, from: %<s, at-most: 99%%}
                """.formatted(
                        set.method,
                        set.workers,
                        set.queue,
                        set.time,
                        set.backends,
                        perSecond,
                        WholeStage.seconds(lastsNanos),
                        WholeStage.seconds(fromNanos)));
    }

    @Override
    public void attemptPicked(long atNanos, int pool, int backend, long request, int attempt, int inFlight) {
        if (atNanos >= fromNanos) {
            picked++;
            waiting += inFlight > workers ? 1 : 0;
        }
    }

    @Override
    public void requestEnded(
            long atNanos, long request, long dueNanos, int traffic, int kind, @Nullable Cause cause, int status) {
        if (dueNanos >= fromNanos) {
            ended++;
            took += atNanos - dueNanos > longNanos ? 1 : 0;
        }
    }
}
