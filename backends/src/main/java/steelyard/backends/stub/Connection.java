package steelyard.backends.stub;

import io.netty.buffer.ByteBuf;
import io.netty.buffer.ByteBufUtil;
import io.netty.buffer.Unpooled;
import io.netty.channel.ChannelFuture;
import io.netty.channel.ChannelFutureListener;
import io.netty.channel.ChannelHandlerContext;
import io.netty.channel.ChannelInboundHandlerAdapter;
import io.netty.channel.ChannelOption;
import io.netty.handler.codec.http.FullHttpResponse;
import io.netty.handler.codec.http.HttpContent;
import io.netty.handler.codec.http.HttpHeaderNames;
import io.netty.handler.codec.http.HttpHeaderValues;
import io.netty.handler.codec.http.HttpRequest;
import io.netty.handler.codec.http.HttpResponseEncoder;
import io.netty.handler.codec.http.HttpResponseStatus;
import io.netty.handler.codec.http.HttpUtil;
import io.netty.handler.codec.http.LastHttpContent;
import io.netty.handler.ssl.SslHandler;
import io.netty.util.ReferenceCountUtil;
import java.util.ArrayDeque;
import java.util.Deque;
import org.jspecify.annotations.Nullable;

/**
 * One connection to a stub: reads requests, hands each over once it has been read to its end, and sends the replies in
 * the order of the requests, whatever the order in which they become known. A reply that never comes holds back those
 * behind it, as on any HTTP/1.1 connection.
 */
final class Connection extends ChannelInboundHandlerAdapter {

    /** Requests read ahead of their replies; beyond it reading stops. */
    private static final int MOST_AHEAD = 64;

    private final PlanRunner runner;
    private final Deque<Exchange> exchanges = new ArrayDeque<>();
    private @Nullable ChannelHandlerContext context;
    private @Nullable Exchange reading;
    private @Nullable ByteBuf body;
    /** No request is taken after one that closes the connection. */
    private boolean closing;

    private boolean tunnelling;

    Connection(PlanRunner runner) {
        this.runner = runner;
    }

    @Override
    public void channelActive(ChannelHandlerContext active) {
        context = active;
        runner.opened(this);
    }

    @Override
    public void channelRead(ChannelHandlerContext unused, Object message) {
        try {
            if (message instanceof HttpRequest head && !closing) {
                begin(head);
            }
            if (message instanceof HttpContent content && reading != null) {
                read(reading, content);
            }
        } finally {
            ReferenceCountUtil.release(message);
        }
    }

    @Override
    public void channelInactive(ChannelHandlerContext unused) {
        runner.closed(this);
        if (tunnelling) {
            runner.tunnelClosed();
        }
        releaseBody();
        exchanges.forEach(runner::abandon);
        exchanges.clear();
    }

    @Override
    public void exceptionCaught(ChannelHandlerContext failed, Throwable cause) {
        // The peer reset it, or it is beyond use: whatever is open on it ends as abandoned.
        failed.close();
    }

    /** Sends the reply of an exchange, now or when those before it have gone. */
    void reply(Exchange exchange, FullHttpResponse reply) {
        exchange.reply = reply;
        exchange.status = reply.status().code();
        while (!exchanges.isEmpty() && exchanges.getFirst().reply instanceof FullHttpResponse next) {
            send(exchanges.removeFirst(), next);
        }
        readAgain();
    }

    /** Resets the connection: the peer sees RST, not an orderly end. */
    void reset(long atNanos) {
        exchanges.forEach(exchange -> runner.end(exchange, false, 0, atNanos));
        exchanges.clear();
        ChannelHandlerContext open = context;
        if (open != null) {
            // One that is closed already is told so a moment later, and takes no options any more.
            if (open.channel().isActive()) {
                open.channel().config().setOption(ChannelOption.SO_LINGER, 0);
            }
            // Past the handler of TLS, if there is one: a process that dies says nothing more.
            ChannelHandlerContext tls = open.pipeline().context(SslHandler.class);
            (tls == null ? open : tls).close();
        }
    }

    /** Closes the connection in order; completes when it is closed. */
    ChannelFuture close() {
        return opened().close();
    }

    private void begin(HttpRequest head) {
        if (head.decoderResult().isFailure()) {
            refuse(runner.malformed(this));
            return;
        }
        Exchange exchange = runner.begin(this, head);
        boolean first = exchanges.isEmpty();
        exchanges.add(exchange);
        reading = exchange;
        closing = !exchange.keepAlive;
        if (first && HttpUtil.is100ContinueExpected(head) && !runner.hanging()) {
            opened().writeAndFlush(Replies.goOn());
        }
        if (exchanges.size() >= MOST_AHEAD) {
            opened().channel().config().setAutoRead(false);
        }
    }

    private void read(Exchange exchange, HttpContent content) {
        if (content.decoderResult().isFailure()) {
            opened().close();
            return;
        }
        runner.countBody(content.content().readableBytes());
        if (exchange.head != null && content.content().isReadable()) {
            keepBody(content.content());
        }
        if (content instanceof LastHttpContent) {
            reading = null;
            byte[] kept = body == null ? new byte[0] : ByteBufUtil.getBytes(body);
            releaseBody();
            runner.arrive(exchange, kept);
        }
    }

    private void keepBody(ByteBuf part) {
        ByteBuf kept = body == null ? body = Unpooled.buffer() : body;
        int room = Answers.MOST_BODY_BYTES - kept.readableBytes();
        kept.writeBytes(part, part.readerIndex(), Math.min(room, part.readableBytes()));
    }

    private void refuse(Exchange exchange) {
        closing = true;
        exchanges.add(exchange);
        reply(exchange, runner.replies().shortText(400, false));
    }

    private void send(Exchange exchange, FullHttpResponse reply) {
        boolean switches = reply.status().code() == HttpResponseStatus.SWITCHING_PROTOCOLS.code();
        if (!exchange.keepAlive && !switches) {
            reply.headers().set(HttpHeaderNames.CONNECTION, HttpHeaderValues.CLOSE);
        }
        ChannelFuture sent = opened().writeAndFlush(reply);
        if (sent.isDone()) {
            runner.sent(exchange, sent.isSuccess());
        } else {
            sent.addListener(done -> runner.sent(exchange, done.isSuccess()));
        }
        if (switches) {
            tunnel();
        } else if (!exchange.keepAlive) {
            sent.addListener(ChannelFutureListener.CLOSE);
        } else if (exchange.upgrade != null) {
            stayWithHttp();
        }
    }

    /** What was read behind the request goes to the tunnel with the rest. */
    private void tunnel() {
        tunnelling = true;
        runner.tunnelOpened();
        opened().channel().config().setOption(ChannelOption.ALLOW_HALF_CLOSURE, true);
        opened().pipeline().remove(HttpResponseEncoder.class);
        opened().pipeline().replace(RequestDecoder.class, "tunnel", new Tunnel());
    }

    private void stayWithHttp() {
        // Not from inside the sending of replies: requests that were held back may be answered at once.
        opened().executor().execute(() -> {
            RequestDecoder decoder = opened().pipeline().get(RequestDecoder.class);
            if (decoder != null) {
                decoder.goOn();
            }
        });
    }

    private void readAgain() {
        if (exchanges.size() < MOST_AHEAD && !opened().channel().config().isAutoRead()) {
            opened().channel().config().setAutoRead(true);
        }
    }

    private void releaseBody() {
        if (body != null) {
            body.release();
            body = null;
        }
    }

    private ChannelHandlerContext opened() {
        if (context == null) {
            throw new IllegalStateException("the connection is not open yet");
        }
        return context;
    }
}
