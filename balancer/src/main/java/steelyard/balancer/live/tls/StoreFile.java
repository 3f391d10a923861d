package steelyard.balancer.live.tls;

import java.io.IOException;
import java.io.InputStream;
import java.nio.file.Files;
import java.nio.file.Path;
import java.security.GeneralSecurityException;
import java.security.KeyStore;
import java.security.PrivateKey;
import java.security.UnrecoverableKeyException;
import java.security.cert.Certificate;
import java.security.cert.X509Certificate;
import java.util.Arrays;
import java.util.Collections;
import java.util.function.Function;
import org.jspecify.annotations.Nullable;

/** A certificate with its key in a PKCS#12 store; the first key in it counts. */
final class StoreFile {
    private StoreFile() {}

    /**
     * @param variable the one that holds the password
     * @param environment gives the value of a variable, or null
     */
    static Identity read(Path file, String variable, Function<String, @Nullable String> environment)
            throws BadCertificate {
        String password = environment.apply(variable);
        if (password == null) {
            throw new BadCertificate(
                    file + ": the environment variable " + variable + " with its password is not set: export it");
        }
        char[] secret = password.toCharArray();
        try (InputStream in = Files.newInputStream(file)) {
            KeyStore store = KeyStore.getInstance("PKCS12");
            store.load(in, secret);
            return first(file, store, secret);
        } catch (IOException e) {
            if (e.getCause() instanceof UnrecoverableKeyException) {
                throw new BadCertificate(file + ": the password in " + variable + " does not open it: correct it", e);
            }
            throw Files.isReadable(file)
                    ? new BadCertificate(file + ": not a PKCS#12 store: give one, or PEM files", e)
                    : PemFiles.unreadable(file, e);
        } catch (GeneralSecurityException e) {
            throw new BadCertificate(file + ": cannot be opened as a PKCS#12 store: make it anew", e);
        } finally {
            Arrays.fill(secret, '\0');
        }
    }

    private static Identity first(Path file, KeyStore store, char[] secret)
            throws GeneralSecurityException, BadCertificate {
        for (String alias : Collections.list(store.aliases())) {
            Certificate[] chain = store.getCertificateChain(alias);
            if (chain != null && chain.length > 0 && store.getKey(alias, secret) instanceof PrivateKey key) {
                return new Identity(
                        key,
                        Arrays.stream(chain).map(X509Certificate.class::cast).toList());
            }
        }
        throw new BadCertificate(file + ": holds no key with a certificate: make it with both");
    }
}
