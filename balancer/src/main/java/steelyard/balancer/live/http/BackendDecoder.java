package steelyard.balancer.live.http;

import io.netty.channel.ChannelHandlerContext;
import io.netty.handler.codec.http.HttpDecoderConfig;
import io.netty.handler.codec.http.HttpMessage;
import io.netty.handler.codec.http.HttpResponse;
import io.netty.handler.codec.http.HttpResponseDecoder;

/** Decodes answers, knows those to HEAD, and remembers whether any byte of an answer came. */
final class BackendDecoder extends HttpResponseDecoder {
    private final Runnable bytesCame;
    private boolean head;
    private boolean bytesSeen;

    /** @param bytesCame told of every read before it is decoded, since a head may come in many */
    BackendDecoder(HttpDecoderConfig config, Runnable bytesCame) {
        super(config);
        this.bytesCame = bytesCame;
    }

    /** The next answer belongs to a new request. */
    void expect(boolean head) {
        this.head = head;
        this.bytesSeen = false;
    }

    boolean bytesSeen() {
        return bytesSeen;
    }

    /** Whether everything that came has been decoded. */
    boolean isDrained() {
        return actualReadableBytes() == 0;
    }

    @Override
    public void channelRead(ChannelHandlerContext ctx, Object message) throws Exception {
        bytesSeen = true;
        bytesCame.run();
        super.channelRead(ctx, message);
    }

    @Override
    protected boolean isContentAlwaysEmpty(HttpMessage message) {
        int status = ((HttpResponse) message).status().code();
        return status == 101 || head && status >= 200 || super.isContentAlwaysEmpty(message);
    }
}
