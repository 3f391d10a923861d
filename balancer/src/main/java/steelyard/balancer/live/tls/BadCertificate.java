package steelyard.balancer.live.tls;

/** A certificate cannot be used. The message is one line: which file, what is wrong with it, what to do. */
public final class BadCertificate extends Exception {
    private static final long serialVersionUID = 1L;

    BadCertificate(String message) {
        super(message);
    }

    BadCertificate(String message, Throwable cause) {
        super(message, cause);
    }
}
