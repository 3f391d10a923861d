package steelyard.backends.behave;

import java.util.Map;

/**
 * Takes the plans of a {@link Behaviour} and carries them out, on sockets or on an event queue.
 *
 * <p>Calls come inside a call to the behaviour, on its thread, in the order of their instants; an instant is never after
 * the {@code nowNanos} of that call. It is the planned one: a driver that was polled late acts at once and reports its
 * own lateness. A sink must not call back into the behaviour.
 */
public interface ReplySink {

    /**
     * The end of one request.
     *
     * @param token as given at arrival
     * @param status to send for ANSWER, TURNED_AWAY and FAULT, else 0
     * @param bodyBytes size of the body to send for ANSWER, else 0
     */
    void reply(long token, long request, int attempt, Reply reply, int status, int bodyBytes, long atNanos);

    /**
     * The end of one probe. {@code reply} and {@code status} read as for a request; there is no body.
     *
     * @param token as given with the probe
     */
    void probeReply(long token, long probe, Reply reply, int status, long atNanos);

    /**
     * The end of one reading of the load page. {@code reply} and {@code status} read as for a request.
     *
     * @param token as given with the reading
     * @param gauges what the page shows at that instant, by name, each 0..1, cpu first; empty unless ANSWER. Immutable
     */
    void readingReply(long token, long reading, Reply reply, int status, Map<String, Double> gauges, long atNanos);

    /** From now on new connections are accepted ({@code open}) or refused. Called only when that changes. */
    void listening(boolean open, long atNanos);

    /** Every open connection is reset, also those whose requests were met with silence. */
    void connectionsReset(long atNanos);
}
