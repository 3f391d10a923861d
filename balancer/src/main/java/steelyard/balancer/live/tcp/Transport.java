package steelyard.balancer.live.tcp;

import io.netty.bootstrap.Bootstrap;
import io.netty.bootstrap.ServerBootstrap;
import io.netty.channel.Channel;
import io.netty.channel.ChannelFuture;
import io.netty.channel.ChannelOption;
import io.netty.channel.EventLoop;
import io.netty.channel.IoHandlerFactory;
import io.netty.channel.MultiThreadIoEventLoopGroup;
import io.netty.channel.ServerChannel;
import io.netty.channel.epoll.Epoll;
import io.netty.channel.epoll.EpollIoHandler;
import io.netty.channel.epoll.EpollServerSocketChannel;
import io.netty.channel.epoll.EpollSocketChannel;
import io.netty.channel.nio.NioIoHandler;
import io.netty.channel.socket.SocketChannel;
import io.netty.channel.socket.nio.NioServerSocketChannel;
import io.netty.channel.socket.nio.NioSocketChannel;
import io.netty.util.concurrent.DefaultThreadFactory;
import java.io.IOException;
import java.net.InetAddress;
import java.net.InetSocketAddress;
import java.util.ArrayList;
import java.util.List;
import java.util.concurrent.TimeUnit;

/**
 * The event loops of one balancer, native where the system has epoll and NIO elsewhere.
 *
 * <p>The first loop is the home loop: orders, probes and the Decider's timer run there.
 */
public final class Transport {
    private static final int BACKLOG = 4096;
    private static final long END_SECONDS = 10;

    private final MultiThreadIoEventLoopGroup group;
    private final List<EventLoop> loops;
    private final Class<? extends ServerChannel> serverChannel;
    private final Class<? extends SocketChannel> socketChannel;

    private Transport(
            int loops,
            IoHandlerFactory io,
            Class<? extends ServerChannel> serverChannel,
            Class<? extends SocketChannel> socketChannel) {
        this.group = new MultiThreadIoEventLoopGroup(loops, new DefaultThreadFactory("steelyard-balancer", true), io);
        this.loops = new ArrayList<>();
        group.forEach(executor -> this.loops.add((EventLoop) executor));
        this.serverChannel = serverChannel;
        this.socketChannel = socketChannel;
    }

    /** Starts no thread yet; {@link #close} must be called all the same. */
    public static Transport open(int loops) {
        return Epoll.isAvailable()
                ? new Transport(
                        loops, EpollIoHandler.newFactory(), EpollServerSocketChannel.class, EpollSocketChannel.class)
                : new Transport(loops, NioIoHandler.newFactory(), NioServerSocketChannel.class, NioSocketChannel.class);
    }

    public List<EventLoop> loops() {
        return List.copyOf(loops);
    }

    public EventLoop home() {
        return loops.get(0);
    }

    /** A server whose channels are spread over the loops; the caller adds the handler. */
    public ServerBootstrap server() {
        return new ServerBootstrap()
                .group(group)
                .channel(serverChannel)
                .option(ChannelOption.SO_BACKLOG, BACKLOG)
                .childOption(ChannelOption.TCP_NODELAY, true);
    }

    /**
     * Binds a server to a loopback port, and waits for it.
     *
     * @param port 0 for any that is free
     * @throws IOException when the port cannot be had
     */
    public static Channel listen(ServerBootstrap server, int port) throws IOException {
        ChannelFuture binding = server.bind(new InetSocketAddress(InetAddress.getLoopbackAddress(), port))
                .awaitUninterruptibly();
        if (!binding.isSuccess()) {
            throw new IOException(String.valueOf(binding.cause().getMessage()), binding.cause());
        }
        return binding.channel();
    }

    /** A client whose channels live on {@code loop}; the caller adds the handler. */
    public Bootstrap client(EventLoop loop) {
        return new Bootstrap().group(loop).channel(socketChannel).option(ChannelOption.TCP_NODELAY, true);
    }

    /**
     * Ends the loops and waits for them; whatever channels were left are closed.
     *
     * @throws IllegalStateException when they do not end in 10 seconds
     */
    public void close() {
        if (!group.shutdownGracefully(0, END_SECONDS, TimeUnit.SECONDS)
                .awaitUninterruptibly(END_SECONDS, TimeUnit.SECONDS)) {
            throw new IllegalStateException("event loops did not end in " + END_SECONDS + " s");
        }
    }
}
