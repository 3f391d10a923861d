package steelyard.drills.model;

import java.util.Objects;
import org.jspecify.annotations.Nullable;

/**
 * Where and how clients reach a pool.
 *
 * @param port the port that it must have, or 0 for any free one
 * @param tls what it shows as its own, or null for no TLS
 */
public record Front(int port, Kind kind, @Nullable Tls tls) {
    /** Any port, HTTP in the clear. */
    public static final Front USUAL = new Front(0, Kind.HTTP, null);

    public Front {
        Objects.requireNonNull(kind);
        Check.that(port >= 0 && port <= 65_535, "port %d", port);
    }

    public Front on(int otherPort) {
        return new Front(otherPort, kind, tls);
    }

    /** What is passed on. */
    public enum Kind implements Worded {
        /** Request by request. */
        HTTP("http"),
        /** Connection by connection, octets as they come. */
        TCP("tcp");

        private final String word;

        Kind(String word) {
            this.word = word;
        }

        @Override
        public String word() {
            return word;
        }
    }

    /**
     * The certificate of a front: from PEM files, from a PKCS #12 store, or made at start and thrown away, where all
     * are null.
     *
     * @param certificate PEM file of the certificate and those that vouch for it
     * @param key PEM file of its private key, there exactly with a certificate
     * @param store PKCS #12 file
     * @param passwordFrom the environment variable that holds the store's password, there exactly with a store
     */
    public record Tls(
            @Nullable String certificate,
            @Nullable String key,
            @Nullable String store,
            @Nullable String passwordFrom) {

        /** A certificate made at start. */
        public static final Tls THROW_AWAY = new Tls(null, null, null, null);

        public Tls {
            Check.that((certificate == null) == (key == null), "a certificate and its key go together");
            Check.that((store == null) == (passwordFrom == null), "a store and its password go together");
            Check.that(
                    certificate == null || store == null, "a certificate comes from files or from a store, not both");
        }

        public static Tls files(String certificate, String key) {
            return new Tls(certificate, key, null, null);
        }

        public static Tls store(String store, String passwordFrom) {
            return new Tls(null, null, store, passwordFrom);
        }
    }
}
