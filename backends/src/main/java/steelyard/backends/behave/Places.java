package steelyard.backends.behave;

import java.util.Arrays;

/**
 * What is known of the requests, probes and readings that a behaviour holds, in columns instead of objects: a place is an index
 * into all of them. Places are reused, the last freed first, and the columns grow to the most ever held, so that holding
 * a request allocates nothing once a play is under way.
 */
final class Places {

    /** No place. */
    static final int NOWHERE = -1;

    /** Where the request of a place is. */
    enum State {
        FREE,
        WAITING,
        /** Has a worker, or is free work under way, which needs none. */
        STARTED
    }

    /** Who asks for it. */
    enum Task {
        REQUEST,
        PROBE,
        /** A reading of the load page. */
        READING
    }

    private static final int FIRST_CAPACITY = 16;

    State[] state = newStates(FIRST_CAPACITY);
    long[] token = new long[FIRST_CAPACITY];
    /** Number of the request, the probe or the reading. */
    long[] number = new long[FIRST_CAPACITY];

    int[] attempt = new int[FIRST_CAPACITY];
    Task[] task = newTasks(FIRST_CAPACITY);
    boolean[] holdsWorker = new boolean[FIRST_CAPACITY];
    boolean[] abandoned = new boolean[FIRST_CAPACITY];
    /** Work asked for on top of the drawn demand. */
    long[] extraNanos = new long[FIRST_CAPACITY];

    long[] arrivedNanos = new long[FIRST_CAPACITY];
    long[] startedNanos = new long[FIRST_CAPACITY];
    /** Status that a fault has chosen for the answer, or 0. */
    int[] faultStatus = new int[FIRST_CAPACITY];

    private int[] freed = new int[FIRST_CAPACITY];
    private int freedCount;
    private int used;

    /** A place with the given facts and every other one cleared. */
    int take(long withToken, long withNumber, int withAttempt, Task ofTask, long withExtraNanos, long nowNanos) {
        int place = freedCount > 0 ? freed[--freedCount] : fresh();
        state[place] = State.WAITING;
        token[place] = withToken;
        number[place] = withNumber;
        attempt[place] = withAttempt;
        task[place] = ofTask;
        holdsWorker[place] = false;
        abandoned[place] = false;
        extraNanos[place] = withExtraNanos;
        arrivedNanos[place] = nowNanos;
        startedNanos[place] = nowNanos;
        faultStatus[place] = 0;
        return place;
    }

    void free(int place) {
        state[place] = State.FREE;
        freed[freedCount++] = place;
    }

    boolean holds(int place, long withToken) {
        return place >= 0 && place < used && state[place] != State.FREE && token[place] == withToken;
    }

    /** Upper end of the places ever used: 0..used-1. */
    int used() {
        return used;
    }

    private int fresh() {
        if (used == token.length) {
            grow(used * 2);
        }
        return used++;
    }

    private void grow(int capacity) {
        int old = state.length;
        state = Arrays.copyOf(state, capacity);
        Arrays.fill(state, old, capacity, State.FREE);
        token = Arrays.copyOf(token, capacity);
        number = Arrays.copyOf(number, capacity);
        attempt = Arrays.copyOf(attempt, capacity);
        task = Arrays.copyOf(task, capacity);
        Arrays.fill(task, old, capacity, Task.REQUEST);
        holdsWorker = Arrays.copyOf(holdsWorker, capacity);
        abandoned = Arrays.copyOf(abandoned, capacity);
        extraNanos = Arrays.copyOf(extraNanos, capacity);
        arrivedNanos = Arrays.copyOf(arrivedNanos, capacity);
        startedNanos = Arrays.copyOf(startedNanos, capacity);
        faultStatus = Arrays.copyOf(faultStatus, capacity);
        freed = Arrays.copyOf(freed, capacity);
    }

    private static State[] newStates(int capacity) {
        State[] states = new State[capacity];
        Arrays.fill(states, State.FREE);
        return states;
    }

    private static Task[] newTasks(int capacity) {
        Task[] tasks = new Task[capacity];
        Arrays.fill(tasks, Task.REQUEST);
        return tasks;
    }
}
