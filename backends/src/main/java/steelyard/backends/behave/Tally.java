package steelyard.backends.behave;

import org.jspecify.annotations.Nullable;

/**
 * The books of a behaviour. Two sides are kept apart so that they can be held against each other: sums of what each
 * request spent, and integrals over time of how many there were. All whole nanoseconds; sums of differences only, so the
 * clock's origin does not matter.
 */
final class Tally {

    long received;
    long answered;
    long turnedAway;
    long failed;
    long unanswered;
    long lost;
    long abandoned;
    long dropped;
    long probes;
    long probesFailed;
    long readings;
    long readingsFailed;

    private final int workers;
    private final @Nullable BusyHistory history;
    private int inService;
    private int waiting;
    private int busyWorkers;
    private int peak;
    private long waitNanos;
    private long serviceNanos;
    private long heldIntegralNanos;
    private long busyWorkerNanos;
    private long lastNanos;

    /** @param lastSecond whether {@link #busyShare} will be asked for, which costs the keeping of a history */
    Tally(long startNanos, int workers, boolean lastSecond) {
        this.lastNanos = startNanos;
        this.workers = workers;
        this.history = lastSecond ? new BusyHistory() : null;
    }

    int busyWorkers() {
        return busyWorkers;
    }

    /** Requests in service and waiting. */
    int held() {
        return inService + waiting;
    }

    /** Busy share of the workers over the second that ends now, 0..1; before the start none was busy. */
    double busyShare(long nowNanos) {
        if (history == null) {
            throw new IllegalStateException("no history was asked for");
        }
        return (double) history.lastSecondNanos(nowNanos) / BusyHistory.SPAN_NANOS / workers;
    }

    /** Brings the integrals up to an instant; every change of a number below is preceded by this. */
    void advanceTo(long nowNanos) {
        long spanNanos = nowNanos - lastNanos;
        heldIntegralNanos += spanNanos * (inService + waiting);
        busyWorkerNanos += spanNanos * busyWorkers;
        lastNanos = nowNanos;
    }

    void workerTaken() {
        busyWorkers++;
        busyChanged();
    }

    void workerFreed() {
        busyWorkers--;
        busyChanged();
    }

    void joinedLine() {
        waiting++;
        peak = Math.max(peak, inService + waiting);
    }

    void leftLine(long spentNanos) {
        waiting--;
        waitNanos += spentNanos;
    }

    void startedService() {
        inService++;
        peak = Math.max(peak, inService + waiting);
    }

    void endedService(long spentNanos) {
        inService--;
        serviceNanos += spentNanos;
    }

    void ended(Reply reply) {
        switch (reply) {
            case ANSWER -> answered++;
            case TURNED_AWAY -> turnedAway++;
            case FAULT -> failed++;
            case SILENCE -> unanswered++;
            case LOST -> lost++;
            case DROPPED -> dropped++;
        }
    }

    void probeEnded(Reply reply, int status) {
        if (reply != Reply.ANSWER || status < 200 || status > 299) {
            probesFailed++;
        }
    }

    void readingEnded(Reply reply) {
        if (reply != Reply.ANSWER) {
            readingsFailed++;
        }
    }

    Figures figures(long atNanos, long waitSoFarNanos, long serviceSoFarNanos) {
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
                waitNanos + waitSoFarNanos,
                serviceNanos + serviceSoFarNanos,
                heldIntegralNanos,
                busyWorkerNanos,
                workers,
                probes,
                probesFailed,
                readings,
                readingsFailed,
                0,
                0);
    }

    private void busyChanged() {
        if (history != null) {
            history.changed(lastNanos, busyWorkers);
        }
    }
}
