package steelyard.harness.judge;

import java.util.List;
import org.HdrHistogram.Histogram;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.decide.Outcome;
import steelyard.drills.model.Cause;
import steelyard.drills.model.Measure.Unit;
import steelyard.harness.record.Cast;
import steelyard.harness.record.PlayListener;
import steelyard.harness.record.Sample;
import steelyard.harness.record.SelfCheck;
import steelyard.harness.record.Wording;

/** Whether a play is fit to judge: what it says of itself must add up, and its generator must have kept time. */
final class SelfChecks implements PlayListener {
    private static final long LATE_NANOS = 5_000_000L;
    private static final int ONE_LATE_IN = 100;
    private static final int NONE = -1;

    private final Cast cast;
    private final RequestLedger requests = new RequestLedger();
    private final AttemptLedger attempts;
    private final Histogram lateness = new Histogram(3);
    private final int[] inFlight;
    private final long[] movedNanos;
    private final long[] integralNanos;
    private long sent;
    private long late;
    private long capHits;
    private boolean complete;
    private long playedNanos = Long.MAX_VALUE;
    private int astray = NONE;
    private long astraySpentNanos;
    private long astrayHeldNanos;

    SelfChecks(Cast cast) {
        this.cast = cast;
        int backends = cast.backends().size();
        boolean[] byConnection = new boolean[backends];
        for (int backend = 0; backend < backends; backend++) {
            byConnection[backend] = cast.passesOctets(cast.poolOf(backend));
        }
        attempts = new AttemptLedger(byConnection);
        inFlight = new int[backends];
        movedNanos = new long[backends];
        integralNanos = new long[backends];
        lateness.setAutoResize(true);
    }

    @Override
    public void requestDue(long atNanos, long request, int traffic, int kind, int client) {
        requests.due(request);
    }

    @Override
    public void requestSent(long atNanos, long request, long dueNanos) {
        long lateNanos = Math.max(0, atNanos - dueNanos);
        lateness.recordValue(lateNanos);
        sent++;
        if (lateNanos > LATE_NANOS) {
            late++;
        }
    }

    @Override
    public void requestEnded(
            long atNanos, long request, long dueNanos, int traffic, int kind, @Nullable Cause cause, int status) {
        requests.ended(request, cause);
    }

    @Override
    public void connectionCapHit(long atNanos) {
        capHits++;
    }

    @Override
    public void attemptPicked(long atNanos, int pool, int backend, long request, int attempt, int inFlight) {
        attempts.picked(atNanos, backend, request, attempt);
        moved(atNanos, backend, inFlight);
    }

    @Override
    public void attemptEnded(
            long atNanos, int backend, long request, int attempt, Outcome outcome, int status, int inFlight) {
        attempts.ended(atNanos, backend, request, attempt, outcome, status);
        moved(atNanos, backend, inFlight);
    }

    @Override
    public void backendReceived(long atNanos, int backend, long request, int attempt) {
        attempts.received(backend, request, attempt);
    }

    @Override
    public void backendEnded(long atNanos, int backend, long request, int attempt, boolean inFull, int status) {
        attempts.left(backend, request, attempt, inFull, status);
    }

    @Override
    public void sampled(long atNanos, Sample sample) {
        for (int backend = 0; backend < inFlight.length && astray == NONE; backend++) {
            if (sample.spentNanos[backend] != sample.heldNanos[backend]) {
                astray = backend;
                astraySpentNanos = sample.spentNanos[backend];
                astrayHeldNanos = sample.heldNanos[backend];
            }
        }
    }

    @Override
    public void interrupted(long atNanos) {
        playedNanos = atNanos;
    }

    @Override
    public void ended(long atNanos, boolean complete) {
        this.complete = complete;
        playedNanos = Math.min(playedNanos, atNanos);
        attempts.close(atNanos);
        for (int backend = 0; backend < inFlight.length; backend++) {
            moved(atNanos, backend, inFlight[backend]);
        }
    }

    /** What was found, once the play has ended. */
    List<SelfCheck> read() {
        AttemptTally tally = attempts.tally();
        return List.of(
                new SelfCheck(
                        SelfCheck.PLAYED_TO_ITS_END,
                        complete,
                        complete ? "complete" : "interrupted at " + Findings.instant(playedNanos)),
                latenessCheck(),
                new SelfCheck(
                        "connection cap",
                        capHits == 0,
                        capHits == 0 ? "never hit" : "hit " + Wording.count(capHits, "time", "times")),
                new SelfCheck("requests add up", requests.balanced(complete), requests.text(complete)),
                new SelfCheck("attempts as balancer and backends count them", tally.agrees(complete), tally.text()),
                littleCheck(),
                backendsCheck());
    }

    private SelfCheck latenessCheck() {
        String text = sent == 0
                ? "nothing was sent"
                : "99 % within " + Wording.value(Unit.DURATION, lateness.getValueAtPercentile(99)) + " (limit "
                        + Wording.duration(LATE_NANOS) + ")";
        return new SelfCheck("lateness of the generator", late * ONE_LATE_IN <= sent, text);
    }

    /** Little's law on a path: two sums that are kept apart, one over time and one over attempts, are the same. */
    private SelfCheck littleCheck() {
        for (int backend = 0; backend < inFlight.length; backend++) {
            if (integralNanos[backend] != attempts.timeNanos(backend)) {
                return new SelfCheck(
                        "time in flight",
                        false,
                        cast.backends().get(backend).name() + ": in flight over time adds up to "
                                + Wording.duration(integralNanos[backend]) + ", its attempts to "
                                + Wording.duration(attempts.timeNanos(backend)));
            }
        }
        return new SelfCheck(
                "time in flight", true, "in flight over time equals the attempts' times, exactly, on every backend");
    }

    /** The same law within the backends, by their own accounts, at every sample. */
    private SelfCheck backendsCheck() {
        return astray == NONE
                ? new SelfCheck(
                        "time in backends", true, "held over time equals waits and services, exactly, at every slice")
                : new SelfCheck(
                        "time in backends",
                        false,
                        cast.backends().get(astray).name() + ": held over time adds up to "
                                + Wording.duration(astrayHeldNanos) + ", waits and services to "
                                + Wording.duration(astraySpentNanos));
    }

    private void moved(long atNanos, int backend, int level) {
        integralNanos[backend] += inFlight[backend] * (atNanos - movedNanos[backend]);
        movedNanos[backend] = atNanos;
        inFlight[backend] = level;
    }
}
