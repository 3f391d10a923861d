package steelyard.backends.stub;

/**
 * Hears what backends do with requests. Probes are not traffic and are not told.
 *
 * <p>Called on the event loop of the backend; must return quickly and never throw. Instants are of the clock handed to
 * the stub. For one attempt {@code received} comes first and {@code ended} exactly once after it, at the latest when the
 * stub is closed.
 */
public interface BackendListener {

    /**
     * A request's head was read.
     *
     * @param backend number of the backend, as handed to the stub
     * @param request number of the request, or below 0 for one that carried none (a running number of its own)
     * @param attempt number of the attempt, 0 if it carried none
     */
    void received(int backend, long request, int attempt, long atNanos);

    /**
     * A request is over for this backend.
     *
     * @param answeredInFull whether the whole answer was handed to the socket; false when the connection closed or was
     *     reset first
     * @param status of the answer, or 0 if none was begun
     */
    void ended(int backend, long request, int attempt, boolean answeredInFull, int status, long atNanos);
}
