package steelyard.harness.record;

/** A run folder cannot be made or read. The message is one line: which folder, what is wrong, what to do. */
public final class FolderRefused extends Exception {
    private static final long serialVersionUID = 1L;

    public FolderRefused(String message) {
        super(message);
    }

    public FolderRefused(String message, Throwable cause) {
        super(message, cause);
    }
}
