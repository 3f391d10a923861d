package steelyard.harness.judge;

import java.util.Arrays;
import steelyard.balancer.core.decide.Outcome;
import steelyard.harness.record.Words;

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
    private final long[] apart = new long[OUTCOMES.length];
    private final long[] unread = new long[OUTCOMES.length];
    private long agreed;
    private long differing;
    private long pickedTwice;
    private long endedUnpicked;
    private long readUnsent;
    private long leftUnread;
    private long belated;
    private long foreign;
    private long openInBalancer;
    private long openInBackend;
    private long leftBehind;
    private long connections;

    /** @param byConnection by backend: whether it is reached by connections that are passed on as they come */
    AttemptLedger(boolean[] byConnection) {
        this.byConnection = byConnection;
        timeNanos = new long[byConnection.length];
    }

    void picked(long atNanos, int backend, long request, int attempt) {
        long key = key(request, attempt);
        if (find(key) >= 0) {
            pickedTwice++;
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
            endedUnpicked++;
            return;
        }
        if (backendOf[place] != backend) {
            differing++;
        }
        timeNanos[backend] += atNanos - pickNanos[place];
        if (byConnection[backend]) {
            connections++;
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
            foreign++;
            return;
        }
        int place = find(key(request, attempt));
        if (place < 0) {
            place = add(key(request, attempt));
            backendOf[place] = backend;
            state[place] = ENDED | RECEIVED | BELATED;
            outcome[place] = (byte) Outcome.ABANDONED.ordinal();
            belated++;
        } else if ((state[place] & RECEIVED) != 0 || backendOf[place] != backend) {
            readUnsent++;
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
            leftUnread++;
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
                openInBalancer += byConnection[backendOf[place]] ? 0 : 1;
                connections += byConnection[backendOf[place]] ? 1 : 0;
            } else if ((state[place] & BELATED) == 0 && OUTCOMES[outcome[place]] == Outcome.ANSWERED) {
                openInBackend++;
            } else {
                leftBehind++;
            }
        }
    }

    /** Sum of the times in flight of a backend's attempts, cut at the end of the play. */
    long timeNanos(int backend) {
        return timeNanos[backend];
    }

    /** @param complete whether the play was played to its end; otherwise attempts that it broke off are no mistake */
    boolean agrees(boolean complete) {
        long unreadSum = Arrays.stream(unread).sum();
        return differing + pickedTwice + endedUnpicked + readUnsent + leftUnread == 0
                && belated <= unreadSum - unread[Outcome.REFUSED.ordinal()]
                && (!complete || openInBalancer + openInBackend == 0);
    }

    String text() {
        StringBuilder text = new StringBuilder().append(agreed).append(" agree");
        for (Outcome each : OUTCOMES) {
            if (apart[each.ordinal()] > 0) {
                text.append(", ").append(apart[each.ordinal()]).append(' ').append(Words.of(each));
                if (unread[each.ordinal()] > 0) {
                    text.append(" (").append(unread[each.ordinal()]).append(" not read)");
                }
            }
        }
        note(text, connections, "were connections, which the balancer alone counts");
        note(text, belated, "read after they were given up");
        note(text, foreign, "not of this play");
        note(text, leftBehind, "given up and left in a backend");
        note(text, differing, "told differently by balancer and backend");
        note(text, pickedTwice, "picked twice");
        note(text, endedUnpicked, "ended twice or never picked");
        note(text, readUnsent, "read twice or by another backend");
        note(text, leftUnread, "ended by a backend twice or without being read");
        note(text, openInBalancer, "never ended by the balancer");
        note(text, openInBackend, "answered but never ended by a backend");
        return text.toString();
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
            count(how, received, (bits & IN_FULL) != 0 && told[place] == answered[place]);
        }
        remove(place);
    }

    private void count(Outcome how, boolean received, boolean inFull) {
        if (how == Outcome.ANSWERED) {
            agreed += inFull ? 1 : 0;
            differing += inFull ? 0 : 1;
            return;
        }
        apart[how.ordinal()]++;
        if (!received) {
            unread[how.ordinal()]++;
        } else if (how == Outcome.REFUSED) {
            differing++;
        }
    }

    private static boolean foreign(long request, int attempt) {
        return request < 0 || attempt == 0;
    }

    private static long key(long request, int attempt) {
        return (request << ATTEMPT_BITS) | attempt;
    }

    private static void note(StringBuilder text, long count, String what) {
        if (count > 0) {
            text.append(", ").append(count).append(' ').append(what);
        }
    }
}
