package steelyard.harness.stage.virtual;

import java.util.Arrays;
import steelyard.balancer.core.decide.Decider;

/**
 * Connections that are passed through as they are, in columns: a passage is an index into all of them, from the client's
 * wish to connect until both the client and the balancer are done with it.
 */
final class Passages extends Slots {
    /** As the balancer would say. */
    enum State {
        FREE,
        /** On its way to the balancer. */
        COMING,
        /** Every backend is full. */
        WAITING,
        CONNECTING,
        OPEN,
        /** The client has closed its side, and the backend's end is waited for. */
        ENDING,
        OVER
    }

    private static final int FIRST_CAPACITY = 16;
    static final int NONE = -1;

    State[] state = newStates(FIRST_CAPACITY);
    int[] traffic = new int[FIRST_CAPACITY];
    int[] client = new int[FIRST_CAPACITY];
    /** The client's connection. */
    int[] connection = new int[FIRST_CAPACITY];
    /** The request that is on it, or none. */
    int[] flight = new int[FIRST_CAPACITY];
    /** Whether that request waits at the balancer for the passage to open. */
    boolean[] early = new boolean[FIRST_CAPACITY];
    /** Counted down from -1, so that it is never that of a request. */
    long[] number = new long[FIRST_CAPACITY];

    int[] backend = new int[FIRST_CAPACITY];
    /** The backend has accepted and its end stands. */
    boolean[] accepted = new boolean[FIRST_CAPACITY];
    /** The client has closed it; the balancer learns of it a hop later. */
    boolean[] left = new boolean[FIRST_CAPACITY];

    private long latest;

    Passages() {
        super(FIRST_CAPACITY);
    }

    int open(int stream, int clientOfStream, int onConnection) {
        int passage = takeSlot();
        state[passage] = State.COMING;
        traffic[passage] = stream;
        client[passage] = clientOfStream;
        connection[passage] = onConnection;
        flight[passage] = NONE;
        early[passage] = false;
        number[passage] = --latest;
        backend[passage] = Decider.NOBODY;
        accepted[passage] = false;
        left[passage] = false;
        return passage;
    }

    /** The balancer is done with it, and the client does not know yet. */
    void over(int passage) {
        state[passage] = State.OVER;
        accepted[passage] = false;
    }

    /** Both are done with it. */
    void free(int passage) {
        state[passage] = State.FREE;
        accepted[passage] = false;
        freeSlot(passage);
    }

    /** Whether it counts in flight on a backend. */
    boolean on(int passage, int onBackend) {
        return backend[passage] == onBackend
                && switch (state[passage]) {
                    case CONNECTING, OPEN, ENDING -> true;
                    case FREE, COMING, WAITING, OVER -> false;
                };
    }

    private static State[] newStates(int capacity) {
        State[] states = new State[capacity];
        Arrays.fill(states, State.FREE);
        return states;
    }

    @Override
    void grow(int capacity) {
        int old = state.length;
        state = Arrays.copyOf(state, capacity);
        Arrays.fill(state, old, capacity, State.FREE);
        traffic = Arrays.copyOf(traffic, capacity);
        client = Arrays.copyOf(client, capacity);
        connection = Arrays.copyOf(connection, capacity);
        flight = Arrays.copyOf(flight, capacity);
        early = Arrays.copyOf(early, capacity);
        number = Arrays.copyOf(number, capacity);
        backend = Arrays.copyOf(backend, capacity);
        accepted = Arrays.copyOf(accepted, capacity);
        left = Arrays.copyOf(left, capacity);
    }
}
