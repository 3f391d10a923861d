package steelyard.backends.behave;

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

    private int inService;
    private int waiting;
    private int busyWorkers;
    private int peak;
    private long waitNanos;
    private long serviceNanos;
    private long heldIntegralNanos;
    private long busyWorkerNanos;
    private long lastNanos;

    Tally(long startNanos) {
        lastNanos = startNanos;
    }

    int busyWorkers() {
        return busyWorkers;
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
    }

    void workerFreed() {
        busyWorkers--;
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

    Figures figures(long atNanos, long waitSoFarNanos, long serviceSoFarNanos, int workers) {
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
                probesFailed);
    }
}
