package steelyard.harness.stage.virtual;

import java.util.Arrays;
import java.util.List;
import steelyard.balancer.core.decide.Decider;
import steelyard.drills.model.Traffic;

/**
 * The clients' connections to the front: each client keeps as many as it needs at once, takes up the one used last, and
 * has closed whatever was idle for longer than its limit.
 */
final class Connections {
    private static final int NONE = -1;
    /** Idle since then: closed, or in use. Far from every play time, and its distance to one is no overflow. */
    private static final long CLOSED = Long.MIN_VALUE / 2;

    private final int[] firstClient;
    private final int cap;
    private final long idleLimitNanos;
    private final int[] idleTop;
    private int[] below = new int[64];
    private int[] client = new int[64];
    private int[] pinned = new int[64];
    private int[] passage = new int[64];
    private long[] idleSinceNanos = new long[64];
    private int used;
    private int freeTop = NONE;
    private int open;
    private boolean fresh;

    /** @param cap on all connections together */
    Connections(List<Traffic> traffic, int cap, long idleLimitNanos) {
        this.cap = cap;
        this.idleLimitNanos = idleLimitNanos;
        firstClient = new int[traffic.size()];
        int clients = 0;
        for (int stream = 0; stream < firstClient.length; stream++) {
            firstClient[stream] = clients;
            clients += traffic.get(stream).clients();
        }
        idleTop = new int[clients];
        Arrays.fill(idleTop, NONE);
    }

    /** A connection of a client of a stream for one request, or -1 when the cap on all connections is hit. */
    int take(int traffic, int clientOfStream, long nowNanos) {
        int owner = firstClient[traffic] + clientOfStream;
        int top = idleTop[owner];
        if (top != NONE && nowNanos - idleSinceNanos[top] < idleLimitNanos) {
            idleTop[owner] = below[top];
            fresh = false;
            return top;
        }
        top = firstAlive(top, nowNanos);
        fresh = top == NONE;
        if (fresh) {
            idleTop[owner] = NONE;
            return open < cap ? connect(owner) : NONE;
        }
        idleTop[owner] = below[top];
        return top;
    }

    /** Drops what broke while idle; where one has been idle too long, those below it have too. */
    private int firstAlive(int top, long nowNanos) {
        int each = top;
        while (each != NONE && nowNanos - idleSinceNanos[each] >= idleLimitNanos) {
            int next = below[each];
            if (idleSinceNanos[each] == CLOSED) {
                recycle(each);
            } else {
                close(each);
            }
            each = next;
        }
        return each;
    }

    /** Whether the connection just taken had to be made. */
    boolean fresh() {
        return fresh;
    }

    /** A request on it is over and it stays open. */
    void idle(int connection, long nowNanos) {
        int owner = client[connection];
        idleSinceNanos[connection] = nowNanos;
        below[connection] = idleTop[owner];
        idleTop[owner] = connection;
    }

    /** One that a request is on. */
    void close(int connection) {
        open--;
        recycle(connection);
    }

    /** One that nothing is on; it is dropped when its client comes upon it. */
    void closeIdle(int connection) {
        open--;
        idleSinceNanos[connection] = CLOSED;
    }

    boolean idleSince(int connection, long sinceNanos) {
        return idleSinceNanos[connection] == sinceNanos;
    }

    private void recycle(int connection) {
        below[connection] = freeTop;
        freeTop = connection;
    }

    /** The passage through the balancer that a connection is. */
    int passage(int connection) {
        return passage[connection];
    }

    void passes(int connection, int asPassage) {
        passage[connection] = asPassage;
    }

    int pinned(int connection) {
        return pinned[connection];
    }

    void pin(int connection, int backend) {
        pinned[connection] = backend;
    }

    private int connect(int owner) {
        int connection = freeTop;
        if (connection != NONE) {
            freeTop = below[connection];
        } else {
            connection = used++;
            if (used > below.length) {
                grow();
            }
        }
        open++;
        client[connection] = owner;
        pinned[connection] = Decider.NOBODY;
        return connection;
    }

    private void grow() {
        int capacity = 2 * below.length;
        below = Arrays.copyOf(below, capacity);
        client = Arrays.copyOf(client, capacity);
        pinned = Arrays.copyOf(pinned, capacity);
        passage = Arrays.copyOf(passage, capacity);
        idleSinceNanos = Arrays.copyOf(idleSinceNanos, capacity);
    }
}
