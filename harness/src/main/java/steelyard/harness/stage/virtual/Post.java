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
        /** A request reaches the balancer, on an open connection of its client or on a new one, perhaps with TLS. */
        REQUEST,
        REQUEST_ON_NEW,
        REQUEST_ON_TLS,
        /** The client is gone; {@code what} is the request, {@code where} the flight. */
        CLIENT_GONE,
        /** The balancer asks a backend for a connection. */
        CONNECT,
        /** A request reaches a backend, on a kept connection or on the new one, perhaps with TLS. */
        ATTEMPT,
        ATTEMPT_ON_NEW,
        ATTEMPT_ON_TLS,
        /** The balancer closed the connection of an attempt; {@code where} is backend x 2^32 + place. */
        ATTEMPT_GONE,
        /** What an attempt came to reaches the balancer. */
        ANSWER,
        RESET,
        REFUSAL,
        /** The balancer's answer reaches the client. */
        RESULT,
        /** A client learns that its tunnel stands. */
        TUNNEL_OPENED,
        /** A tunnel that its client closed is closed by the backend too, and the balancer learns of it. */
        TUNNEL_ENDED,
        /** A connection that is passed through reaches the balancer, or its TLS does; {@code what} is a passage's token. */
        PASSAGE,
        PASSAGE_ON_TLS,
        /** The balancer asks a backend for its other end. */
        PASSAGE_CONNECT,
        /** That stands, perhaps with TLS, or is refused. */
        PASSAGE_OPEN,
        PASSAGE_OPEN_ON_TLS,
        PASSAGE_REFUSED,
        /** A request reaches a backend on a passage; {@code what} is its flight's token. */
        PASSED,
        /** The client has closed it; the backend has too, and the balancer learns of it. */
        PASSAGE_LEFT,
        PASSAGE_ENDED,
        /** It broke at the backend, and the balancer learns of it; it broke, and the client does. */
        PASSAGE_RESET,
        PASSAGE_BROKEN,
        /** A probe asks for a connection, and is read; {@code what} is the probe's number. */
        PROBE_CONNECT,
        PROBE,
        PROBE_ON_TLS,
        /** Good or bad: {@code where} is twice the backend, plus one for good. */
        PROBE_RESULT,
        /** A reading of a load page, as a probe. */
        READING_CONNECT,
        READING,
        READING_ON_TLS,
        READING_RESULT
    }

    private static final Kind[] KINDS = Kind.values();
    private static final int[] HOPS = hops();
    private static final int MOST_HOPS = 3;
    private static final int MOST_HOPS_ON_TLS = 5;

    /** By number of hops, less one. */
    private final Lane[] lanes;

    private final long hopNanos;

    /** @param tls whether anybody speaks it: the fewer lanes, the faster */
    Post(Transport transport, boolean tls) {
        hopNanos = transport.hopNanos();
        lanes = new Lane[tls ? MOST_HOPS_ON_TLS : MOST_HOPS];
        for (int hops = 1; hops <= lanes.length; hops++) {
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
            // A handshake of TLS 1.3 is one more way there and back before the first request (RFC 8446, 2).
            case REQUEST_ON_TLS, PASSAGE_ON_TLS -> 5;
            case ATTEMPT_ON_TLS, PROBE_ON_TLS, READING_ON_TLS -> 4;
            case REQUEST_ON_NEW, PASSAGE_OPEN_ON_TLS, TUNNEL_ENDED -> 3;
            case ATTEMPT_ON_NEW, PROBE, READING, PASSAGE_ENDED -> 2;
            case REQUEST,
                    CLIENT_GONE,
                    CONNECT,
                    ATTEMPT,
                    ATTEMPT_GONE,
                    ANSWER,
                    RESET,
                    REFUSAL,
                    RESULT,
                    TUNNEL_OPENED,
                    PASSAGE,
                    PASSAGE_CONNECT,
                    PASSAGE_OPEN,
                    PASSAGE_REFUSED,
                    PASSED,
                    PASSAGE_LEFT,
                    PASSAGE_RESET,
                    PASSAGE_BROKEN,
                    PROBE_CONNECT,
                    PROBE_RESULT,
                    READING_CONNECT,
                    READING_RESULT -> 1;
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
