package steelyard.balancer.core.decide;

import steelyard.balancer.core.standing.BackendStanding;

/**
 * Attempts from the pick to their end: who gets them, who waits for a place, and what their ends say of a backend.
 *
 * <p>Whom a try gets, the first of these that holds:
 *
 * <ol>
 *   <li>the backend that its connection follows, while that may be picked, is not full and was not tried yet;
 *   <li>the backend that affinity holds its client to, likewise, or while that drains and keeps its clients;
 *   <li>whom the method picks among those that may be picked and are not full;
 *   <li>nobody yet, where the line has room: a full one may free a place, one that is away may return;
 *   <li>nobody.
 * </ol>
 *
 * The first two take no turn. A client is held to whom it was last given, so one that had to go elsewhere stays there.
 */
final class Attempts {
    private static final int NOBODY = Decider.NOBODY;

    private final Roster roster;

    Attempts(Roster roster) {
        this.roster = roster;
    }

    int pick(Ask ask, long nowNanos) {
        PoolDesk desk = roster.desks[ask.pool];
        if (ask.attempt == 1) {
            desk.retries.firstTry();
        }
        int backend = choose(desk, ask, nowNanos);
        if (backend != NOBODY) {
            begin(desk, ask, backend, nowNanos);
            return backend;
        }
        if (desk.line.hasRoom() && ask.triedCount() < desk.members()) {
            desk.line.join(ask, nowNanos);
            roster.rescheduleLine(ask.pool);
            roster.sink.waited(nowNanos, ask.pool, ask.request, ask.attempt, desk.line.waiting());
            return Decider.WAITING;
        }
        nobody(desk, ask, nowNanos);
        return NOBODY;
    }

    void ended(int backend, long request, int attempt, Outcome outcome, int status, long nowNanos) {
        PoolDesk desk = roster.deskOf(backend);
        int member = roster.member(backend);
        if (desk.inFlight(member) == 0) {
            throw new IllegalStateException("request " + request + " ended on backend " + backend + ", which has none");
        }
        int count = desk.ended(member, outcome == Outcome.ANSWERED, nowNanos);
        roster.sink.ended(nowNanos, backend, request, attempt, outcome, status, count);
        if (outcome.saysOfBackend()) {
            said(backend, outcome != Outcome.ANSWERED || status >= 500, nowNanos);
        }
    }

    /** One that is benched while it drains or is down shows no change, and is freed in time all the same. */
    private void said(int backend, boolean failure, long nowNanos) {
        BackendStanding standing = roster.standing(backend);
        boolean wasBenched = standing.benched();
        roster.stood(backend, standing.ended(failure, roster.deskOf(backend).benchRoom, nowNanos), nowNanos);
        if (standing.benched() != wasBenched) {
            roster.reschedule(backend, nowNanos);
        }
    }

    /** Whether the ticket was still waiting; it is not any more. */
    boolean leave(long ticket, long nowNanos) {
        for (int pool = 0; pool < roster.desks.length; pool++) {
            PoolDesk desk = roster.desks[pool];
            int place = desk.line.find(ticket);
            if (place >= 0) {
                notMade(desk, desk.line.at(place));
                desk.line.remove(place);
                roster.rescheduleLine(pool);
                return true;
            }
        }
        return false;
    }

    /**
     * Gives places to those that wait, in order, and sends away those whose time is over. A retry whose backends were all
     * tried is passed over: a place that it cannot take must not stand empty.
     */
    void serve(int pool, long nowNanos) {
        PoolDesk desk = roster.desks[pool];
        WaitingLine line = desk.line;
        if (line.waiting() == 0) {
            return;
        }
        int place = 0;
        while (place < line.waiting()) {
            Ask ask = line.at(place);
            int backend = NOBODY;
            if (nowNanos - line.untilNanos(place) >= 0) {
                nobody(desk, ask, nowNanos);
            } else {
                backend = choose(desk, ask, nowNanos);
                if (backend == NOBODY && ask.triedCount() == 0) {
                    break;
                }
                if (backend == NOBODY) {
                    place++;
                    continue;
                }
                begin(desk, ask, backend, nowNanos);
            }
            line.remove(place);
            roster.orders.place(ask.ticket, backend);
        }
        roster.rescheduleLine(pool);
    }

    // --- inside -----------------------------------------------------------------------------------------------------

    private int choose(PoolDesk desk, Ask ask, long nowNanos) {
        if (ask.pinned != NOBODY && keeps(desk, ask, ask.pinned, false)) {
            return ask.pinned;
        }
        int held = held(desk, ask, nowNanos);
        if (held != NOBODY && keeps(desk, ask, held, desk.drain().keepsClients())) {
            return held;
        }
        int member = ask.attempt == 1 ? desk.pickFirst(ask, nowNanos) : pickAgain(desk, ask, nowNanos);
        return member == NOBODY ? NOBODY : roster.firstOf(ask.pool) + member;
    }

    private static int held(PoolDesk desk, Ask ask, long nowNanos) {
        if (desk.affinity == null) {
            return NOBODY;
        }
        return desk.clients == null ? ask.held : desk.clients.heldBy(ask.client, nowNanos);
    }

    private boolean keeps(PoolDesk desk, Ask ask, int backend, boolean whileDraining) {
        int member = backend - roster.firstOf(ask.pool);
        return backend >= roster.firstOf(ask.pool)
                && backend < roster.endOf(ask.pool)
                && !ask.tried(backend)
                && !desk.full(member)
                && (desk.open(member)
                        || whileDraining && roster.standing(backend).servesUntilLimit());
    }

    private int pickAgain(PoolDesk desk, Ask ask, long nowNanos) {
        // The pool knows its backends by their place in it; the asker's array gets its numbers back below.
        int first = roster.firstOf(ask.pool);
        int[] tried = ask.tried();
        int count = ask.triedCount();
        for (int i = 0; i < count; i++) {
            tried[i] -= first;
        }
        int member = desk.pickAgain(ask, tried, count, nowNanos);
        for (int i = 0; i < count; i++) {
            tried[i] += first;
        }
        return member;
    }

    private void begin(PoolDesk desk, Ask ask, int backend, long nowNanos) {
        int count = desk.began(roster.member(backend), nowNanos);
        if (desk.clients != null) {
            desk.clients.hold(ask.client, backend, nowNanos);
        }
        roster.sink.picked(nowNanos, ask.pool, backend, ask.request, ask.attempt, count);
    }

    private void nobody(PoolDesk desk, Ask ask, long nowNanos) {
        notMade(desk, ask);
        roster.sink.nobody(nowNanos, ask.pool, ask.request, ask.attempt);
    }

    private static void notMade(PoolDesk desk, Ask ask) {
        if (ask.attempt > 1) {
            desk.retries.giveBack();
        }
    }
}
