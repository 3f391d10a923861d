package steelyard.balancer.live.tls;

import io.netty.channel.Channel;
import io.netty.channel.ChannelFuture;
import io.netty.channel.ChannelHandlerContext;
import io.netty.channel.ChannelOption;
import io.netty.channel.ChannelPromise;
import io.netty.channel.socket.DuplexChannel;
import io.netty.handler.ssl.SslHandler;
import io.netty.util.concurrent.Future;
import java.util.function.Consumer;

/** How connections stand and end, with TLS on them or without. Used on the loop of the channel. */
public final class Ends {
    private Ends() {}

    /**
     * Tells when a connection that is being opened can be used: when its handshake is over, where it speaks TLS.
     *
     * @param told of the connecting or of the handshake, whichever failed or came last
     */
    public static void whenUsable(ChannelFuture connecting, Consumer<Future<?>> told) {
        connecting.addListener(done -> {
            SslHandler tls = connecting.channel().pipeline().get(SslHandler.class);
            if (done.isSuccess() && tls != null) {
                tls.handshakeFuture().addListener(told::accept);
            } else {
                told.accept(done);
            }
        });
    }

    /** Says to the other end that nothing more comes; what it still sends can be read. */
    public static ChannelFuture finish(Channel channel) {
        ChannelPromise finished = channel.newPromise();
        SslHandler tls = channel.pipeline().get(SslHandler.class);
        if (tls == null) {
            shutDown(channel, finished);
        } else {
            tls.closeOutbound().addListener(said -> shutDown(channel, finished));
        }
        return finished;
    }

    private static void shutDown(Channel channel, ChannelPromise finished) {
        if (channel instanceof DuplexChannel duplex) {
            duplex.shutdownOutput(finished);
        } else {
            channel.close(finished);
        }
    }

    /** Closes so that the other end sees a reset, and no orderly end of TLS before it. */
    public static void reset(Channel channel) {
        if (channel.isActive()) {
            channel.config().setOption(ChannelOption.SO_LINGER, 0);
        }
        ChannelHandlerContext tls = channel.pipeline().context(SslHandler.class);
        if (tls == null) {
            channel.close();
        } else {
            tls.close();
        }
    }
}
