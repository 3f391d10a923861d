package steelyard.balancer.live.tcp;

import io.netty.bootstrap.ServerBootstrap;
import io.netty.channel.Channel;
import io.netty.channel.ChannelOption;
import io.netty.channel.group.ChannelGroup;
import io.netty.channel.group.DefaultChannelGroup;
import io.netty.util.concurrent.GlobalEventExecutor;
import java.io.IOException;
import java.net.InetSocketAddress;
import java.util.ArrayList;
import java.util.List;

/**
 * Fronts that listen, and the client connections that came through them. Methods may be called from any thread but a
 * loop's own.
 */
public final class Fronts {
    private final List<Channel> listening = new ArrayList<>();
    private final ChannelGroup clients = new DefaultChannelGroup(GlobalEventExecutor.INSTANCE, true);

    /**
     * Binds a front to a loopback port. Connections wait there until {@link #begin}.
     *
     * @param server with the handler of its connections
     * @param port 0 for any that is free
     * @throws IOException when the port cannot be had
     */
    public InetSocketAddress bind(ServerBootstrap server, int port) throws IOException {
        Channel front = Transport.listen(server.option(ChannelOption.AUTO_READ, false), port);
        listening.add(front);
        return (InetSocketAddress) front.localAddress();
    }

    /** A client connected; may be called on any thread. */
    public void came(Channel client) {
        clients.add(client);
    }

    /** From now on the fronts take connections. */
    public void begin() {
        listening.forEach(front -> front.config().setAutoRead(true));
    }

    /** Closes the fronts and the client connections, and waits for both. */
    public void close() {
        listening.forEach(front -> front.close().awaitUninterruptibly());
        clients.close().awaitUninterruptibly();
    }
}
