package steelyard.harness.judge;

import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;
import java.util.function.Consumer;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.decide.Outcome;
import steelyard.balancer.core.standing.Standing;
import steelyard.balancer.core.standing.Transition;
import steelyard.drills.model.Cause;
import steelyard.drills.model.Cue;
import steelyard.drills.model.Drill;
import steelyard.harness.record.Cast;
import steelyard.harness.record.Finding;
import steelyard.harness.record.PlayListener;
import steelyard.harness.record.Sample;
import steelyard.harness.record.TestDrill;
import steelyard.harness.record.Verdict;

/** Writes the events of a play down in any order and tells them to a judge in order of time. */
final class Play {
    private final List<Event> events = new ArrayList<>();
    private final int[] inFlight = new int[4];
    private long requests;

    private record Event(long atNanos, int number, Consumer<PlayListener> telling) {}

    /** Anything else, at an instant. Events of one instant are told in the order in which they were written. */
    Play at(long atNanos, Consumer<PlayListener> telling) {
        events.add(new Event(atNanos, events.size(), telling));
        return this;
    }

    /** A request of the first stream, sent when due and not attempted. */
    Play request(long dueNanos, long tookNanos, @Nullable Cause cause) {
        return request(dueNanos, tookNanos, cause, 0);
    }

    Play request(long dueNanos, long tookNanos, @Nullable Cause cause, int traffic) {
        long request = requests++;
        at(dueNanos, to -> to.requestDue(dueNanos, request, traffic, 0, 0));
        at(dueNanos, to -> to.requestSent(dueNanos, request, dueNanos));
        long end = dueNanos + tookNanos;
        return at(end, to -> to.requestEnded(end, request, dueNanos, traffic, 0, cause, cause == null ? 200 : 0));
    }

    /** A first attempt of a request of its own, answered by the backend. */
    Play attempt(long atNanos, long tookNanos, int backend) {
        return attempt(atNanos, tookNanos, backend, requests++, 1, Outcome.ANSWERED);
    }

    /** An attempt, told by the balancer and, unless it was refused, by the backend. */
    Play attempt(long atNanos, long tookNanos, int backend, long request, int attempt, Outcome outcome) {
        boolean answered = outcome == Outcome.ANSWERED;
        int status = answered ? 200 : 0;
        picked(atNanos, backend, request, attempt);
        if (outcome != Outcome.REFUSED) {
            at(atNanos, to -> to.backendReceived(atNanos, backend, request, attempt));
            at(
                    atNanos + tookNanos,
                    to -> to.backendEnded(atNanos + tookNanos, backend, request, attempt, answered, status));
        }
        return ended(atNanos + tookNanos, backend, request, attempt, outcome, status);
    }

    /** The pick alone. */
    Play picked(long atNanos, int backend, long request, int attempt) {
        int pool = backend == TestDrill.SKUA ? TestDrill.CARGO : TestDrill.SEATS;
        return at(atNanos, to -> to.attemptPicked(atNanos, pool, backend, request, attempt, ++inFlight[backend]));
    }

    /** The end alone, as the balancer tells it. */
    Play ended(long atNanos, int backend, long request, int attempt, Outcome outcome, int status) {
        return at(
                atNanos,
                to -> to.attemptEnded(atNanos, backend, request, attempt, outcome, status, --inFlight[backend]));
    }

    Play cue(long appliedNanos, Cue cue) {
        return cue(appliedNanos, cue, PlayListener.By.DRILL);
    }

    Play cue(long appliedNanos, Cue cue, PlayListener.By by) {
        return at(appliedNanos, to -> to.cueApplied(appliedNanos, cue.atNanos(), cue, by));
    }

    Play stood(long atNanos, int backend, Standing from, Standing to, Transition.Cause cause) {
        return at(atNanos, listener -> listener.stood(new Transition(backend, from, to, cause, atNanos)));
    }

    Play sample(long atNanos, Consumer<Sample> filling) {
        return at(atNanos, to -> {
            Sample sample = new Sample(inFlight.length);
            filling.accept(sample);
            to.sampled(atNanos, sample);
        });
    }

    Verdict verdict(Drill drill) {
        return verdict(drill, drill.lastsNanos(), true);
    }

    Verdict verdict(Drill drill, long endNanos, boolean complete) {
        Judge judge = new Judge(drill, new Cast(drill));
        events.stream()
                .sorted(Comparator.comparingLong(Event::atNanos).thenComparingInt(Event::number))
                .forEach(event -> event.telling().accept(judge));
        judge.ended(endNanos, complete);
        return judge.verdict();
    }

    /** What the only expectation of a drill found. */
    Finding finding(Drill drill) {
        return verdict(drill).expectations().get(0);
    }
}
