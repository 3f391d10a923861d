package steelyard.balancer.live.http;

import io.netty.buffer.ByteBuf;
import io.netty.buffer.ByteBufUtil;
import io.netty.channel.ChannelHandlerContext;
import io.netty.channel.ChannelPromise;
import io.netty.handler.codec.http.FullHttpResponse;
import io.netty.handler.codec.http.HttpHeaderNames;
import io.netty.handler.codec.http.HttpResponse;
import io.netty.handler.codec.http.HttpResponseEncoder;

/** Encodes answers; those to HEAD have no content, whatever their fields say. */
final class ClientEncoder extends HttpResponseEncoder {
    /** Copying so much costs less than a buffer more to write. */
    private static final int MOST_COPIED = 4096;

    private static final int USUAL_HEAD = 256;
    private static final int CRLF = '\r' << 8 | '\n';

    private boolean head;

    /** Whether the answers that follow are to HEAD. */
    void answersHead(boolean head) {
        this.head = head;
    }

    boolean answersHead() {
        return head;
    }

    /** A short answer becomes one buffer at once; all others go the long way. */
    @Override
    public void write(ChannelHandlerContext context, Object message, ChannelPromise promise) throws Exception {
        if (message instanceof FullHttpResponse answer && isShort(answer)) {
            ByteBuf content = answer.content();
            ByteBuf whole = context.alloc().directBuffer(USUAL_HEAD + content.readableBytes());
            encodeInitialLine(whole, answer);
            encodeHeaders(answer.headers(), whole);
            ByteBufUtil.writeShortBE(whole, CRLF);
            whole.writeBytes(content);
            content.release();
            context.write(whole, promise);
        } else {
            super.write(context, message, promise);
        }
    }

    private boolean isShort(FullHttpResponse answer) {
        int bytes = answer.content().readableBytes();
        return bytes > 0
                && bytes <= MOST_COPIED
                && !isContentAlwaysEmpty(answer)
                && !answer.headers().contains(HttpHeaderNames.TRANSFER_ENCODING);
    }

    @Override
    protected boolean isContentAlwaysEmpty(HttpResponse response) {
        return head && response.status().code() >= 200 || super.isContentAlwaysEmpty(response);
    }
}
