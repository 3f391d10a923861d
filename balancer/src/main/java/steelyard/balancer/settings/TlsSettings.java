package steelyard.balancer.settings;

import java.nio.file.Path;
import org.jspecify.annotations.Nullable;

/**
 * Where the certificate of a front comes from: two PEM files, or a PKCS#12 store, or, when all is null, a throw-away one
 * made at the start.
 *
 * @param certificate a PEM file with the certificate and those that it hangs on
 * @param key a PEM file with its PKCS#8 key, without a password
 * @param store a PKCS#12 file
 * @param passwordFrom the environment variable that holds the store's password
 */
public record TlsSettings(
        @Nullable Path certificate,
        @Nullable Path key,
        @Nullable Path store,
        @Nullable String passwordFrom) {
    /** A certificate made at the start, believed by nobody else. */
    public static final TlsSettings THROW_AWAY = new TlsSettings(null, null, null, null);

    public TlsSettings {
        Check.that((certificate == null) == (key == null), "a certificate goes with its key");
        Check.that((store == null) == (passwordFrom == null), "a store goes with the variable of its password");
        Check.that(certificate == null || store == null, "either PEM files or a store");
    }
}
