package steelyard.backends.stub;

/** Header fields by which a request tells a backend who it is, so that both draw the same chance. */
public final class StubHeaders {

    /** Number of the request over the whole play, a decimal number of 0 or above. */
    public static final String REQUEST = "Steelyard-Request";

    /**
     * Number of the probe at this backend, a decimal number of 0 or above; those that never arrived count too. A probe that
     * carries none is numbered by the stub.
     */
    public static final String PROBE = "Steelyard-Probe";

    /** Number of the attempt at this request, a decimal number; the first try is 1. */
    public static final String ATTEMPT = "Steelyard-Attempt";

    private StubHeaders() {}
}
