package steelyard.balancer.live.http;

import io.netty.buffer.ByteBuf;
import io.netty.buffer.Unpooled;
import io.netty.handler.codec.http.DefaultFullHttpResponse;
import io.netty.handler.codec.http.DefaultHttpHeadersFactory;
import io.netty.handler.codec.http.FullHttpResponse;
import io.netty.handler.codec.http.HttpHeaderNames;
import io.netty.handler.codec.http.HttpHeaderValues;
import io.netty.handler.codec.http.HttpHeaders;
import io.netty.handler.codec.http.HttpResponseStatus;
import io.netty.handler.codec.http.HttpVersion;
import java.nio.charset.StandardCharsets;

/** Writes out {@link OwnAnswer}s. */
final class OwnAnswers {
    /** Seconds. What makes a pool empty is over when a probe passes, and probes run about once a second. */
    private static final String RETRY_AFTER = "1";

    private OwnAnswers() {}

    /** @param withContent false for an answer to HEAD: the same fields without the text */
    static FullHttpResponse make(OwnAnswer answer, String balancer, boolean withContent, boolean close) {
        byte[] text = (answer.text() + "\n").getBytes(StandardCharsets.US_ASCII);
        ByteBuf content = withContent ? Unpooled.wrappedBuffer(text) : Unpooled.EMPTY_BUFFER;
        FullHttpResponse response = new DefaultFullHttpResponse(
                HttpVersion.HTTP_1_1,
                answer.status(),
                content,
                DefaultHttpHeadersFactory.headersFactory(),
                DefaultHttpHeadersFactory.trailersFactory());
        HttpHeaders headers = response.headers();
        headers.set(HttpHeaderNames.DATE, HttpDate.now());
        headers.set(HttpHeaderNames.CONTENT_TYPE, "text/plain; charset=us-ascii");
        headers.set(HttpHeaderNames.CONTENT_LENGTH, text.length);
        if (answer.error() != null) {
            headers.set(Fields.PROXY_STATUS, name(balancer) + "; error=" + answer.error());
        }
        if (answer.status() == HttpResponseStatus.SERVICE_UNAVAILABLE) {
            headers.set(HttpHeaderNames.RETRY_AFTER, RETRY_AFTER);
        }
        if (answer == OwnAnswer.NO_ECHO || answer == OwnAnswer.OPTIONS_HERE) {
            headers.set(HttpHeaderNames.ALLOW, "GET, HEAD, POST, PUT, DELETE, OPTIONS, PATCH");
        }
        if (close) {
            headers.set(HttpHeaderNames.CONNECTION, HttpHeaderValues.CLOSE);
        }
        return response;
    }

    /** A token of a structured field starts with a letter (RFC 8941, 3.3.4); any other name is a string there. */
    private static String name(String balancer) {
        return Character.isLetter(balancer.charAt(0)) ? balancer : '"' + balancer + '"';
    }
}
