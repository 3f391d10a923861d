package steelyard.harness.stage.virtual;

/**
 * The lanes of one play: every message that can be under way, by what it is and how long it takes.
 *
 * <p>A new connection costs a round trip before the request: its lanes are two hops longer. What a message carries is said
 * at its kind: most name a flight's token and a backend.
 */
final class Post {
    /** The ends of lanes; the order decides between messages of one instant. */
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

    private final Lane[] lanes = new Lane[KINDS.length];

    Post(Transport transport) {
        long hop = transport.hopNanos();
        for (Kind kind : KINDS) {
            lanes[kind.ordinal()] = new Lane(hops(kind) * hop);
        }
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

    void send(Kind kind, long nowNanos, long what, long where) {
        lanes[kind.ordinal()].send(nowNanos, what, where);
    }

    long nextNanos() {
        long next = Lane.NEVER;
        for (Lane lane : lanes) {
            next = Math.min(next, lane.nextNanos());
        }
        return next;
    }

    /** The kind whose message comes first. */
    Kind next() {
        int first = 0;
        for (int lane = 1; lane < lanes.length; lane++) {
            if (lanes[lane].nextNanos() < lanes[first].nextNanos()) {
                first = lane;
            }
        }
        return KINDS[first];
    }

    Lane lane(Kind kind) {
        return lanes[kind.ordinal()];
    }
}
