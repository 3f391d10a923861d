package steelyard.harness.stage;

/** A drill cannot be played here. The message is one line: what is wrong, and what to do. */
public final class CannotPlay extends Exception {
    private static final long serialVersionUID = 1L;

    public CannotPlay(String message) {
        super(message);
    }

    public CannotPlay(String message, Throwable cause) {
        super(message, cause);
    }
}
