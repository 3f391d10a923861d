package steelyard.bench;

import io.netty.bootstrap.Bootstrap;
import io.netty.channel.Channel;
import io.netty.channel.ChannelFutureListener;
import io.netty.channel.ChannelHandlerContext;
import io.netty.channel.ChannelInboundHandlerAdapter;
import io.netty.channel.ChannelInitializer;
import io.netty.channel.ChannelOption;
import java.net.InetSocketAddress;
import org.jspecify.annotations.Nullable;

/** The yardstick: passes bytes on, both ways, and knows nothing of what they mean. */
final class ByteRelay implements AutoCloseable {
    private final Loops loops = new Loops("bench-relay");
    private final InetSocketAddress address;

    ByteRelay(InetSocketAddress backend) throws InterruptedException {
        Bootstrap towards = loops.client().remoteAddress(backend);
        address = (InetSocketAddress) loops.server()
                .childOption(ChannelOption.AUTO_READ, false)
                .childHandler(new ChannelInitializer<Channel>() {
                    @Override
                    protected void initChannel(Channel channel) {
                        connect(towards, channel);
                    }
                })
                .bind()
                .sync()
                .channel()
                .localAddress();
    }

    private static void connect(Bootstrap towards, Channel client) {
        Side forth = new Side();
        Side back = new Side();
        back.other = client;
        forth.other = towards.clone()
                .handler(back)
                .connect()
                .addListener((ChannelFutureListener) connected -> {
                    if (connected.isSuccess()) {
                        client.config().setAutoRead(true);
                    } else {
                        client.close();
                    }
                })
                .channel();
        client.pipeline().addLast(forth);
    }

    InetSocketAddress address() {
        return address;
    }

    @Override
    public void close() {
        loops.close();
    }

    /** One direction. */
    private static final class Side extends ChannelInboundHandlerAdapter {
        private @Nullable Channel other;

        private Channel other() {
            if (other == null) {
                throw new IllegalStateException("not joined");
            }
            return other;
        }

        @Override
        public void channelRead(ChannelHandlerContext context, Object message) {
            other().write(message, other().voidPromise());
        }

        @Override
        public void channelReadComplete(ChannelHandlerContext context) {
            other().flush();
        }

        @Override
        public void channelWritabilityChanged(ChannelHandlerContext context) {
            other().config().setAutoRead(context.channel().isWritable());
        }

        @Override
        public void channelInactive(ChannelHandlerContext context) {
            other().close();
        }
    }
}
