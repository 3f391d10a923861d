package steelyard.balancer.live.control;

import io.netty.channel.Channel;
import io.netty.channel.ChannelFutureListener;
import io.netty.channel.ChannelHandlerContext;
import io.netty.channel.ChannelInitializer;
import io.netty.channel.SimpleChannelInboundHandler;
import io.netty.channel.group.ChannelGroup;
import io.netty.channel.group.DefaultChannelGroup;
import io.netty.handler.codec.http.FullHttpRequest;
import io.netty.handler.codec.http.FullHttpResponse;
import io.netty.handler.codec.http.HttpHeaderNames;
import io.netty.handler.codec.http.HttpMethod;
import io.netty.handler.codec.http.HttpObjectAggregator;
import io.netty.handler.codec.http.HttpResponseStatus;
import io.netty.handler.codec.http.HttpServerCodec;
import io.netty.handler.timeout.ReadTimeoutHandler;
import io.netty.util.concurrent.DefaultEventExecutor;
import io.netty.util.concurrent.DefaultThreadFactory;
import io.netty.util.concurrent.GlobalEventExecutor;
import java.io.IOException;
import java.net.InetSocketAddress;
import java.nio.charset.StandardCharsets;
import java.security.MessageDigest;
import java.util.List;
import java.util.concurrent.TimeUnit;
import java.util.function.IntToLongFunction;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.live.guard.GuardedDecider;
import steelyard.balancer.live.tcp.Transport;
import steelyard.balancer.settings.BalancerSettings;

/**
 * {@code GET /metrics}, {@code GET /state} and {@code POST /cues} on a loopback port, for whoever shows the run's token as
 * a bearer (RFC 6750). Thread-safe.
 */
public final class ControlPage {
    private static final int MOST_REQUEST = 16 * 1024;
    private static final long END_SECONDS = 10;
    private static final String METRICS = "/metrics";
    private static final String STATE = "/state";
    private static final String CUES = "/cues";

    private final BalancerSettings settings;
    private final GuardedDecider decider;
    private final Counts counts;
    private final IntToLongFunction failedHandshakes;
    private final CueTaker cues;
    private final byte[] authorization;
    private final ChannelGroup channels = new DefaultChannelGroup(GlobalEventExecutor.INSTANCE, true);

    /** Makes the pages and sends the cues, and alone touches the meters. */
    private final DefaultEventExecutor maker =
            new DefaultEventExecutor(new DefaultThreadFactory("steelyard-control", true));

    private final StatePage state;
    private @Nullable Meters meters;

    /**
     * @param failedHandshakes how many there were at the front of a pool, by its number; from any thread
     * @param cues where the cues go that are sent here
     * @param token that a reader has to show
     */
    public ControlPage(
            BalancerSettings settings,
            GuardedDecider decider,
            Counts counts,
            IntToLongFunction failedHandshakes,
            CueTaker cues,
            String token) {
        this.settings = settings;
        this.decider = decider;
        this.counts = counts;
        this.failedHandshakes = failedHandshakes;
        this.cues = cues;
        this.state = new StatePage(settings, decider);
        this.authorization = ("Bearer " + token).getBytes(StandardCharsets.US_ASCII);
    }

    /**
     * Binds the page to a loopback port.
     *
     * @param port 0 for any that is free
     * @throws IOException when the port cannot be had
     */
    public InetSocketAddress bind(Transport transport, int port) throws IOException {
        Channel listening = Transport.listen(transport.server().childHandler(new Connections()), port);
        channels.add(listening);
        return (InetSocketAddress) listening.localAddress();
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
            channel.pipeline()
                    .addLast(
                            new ReadTimeoutHandler(END_SECONDS, TimeUnit.SECONDS),
                            new HttpServerCodec(),
                            new HttpObjectAggregator(MOST_REQUEST),
                            new Reader());
        }
    }

    private final class Reader extends SimpleChannelInboundHandler<FullHttpRequest> {
        @Override
        protected void channelRead0(ChannelHandlerContext context, FullHttpRequest request) {
            FullHttpResponse refusal = refusal(request);
            if (refusal != null) {
                send(context, refusal);
                return;
            }
            String path = request.uri();
            String content = request.content().toString(StandardCharsets.UTF_8);
            maker.execute(() -> send(context, answer(path, content)));
        }

        private void send(ChannelHandlerContext context, FullHttpResponse answer) {
            context.writeAndFlush(answer).addListener(ChannelFutureListener.CLOSE);
        }

        @Override
        public void exceptionCaught(ChannelHandlerContext context, Throwable cause) {
            context.close();
        }
    }

    /** The token comes first: without it nothing is said, not even what there is here. */
    private @Nullable FullHttpResponse refusal(FullHttpRequest request) {
        if (request.decoderResult().isFailure()) {
            return ControlAnswers.line(HttpResponseStatus.BAD_REQUEST, "The request is not valid HTTP.");
        }
        List<String> shown = request.headers().getAll(HttpHeaderNames.AUTHORIZATION);
        if (shown.size() != 1 || !shown(shown.get(0))) {
            return ControlAnswers.unauthorized();
        }
        HttpMethod method = method(request.uri());
        if (method == null) {
            return ControlAnswers.line(HttpResponseStatus.NOT_FOUND, "There are /metrics, /state and /cues here.");
        }
        if (!method.equals(request.method())) {
            return ControlAnswers.only(method);
        }
        if (decider.hasBegun()) {
            return null;
        }
        return request.uri().equals(CUES)
                ? ControlAnswers.reply(CueTaker.Reply.nothingPlays())
                : ControlAnswers.line(HttpResponseStatus.SERVICE_UNAVAILABLE, "Nothing is decided yet.");
    }

    private static @Nullable HttpMethod method(String path) {
        return switch (path) {
            case METRICS, STATE -> HttpMethod.GET;
            case CUES -> HttpMethod.POST;
            default -> null;
        };
    }

    private FullHttpResponse answer(String path, String content) {
        return switch (path) {
            case METRICS -> ControlAnswers.page(Meters.OPEN_METRICS, meters().page());
            case STATE -> ControlAnswers.page("application/json", state.page());
            default -> ControlAnswers.reply(cues.take(content));
        };
    }

    private Meters meters() {
        if (meters == null) {
            meters = new Meters(settings, decider, counts, failedHandshakes);
        }
        return meters;
    }

    /** Takes the same time for every wrong token of one length. */
    private boolean shown(String given) {
        return MessageDigest.isEqual(authorization, given.getBytes(StandardCharsets.UTF_8));
    }
}
