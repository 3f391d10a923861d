package steelyard.harness.stage.live;

import io.netty.channel.Channel;
import io.netty.channel.ChannelHandlerContext;
import io.netty.channel.ChannelInboundHandlerAdapter;
import io.netty.channel.socket.DuplexChannel;
import io.netty.handler.codec.http.HttpObject;
import io.netty.handler.codec.http.HttpResponse;
import io.netty.handler.codec.http.HttpStatusClass;
import io.netty.handler.codec.http.HttpUtil;
import io.netty.handler.codec.http.LastHttpContent;
import io.netty.handler.ssl.SslHandler;
import io.netty.util.ReferenceCountUtil;
import org.jspecify.annotations.Nullable;

/**
 * One connection of a client: one request at a time, the answer read as it streams in and thrown away.
 *
 * <p>Lives on the generator's loop.
 */
final class ClientConnection extends ChannelInboundHandlerAdapter {
    private static final String PROXY_STATUS = "Proxy-Status";
    private static final int SWITCHING = 101;

    /** What a connection tells its client. */
    interface Owner {
        /** The whole answer is there. {@code proxyStatus} as of {@link Answer#cause}. */
        void answered(ClientConnection connection, Exchange exchange, int status, @Nullable String proxyStatus);

        /** The connection closed before the whole answer was there. {@code status} is 0 if not even its head was. */
        void brokeOff(ClientConnection connection, Exchange exchange, int status);

        /** The connection has become a tunnel, which is now the exchange's. */
        void upgraded(ClientConnection connection, Exchange exchange);

        /** A tunnel is closed; {@code orderly} when this end had said first that nothing more comes. */
        void tunnelEnded(ClientConnection connection, Exchange exchange, boolean orderly);

        /** The connection is closed. */
        void closed(ClientConnection connection);
    }

    private final Owner owner;
    private final Client client;
    private final Channel channel;
    private @Nullable Exchange exchange;
    private @Nullable HttpResponse head;
    private boolean tunnel;
    private boolean finished;
    private long idleSinceNanos;

    ClientConnection(Owner owner, Client client, Channel channel) {
        this.owner = owner;
        this.client = client;
        this.channel = channel;
    }

    Client client() {
        return client;
    }

    /** Sends a request on a connection that stands and has none. */
    void send(Exchange next, Object message) {
        exchange = next;
        head = null;
        channel.writeAndFlush(message, channel.voidPromise());
    }

    /** Says through a tunnel that nothing more comes, and waits for the other end to say so too. */
    void finish() {
        finished = true;
        SslHandler tls = channel.pipeline().get(SslHandler.class);
        if (tls == null) {
            shutDown();
        } else {
            tls.closeOutbound().addListener(said -> shutDown());
        }
    }

    private void shutDown() {
        if (channel instanceof DuplexChannel duplex) {
            duplex.shutdownOutput();
        } else {
            channel.close();
        }
    }

    boolean usable() {
        return channel.isActive() && exchange == null;
    }

    void close() {
        channel.close();
    }

    /** Forgets the request: whatever still comes is not its answer any more. */
    void abandon() {
        exchange = null;
        channel.close();
    }

    long idleSinceNanos() {
        return idleSinceNanos;
    }

    void idleSince(long nowNanos) {
        idleSinceNanos = nowNanos;
    }

    @Override
    public void channelRead(ChannelHandlerContext context, Object message) {
        try {
            if (!tunnel) { // what comes through a tunnel is thrown away
                read((HttpObject) message);
            }
        } finally {
            ReferenceCountUtil.release(message);
        }
    }

    private void read(HttpObject part) {
        if (exchange == null || part.decoderResult().isFailure()) {
            // An answer to nothing, or none in HTTP: nothing more on this connection can be believed.
            channel.close();
            return;
        }
        if (part instanceof HttpResponse response) {
            head = response;
        }
        if (part instanceof LastHttpContent) {
            complete();
        }
    }

    private void complete() {
        HttpResponse answer = head;
        Exchange done = exchange;
        if (answer == null || done == null) {
            return;
        }
        client.cookies().take(answer.headers());
        if (answer.status().code() == SWITCHING && done.asks.upgrade() != null) {
            tunnel = true;
            owner.upgraded(this, done);
            return;
        }
        if (answer.status().codeClass() == HttpStatusClass.INFORMATIONAL) {
            return;
        }
        exchange = null;
        if (!HttpUtil.isKeepAlive(answer)) {
            channel.close();
        }
        owner.answered(this, done, answer.status().code(), answer.headers().get(PROXY_STATUS));
    }

    @Override
    public void channelInactive(ChannelHandlerContext context) {
        Exchange open = exchange;
        exchange = null;
        if (open != null && tunnel) {
            owner.tunnelEnded(this, open, finished);
        } else if (open != null) {
            owner.brokeOff(this, open, head == null ? 0 : head.status().code());
        }
        owner.closed(this);
    }

    @Override
    public void exceptionCaught(ChannelHandlerContext context, Throwable cause) {
        // A reset, most likely. The request learns of it when the channel becomes inactive.
        finished = false;
        channel.close();
    }
}
