package steelyard.backends.stub;

import io.netty.buffer.ByteBuf;
import io.netty.buffer.Unpooled;
import io.netty.channel.ChannelHandlerContext;
import io.netty.handler.codec.http.HttpRequest;
import io.netty.handler.codec.http.HttpRequestDecoder;
import io.netty.handler.codec.http.LastHttpContent;
import java.util.List;
import org.jspecify.annotations.Nullable;

/**
 * Reads requests, and stops after one that asks for another protocol: until it is answered nobody knows what the octets behind
 * it are. They stay here, and go to whatever handler takes this one's place.
 */
final class RequestDecoder extends HttpRequestDecoder {

    private @Nullable ChannelHandlerContext context;
    private boolean asked;
    private boolean waiting;

    @Override
    public void handlerAdded(ChannelHandlerContext added) throws Exception {
        super.handlerAdded(added);
        context = added;
    }

    @Override
    protected void decode(ChannelHandlerContext read, ByteBuf in, List<Object> out) throws Exception {
        if (waiting) {
            return;
        }
        int before = out.size();
        super.decode(read, in, out);
        for (int i = before; i < out.size(); i++) {
            Object part = out.get(i);
            if (part instanceof HttpRequest head) {
                asked = Upgrade.asked(head) != null;
            }
            if (part instanceof LastHttpContent) {
                waiting = asked;
            }
        }
    }

    /** The answer was not 101: what follows is HTTP after all. */
    void goOn() {
        ChannelHandlerContext here = context;
        if (!waiting || here == null) {
            return;
        }
        waiting = false;
        try {
            channelRead(here, Unpooled.EMPTY_BUFFER);
            channelReadComplete(here);
        } catch (Exception failure) {
            here.fireExceptionCaught(failure);
        }
    }
}
