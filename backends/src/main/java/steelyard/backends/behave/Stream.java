package steelyard.backends.behave;

/**
 * What a draw is for. Draws of different streams are independent under one seed.
 *
 * <p>The numbers are part of the meaning of a seed: a changed number changes every recorded play, so they are written
 * out and never reused.
 */
public enum Stream {
    /** Gaps between arrivals. */
    ARRIVALS(1),
    /** Which entry of the request mix a request is. */
    MIX(2),
    /** Which client sends a request. */
    CLIENT(3),
    /** The work that a request, or a queued probe, asks of a backend. */
    SERVICE(4),
    /** The choice of a backend, where a method draws lots. */
    PICK(5),
    /** Whether a fault that strikes a share of the requests strikes this one. */
    FAULT(6),
    /** Where in its period the first probe of a backend starts. */
    PROBE_PHASE(7),
    /** How far the period after a probe is off, where probes have jitter. */
    PROBE_JITTER(8),
    /** Where in its period the first load reading of a backend starts. */
    READING_PHASE(9);

    /** No stream has a greater number. */
    static final int MOST = 9;

    private final int number;

    Stream(int number) {
        this.number = number;
    }

    /** The fixed number of this stream, 1 or above. */
    public int number() {
        return number;
    }
}
