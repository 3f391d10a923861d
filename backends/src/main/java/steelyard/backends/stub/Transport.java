package steelyard.backends.stub;

import io.netty.channel.EventLoopGroup;
import io.netty.channel.MultiThreadIoEventLoopGroup;
import io.netty.channel.ServerChannel;
import io.netty.channel.epoll.Epoll;
import io.netty.channel.epoll.EpollIoHandler;
import io.netty.channel.epoll.EpollServerSocketChannel;
import io.netty.channel.nio.NioIoHandler;
import io.netty.channel.socket.nio.NioServerSocketChannel;
import io.netty.util.concurrent.DefaultThreadFactory;

/** How sockets are driven: native epoll where this machine has it, the JDK's own selector elsewhere. */
public enum Transport {
    EPOLL,
    NIO;

    /** The better of those that work here. */
    public static Transport best() {
        return Epoll.isAvailable() ? EPOLL : NIO;
    }

    /** Event loops on daemon threads named after {@code role}; the caller shuts them down. */
    public EventLoopGroup loops(int count, String role) {
        return new MultiThreadIoEventLoopGroup(
                count,
                new DefaultThreadFactory(role, true),
                this == EPOLL ? EpollIoHandler.newFactory() : NioIoHandler.newFactory());
    }

    Class<? extends ServerChannel> serverChannel() {
        return this == EPOLL ? EpollServerSocketChannel.class : NioServerSocketChannel.class;
    }
}
