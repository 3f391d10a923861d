package steelyard.balancer.live;

import org.jspecify.annotations.Nullable;

/** A balancer cannot start here. The message is one line that says what is in the way and what to do. */
public final class CannotStart extends Exception {
    private static final long serialVersionUID = 1L;

    CannotStart(String message, @Nullable Throwable cause) {
        super(message, cause);
    }
}
