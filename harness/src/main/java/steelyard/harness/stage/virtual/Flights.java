package steelyard.harness.stage.virtual;

import java.util.Arrays;

/**
 * Requests on their way, in columns: a flight is an index into all of them, reused when its request is over for client and
 * balancer alike.
 */
final class Flights extends Slots {
    private static final int FIRST_CAPACITY = 64;

    /** Where a request is, as the balancer would say. */
    enum State {
        FREE,
        TO_BALANCER,
        /** Every backend is full, and the next attempt waits for one. */
        WAITING,
        /** An attempt is under way. */
        ATTEMPTED,
        /** It went through on a connection of its client's. */
        PASSED,
        /** The backend agreed to go over to another protocol, and a tunnel stands. */
        TUNNEL,
        TO_CLIENT
    }

    State[] state = newStates(FIRST_CAPACITY);
    long[] request = new long[FIRST_CAPACITY];
    long[] dueNanos = new long[FIRST_CAPACITY];
    int[] traffic = new int[FIRST_CAPACITY];
    int[] kind = new int[FIRST_CAPACITY];
    int[] client = new int[FIRST_CAPACITY];
    int[] connection = new int[FIRST_CAPACITY];
    /** The connection through the balancer that it is on; only where connections are passed through. */
    int[] passage = new int[FIRST_CAPACITY];
    /** The backend that the client's cookie names; only where cookies hold clients. */
    int[] held = new int[FIRST_CAPACITY];

    int[] attempt = new int[FIRST_CAPACITY];
    int[] backend = new int[FIRST_CAPACITY];
    /** Where the behaviour holds it, or -1. */
    int[] place = new int[FIRST_CAPACITY];
    /** Whether the backend read it and fell silent about it. */
    boolean[] silent = new boolean[FIRST_CAPACITY];
    /** What the client gets if nothing better comes: status of the answer, and ordinal of the cause of its failure or -1. */
    int[] status = new int[FIRST_CAPACITY];

    int[] cause = new int[FIRST_CAPACITY];
    boolean[] closes = new boolean[FIRST_CAPACITY];
    /** When the client's tunnel stood, or {@link Lane#NEVER}. Who ends it clears that: most flights have none. */
    long[] openedNanos = never(FIRST_CAPACITY);
    /** The client has its end, good or bad. */
    boolean[] told = new boolean[FIRST_CAPACITY];

    int[] triedCount = new int[FIRST_CAPACITY];
    int[][] tried = new int[FIRST_CAPACITY][];

    private final int mostTried;

    /** @param mostTried attempts a request */
    Flights(int mostTried) {
        super(FIRST_CAPACITY);
        this.mostTried = mostTried;
        makeTried(0);
    }

    /** Whether the client of a request still waits for its end. */
    boolean waits(int flight, long requestNumber) {
        return request[flight] == requestNumber
                && !told[flight]
                && state[flight] != State.FREE
                && openedNanos[flight] == Lane.NEVER;
    }

    int take(long requestNumber, long due, int trafficNumber, int kindNumber, int clientNumber, int connectionNumber) {
        int flight = takeSlot();
        state[flight] = State.TO_BALANCER;
        request[flight] = requestNumber;
        dueNanos[flight] = due;
        traffic[flight] = trafficNumber;
        kind[flight] = kindNumber;
        client[flight] = clientNumber;
        connection[flight] = connectionNumber;
        attempt[flight] = 0;
        backend[flight] = -1;
        place[flight] = -1;
        silent[flight] = false;
        status[flight] = 0;
        cause[flight] = -1;
        closes[flight] = false;
        told[flight] = false;
        triedCount[flight] = 0;
        return flight;
    }

    /** An attempt begins. */
    void attempted(int flight, int number, int onBackend) {
        state[flight] = State.ATTEMPTED;
        attempt[flight] = number;
        backend[flight] = onBackend;
        place[flight] = -1;
        silent[flight] = false;
        nextLeg(flight);
    }

    /** It goes through to a backend. */
    void passed(int flight, int toBackend) {
        state[flight] = State.PASSED;
        backend[flight] = toBackend;
        nextLeg(flight);
    }

    /** The attempt under way has become a tunnel. */
    void tunnel(int flight) {
        state[flight] = State.TUNNEL;
        nextLeg(flight);
    }

    /** The attempt with that number waits for a backend. */
    void waiting(int flight, int number) {
        state[flight] = State.WAITING;
        attempt[flight] = number;
    }

    /** The attempt under way is over. */
    void ended(int flight) {
        if (triedCount[flight] < mostTried) {
            tried[flight][triedCount[flight]++] = backend[flight];
        }
        nextLeg(flight);
    }

    /** Notes what the client gets unless another attempt succeeds; {@code causeOrdinal} is -1 for a backend's answer. */
    void note(int flight, int withStatus, int causeOrdinal) {
        status[flight] = withStatus;
        cause[flight] = causeOrdinal;
    }

    /** The answer to the client, as noted, is on its way. */
    void replied(int flight) {
        state[flight] = State.TO_CLIENT;
    }

    boolean attemptOn(int flight, int onBackend) {
        return state[flight] == State.ATTEMPTED && backend[flight] == onBackend;
    }

    boolean tunnelOn(int flight, int onBackend) {
        return state[flight] == State.TUNNEL && backend[flight] == onBackend;
    }

    void free(int flight) {
        state[flight] = State.FREE;
        freeSlot(flight);
    }

    private static long[] never(int capacity) {
        long[] all = new long[capacity];
        Arrays.fill(all, Lane.NEVER);
        return all;
    }

    private static State[] newStates(int capacity) {
        State[] states = new State[capacity];
        Arrays.fill(states, State.FREE);
        return states;
    }

    private void makeTried(int from) {
        for (int flight = from; flight < tried.length; flight++) {
            tried[flight] = new int[mostTried];
        }
    }

    @Override
    void grow(int capacity) {
        int old = state.length;
        state = Arrays.copyOf(state, capacity);
        Arrays.fill(state, old, capacity, State.FREE);
        request = Arrays.copyOf(request, capacity);
        dueNanos = Arrays.copyOf(dueNanos, capacity);
        traffic = Arrays.copyOf(traffic, capacity);
        kind = Arrays.copyOf(kind, capacity);
        client = Arrays.copyOf(client, capacity);
        connection = Arrays.copyOf(connection, capacity);
        passage = Arrays.copyOf(passage, capacity);
        held = Arrays.copyOf(held, capacity);
        attempt = Arrays.copyOf(attempt, capacity);
        backend = Arrays.copyOf(backend, capacity);
        place = Arrays.copyOf(place, capacity);
        silent = Arrays.copyOf(silent, capacity);
        status = Arrays.copyOf(status, capacity);
        cause = Arrays.copyOf(cause, capacity);
        closes = Arrays.copyOf(closes, capacity);
        openedNanos = Arrays.copyOf(openedNanos, capacity);
        Arrays.fill(openedNanos, old, capacity, Lane.NEVER);
        told = Arrays.copyOf(told, capacity);
        triedCount = Arrays.copyOf(triedCount, capacity);
        tried = Arrays.copyOf(tried, capacity);
        makeTried(old);
    }
}
