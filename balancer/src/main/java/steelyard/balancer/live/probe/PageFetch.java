package steelyard.balancer.live.probe;

import io.netty.buffer.Unpooled;
import io.netty.channel.Channel;
import io.netty.channel.ChannelHandlerContext;
import io.netty.channel.ChannelInitializer;
import io.netty.channel.SimpleChannelInboundHandler;
import io.netty.handler.codec.http.DefaultFullHttpRequest;
import io.netty.handler.codec.http.FullHttpRequest;
import io.netty.handler.codec.http.FullHttpResponse;
import io.netty.handler.codec.http.HttpClientCodec;
import io.netty.handler.codec.http.HttpHeaderNames;
import io.netty.handler.codec.http.HttpHeaderValues;
import io.netty.handler.codec.http.HttpMethod;
import io.netty.handler.codec.http.HttpObjectAggregator;
import io.netty.handler.codec.http.HttpVersion;
import java.nio.charset.StandardCharsets;
import java.util.function.Consumer;
import org.jspecify.annotations.Nullable;

/** Asks for a load page on a connection that is used for nothing else, and takes the whole of it. */
final class PageFetch extends ChannelInitializer<Channel> {
    private static final int MOST_BYTES = 256 * 1024;

    private final String path;
    private final Lane<?> lane;
    private final Consumer<@Nullable String> read;

    /** @param read given the page, or null when none came; more than once, maybe */
    PageFetch(String path, Lane<?> lane, Consumer<@Nullable String> read) {
        this.path = path;
        this.lane = lane;
        this.read = read;
    }

    @Override
    protected void initChannel(Channel channel) {
        channel.pipeline().addLast(new HttpClientCodec(), new HttpObjectAggregator(MOST_BYTES), new Page());
        lane.secure(channel);
    }

    private FullHttpRequest request() {
        FullHttpRequest request =
                new DefaultFullHttpRequest(HttpVersion.HTTP_1_1, HttpMethod.GET, path, Unpooled.EMPTY_BUFFER);
        request.headers()
                .set(HttpHeaderNames.HOST, lane.host())
                .set(HttpHeaderNames.ACCEPT, "application/openmetrics-text; version=1.0.0")
                .set(HttpHeaderNames.CONNECTION, HttpHeaderValues.CLOSE);
        return request;
    }

    private final class Page extends SimpleChannelInboundHandler<FullHttpResponse> {
        @Override
        public void channelActive(ChannelHandlerContext context) {
            context.writeAndFlush(request(), context.voidPromise());
        }

        @Override
        protected void channelRead0(ChannelHandlerContext context, FullHttpResponse answer) {
            int status = answer.status().code();
            boolean good = answer.decoderResult().isSuccess() && status >= 200 && status <= 299;
            read.accept(good ? answer.content().toString(StandardCharsets.UTF_8) : null);
        }

        @Override
        public void channelInactive(ChannelHandlerContext context) {
            read.accept(null);
        }

        @Override
        public void exceptionCaught(ChannelHandlerContext context, Throwable cause) {
            read.accept(null);
        }
    }
}
