package steelyard.bench;

import io.netty.bootstrap.Bootstrap;
import io.netty.bootstrap.ServerBootstrap;
import io.netty.channel.ChannelOption;
import io.netty.channel.EventLoopGroup;
import io.netty.channel.MultiThreadIoEventLoopGroup;
import io.netty.channel.epoll.Epoll;
import io.netty.channel.epoll.EpollIoHandler;
import io.netty.channel.epoll.EpollServerSocketChannel;
import io.netty.channel.epoll.EpollSocketChannel;
import io.netty.channel.nio.NioIoHandler;
import io.netty.channel.socket.nio.NioServerSocketChannel;
import io.netty.channel.socket.nio.NioSocketChannel;
import io.netty.util.concurrent.DefaultThreadFactory;
import java.net.InetAddress;
import java.net.InetSocketAddress;
import java.util.concurrent.TimeUnit;

/** One event loop of the same kind as the balancer's, and what is made on it. */
final class Loops implements AutoCloseable {
    private final EventLoopGroup group;

    Loops(String threads) {
        group = new MultiThreadIoEventLoopGroup(
                1,
                new DefaultThreadFactory(threads, true),
                Epoll.isAvailable() ? EpollIoHandler.newFactory() : NioIoHandler.newFactory());
    }

    ServerBootstrap server() {
        return new ServerBootstrap()
                .group(group)
                .channel(Epoll.isAvailable() ? EpollServerSocketChannel.class : NioServerSocketChannel.class)
                .childOption(ChannelOption.TCP_NODELAY, true)
                .localAddress(new InetSocketAddress(InetAddress.getLoopbackAddress(), 0));
    }

    Bootstrap client() {
        return new Bootstrap()
                .group(group)
                .channel(Epoll.isAvailable() ? EpollSocketChannel.class : NioSocketChannel.class)
                .option(ChannelOption.TCP_NODELAY, true);
    }

    @Override
    public void close() {
        group.shutdownGracefully(0, 5, TimeUnit.SECONDS).awaitUninterruptibly(5, TimeUnit.SECONDS);
    }
}
