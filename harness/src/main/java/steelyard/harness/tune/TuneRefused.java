package steelyard.harness.tune;

/** A grid that cannot be played as it was asked for. The message is one line: what is wrong, and what to do. */
public final class TuneRefused extends Exception {
    private static final long serialVersionUID = 1L;

    public TuneRefused(String message) {
        super(message);
    }
}
