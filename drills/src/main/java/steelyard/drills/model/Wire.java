package steelyard.drills.model;

import java.util.Objects;

/**
 * How a pool speaks to both sides.
 *
 * @param backendTls whether it speaks TLS to its backends
 */
public record Wire(Front front, Forwarded forwarded, boolean backendTls) {
    /** HTTP in the clear on any port, and no Forwarded field. */
    public static final Wire USUAL = new Wire(Front.USUAL, Forwarded.NOT_ADDED, false);

    public Wire {
        Objects.requireNonNull(front);
        Objects.requireNonNull(forwarded);
    }

    public Wire with(Front other) {
        return new Wire(other, forwarded, backendTls);
    }
}
