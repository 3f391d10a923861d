package steelyard.contract;

import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import java.util.TreeMap;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.decide.Outcome;
import steelyard.balancer.core.standing.Transition;
import steelyard.drills.model.Cause;
import steelyard.drills.model.Cue;
import steelyard.harness.record.PlayListener;
import steelyard.harness.record.Sample;

/** Keeps all that a stage tells; for plays of a few hundred requests. */
public final class Heard implements PlayListener {
    /** A request as it ended. */
    public record End(
            long request,
            long dueNanos,
            long atNanos,
            @Nullable Cause cause,
            int status) {}

    /** An attempt as it was picked. */
    public record Pick(long atNanos, int pool, int backend, long request, int attempt) {}

    /** An attempt as it ended. */
    public record Over(long atNanos, int backend, long request, int attempt, Outcome outcome) {}

    /** What a reading made of a weight. */
    public record Read(long atNanos, int backend, int headroomMilli, boolean fresh) {}

    /** A cue as it was applied, and how many picks had been told before it. */
    public record Applied(long atNanos, long dueNanos, Cue cue, By by, int picks) {}

    public final List<Long> dues = new ArrayList<>();
    private final Map<Long, Integer> clients = new TreeMap<>();
    public final List<Pick> picks = new ArrayList<>();
    public final List<Over> overs = new ArrayList<>();
    public final List<End> ends = new ArrayList<>();
    public final List<Transition> transitions = new ArrayList<>();
    public final List<Applied> cues = new ArrayList<>();
    public final List<Read> readings = new ArrayList<>();
    public final List<Long> waited = new ArrayList<>();
    public final List<Long> sampledNanos = new ArrayList<>();
    public final Map<Integer, Integer> received = new TreeMap<>();
    public boolean monotone = true;
    public int endings;
    public boolean complete;
    public long interruptedNanos = -1;
    private final Runnable atFirstSamples;
    private final long atNanosOfInterest;
    private boolean ran;
    private long latestNanos = Long.MIN_VALUE;

    public Heard() {
        this(Long.MAX_VALUE, () -> {});
    }

    /** Runs something, once, in the first sample at or after {@code atNanos}. */
    public Heard(long atNanos, Runnable then) {
        this.atNanosOfInterest = atNanos;
        this.atFirstSamples = then;
    }

    /** How many requests ended so; null for good. */
    public long count(@Nullable Cause cause) {
        return ends.stream().filter(each -> each.cause() == cause).count();
    }

    /** Attempts that were picked and have not ended. */
    public int inFlight() {
        return picks.size() - overs.size();
    }

    /** Ends of the requests due in [from, to) milliseconds. */
    public List<End> dueBetween(long fromMillis, long toMillis) {
        return ends.stream()
                .filter(each -> each.dueNanos() >= fromMillis * 1_000_000 && each.dueNanos() < toMillis * 1_000_000)
                .toList();
    }

    /** The backends picked, in order. */
    public List<Integer> backendsPicked() {
        return picks.stream().map(Pick::backend).toList();
    }

    /** The backend of each request's first attempt, by request. */
    public Map<Long, Integer> backendByRequest() {
        Map<Long, Integer> first = new TreeMap<>();
        picks.forEach(each -> first.putIfAbsent(each.request(), each.backend()));
        return first;
    }

    /** The client of a request within its stream. */
    public int clientOf(long request) {
        return clients.get(request);
    }

    private void at(long nanos) {
        monotone &= nanos >= latestNanos && endings == 0;
        latestNanos = nanos;
    }

    @Override
    public void requestDue(long atNanos, long request, int traffic, int kind, int client) {
        at(atNanos);
        dues.add(atNanos);
        clients.put(request, client);
    }

    @Override
    public void requestSent(long atNanos, long request, long dueNanos) {
        at(atNanos);
    }

    @Override
    public void requestEnded(
            long atNanos, long request, long dueNanos, int traffic, int kind, @Nullable Cause cause, int status) {
        at(atNanos);
        ends.add(new End(request, dueNanos, atNanos, cause, status));
    }

    @Override
    public void attemptPicked(long atNanos, int pool, int backend, long request, int attempt, int inFlight) {
        at(atNanos);
        picks.add(new Pick(atNanos, pool, backend, request, attempt));
    }

    @Override
    public void attemptEnded(
            long atNanos, int backend, long request, int attempt, Outcome outcome, int status, int inFlight) {
        at(atNanos);
        overs.add(new Over(atNanos, backend, request, attempt, outcome));
    }

    @Override
    public void stood(Transition transition) {
        at(transition.atNanos());
        transitions.add(transition);
    }

    @Override
    public void waited(long atNanos, int pool, long request, int waiting) {
        at(atNanos);
        waited.add(request);
    }

    @Override
    public void loadRead(long atNanos, int backend, long number, int headroomMilli, boolean fresh) {
        at(atNanos);
        readings.add(new Read(atNanos, backend, headroomMilli, fresh));
    }

    @Override
    public void backendReceived(long atNanos, int backend, long request, int attempt) {
        at(atNanos);
        received.merge(backend, 1, Integer::sum);
    }

    @Override
    public void cueApplied(long atNanos, long dueNanos, Cue cue, By by) {
        at(atNanos);
        cues.add(new Applied(atNanos, dueNanos, cue, by, picks.size()));
    }

    @Override
    public void sampled(long atNanos, Sample sample) {
        at(atNanos);
        sampledNanos.add(atNanos);
        if (!ran && atNanos >= atNanosOfInterest) {
            ran = true;
            atFirstSamples.run();
        }
    }

    @Override
    public void interrupted(long atNanos) {
        interruptedNanos = atNanos;
    }

    @Override
    public void ended(long atNanos, boolean complete) {
        at(atNanos);
        endings++;
        this.complete = complete;
    }
}
