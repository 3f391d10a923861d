package steelyard.backends.behave;

import java.util.Map;
import org.jspecify.annotations.Nullable;
import steelyard.backends.behave.Change.Fail;
import steelyard.backends.behave.Places.State;
import steelyard.backends.behave.Places.Task;

/**
 * The workers, the line before them and the planned finishes: who starts when, and how each ends. Every caller has brought it up
 * to the instant it names, by {@link #finishUpTo}.
 */
final class WorkQueue {

    private static final int OK = 200;
    private static final int UNAVAILABLE = 503;

    private final BehaviourSettings settings;
    private final Places places;
    private final Work work;
    private final Faults faults;
    private final GaugeBoard gauges;
    private final Tally tally;
    private final WaitingLine line = new WaitingLine();
    private final FinishHeap finishes = new FinishHeap();

    WorkQueue(BehaviourSettings settings, Places places, Work work, Faults faults, GaugeBoard gauges, Tally tally) {
        this.settings = settings;
        this.places = places;
        this.work = work;
        this.faults = faults;
        this.gauges = gauges;
        this.tally = tally;
    }

    boolean hasPlans() {
        return !finishes.isEmpty();
    }

    /** When the first plan is due; there must be one. */
    long firstNanos() {
        return finishes.firstNanos();
    }

    /** Gives what is at this place a worker, a place in the line or its end. */
    void admit(int place, long now, ReplySink sink) {
        if (faults.killed()) {
            end(place, Reply.LOST, 0, now, sink);
        } else if (faults.hanging()) {
            end(place, Reply.SILENCE, 0, now, sink);
        } else if (tally.busyWorkers() < settings.workers()) {
            start(place, now);
            finishUpTo(now, sink);
        } else if (line.size() < settings.queue()) {
            joinLine(place, now);
        } else {
            end(place, Reply.TURNED_AWAY, UNAVAILABLE, now, sink);
        }
    }

    /** Starts a probe or a reading that needs no worker. */
    void startFree(int place, long lateNanos, long now, ReplySink sink) {
        plan(place, work.failing(place), now, lateNanos);
        finishUpTo(now, sink);
    }

    /** Ends a probe that is never answered. */
    void lose(int place, long now, ReplySink sink) {
        end(place, Reply.SILENCE, 0, now, sink);
    }

    /** Does all that is planned up to and including now, each piece at its own instant. */
    void finishUpTo(long now, ReplySink sink) {
        while (!finishes.isEmpty() && finishes.firstNanos() - now <= 0) {
            long finishNanos = finishes.firstNanos();
            int place = finishes.remove();
            boolean freesWorker = places.holdsWorker[place];
            finish(place, finishNanos, sink);
            if (freesWorker && !line.isEmpty()) {
                start(leaveLine(finishNanos), finishNanos);
            }
        }
    }

    /** Everything held is lost. */
    void loseAll(long now, ReplySink sink) {
        while (!finishes.isEmpty()) {
            int place = finishes.remove();
            leaveWorker(place, now);
            end(place, Reply.LOST, 0, now, sink);
        }
        emptyLine(Reply.LOST, now, sink);
    }

    /** Ends everything that waits. */
    void emptyLine(Reply reply, long now, ReplySink sink) {
        while (!line.isEmpty()) {
            end(leaveLine(now), reply, 0, now, sink);
        }
    }

    private void start(int place, long atNanos) {
        tally.advanceTo(atNanos);
        tally.workerTaken();
        if (places.task[place] == Task.REQUEST) {
            tally.startedService();
        }
        places.holdsWorker[place] = true;
        Fail fail = work.failing(place);
        plan(place, fail, atNanos, work.nanos(place, fail, atNanos));
    }

    private void plan(int place, @Nullable Fail fail, long atNanos, long workNanos) {
        places.state[place] = State.STARTED;
        places.startedNanos[place] = atNanos;
        places.faultStatus[place] = fail == null ? 0 : fail.status();
        finishes.add(place, atNanos + workNanos);
    }

    private void finish(int place, long atNanos, ReplySink sink) {
        int status = places.faultStatus[place];
        if (places.task[place] == Task.PROBE && status == 0 && faults.failsProbes(atNanos)) {
            status = UNAVAILABLE;
        }
        leaveWorker(place, atNanos);
        if (places.abandoned[place]) {
            end(place, Reply.DROPPED, 0, atNanos, sink);
        } else if (status != 0) {
            end(place, Reply.FAULT, status, atNanos, sink);
        } else {
            int good = places.task[place] == Task.REQUEST ? settings.status() : OK;
            end(place, Reply.ANSWER, good, atNanos, sink);
        }
    }

    private void joinLine(int place, long now) {
        tally.advanceTo(now);
        line.add(place);
        if (places.task[place] == Task.REQUEST) {
            tally.joinedLine();
        }
    }

    private int leaveLine(long atNanos) {
        tally.advanceTo(atNanos);
        int place = line.remove();
        if (places.task[place] == Task.REQUEST) {
            tally.leftLine(atNanos - places.arrivedNanos[place]);
        }
        return place;
    }

    private void leaveWorker(int place, long atNanos) {
        if (!places.holdsWorker[place]) {
            return;
        }
        tally.advanceTo(atNanos);
        tally.workerFreed();
        if (places.task[place] == Task.REQUEST) {
            tally.endedService(atNanos - places.startedNanos[place]);
        }
    }

    private void end(int place, Reply reply, int status, long atNanos, ReplySink sink) {
        long token = places.token[place];
        long number = places.number[place];
        int attempt = places.attempt[place];
        Task task = places.task[place];
        places.free(place);
        switch (task) {
            case REQUEST -> {
                tally.ended(reply);
                int bodyBytes = reply == Reply.ANSWER ? settings.bodyBytes() : 0;
                sink.reply(token, number, attempt, reply, status, bodyBytes, atNanos);
            }
            case PROBE -> {
                tally.probeEnded(reply, status);
                sink.probeReply(token, number, reply, status, atNanos);
            }
            case READING -> {
                tally.readingEnded(reply);
                Map<String, Double> values =
                        reply == Reply.ANSWER ? gauges.values(tally.busyShare(atNanos), tally.held()) : Map.of();
                sink.readingReply(token, number, reply, status, values, atNanos);
            }
        }
    }
}
