package steelyard.backends.behave;

import steelyard.backends.behave.BehaviourSettings.ProbeWork;
import steelyard.backends.behave.Change.Kind;
import steelyard.backends.behave.Places.State;
import steelyard.backends.behave.Places.Task;

/**
 * The queue that a backend is. A request takes a free worker, else waits in order of arrival, else is turned away.
 *
 * <p>It is polled: every call is told the time, and first does all that was planned up to it. When a worker frees at
 * {@code t}, the next request starts at {@code t}, even if the call that finds out comes later. So, with calls given in
 * order of time, replies do not depend on how often or how late {@link #poll} is called. At one instant, planned
 * finishes come before what the call brings.
 *
 * <p>A driver calls {@link #arrive}, {@link #probe}, {@link #read} and {@link #apply} as things happen, and {@link #poll} at
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

    private final BehaviourSettings settings;
    private final Places places = new Places();
    private final Faults faults;
    private final Tally tally;
    private final Work work;
    private final WorkQueue queue;
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
        GaugeBoard gauges = new GaugeBoard(settings.load());
        this.settings = settings;
        this.faults = new Faults(gauges);
        this.tally = new Tally(startNanos, settings.workers(), settings.load() != null);
        this.work = new Work(backend, settings, chance, faults, places);
        this.queue = new WorkQueue(settings, places, work, faults, gauges, tally);
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
        int place = places.take(token, request, attempt, Task.REQUEST, extraNanos, now);
        queue.admit(place, now, sink);
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
        int place = places.take(token, probe, 0, Task.PROBE, 0, now);
        if (!faults.killed() && work.losesProbe(probe)) {
            queue.lose(place, now, sink);
        } else if (settings.probeWork() == ProbeWork.QUEUED || faults.killed() || faults.hanging()) {
            queue.admit(place, now, sink);
        } else {
            queue.startFree(place, work.freeProbeNanos(place), now, sink);
        }
    }

    /**
     * A reading of the load page was asked for. One that costs nothing is answered at once, past the queue; else it waits its
     * turn and holds a worker for its cost, which a fault slows like any work. It shows the gauges of the instant at which it is
     * answered, its own work included.
     *
     * @param token handed back with the reply
     * @param reading number of the reading at this backend
     * @throws IllegalStateException if the backend has no load page
     */
    public void read(long token, long reading, long nowNanos, ReplySink sink) {
        if (settings.load() == null) {
            throw new IllegalStateException("a backend without a load page was read");
        }
        long now = poll(nowNanos, sink);
        tally.readings++;
        int place = places.take(token, reading, 0, Task.READING, 0, now);
        if (work.readingNanos() > 0 || faults.killed() || faults.hanging()) {
            queue.admit(place, now, sink);
        } else {
            queue.startFree(place, 0, now, sink);
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
            queue.loseAll(now, sink);
            sink.connectionsReset(now);
        } else if (change.kind() == Kind.HANG) {
            queue.emptyLine(Reply.SILENCE, now, sink);
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
        queue.finishUpTo(latestNanos, sink);
        return latestNanos;
    }

    /** Whether anything is planned. */
    public boolean hasDeadline() {
        return queue.hasPlans();
    }

    /**
     * When the next plan is due.
     *
     * @throws IllegalStateException if nothing is planned
     */
    public long nextDeadlineNanos() {
        if (!queue.hasPlans()) {
            throw new IllegalStateException("nothing is planned");
        }
        return queue.firstNanos();
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
            if (places.task[place] != Task.REQUEST) {
                continue;
            }
            if (places.state[place] == State.WAITING) {
                waitSoFarNanos += now - places.arrivedNanos[place];
            } else if (places.state[place] == State.STARTED) {
                serviceSoFarNanos += now - places.startedNanos[place];
            }
        }
        return tally.figures(now, waitSoFarNanos, serviceSoFarNanos);
    }
}
