package steelyard.backends.stub;

import static io.netty.handler.codec.http.HttpVersion.HTTP_1_1;

import io.netty.buffer.ByteBuf;
import io.netty.buffer.Unpooled;
import io.netty.handler.codec.http.DefaultFullHttpResponse;
import io.netty.handler.codec.http.DefaultHttpHeadersFactory;
import io.netty.handler.codec.http.FullHttpResponse;
import io.netty.handler.codec.http.HttpHeaderNames;
import io.netty.handler.codec.http.HttpHeaderValues;
import io.netty.handler.codec.http.HttpHeaders;
import io.netty.handler.codec.http.HttpHeadersFactory;
import io.netty.handler.codec.http.HttpResponseStatus;
import java.nio.ByteBuffer;
import java.nio.charset.StandardCharsets;
import java.util.Map;

/** Makes the messages that a stub sends. Plain bodies are made once and shared. */
final class Replies {

    private static final String LINE = "served by a steelyard backend\n";

    private static final HttpHeadersFactory HEADERS =
            DefaultHttpHeadersFactory.headersFactory().withValidation(false);
    private static final HttpHeadersFactory TRAILERS =
            DefaultHttpHeadersFactory.trailersFactory().withValidation(false);

    private final ByteBuf plainBody;

    /** @param plainBytes size of the plain answer's body */
    Replies(int plainBytes) {
        byte[] text = LINE.repeat(plainBytes / LINE.length() + 1)
                .substring(0, plainBytes)
                .getBytes(StandardCharsets.US_ASCII);
        plainBody = shared(text);
    }

    FullHttpResponse plain(int status, boolean headOnly) {
        return text(status, plainBody.duplicate(), headOnly);
    }

    /** A short text of the status' own words. */
    FullHttpResponse shortText(int status, boolean headOnly) {
        String text = HttpResponseStatus.valueOf(status).reasonPhrase() + "\n";
        return text(status, Unpooled.wrappedBuffer(text.getBytes(StandardCharsets.US_ASCII)), headOnly);
    }

    /** The load page. */
    FullHttpResponse page(byte[] text, boolean headOnly) {
        FullHttpResponse reply = text(HttpResponseStatus.OK.code(), Unpooled.wrappedBuffer(text), headOnly);
        reply.headers().set(HttpHeaderNames.CONTENT_TYPE, LoadText.OPEN_METRICS);
        return reply;
    }

    /**
     * What a mapping answers: its header fields as they stand, its body framed by its true length, or in chunks where the
     * mapping names that transfer coding.
     */
    FullHttpResponse mapped(Answers.Answer answer, boolean headOnly) {
        ByteBuf body = Unpooled.wrappedBuffer(answer.body());
        FullHttpResponse reply = message(answer.status(), headOnly ? Unpooled.EMPTY_BUFFER : body);
        for (Map.Entry<String, String> field : answer.headers()) {
            reply.headers().add(field.getKey(), field.getValue());
        }
        HttpHeaders headers = reply.headers();
        boolean chunked = headers.containsValue(HttpHeaderNames.TRANSFER_ENCODING, HttpHeaderValues.CHUNKED, true);
        headers.remove(HttpHeaderNames.TRANSFER_ENCODING);
        headers.remove(HttpHeaderNames.CONTENT_LENGTH);
        headers.remove(HttpHeaderNames.CONNECTION);
        if (hasNoBody(answer.status())) {
            return reply.replace(Unpooled.EMPTY_BUFFER);
        }
        if (chunked && !headOnly) {
            headers.set(HttpHeaderNames.TRANSFER_ENCODING, HttpHeaderValues.CHUNKED);
        } else if (!chunked) {
            headers.set(HttpHeaderNames.CONTENT_LENGTH, answer.body().length);
        }
        return reply;
    }

    /** Agrees to go on in another protocol. */
    FullHttpResponse switching(String protocol) {
        FullHttpResponse reply = message(HttpResponseStatus.SWITCHING_PROTOCOLS.code(), Unpooled.EMPTY_BUFFER);
        reply.headers().set(HttpHeaderNames.CONNECTION, HttpHeaderValues.UPGRADE);
        reply.headers().set(HttpHeaderNames.UPGRADE, protocol);
        return reply;
    }

    /** Tells a client that waits to send its body. */
    static FullHttpResponse goOn() {
        return message(HttpResponseStatus.CONTINUE.code(), Unpooled.EMPTY_BUFFER);
    }

    private static FullHttpResponse text(int status, ByteBuf body, boolean headOnly) {
        if (hasNoBody(status)) {
            return message(status, Unpooled.EMPTY_BUFFER);
        }
        FullHttpResponse reply = message(status, headOnly ? Unpooled.EMPTY_BUFFER : body);
        reply.headers().set(HttpHeaderNames.CONTENT_TYPE, HttpHeaderValues.TEXT_PLAIN);
        reply.headers().set(HttpHeaderNames.CONTENT_LENGTH, body.readableBytes());
        return reply;
    }

    private static FullHttpResponse message(int status, ByteBuf body) {
        return new DefaultFullHttpResponse(HTTP_1_1, HttpResponseStatus.valueOf(status), body, HEADERS, TRAILERS);
    }

    /** Of memory that goes with its last reference: nobody has to release it. */
    private static ByteBuf shared(byte[] bytes) {
        ByteBuffer direct = ByteBuffer.allocateDirect(bytes.length).put(bytes).flip();
        return Unpooled.unreleasableBuffer(Unpooled.wrappedBuffer(direct).asReadOnly());
    }

    /** RFC 9110, 6.4.1. */
    private static boolean hasNoBody(int status) {
        return status == 204 || status == 304;
    }
}
