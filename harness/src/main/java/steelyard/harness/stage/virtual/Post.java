package steelyard.harness.stage.virtual;

/**
 * Every message of one play that can be under way.
 *
 * <p>There is a lane for each length of the way, in hops: a new connection costs a round trip before the request. Messages
 * of one instant come the shorter way first, and those of one lane in the order in which they were sent. What a message
 * carries is said at its kind: most name a flight's token and a backend.
 */
final class Post {
    /** What a message is. */
    enum Kind {
        /** A request reaches the balancer, on an open connection of its client or on a new one. */
        REQUEST,
        REQUEST_ON_NEW,
        /** The client is gone; {@code what} is the request, {@code where} the flight. */
        CLIENT_GONE,
        /** The balancer asks a backend for a connection. */
        CONNECT,
        /** A request reaches a backend, on a kept connection or on the new one. */
        ATTEMPT,
        ATTEMPT_ON_NEW,
        /** The balancer closed the connection of an attempt; {@code where} is backend x 2^32 + place. */
        ATTEMPT_GONE,
        /** What an attempt came to reaches the balancer. */
        ANSWER,
        RESET,
        REFUSAL,
        /** The balancer's answer reaches the client. */
        RESULT,
        /** A probe asks for a connection, and is read; {@code what} is the probe's number. */
        PROBE_CONNECT,
        PROBE,
        /** Good or bad: {@code where} is twice the backend, plus one for good. */
        PROBE_RESULT
    }

    private static final Kind[] KINDS = Kind.values();
    private static final int[] HOPS = hops();
    private static final int MOST_HOPS = 3;

    /** By number of hops, less one. */
    private final Lane[] lanes = new Lane[MOST_HOPS];

    private final long hopNanos;

    Post(Transport transport) {
        hopNanos = transport.hopNanos();
        for (int hops = 1; hops <= MOST_HOPS; hops++) {
            lanes[hops - 1] = new Lane(hops * hopNanos);
        }
    }

    private static int[] hops() {
        int[] hops = new int[KINDS.length];
        for (Kind kind : KINDS) {
            hops[kind.ordinal()] = hops(kind);
        }
        return hops;
    }

    private static int hops(Kind kind) {
        return switch (kind) {
            case REQUEST_ON_NEW -> 3;
            case ATTEMPT_ON_NEW, PROBE -> 2;
            case REQUEST,
                    CLIENT_GONE,
                    CONNECT,
                    ATTEMPT,
                    ATTEMPT_GONE,
                    ANSWER,
                    RESET,
                    REFUSAL,
                    RESULT,
                    PROBE_CONNECT,
                    PROBE_RESULT -> 1;
        };
    }

    /** One way, from one process to the next. */
    long hopNanos() {
        return hopNanos;
    }

    void send(Kind kind, long nowNanos, long what, long where) {
        lanes[HOPS[kind.ordinal()] - 1].send(nowNanos, what, where, kind.ordinal());
    }

    /** The lane whose message comes first; an empty one when nothing is under way. */
    Lane next() {
        Lane first = lanes[0];
        for (int lane = 1; lane < lanes.length; lane++) {
            if (lanes[lane].nextNanos() < first.nextNanos()) {
                first = lanes[lane];
            }
        }
        return first;
    }

    /** What the message at the head of a lane is. */
    static Kind kind(Lane lane) {
        return KINDS[lane.tag()];
    }
}
