package steelyard.harness.judge;

import steelyard.balancer.core.decide.Outcome;

/**
 * Attempts as the balancer and the backends tell of them, matched by request and attempt number. An entry goes when
 * both sides have ended it, or when the balancer's attempt failed before a backend had read it: such a one may still be
 * read later, and is then matched by count.
 *
 * <p>Where octets are passed on as they come, the balancer tells of connections, under numbers below zero, and the
 * backends of the requests in them. There is nothing to match then; the connections' times in flight still count.
 */
final class AttemptLedger extends LongTable {
    private static final int ATTEMPT_BITS = 8;
    private static final Outcome[] OUTCOMES = Outcome.values();

    private static final int ENDED = 1;
    private static final int RECEIVED = 2;
    private static final int LEFT = 4;
    private static final int IN_FULL = 8;
    /** Read by a backend after the balancer had given it up and its entry had gone. */
    private static final int BELATED = 16;

    private int[] backendOf = new int[capacity()];
    private byte[] state = new byte[capacity()];
    private byte[] outcome = new byte[capacity()];
    private short[] told = new short[capacity()];
    private short[] answered = new short[capacity()];
    private long[] pickNanos = new long[capacity()];

    /** By backend: whether it is reached by connections that are passed on as they come. */
    private final boolean[] byConnection;

    private final long[] timeNanos;
    private final AttemptTally tally = new AttemptTally();

    /** @param byConnection by backend: whether it is reached by connections that are passed on as they come */
    AttemptLedger(boolean[] byConnection) {
        this.byConnection = byConnection;
        timeNanos = new long[byConnection.length];
    }

    void picked(long atNanos, int backend, long request, int attempt) {
        long key = key(request, attempt);
        if (find(key) >= 0) {
            tally.pickedTwice++;
            return;
        }
        int place = add(key);
        backendOf[place] = backend;
        state[place] = 0;
        pickNanos[place] = atNanos;
    }

    void ended(long atNanos, int backend, long request, int attempt, Outcome how, int status) {
        int place = find(key(request, attempt));
        if (place < 0 || (state[place] & ENDED) != 0) {
            tally.endedUnpicked++;
            return;
        }
        if (backendOf[place] != backend) {
            tally.differing++;
        }
        timeNanos[backend] += atNanos - pickNanos[place];
        if (byConnection[backend]) {
            tally.connections++;
            remove(place);
            return;
        }
        state[place] |= ENDED;
        outcome[place] = (byte) how.ordinal();
        told[place] = (short) status;
        settle(place);
    }

    void received(int backend, long request, int attempt) {
        if (byConnection[backend]) {
            return;
        }
        if (foreign(request, attempt)) {
            tally.foreign++;
            return;
        }
        int place = find(key(request, attempt));
        if (place < 0) {
            place = add(key(request, attempt));
            backendOf[place] = backend;
            state[place] = ENDED | RECEIVED | BELATED;
            outcome[place] = (byte) Outcome.ABANDONED.ordinal();
            tally.belated++;
        } else if ((state[place] & RECEIVED) != 0 || backendOf[place] != backend) {
            tally.readUnsent++;
        } else {
            state[place] |= RECEIVED;
        }
    }

    void left(int backend, long request, int attempt, boolean inFull, int status) {
        if (byConnection[backend] || foreign(request, attempt)) {
            return;
        }
        int place = find(key(request, attempt));
        if (place < 0 || (state[place] & (RECEIVED | LEFT)) != RECEIVED || backendOf[place] != backend) {
            tally.leftUnread++;
            return;
        }
        state[place] |= (byte) (LEFT | (inFull ? IN_FULL : 0));
        answered[place] = (short) status;
        settle(place);
    }

    /** The play is over: attempts still open count up to now. */
    void close(long atNanos) {
        for (int place = 0; place < capacity(); place++) {
            if (!used(place)) {
                continue;
            }
            if ((state[place] & ENDED) == 0) {
                timeNanos[backendOf[place]] += atNanos - pickNanos[place];
                tally.openInBalancer += byConnection[backendOf[place]] ? 0 : 1;
                tally.connections += byConnection[backendOf[place]] ? 1 : 0;
            } else if ((state[place] & BELATED) == 0 && OUTCOMES[outcome[place]] == Outcome.ANSWERED) {
                tally.openInBackend++;
            } else {
                tally.leftBehind++;
            }
        }
    }

    /** Sum of the times in flight of a backend's attempts, cut at the end of the play. */
    long timeNanos(int backend) {
        return timeNanos[backend];
    }

    /** What matching has come to. */
    AttemptTally tally() {
        return tally;
    }

    @Override
    void moved(int from, int to) {
        backendOf[to] = backendOf[from];
        state[to] = state[from];
        outcome[to] = outcome[from];
        told[to] = told[from];
        answered[to] = answered[from];
        pickNanos[to] = pickNanos[from];
    }

    @Override
    void grown(int capacity, int[] places) {
        int[] oldBackendOf = backendOf;
        byte[] oldState = state;
        byte[] oldOutcome = outcome;
        short[] oldTold = told;
        short[] oldAnswered = answered;
        long[] oldPickNanos = pickNanos;
        backendOf = new int[capacity];
        state = new byte[capacity];
        outcome = new byte[capacity];
        told = new short[capacity];
        answered = new short[capacity];
        pickNanos = new long[capacity];
        for (int old = 0; old < places.length; old++) {
            int place = places[old];
            if (place >= 0) {
                backendOf[place] = oldBackendOf[old];
                state[place] = oldState[old];
                outcome[place] = oldOutcome[old];
                told[place] = oldTold[old];
                answered[place] = oldAnswered[old];
                pickNanos[place] = oldPickNanos[old];
            }
        }
    }

    private void settle(int place) {
        int bits = state[place];
        Outcome how = OUTCOMES[outcome[place]];
        boolean received = (bits & RECEIVED) != 0;
        boolean done = (bits & ENDED) != 0 && ((bits & LEFT) != 0 || (how != Outcome.ANSWERED && !received));
        if (!done) {
            return;
        }
        if ((bits & BELATED) == 0) {
            tally.count(how, received, (bits & IN_FULL) != 0 && told[place] == answered[place]);
        }
        remove(place);
    }

    private static boolean foreign(long request, int attempt) {
        return request < 0 || attempt == 0;
    }

    private static long key(long request, int attempt) {
        return (request << ATTEMPT_BITS) | attempt;
    }
}
