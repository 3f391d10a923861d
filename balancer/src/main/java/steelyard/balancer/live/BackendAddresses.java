package steelyard.balancer.live;

import java.net.InetSocketAddress;

/** Where the backends listen. Asked once for each at the start. */
@FunctionalInterface
public interface BackendAddresses {
    /** The address of a backend by number, resolved. */
    InetSocketAddress of(int backend);
}
