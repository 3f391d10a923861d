package steelyard.harness.stage.virtual;

import java.util.ArrayDeque;
import java.util.ArrayList;
import java.util.List;
import org.jspecify.annotations.Nullable;
import steelyard.backends.behave.Chance;
import steelyard.balancer.core.decide.Outcome;
import steelyard.balancer.core.standing.Transition;
import steelyard.drills.model.Cause;
import steelyard.drills.model.Drill;
import steelyard.drills.read.DrillReader;
import steelyard.drills.read.Parsed;
import steelyard.harness.conduct.Conductor;
import steelyard.harness.judge.Judge;
import steelyard.harness.record.Cast;
import steelyard.harness.record.PlayListener;
import steelyard.harness.record.SelfCheck;
import steelyard.harness.record.Tee;
import steelyard.harness.record.Verdict;
import steelyard.harness.stage.CannotPlay;

/** A small play and what was told in it, with hops of 50 us; the account has to add up whatever the play is about. */
final class Witness implements PlayListener {
    static final long MICRO = 1_000;
    static final long MILLI = 1_000_000;
    static final long HOP = 50 * MICRO;

    record Pick(long atNanos, int backend, long request, int attempt) {}

    record Over(long atNanos, int backend, long request, Outcome outcome, int status) {}

    record End(
            long request,
            long dueNanos,
            long atNanos,
            @Nullable Cause cause,
            int status) {
        long tookNanos() {
            return atNanos - dueNanos;
        }
    }

    record Reading(long atNanos, int backend, int headroomMilli, boolean fresh) {}

    final List<Pick> picks = new ArrayList<>();
    final List<Over> overs = new ArrayList<>();
    final List<End> ends = new ArrayList<>();
    final List<Reading> readings = new ArrayList<>();
    final List<Transition> transitions = new ArrayList<>();
    final List<Long> waited = new ArrayList<>();
    final List<Long> opened = new ArrayList<>();
    int received;

    /** @param pool its settings as a flow mapping, without the braces */
    static Witness of(String pool, String traffic, String lasts, String cues) {
        Witness witness = new Witness();
        judged(drill(pool, traffic, lasts, cues, ""), witness);
        return witness;
    }

    /** What the one expectation of a play was measured to be, in words. */
    static String measured(String pool, String traffic, String lasts, String expectation) {
        return judged(drill(pool, traffic, lasts, "", expectation), new Witness())
                .expectations()
                .get(0)
                .measured();
    }

    private static Drill drill(String pool, String traffic, String lasts, String cues, String expectation) {
        String text = """
                drill: Small
                about: Worked out by hand.
                stage: {pools: {seats: {%s}}}
                traffic: [{to: seats, arrivals: even, %s}]
                lasts: %s
                cues: [%s]
                expect: [%s]
                """.formatted(pool, traffic, lasts, cues, expectation);
        Parsed<Drill> parsed = DrillReader.read("drill", text);
        return parsed.value().orElseThrow(() -> new AssertionError(parsed.problems()));
    }

    private static Verdict judged(Drill drill, Witness witness) {
        Judge judge = new Judge(drill, new Cast(drill));
        try (VirtualStage stage = new VirtualStage(drill, 1, new Transport(HOP))) {
            stage.open(new Tee(judge, witness));
            stage.play(new Conductor(drill, new Chance(1), new ArrayDeque<>()));
        } catch (CannotPlay e) {
            throw new AssertionError(e);
        }
        List<SelfCheck> wrong =
                judge.verdict().checks().stream().filter(each -> !each.ok()).toList();
        if (!wrong.isEmpty()) {
            throw new AssertionError(wrong);
        }
        return judge.verdict();
    }

    List<Integer> backendsPicked() {
        return picks.stream().map(Pick::backend).toList();
    }

    long count(@Nullable Cause cause) {
        return ends.stream().filter(each -> each.cause() == cause).count();
    }

    @Override
    public void attemptPicked(long atNanos, int pool, int backend, long request, int attempt, int inFlight) {
        picks.add(new Pick(atNanos, backend, request, attempt));
    }

    @Override
    public void attemptEnded(
            long atNanos, int backend, long request, int attempt, Outcome outcome, int status, int inFlight) {
        overs.add(new Over(atNanos, backend, request, outcome, status));
    }

    @Override
    public void requestEnded(
            long atNanos, long request, long dueNanos, int traffic, int kind, @Nullable Cause cause, int status) {
        ends.add(new End(request, dueNanos, atNanos, cause, status));
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
        opened.add(openedNanos);
        requestEnded(atNanos, request, dueNanos, traffic, kind, cause, status);
    }

    @Override
    public void waited(long atNanos, int pool, long request, int waiting) {
        waited.add(request);
    }

    @Override
    public void loadRead(long atNanos, int backend, long number, int headroomMilli, boolean fresh) {
        readings.add(new Reading(atNanos, backend, headroomMilli, fresh));
    }

    @Override
    public void stood(Transition transition) {
        transitions.add(transition);
    }

    @Override
    public void backendReceived(long atNanos, int backend, long request, int attempt) {
        received++;
    }
}
