package steelyard.balancer.live.guard;

import java.net.InetAddress;
import java.net.InetSocketAddress;
import java.net.SocketAddress;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.pick.Keys;

/** What a client is known by. */
public final class ClientKeys {
    private ClientKeys() {}

    /** The key of the text of its address, without the port; of an unknown one, that of the empty text. */
    public static long of(@Nullable SocketAddress client) {
        InetAddress address = client instanceof InetSocketAddress inet ? inet.getAddress() : null;
        return Keys.of(address == null ? "" : address.getHostAddress());
    }
}
