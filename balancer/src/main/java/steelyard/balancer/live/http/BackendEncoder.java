package steelyard.balancer.live.http;

import io.netty.buffer.ByteBuf;
import io.netty.buffer.ByteBufUtil;
import io.netty.channel.ChannelHandlerContext;
import io.netty.channel.ChannelPromise;
import io.netty.handler.codec.http.FullHttpRequest;
import io.netty.handler.codec.http.HttpHeaderNames;
import io.netty.handler.codec.http.HttpRequestEncoder;

/** Encodes requests; one without content becomes one buffer at once, all others go the long way. */
final class BackendEncoder extends HttpRequestEncoder {
    private static final int USUAL_HEAD = 512;
    private static final int CRLF = '\r' << 8 | '\n';

    @Override
    public void write(ChannelHandlerContext context, Object message, ChannelPromise promise) throws Exception {
        if (message instanceof FullHttpRequest request && isHeadAlone(request)) {
            ByteBuf head = context.alloc().directBuffer(USUAL_HEAD);
            encodeInitialLine(head, request);
            encodeHeaders(request.headers(), head);
            ByteBufUtil.writeShortBE(head, CRLF);
            request.release();
            context.write(head, promise);
        } else {
            super.write(context, message, promise);
        }
    }

    private static boolean isHeadAlone(FullHttpRequest request) {
        return !request.content().isReadable() && !request.headers().contains(HttpHeaderNames.TRANSFER_ENCODING);
    }
}
