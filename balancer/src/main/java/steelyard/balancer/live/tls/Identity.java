package steelyard.balancer.live.tls;

import java.security.GeneralSecurityException;
import java.security.PrivateKey;
import java.security.PublicKey;
import java.security.Signature;
import java.security.cert.X509Certificate;
import java.util.List;
import org.jspecify.annotations.Nullable;

/**
 * Who a server says that it is.
 *
 * @param key of the first certificate
 * @param chain the certificate and those that it hangs on, at least one
 */
record Identity(PrivateKey key, List<X509Certificate> chain) {
    Identity {
        chain = List.copyOf(chain);
        if (chain.isEmpty()) {
            throw new IllegalArgumentException("an identity has a certificate");
        }
    }

    X509Certificate certificate() {
        return chain.get(0);
    }

    /** Whether the key belongs to the certificate: what the one signs, the other confirms. */
    boolean fits() {
        String algorithm = signature(key.getAlgorithm());
        if (algorithm == null) {
            return false;
        }
        byte[] sample = {1, 2, 3};
        PublicKey shown = certificate().getPublicKey();
        try {
            Signature signing = Signature.getInstance(algorithm);
            signing.initSign(key);
            signing.update(sample);
            byte[] signed = signing.sign();
            Signature confirming = Signature.getInstance(algorithm);
            confirming.initVerify(shown);
            confirming.update(sample);
            return confirming.verify(signed);
        } catch (GeneralSecurityException e) {
            return false; // keys of two kinds
        }
    }

    private static @Nullable String signature(String key) {
        return switch (key) {
            case "RSA" -> "SHA256withRSA";
            case "EC" -> "SHA256withECDSA";
            case "EdDSA" -> "EdDSA";
            default -> null;
        };
    }
}
