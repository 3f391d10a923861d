package steelyard.harness.judge;

import java.util.ArrayList;
import java.util.List;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.decide.Outcome;
import steelyard.balancer.core.standing.Transition;
import steelyard.drills.model.Cause;
import steelyard.drills.model.Cue;
import steelyard.drills.model.Drill;
import steelyard.drills.model.Expectation;
import steelyard.harness.record.Cast;
import steelyard.harness.record.Finding;
import steelyard.harness.record.PlayListener;
import steelyard.harness.record.Sample;
import steelyard.harness.record.SelfCheck;
import steelyard.harness.record.Verdict;

/**
 * Judges one play of a drill while it is told.
 *
 * <p>One meter an expectation, one for each measure of the standard set, and the self-checks. Each is told only of the
 * events that it asked for, so that a pick costs what looks at picks and no more; nothing is allocated an event. Memory
 * grows with the stage and the length of the play in slices, never with the number of requests.
 */
public final class Judge implements PlayListener {
    private final Drill drill;
    private final List<Expectation> expectations;
    private final List<Expectation> standard;
    private final List<Meter> meters = new ArrayList<>();
    private final SelfChecks checks;
    private final WindowPicks[] windows;
    private final WindowLatencies[] latencies;
    private final Meter[] onRequests;
    private final Meter[] onPicks;
    private final Meter[] onEnds;
    private final Meter[] onStandings;
    private final Meter[] onWeights;
    private final Meter[] onCues;
    private final Meter[] onSamples;
    private boolean ended;
    private boolean complete;
    private long playedNanos = Long.MAX_VALUE;

    /** @param cast of the drill's stage */
    public Judge(Drill drill, Cast cast) {
        this.drill = drill;
        expectations = drill.expectations();
        standard = StandardSet.of(drill);
        checks = new SelfChecks(cast);
        Meters maker = new Meters(drill, cast);
        expectations.forEach(each -> meters.add(maker.of(each)));
        standard.forEach(each -> meters.add(maker.of(each)));
        windows = maker.picks();
        latencies = maker.latencies();
        onRequests = hearing(Hears.REQUESTS);
        onPicks = hearing(Hears.PICKS);
        onEnds = hearing(Hears.ATTEMPT_ENDS);
        onStandings = hearing(Hears.STANDINGS);
        onWeights = hearing(Hears.WEIGHTS);
        onCues = hearing(Hears.CUES);
        onSamples = hearing(Hears.SAMPLES);
    }

    /**
     * The verdict, once the play has ended.
     *
     * @throws IllegalStateException before that
     */
    public Verdict verdict() {
        if (!ended) {
            throw new IllegalStateException("a play is judged when it has ended");
        }
        List<Finding> found = new ArrayList<>();
        List<Finding> measures = new ArrayList<>();
        for (int i = 0; i < meters.size(); i++) {
            boolean expected = i < expectations.size();
            Expectation expectation = expected ? expectations.get(i) : standard.get(i - expectations.size());
            Reading reading = meters.get(i).read();
            Finding finding = complete || !expected
                    ? Findings.of(expectation, expected, reading, drill.lastsNanos())
                    : Findings.cutShort(expectation, reading, drill.lastsNanos(), playedNanos);
            (expected ? found : measures).add(finding);
        }
        List<SelfCheck> selfChecks = checks.read();
        boolean met = found.stream().allMatch(Finding::met);
        boolean fit = selfChecks.stream().allMatch(SelfCheck::ok);
        String text = complete ? Findings.sentence(found, selfChecks) : Findings.interrupted(playedNanos);
        return new Verdict(met, fit, text, found, measures, selfChecks);
    }

    @Override
    public void requestDue(long atNanos, long request, int traffic, int kind, int client) {
        checks.requestDue(atNanos, request, traffic, kind, client);
    }

    @Override
    public void requestSent(long atNanos, long request, long dueNanos) {
        checks.requestSent(atNanos, request, dueNanos);
    }

    @Override
    public void requestEnded(
            long atNanos, long request, long dueNanos, int traffic, int kind, @Nullable Cause cause, int status) {
        checks.requestEnded(atNanos, request, dueNanos, traffic, kind, cause, status);
        count(atNanos, request, dueNanos, traffic, kind, cause, status);
    }

    @Override
    public void tunnelEnded(
            long atNanos,
            long openedNanos,
            long request,
            long dueNanos,
            int traffic,
            int kind,
            @Nullable Cause cause,
            int status) {
        checks.requestEnded(atNanos, request, dueNanos, traffic, kind, cause, status);
        count(openedNanos, request, dueNanos, traffic, kind, cause, status);
    }

    private void count(
            long answeredNanos, long request, long dueNanos, int traffic, int kind, @Nullable Cause cause, int status) {
        for (WindowLatencies each : latencies) {
            each.ended(answeredNanos, dueNanos, traffic, cause);
        }
        for (Meter each : onRequests) {
            each.requestEnded(answeredNanos, request, dueNanos, traffic, kind, cause, status);
        }
    }

    @Override
    public void connectionCapHit(long atNanos) {
        checks.connectionCapHit(atNanos);
    }

    @Override
    public void attemptPicked(long atNanos, int pool, int backend, long request, int attempt, int inFlight) {
        checks.attemptPicked(atNanos, pool, backend, request, attempt, inFlight);
        for (WindowPicks each : windows) {
            each.picked(atNanos, pool, backend);
        }
        for (Meter each : onPicks) {
            each.attemptPicked(atNanos, pool, backend, request, attempt, inFlight);
        }
    }

    @Override
    public void attemptEnded(
            long atNanos, int backend, long request, int attempt, Outcome outcome, int status, int inFlight) {
        checks.attemptEnded(atNanos, backend, request, attempt, outcome, status, inFlight);
        for (Meter each : onEnds) {
            each.attemptEnded(atNanos, backend, request, attempt, outcome, status, inFlight);
        }
    }

    @Override
    public void stood(Transition transition) {
        for (Meter each : onStandings) {
            each.stood(transition);
        }
    }

    @Override
    public void reweighed(long atNanos, boolean host, int number, int weight) {
        for (Meter each : onWeights) {
            each.reweighed(atNanos, host, number, weight);
        }
    }

    @Override
    public void backendReceived(long atNanos, int backend, long request, int attempt) {
        checks.backendReceived(atNanos, backend, request, attempt);
    }

    @Override
    public void backendEnded(long atNanos, int backend, long request, int attempt, boolean inFull, int status) {
        checks.backendEnded(atNanos, backend, request, attempt, inFull, status);
    }

    @Override
    public void cueApplied(long atNanos, long dueNanos, Cue cue, By by) {
        for (Meter each : onCues) {
            each.cueApplied(atNanos, dueNanos, cue, by);
        }
    }

    @Override
    public void sampled(long atNanos, Sample sample) {
        checks.sampled(atNanos, sample);
        for (Meter each : onSamples) {
            each.sampled(atNanos, sample);
        }
    }

    @Override
    public void interrupted(long atNanos) {
        playedNanos = atNanos;
        checks.interrupted(atNanos);
    }

    @Override
    public void ended(long atNanos, boolean complete) {
        ended = true;
        this.complete = complete;
        playedNanos = Math.min(playedNanos, atNanos);
        checks.ended(atNanos, complete);
        for (Meter each : meters) {
            each.ended(atNanos, complete);
        }
    }

    private Meter[] hearing(Hears what) {
        return meters.stream().filter(each -> each.hears().contains(what)).toArray(Meter[]::new);
    }
}
