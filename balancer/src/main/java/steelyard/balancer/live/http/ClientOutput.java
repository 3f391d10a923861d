package steelyard.balancer.live.http;

import io.netty.buffer.ByteBuf;
import io.netty.buffer.Unpooled;
import io.netty.channel.Channel;
import io.netty.channel.ChannelFuture;
import io.netty.handler.codec.http.DefaultFullHttpResponse;
import io.netty.handler.codec.http.EmptyHttpHeaders;
import io.netty.handler.codec.http.HttpHeaderNames;
import io.netty.handler.codec.http.HttpHeaderValues;
import io.netty.handler.codec.http.HttpMethod;
import io.netty.handler.codec.http.HttpObject;
import io.netty.handler.codec.http.HttpRequest;
import io.netty.handler.codec.http.HttpResponse;
import io.netty.handler.codec.http.LastHttpContent;
import org.jspecify.annotations.Nullable;

/** What goes to one client. A head is held back until something follows it: a short answer is then one buffer. */
final class ClientOutput {
    private final Channel channel;
    private final ClientEncoder encoder;
    private final String balancer;
    private @Nullable HttpResponse heldHead;

    /** @param balancer the pseudonym in answers of our own */
    ClientOutput(Channel channel, ClientEncoder encoder, String balancer) {
        this.channel = channel;
        this.encoder = encoder;
        this.balancer = balancer;
    }

    /** The answers that follow are to this request. */
    void answers(HttpRequest request) {
        encoder.answersHead(HttpMethod.HEAD.equals(request.method()));
    }

    /** Has that done on the loop of the client, in a task of its own. */
    void later(Runnable what) {
        channel.eventLoop().execute(what);
    }

    boolean writable() {
        return channel.isWritable();
    }

    /** The head of an answer; it is written with what comes next, at the latest at the next flush. */
    void passHead(HttpResponse response, boolean close) {
        if (close) {
            response.headers().set(HttpHeaderNames.CONNECTION, HttpHeaderValues.CLOSE);
        }
        heldHead = response;
    }

    void write(HttpObject message) {
        HttpResponse head = heldHead;
        if (head != null && message instanceof LastHttpContent last) {
            heldHead = null;
            channel.write(whole(head, last.content()), channel.voidPromise());
        } else {
            writeHeldHead();
            channel.write(message, channel.voidPromise());
        }
    }

    private static HttpResponse whole(HttpResponse head, ByteBuf content) {
        return new DefaultFullHttpResponse(
                head.protocolVersion(), head.status(), content, head.headers(), EmptyHttpHeaders.INSTANCE);
    }

    private void writeHeldHead() {
        HttpResponse head = heldHead;
        if (head != null) {
            heldHead = null;
            channel.write(head, channel.voidPromise());
        }
    }

    void flush() {
        writeHeldHead();
        channel.flush();
    }

    /** Writes an answer of our own. */
    void own(OwnAnswer answer, boolean close) {
        channel.writeAndFlush(OwnAnswers.make(answer, balancer, !encoder.answersHead(), close), channel.voidPromise());
    }

    /** Writes what is held back, and says when everything before this point is out. */
    ChannelFuture drained() {
        writeHeldHead();
        return channel.writeAndFlush(Unpooled.EMPTY_BUFFER);
    }
}
