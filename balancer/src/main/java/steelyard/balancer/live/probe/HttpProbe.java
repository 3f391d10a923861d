package steelyard.balancer.live.probe;

import io.netty.buffer.Unpooled;
import io.netty.channel.Channel;
import io.netty.channel.ChannelHandlerContext;
import io.netty.channel.ChannelInitializer;
import io.netty.channel.SimpleChannelInboundHandler;
import io.netty.handler.codec.http.DefaultFullHttpRequest;
import io.netty.handler.codec.http.FullHttpRequest;
import io.netty.handler.codec.http.HttpClientCodec;
import io.netty.handler.codec.http.HttpHeaderNames;
import io.netty.handler.codec.http.HttpHeaderValues;
import io.netty.handler.codec.http.HttpMethod;
import io.netty.handler.codec.http.HttpObject;
import io.netty.handler.codec.http.HttpResponse;
import io.netty.handler.codec.http.HttpVersion;
import io.netty.util.AsciiString;
import java.util.function.Consumer;

/** Asks for the probe's path on a connection that is used for nothing else, and looks at the status. */
final class HttpProbe extends ChannelInitializer<Channel> {
    /** Tells a backend that, and which, probe this is. */
    private static final AsciiString PROBE = AsciiString.cached("steelyard-probe");

    private final String path;
    private final Lane<?> lane;
    private final long number;
    private final Consumer<Boolean> answered;

    /** @param answered told whether the answer was good; more than once, maybe */
    HttpProbe(String path, Lane<?> lane, long number, Consumer<Boolean> answered) {
        this.path = path;
        this.lane = lane;
        this.number = number;
        this.answered = answered;
    }

    @Override
    protected void initChannel(Channel channel) {
        channel.pipeline().addLast(new HttpClientCodec(), new Answer());
        lane.secure(channel);
    }

    private FullHttpRequest request() {
        FullHttpRequest request =
                new DefaultFullHttpRequest(HttpVersion.HTTP_1_1, HttpMethod.GET, path, Unpooled.EMPTY_BUFFER);
        request.headers()
                .set(HttpHeaderNames.HOST, lane.host())
                .set(HttpHeaderNames.CONNECTION, HttpHeaderValues.CLOSE)
                .set(PROBE, number);
        return request;
    }

    private final class Answer extends SimpleChannelInboundHandler<HttpObject> {
        @Override
        public void channelActive(ChannelHandlerContext context) {
            context.writeAndFlush(request(), context.voidPromise());
        }

        @Override
        protected void channelRead0(ChannelHandlerContext context, HttpObject part) {
            if (part.decoderResult().isFailure()) {
                answered.accept(false);
            } else if (part instanceof HttpResponse response
                    && response.status().code() >= 200) {
                int status = response.status().code();
                answered.accept(status <= 299);
            }
        }

        @Override
        public void channelInactive(ChannelHandlerContext context) {
            answered.accept(false);
        }

        @Override
        public void exceptionCaught(ChannelHandlerContext context, Throwable cause) {
            answered.accept(false);
        }
    }
}
