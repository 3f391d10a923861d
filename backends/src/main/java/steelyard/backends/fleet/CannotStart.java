package steelyard.backends.fleet;

import org.jspecify.annotations.Nullable;

/** Backends cannot be started on this machine now. The message is one line and says what to do. */
public final class CannotStart extends Exception {
    public CannotStart(String message) {
        this(message, null);
    }

    public CannotStart(String message, @Nullable Throwable cause) {
        super(message, cause);
    }
}
