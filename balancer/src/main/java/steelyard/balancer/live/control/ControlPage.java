package steelyard.balancer.live.control;

import io.netty.buffer.ByteBuf;
import io.netty.buffer.Unpooled;
import io.netty.channel.Channel;
import io.netty.channel.ChannelFutureListener;
import io.netty.channel.ChannelHandlerContext;
import io.netty.channel.ChannelInitializer;
import io.netty.channel.SimpleChannelInboundHandler;
import io.netty.channel.group.ChannelGroup;
import io.netty.channel.group.DefaultChannelGroup;
import io.netty.handler.codec.http.DefaultFullHttpResponse;
import io.netty.handler.codec.http.FullHttpRequest;
import io.netty.handler.codec.http.FullHttpResponse;
import io.netty.handler.codec.http.HttpHeaderNames;
import io.netty.handler.codec.http.HttpHeaderValues;
import io.netty.handler.codec.http.HttpMethod;
import io.netty.handler.codec.http.HttpObjectAggregator;
import io.netty.handler.codec.http.HttpResponseStatus;
import io.netty.handler.codec.http.HttpServerCodec;
import io.netty.handler.codec.http.HttpVersion;
import io.netty.util.concurrent.DefaultEventExecutor;
import io.netty.util.concurrent.DefaultThreadFactory;
import io.netty.util.concurrent.GlobalEventExecutor;
import java.io.IOException;
import java.net.InetAddress;
import java.net.InetSocketAddress;
import java.nio.charset.StandardCharsets;
import java.security.MessageDigest;
import java.util.concurrent.TimeUnit;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.live.guard.GuardedDecider;
import steelyard.balancer.live.tcp.Transport;
import steelyard.balancer.settings.BalancerSettings;

/** {@code GET /metrics} on a loopback port, for whoever shows the run's token as a bearer (RFC 6750). Thread-safe. */
public final class ControlPage {
    private static final int MOST_REQUEST = 4096;
    private static final long END_SECONDS = 10;

    private final BalancerSettings settings;
    private final GuardedDecider decider;
    private final Counts counts;
    private final byte[] authorization;
    private final ChannelGroup channels = new DefaultChannelGroup(GlobalEventExecutor.INSTANCE, true);

    /** Makes the pages, and alone touches the meters. */
    private final DefaultEventExecutor maker =
            new DefaultEventExecutor(new DefaultThreadFactory("steelyard-control", true));

    private @Nullable Meters meters;

    /** @param token that a reader has to show */
    public ControlPage(BalancerSettings settings, GuardedDecider decider, Counts counts, String token) {
        this.settings = settings;
        this.decider = decider;
        this.counts = counts;
        this.authorization = ("Bearer " + token).getBytes(StandardCharsets.US_ASCII);
    }

    /**
     * Binds the page to a loopback port.
     *
     * @param port 0 for any that is free
     * @throws IOException when the port cannot be had
     */
    public InetSocketAddress bind(Transport transport, int port) throws IOException {
        var binding = transport
                .server()
                .childHandler(new Connections())
                .bind(new InetSocketAddress(InetAddress.getLoopbackAddress(), port))
                .awaitUninterruptibly();
        if (!binding.isSuccess()) {
            throw new IOException(String.valueOf(binding.cause().getMessage()), binding.cause());
        }
        channels.add(binding.channel());
        return (InetSocketAddress) binding.channel().localAddress();
    }

    /** Closes the port and its connections, and waits for it. */
    public void close() {
        channels.close().awaitUninterruptibly();
        if (!maker.shutdownGracefully(0, END_SECONDS, TimeUnit.SECONDS)
                .awaitUninterruptibly(END_SECONDS, TimeUnit.SECONDS)) {
            throw new IllegalStateException("the control page did not end in " + END_SECONDS + " s");
        }
    }

    private final class Connections extends ChannelInitializer<Channel> {
        @Override
        protected void initChannel(Channel channel) {
            channels.add(channel);
            channel.pipeline().addLast(new HttpServerCodec(), new HttpObjectAggregator(MOST_REQUEST), new Reader());
        }
    }

    private final class Reader extends SimpleChannelInboundHandler<FullHttpRequest> {
        @Override
        protected void channelRead0(ChannelHandlerContext context, FullHttpRequest request) {
            FullHttpResponse refusal = refusal(request);
            if (refusal != null) {
                send(context, refusal);
            } else {
                maker.execute(() -> send(context, page()));
            }
        }

        private void send(ChannelHandlerContext context, FullHttpResponse answer) {
            context.writeAndFlush(answer).addListener(ChannelFutureListener.CLOSE);
        }

        @Override
        public void exceptionCaught(ChannelHandlerContext context, Throwable cause) {
            context.close();
        }
    }

    private @Nullable FullHttpResponse refusal(FullHttpRequest request) {
        if (request.decoderResult().isFailure()) {
            return text(HttpResponseStatus.BAD_REQUEST, "The request is not valid HTTP.\n");
        }
        if (!shown(request.headers().get(HttpHeaderNames.AUTHORIZATION))) {
            FullHttpResponse refused = text(HttpResponseStatus.UNAUTHORIZED, "The token of the run is needed.\n");
            refused.headers().set(HttpHeaderNames.WWW_AUTHENTICATE, "Bearer");
            return refused;
        }
        if (!request.uri().equals("/metrics")) {
            return text(HttpResponseStatus.NOT_FOUND, "There is /metrics here.\n");
        }
        if (!HttpMethod.GET.equals(request.method())) {
            FullHttpResponse refused = text(HttpResponseStatus.METHOD_NOT_ALLOWED, "GET is served here.\n");
            refused.headers().set(HttpHeaderNames.ALLOW, HttpMethod.GET.asciiName());
            return refused;
        }
        return decider.hasBegun() ? null : text(HttpResponseStatus.SERVICE_UNAVAILABLE, "Nothing is decided yet.\n");
    }

    private FullHttpResponse page() {
        if (meters == null) {
            meters = new Meters(settings, decider, counts);
        }
        FullHttpResponse page = text(HttpResponseStatus.OK, meters.page());
        page.headers().set(HttpHeaderNames.CONTENT_TYPE, Meters.OPEN_METRICS);
        return page;
    }

    /** Takes the same time for every wrong token of one length. */
    private boolean shown(@Nullable String given) {
        return given != null && MessageDigest.isEqual(authorization, given.getBytes(StandardCharsets.UTF_8));
    }

    private static FullHttpResponse text(HttpResponseStatus status, String text) {
        ByteBuf content = Unpooled.copiedBuffer(text, StandardCharsets.UTF_8);
        FullHttpResponse response = new DefaultFullHttpResponse(HttpVersion.HTTP_1_1, status, content);
        response.headers()
                .set(HttpHeaderNames.CONTENT_TYPE, "text/plain; charset=utf-8")
                .set(HttpHeaderNames.CONTENT_LENGTH, content.readableBytes())
                .set(HttpHeaderNames.CONNECTION, HttpHeaderValues.CLOSE);
        return response;
    }
}
