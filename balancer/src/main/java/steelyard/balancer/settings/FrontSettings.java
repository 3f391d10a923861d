package steelyard.balancer.settings;

import org.jspecify.annotations.Nullable;

/**
 * Where and how clients reach a pool, and how its backends are reached.
 *
 * @param port to listen on, or 0 for one that the caller of the live side chooses
 * @param tls null for none
 * @param backendTls whether backends are spoken to over TLS
 */
public record FrontSettings(int port, Kind kind, @Nullable TlsSettings tls, boolean backendTls, Forwarded forwarded) {
    /** HTTP without TLS on any port. */
    public static final FrontSettings USUAL = new FrontSettings(0, Kind.HTTP, null, false, Forwarded.NOT);

    public FrontSettings {
        Check.that(port >= 0 && port <= 65_535, "port %d", port);
    }

    /** What is passed on. */
    public enum Kind {
        /** Messages, each to a backend of its own. */
        HTTP,
        /** Octets: a connection goes to one backend as it is. */
        TCP
    }

    /** What requests say of the client in the Forwarded field (RFC 7239). */
    public enum Forwarded {
        /** Nothing. */
        NOT,
        /** Its address. */
        SHOWN,
        /** A made-up identifier in place of addresses (RFC 7239, 6.3). */
        HIDDEN
    }
}
