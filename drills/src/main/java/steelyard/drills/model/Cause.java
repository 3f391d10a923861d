package steelyard.drills.model;

/** Why a request failed; one a request. */
public enum Cause implements Worded {
    /** The connection was refused, or did not stand in time. */
    REFUSED("refused"),
    RESET("reset"),
    TIMED_OUT("timed-out"),
    NO_BACKEND("no-backend"),
    BAD_GATEWAY("bad-gateway"),
    GATEWAY_TIMEOUT("gateway-timeout"),
    BACKEND_ERROR("backend-error"),
    /** Cut at a drain limit. */
    CUT("cut"),
    /** The client gave up. */
    GAVE_UP("gave-up");

    private final String word;

    Cause(String word) {
        this.word = word;
    }

    @Override
    public String word() {
        return word;
    }
}
