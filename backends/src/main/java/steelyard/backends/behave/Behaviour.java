package steelyard.backends.behave;

import org.jspecify.annotations.Nullable;
import steelyard.backends.behave.BehaviourSettings.ProbeWork;
import steelyard.backends.behave.Change.Fail;
import steelyard.backends.behave.Change.Kind;
import steelyard.backends.behave.Change.When;
import steelyard.backends.behave.Places.State;

/**
 * The queue that a backend is. A request takes a free worker, else waits in order of arrival, else is turned away.
 *
 * <p>It is polled: every call is told the time, and first does all that was planned up to it. When a worker frees at
 * {@code t}, the next request starts at {@code t}, even if the call that finds out comes later. So, with calls given in
 * order of time, replies do not depend on how often or how late {@link #poll} is called. At one instant, planned
 * finishes come before what the call brings.
 *
 * <p>A driver calls {@link #arrive}, {@link #probe} and {@link #apply} as things happen, and {@link #poll} at
 * {@link #nextDeadlineNanos}; plans come out of the sink. Instants are compared by subtraction, so the clock may start
 * anywhere; a {@code nowNanos} before that of an earlier call counts as that one.
 *
 * <p>Requests are held in primitive columns, found by place: the hot path allocates nothing once the columns have grown
 * to the most ever held. A request costs O(log workers).
 *
 * <p>One thread at a time.
 */
public final class Behaviour {

    /** What {@link #arrive} returns for a request that is over already. */
    public static final int NOWHERE = Places.NOWHERE;

    /** Sets the draws for lost probes apart from those for faults, whose second key is the bare number below 0. */
    private static final long OF_LOSS = 1L << 32;

    private static final int OK = 200;
    private static final int UNAVAILABLE = 503;

    private final BehaviourSettings settings;
    private final Chance chance;
    private final int probeKey;
    private final Places places = new Places();
    private final WaitingLine line = new WaitingLine();
    private final FinishHeap finishes = new FinishHeap();
    private final Faults faults = new Faults();
    private final Tally tally;
    private long latestNanos;

    /**
     * A healthy backend with nothing to do.
     *
     * @param backend its number in the play, 0 or above: probes draw by it
     * @param startNanos from when its accounts run
     */
    public Behaviour(int backend, BehaviourSettings settings, Chance chance, long startNanos) {
        if (backend < 0) {
            throw new IllegalArgumentException("backend number must be 0 or more, but is " + backend);
        }
        this.settings = settings;
        this.chance = chance;
        // Attempts are counted from 1 (0: not told), so a key below 0 keeps the draws of probes apart from those of
        // requests.
        this.probeKey = -1 - backend;
        this.tally = new Tally(startNanos);
        this.latestNanos = startNanos;
    }

    /**
     * A request was read.
     *
     * @param token handed back with the reply; no two requests held at once may share one
     * @param attempt 1 for the first try, or 0 where it is not known
     * @param extraNanos work on top of the drawn demand, 0 to a day
     * @return its place, for {@link #abandon}, or {@link #NOWHERE} if it is over already
     */
    public int arrive(long token, long request, int attempt, long extraNanos, long nowNanos, ReplySink sink) {
        long now = poll(nowNanos, sink);
        tally.received++;
        int place = places.take(token, request, attempt, false, extraNanos, now);
        admit(place, now, sink);
        return places.holds(place, token) ? place : NOWHERE;
    }

    /**
     * A probe was read. Free probes are answered past the queue, queued ones wait their turn and hold a worker; a lost
     * one is never heard of again, and costs nothing.
     *
     * @param token handed back with the reply
     * @param probe number of the probe at this backend
     */
    public void probe(long token, long probe, long nowNanos, ReplySink sink) {
        long now = poll(nowNanos, sink);
        tally.probes++;
        int place = places.take(token, probe, 0, true, 0, now);
        if (!faults.killed() && loses(probe)) {
            end(place, Reply.SILENCE, 0, now, sink);
        } else if (settings.probeWork() == ProbeWork.QUEUED || faults.killed() || faults.hanging()) {
            admit(place, now, sink);
        } else {
            startFreeProbe(place, now);
            finishUpTo(now, sink);
        }
    }

    /** Applies a change, after all that was planned up to now. */
    public void apply(Change change, long nowNanos, ReplySink sink) {
        long now = poll(nowNanos, sink);
        boolean wasListening = faults.listening();
        faults.apply(change, now);
        if (faults.listening() != wasListening) {
            sink.listening(faults.listening(), now);
        }
        if (change.kind() == Kind.KILL) {
            loseAll(now, sink);
            sink.connectionsReset(now);
        } else if (change.kind() == Kind.HANG) {
            emptyLine(Reply.SILENCE, now, sink);
        }
    }

    /**
     * The connection of a request closed before its reply. The work goes on to its end and is then dropped. Nothing
     * happens if the request is over.
     *
     * @param place as returned by {@link #arrive} for this token
     */
    public void abandon(int place, long token, long nowNanos, ReplySink sink) {
        poll(nowNanos, sink);
        if (places.holds(place, token) && !places.abandoned[place]) {
            places.abandoned[place] = true;
            tally.abandoned++;
        }
    }

    /**
     * Does all that is planned up to and including now.
     *
     * @return now, or the instant of an earlier call if that is later
     */
    public long poll(long nowNanos, ReplySink sink) {
        if (nowNanos - latestNanos > 0) {
            latestNanos = nowNanos;
        }
        finishUpTo(latestNanos, sink);
        return latestNanos;
    }

    /** Whether anything is planned. */
    public boolean hasDeadline() {
        return !finishes.isEmpty();
    }

    /**
     * When the next plan is due.
     *
     * @throws IllegalStateException if nothing is planned
     */
    public long nextDeadlineNanos() {
        if (finishes.isEmpty()) {
            throw new IllegalStateException("nothing is planned");
        }
        return finishes.firstNanos();
    }

    /** Whether new connections are accepted. */
    public boolean listening() {
        return faults.listening();
    }

    /** Whether requests and probes are met with silence. */
    public boolean hanging() {
        return faults.hanging();
    }

    /** The accounts, after all that was planned up to now. Costs a walk over the requests held. */
    public Figures figures(long nowNanos, ReplySink sink) {
        long now = poll(nowNanos, sink);
        tally.advanceTo(now);
        long waitSoFarNanos = 0;
        long serviceSoFarNanos = 0;
        for (int place = 0; place < places.used(); place++) {
            if (places.probe[place]) {
                continue;
            }
            if (places.state[place] == State.WAITING) {
                waitSoFarNanos += now - places.arrivedNanos[place];
            } else if (places.state[place] == State.STARTED) {
                serviceSoFarNanos += now - places.startedNanos[place];
            }
        }
        return tally.figures(now, waitSoFarNanos, serviceSoFarNanos, settings.workers());
    }

    /** Whether chance loses a probe: by the backend's number and the probe's. */
    private boolean loses(long probe) {
        return settings.probeLoss() > 0 && chance.unit(Stream.FAULT, probe, OF_LOSS - probeKey) < settings.probeLoss();
    }

    private void admit(int place, long now, ReplySink sink) {
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

    private void finishUpTo(long now, ReplySink sink) {
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

    private void start(int place, long atNanos) {
        tally.advanceTo(atNanos);
        tally.workerTaken();
        if (!places.probe[place]) {
            tally.startedService();
        }
        places.holdsWorker[place] = true;
        long number = places.number[place];
        long key = drawKey(place);
        Fail fail = faults.failing(chance, places.probe[place], number, key);
        long workNanos = fail != null && fail.when() == When.AT_ONCE
                ? 0
                : faults.slowed(demandNanos(place) + places.extraNanos[place]);
        plan(place, fail, atNanos, workNanos);
    }

    private void startFreeProbe(int place, long now) {
        Fail fail = faults.failing(chance, true, places.number[place], drawKey(place));
        long lateNanos = 0;
        if (faults.slowsFreeProbes()) {
            long demandNanos = demandNanos(place);
            lateNanos = Math.max(0, faults.slowed(demandNanos) - demandNanos);
        }
        plan(place, fail, now, lateNanos);
    }

    private void plan(int place, @Nullable Fail fail, long atNanos, long workNanos) {
        places.state[place] = State.STARTED;
        places.startedNanos[place] = atNanos;
        places.faultStatus[place] = fail == null ? 0 : fail.status();
        finishes.add(place, atNanos + workNanos);
    }

    private void finish(int place, long atNanos, ReplySink sink) {
        int status = places.faultStatus[place];
        if (places.probe[place] && status == 0 && faults.failsProbes(atNanos)) {
            status = UNAVAILABLE;
        }
        leaveWorker(place, atNanos);
        if (places.abandoned[place]) {
            end(place, Reply.DROPPED, 0, atNanos, sink);
        } else if (status != 0) {
            end(place, Reply.FAULT, status, atNanos, sink);
        } else {
            end(place, Reply.ANSWER, places.probe[place] ? OK : settings.status(), atNanos, sink);
        }
    }

    private void loseAll(long now, ReplySink sink) {
        while (!finishes.isEmpty()) {
            int place = finishes.remove();
            leaveWorker(place, now);
            end(place, Reply.LOST, 0, now, sink);
        }
        emptyLine(Reply.LOST, now, sink);
    }

    private void emptyLine(Reply reply, long now, ReplySink sink) {
        while (!line.isEmpty()) {
            end(leaveLine(now), reply, 0, now, sink);
        }
    }

    private void joinLine(int place, long now) {
        tally.advanceTo(now);
        line.add(place);
        if (!places.probe[place]) {
            tally.joinedLine();
        }
    }

    private int leaveLine(long atNanos) {
        tally.advanceTo(atNanos);
        int place = line.remove();
        if (!places.probe[place]) {
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
        if (!places.probe[place]) {
            tally.endedService(atNanos - places.startedNanos[place]);
        }
    }

    private void end(int place, Reply reply, int status, long atNanos, ReplySink sink) {
        long token = places.token[place];
        long number = places.number[place];
        int attempt = places.attempt[place];
        boolean probe = places.probe[place];
        places.free(place);
        if (probe) {
            tally.probeEnded(reply, status);
            sink.probeReply(token, number, reply, status, atNanos);
        } else {
            tally.ended(reply);
            int bodyBytes = reply == Reply.ANSWER ? settings.bodyBytes() : 0;
            sink.reply(token, number, attempt, reply, status, bodyBytes, atNanos);
        }
    }

    private long demandNanos(int place) {
        return settings.time().demandNanos(chance, places.number[place], drawKey(place));
    }

    private int drawKey(int place) {
        return places.probe[place] ? probeKey : places.attempt[place];
    }
}
