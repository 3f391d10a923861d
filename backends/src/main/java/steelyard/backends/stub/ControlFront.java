package steelyard.backends.stub;

import io.netty.bootstrap.ServerBootstrap;
import io.netty.buffer.ByteBufUtil;
import io.netty.buffer.Unpooled;
import io.netty.channel.Channel;
import io.netty.channel.ChannelFuture;
import io.netty.channel.ChannelHandlerContext;
import io.netty.channel.ChannelInitializer;
import io.netty.channel.ChannelOption;
import io.netty.channel.EventLoop;
import io.netty.channel.SimpleChannelInboundHandler;
import io.netty.channel.socket.SocketChannel;
import io.netty.handler.codec.http.DefaultFullHttpResponse;
import io.netty.handler.codec.http.FullHttpRequest;
import io.netty.handler.codec.http.HttpHeaderNames;
import io.netty.handler.codec.http.HttpHeaderValues;
import io.netty.handler.codec.http.HttpMethod;
import io.netty.handler.codec.http.HttpObjectAggregator;
import io.netty.handler.codec.http.HttpResponseStatus;
import io.netty.handler.codec.http.HttpServerCodec;
import io.netty.handler.codec.http.HttpUtil;
import io.netty.handler.codec.http.HttpVersion;
import java.net.InetSocketAddress;
import java.nio.charset.StandardCharsets;
import java.security.MessageDigest;
import java.util.concurrent.CompletableFuture;
import org.jspecify.annotations.Nullable;

/**
 * The control of a stub over HTTP, on a loopback port of its own: {@code POST /change} and {@code GET /figures}, both
 * JSON, both with {@code Authorization: Bearer TOKEN}. Any thread.
 */
public final class ControlFront {

    private static final int MOST_BYTES = 64 << 10;

    private final Channel listening;

    private ControlFront(Channel listening) {
        this.listening = listening;
    }

    /**
     * Starts a front.
     *
     * @param port of 127.0.0.1, or 0 for any
     * @param token made for the play; every call has to carry it
     * @return failed with the {@link java.io.IOException} if the port cannot be opened
     */
    public static CompletableFuture<ControlFront> start(
            StubControl control, Transport transport, EventLoop loop, int port, String token) {
        if (token.isBlank()) {
            throw new IllegalArgumentException("a control front needs a token");
        }
        byte[] bearer = ("Bearer " + token).getBytes(StandardCharsets.UTF_8);
        CompletableFuture<ControlFront> started = new CompletableFuture<>();
        new ServerBootstrap()
                .group(loop)
                .channel(transport.serverChannel())
                .option(ChannelOption.SO_REUSEADDR, true)
                .childHandler(new ChannelInitializer<SocketChannel>() {
                    @Override
                    protected void initChannel(SocketChannel channel) {
                        channel.pipeline()
                                .addLast(
                                        new HttpServerCodec(),
                                        new HttpObjectAggregator(MOST_BYTES),
                                        new Handler(control, bearer));
                    }
                })
                .bind(new InetSocketAddress("127.0.0.1", port))
                .addListener((ChannelFuture bound) -> {
                    if (bound.isSuccess()) {
                        started.complete(new ControlFront(bound.channel()));
                    } else {
                        started.completeExceptionally(bound.cause());
                    }
                });
        return started;
    }

    public InetSocketAddress address() {
        return (InetSocketAddress) listening.localAddress();
    }

    /** Completes when the port is closed. */
    public CompletableFuture<Void> close() {
        CompletableFuture<Void> closed = new CompletableFuture<>();
        listening.close().addListener(done -> closed.complete(null));
        return closed;
    }

    private static final class Handler extends SimpleChannelInboundHandler<FullHttpRequest> {

        private final StubControl control;
        private final byte[] bearer;

        Handler(StubControl control, byte[] bearer) {
            this.control = control;
            this.bearer = bearer;
        }

        @Override
        protected void channelRead0(ChannelHandlerContext context, FullHttpRequest request) {
            boolean keepAlive = HttpUtil.isKeepAlive(request);
            if (!isAllowed(request)) {
                send(
                        context,
                        keepAlive,
                        HttpResponseStatus.UNAUTHORIZED,
                        new ControlJson.Problem("the token is missing or wrong"));
            } else if (request.uri().equals("/figures") && request.method().equals(HttpMethod.GET)) {
                control.figures().whenComplete((figures, failure) -> answer(context, keepAlive, figures, failure));
            } else if (request.uri().equals("/change") && request.method().equals(HttpMethod.POST)) {
                change(context, keepAlive, ByteBufUtil.getBytes(request.content()));
            } else {
                send(
                        context,
                        keepAlive,
                        HttpResponseStatus.NOT_FOUND,
                        new ControlJson.Problem("there is POST /change and GET /figures"));
            }
        }

        @Override
        public void exceptionCaught(ChannelHandlerContext context, Throwable cause) {
            context.close();
        }

        /** Takes the same time for any wrong token of one length, so that it cannot be guessed piece by piece. */
        private boolean isAllowed(FullHttpRequest request) {
            String given = request.headers().get(HttpHeaderNames.AUTHORIZATION, "");
            return MessageDigest.isEqual(bearer, given.getBytes(StandardCharsets.UTF_8));
        }

        private void change(ChannelHandlerContext context, boolean keepAlive, byte[] json) {
            try {
                control.apply(ControlJson.readChange(json))
                        .thenApply(ControlJson.Applied::new)
                        .whenComplete((applied, failure) -> answer(context, keepAlive, applied, failure));
            } catch (IllegalArgumentException bad) {
                send(
                        context,
                        keepAlive,
                        HttpResponseStatus.BAD_REQUEST,
                        new ControlJson.Problem(String.valueOf(bad.getMessage())));
            }
        }

        private static void answer(
                ChannelHandlerContext context, boolean keepAlive, @Nullable Object done, @Nullable Throwable failure) {
            if (done != null) {
                send(context, keepAlive, HttpResponseStatus.OK, done);
            } else {
                send(
                        context,
                        keepAlive,
                        HttpResponseStatus.SERVICE_UNAVAILABLE,
                        new ControlJson.Problem(String.valueOf(failure)));
            }
        }

        private static void send(
                ChannelHandlerContext context, boolean keepAlive, HttpResponseStatus status, Object body) {
            DefaultFullHttpResponse reply = new DefaultFullHttpResponse(
                    HttpVersion.HTTP_1_1, status, Unpooled.wrappedBuffer(ControlJson.write(body)));
            reply.headers().set(HttpHeaderNames.CONTENT_TYPE, HttpHeaderValues.APPLICATION_JSON);
            HttpUtil.setContentLength(reply, reply.content().readableBytes());
            HttpUtil.setKeepAlive(reply, keepAlive);
            ChannelFuture sent = context.writeAndFlush(reply);
            if (!keepAlive) {
                sent.addListener(done -> context.close());
            }
        }
    }
}
