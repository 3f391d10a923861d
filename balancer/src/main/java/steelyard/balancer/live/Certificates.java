package steelyard.balancer.live;

import java.net.InetSocketAddress;
import java.security.cert.X509Certificate;
import java.util.ArrayList;
import java.util.List;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.live.tls.BackendTls;
import steelyard.balancer.live.tls.BadCertificate;
import steelyard.balancer.live.tls.FrontTls;
import steelyard.balancer.settings.BalancerSettings;
import steelyard.balancer.settings.FrontSettings;
import steelyard.balancer.settings.PoolSettings;
import steelyard.balancer.settings.TlsSettings;

/** The TLS of every pool, towards its clients and towards its backends; null where a pool has none. */
final class Certificates {
    private final List<@Nullable FrontTls> fronts = new ArrayList<>();
    private final List<@Nullable BackendTls> backends = new ArrayList<>();

    private Certificates() {}

    /** @throws CannotStart for a certificate that cannot be used, or a backend that could not be told from another */
    static Certificates of(BalancerSettings settings, BackendAddresses addresses) throws CannotStart {
        Certificates made = new Certificates();
        int first = 0;
        for (PoolSettings pool : settings.pools()) {
            made.fronts.add(front(pool));
            made.backends.add(backends(pool, addresses, first));
            first += pool.backends().size();
        }
        return made;
    }

    private static @Nullable FrontTls front(PoolSettings pool) throws CannotStart {
        TlsSettings tls = pool.front().tls();
        if (tls == null) {
            return null;
        }
        try {
            return FrontTls.open(tls, System::getenv, pool.timeouts().headNanos());
        } catch (BadCertificate e) {
            throw new CannotStart("the front of pool " + pool.name() + ": " + e.getMessage(), e);
        }
    }

    private static @Nullable BackendTls backends(PoolSettings pool, BackendAddresses addresses, int first)
            throws CannotStart {
        FrontSettings front = pool.front();
        if (!front.backendTls()) {
            return null;
        }
        List<X509Certificate> known = new ArrayList<>();
        for (int member = 0; member < pool.backends().size(); member++) {
            X509Certificate certificate = addresses.certificate(first + member);
            InetSocketAddress address = addresses.of(first + member);
            if (certificate != null) {
                known.add(certificate);
            } else if (!address.getAddress().isLoopbackAddress()) {
                throw new CannotStart(
                        "backend " + pool.backends().get(member).name() + " at " + address
                                + " is not on the loopback network and its certificate is not known: start it here",
                        null);
            }
        }
        boolean all = known.size() == pool.backends().size();
        return BackendTls.believing(all ? known : List.of(), pool.timeouts().connectNanos());
    }

    @Nullable
    FrontTls front(int pool) {
        return fronts.get(pool);
    }

    @Nullable
    BackendTls backends(int pool) {
        return backends.get(pool);
    }
}
