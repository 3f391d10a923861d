package steelyard.harness.stage.live;

import java.net.InetSocketAddress;
import java.security.cert.X509Certificate;
import org.jspecify.annotations.Nullable;
import steelyard.backends.fleet.Fleet;
import steelyard.balancer.live.BackendAddresses;

/** Where the backends of a fleet listen, and what those with TLS show. */
record FleetAddresses(Fleet fleet) implements BackendAddresses {
    @Override
    public InetSocketAddress of(int backend) {
        return fleet.address(backend);
    }

    @Override
    public @Nullable X509Certificate certificate(int backend) {
        return fleet.certificate();
    }
}
