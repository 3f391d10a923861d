package steelyard.backends.stub;

import java.io.IOException;
import java.io.UncheckedIOException;
import java.net.InetSocketAddress;
import java.net.Socket;
import org.jspecify.annotations.Nullable;

/**
 * Keeps a port from being given to somebody else while nobody listens there: a socket that is bound and does nothing. The
 * kernel refuses connections to it as to any port without a listener. Not thread-safe.
 */
final class KeptPort {
    private final InetSocketAddress address;
    private @Nullable Socket keeper;

    KeptPort(InetSocketAddress address) {
        this.address = address;
    }

    /** Keeps it, where it is to be had: a port that somebody was quicker to take is not kept. */
    void keep() {
        if (keeper != null) {
            return;
        }
        Socket socket = new Socket();
        try {
            socket.setReuseAddress(true); // connections that have just ended would stand in the way
            socket.bind(address);
            keeper = socket;
        } catch (IOException e) {
            close(socket);
        }
    }

    /** Lets it go, so that it can be listened to. */
    void letGo() {
        Socket kept = keeper;
        keeper = null;
        if (kept != null) {
            close(kept);
        }
    }

    private static void close(Socket socket) {
        try {
            socket.close();
        } catch (IOException e) {
            throw new UncheckedIOException(e);
        }
    }
}
