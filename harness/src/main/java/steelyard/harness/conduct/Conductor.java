package steelyard.harness.conduct;

import java.util.Comparator;
import java.util.List;
import java.util.Optional;
import java.util.PriorityQueue;
import java.util.Queue;
import steelyard.backends.behave.Chance;
import steelyard.drills.model.Cue;
import steelyard.drills.model.Drill;
import steelyard.harness.record.PlayListener;
import steelyard.harness.stage.Agenda;
import steelyard.harness.stage.Hands;
import steelyard.harness.traffic.ArrivalPlan;

/**
 * The agenda of a drill: its requests, its cues, the ends of their {@code for:}, and cues sent by hand.
 *
 * <p>All of them come in order of time; at one instant ends come before cues and cues before requests. A cue counts for
 * the arrivals from when it was due, so a poll that comes late changes no due time. A cue by hand is due when the poll
 * finds it. The agenda has something to come until the play's length is over, even without traffic; ends beyond it are
 * left out.
 */
public final class Conductor implements Agenda {
    private final long lastsNanos;
    private final List<Cue> cues;
    private final Queue<Cue> byHand;
    private final ArrivalPlan arrivals;
    private final CueActions actions;
    private final PriorityQueue<End> ends =
            new PriorityQueue<>(Comparator.comparingLong(End::atNanos).thenComparingInt(End::number));

    private int nextCue;
    private int carriedOut;
    /** When the next of all that is planned is due, whether or not the play lasts that long. */
    private long plannedNanos;

    private long polledNanos;
    /** Read by threads that send cues. */
    private volatile boolean over;

    /**
     * @param chance of the play's seed
     * @param byHand where {@link #byHand} leaves cues until the next poll: empty, and safe for the threads that call it
     * @throws IllegalArgumentException if a cue cannot be carried out on the drill's stage
     */
    public Conductor(Drill drill, Chance chance, Queue<Cue> byHand) {
        this.lastsNanos = drill.lastsNanos();
        this.cues = drill.cues();
        this.byHand = byHand;
        this.arrivals = new ArrivalPlan(drill.traffic(), lastsNanos, chance);
        this.actions = new CueActions(drill, arrivals);
        cues.forEach(actions::check);
        plan();
    }

    /**
     * Sends a cue now, whatever its instant says. Any thread.
     *
     * @throws IllegalArgumentException if it cannot be carried out on the drill's stage; nothing has happened then
     */
    public void byHand(Cue cue) {
        actions.check(cue);
        byHand.add(cue);
    }

    /**
     * Why a cue sent now would change nothing, in words: {@code gannet was not killed}. Empty where it would, or where
     * that is not known, such as while another one waits for the next poll. Any thread.
     */
    public Optional<String> idle(Cue cue) {
        return byHand.isEmpty() ? actions.idle(cue) : Optional.empty();
    }

    @Override
    public boolean hasNext() {
        return !over;
    }

    @Override
    public long nextNanos() {
        long planned = Math.min(plannedNanos, lastsNanos);
        return byHand.isEmpty() ? planned : Math.min(planned, polledNanos);
    }

    @Override
    public void poll(long nowNanos, Hands hands, int limit) {
        polledNanos = nowNanos;
        int left = limit;
        while (left > 0 && !over && next(nowNanos, hands)) {
            left--;
        }
    }

    /** Does the one thing that comes next. Returns whether there was any. */
    private boolean next(long nowNanos, Hands hands) {
        long dueNanos = plannedNanos;
        if (dueNanos > nowNanos || dueNanos >= lastsNanos) {
            return handOrOver(nowNanos, hands);
        }
        if (nextEndNanos() == dueNanos) {
            end(hands);
        } else if (nextCueNanos() == dueNanos) {
            carryOut(cues.get(nextCue++), dueNanos, PlayListener.By.DRILL, hands);
        } else {
            send(hands);
        }
        plan();
        return true;
    }

    private void plan() {
        plannedNanos = Math.min(Math.min(nextEndNanos(), nextCueNanos()), arrivals.nextDueNanos());
    }

    private boolean handOrOver(long nowNanos, Hands hands) {
        over = nowNanos >= lastsNanos;
        Cue cue = over ? null : byHand.poll();
        if (cue == null) {
            return false;
        }
        carryOut(cue, nowNanos, PlayListener.By.HAND, hands);
        plan();
        return true;
    }

    private void carryOut(Cue cue, long dueNanos, PlayListener.By by, Hands hands) {
        int number = carriedOut++;
        hands.apply(dueNanos, cue, by, () -> actions.carryOut(cue, number, dueNanos, hands));
        if (cue.forNanos() > 0) {
            ends.add(new End(dueNanos + cue.forNanos(), number, cue));
        }
    }

    private void end(Hands hands) {
        End end = ends.remove();
        if (actions.stands(end.cue(), end.number())) {
            hands.apply(
                    end.atNanos(),
                    end.cue(),
                    PlayListener.By.END,
                    () -> actions.end(end.cue(), end.number(), end.atNanos(), hands));
        }
    }

    private void send(Hands hands) {
        arrivals.take();
        hands.send(arrivals.request(), arrivals.dueNanos(), arrivals.traffic(), arrivals.kind(), arrivals.client());
    }

    private long nextCueNanos() {
        return nextCue < cues.size() ? cues.get(nextCue).atNanos() : Long.MAX_VALUE;
    }

    private long nextEndNanos() {
        End next = ends.peek();
        return next == null ? Long.MAX_VALUE : next.atNanos();
    }

    /** The end of a cue's {@code for:}. */
    private record End(long atNanos, int number, Cue cue) {}
}
