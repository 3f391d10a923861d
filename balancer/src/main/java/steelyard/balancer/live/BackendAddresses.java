package steelyard.balancer.live;

import java.net.InetSocketAddress;
import java.security.cert.X509Certificate;
import org.jspecify.annotations.Nullable;

/** Where the backends listen. Asked once for each at the start. */
@FunctionalInterface
public interface BackendAddresses {
    /** The address of a backend by number, resolved. */
    InetSocketAddress of(int backend);

    /**
     * The certificate that a backend with TLS shows, for whoever started it knows. Null when it is not known: then any is
     * believed, but only of a backend on the loopback network.
     */
    default @Nullable X509Certificate certificate(int backend) {
        return null;
    }
}
