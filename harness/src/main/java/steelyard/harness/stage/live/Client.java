package steelyard.harness.stage.live;

import java.net.InetSocketAddress;
import java.util.ArrayDeque;
import java.util.Iterator;
import java.util.function.LongSupplier;
import org.jspecify.annotations.Nullable;

/** One client of a stream: the connections that it holds idle, the last used first. Lives on the generator's loop. */
final class Client {
    private final int numberInStream;
    private final @Nullable InetSocketAddress from;
    private final ClientCookies cookies;
    private final ArrayDeque<ClientConnection> idle = new ArrayDeque<>();

    /**
     * @param from where it connects from; null for wherever the system chooses
     * @param nanoClock what its cookies run out by
     */
    Client(int numberInStream, @Nullable InetSocketAddress from, LongSupplier nanoClock) {
        this.cookies = new ClientCookies(nanoClock);
        this.numberInStream = numberInStream;
        this.from = from;
    }

    int numberInStream() {
        return numberInStream;
    }

    @Nullable
    InetSocketAddress from() {
        return from;
    }

    ClientCookies cookies() {
        return cookies;
    }

    /** The idle connection that was used last, or null. It is no longer idle then. */
    @Nullable
    ClientConnection takeIdle() {
        ClientConnection connection = idle.pollLast();
        while (connection != null && !connection.usable()) {
            connection = idle.pollLast();
        }
        return connection;
    }

    void keep(ClientConnection connection, long nowNanos) {
        connection.idleSince(nowNanos);
        idle.addLast(connection);
    }

    void forget(ClientConnection connection) {
        idle.remove(connection);
    }

    /** Closes what has been idle since {@code sinceNanos} or longer. */
    void closeIdle(long sinceNanos) {
        for (Iterator<ClientConnection> each = idle.iterator(); each.hasNext(); ) {
            ClientConnection connection = each.next();
            if (connection.idleSinceNanos() > sinceNanos) {
                return;
            }
            each.remove();
            connection.close();
        }
    }
}
