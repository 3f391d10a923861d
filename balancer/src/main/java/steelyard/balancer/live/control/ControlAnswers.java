package steelyard.balancer.live.control;

import io.netty.buffer.ByteBuf;
import io.netty.buffer.Unpooled;
import io.netty.handler.codec.http.DefaultFullHttpResponse;
import io.netty.handler.codec.http.FullHttpResponse;
import io.netty.handler.codec.http.HttpHeaderNames;
import io.netty.handler.codec.http.HttpHeaderValues;
import io.netty.handler.codec.http.HttpMethod;
import io.netty.handler.codec.http.HttpResponseStatus;
import io.netty.handler.codec.http.HttpVersion;
import java.nio.charset.StandardCharsets;

/** What the control page answers. Every answer closes its connection and is stored by nobody. */
final class ControlAnswers {
    private ControlAnswers() {}

    static FullHttpResponse line(HttpResponseStatus status, String line) {
        return of(status, "text/plain; charset=utf-8", line + "\n");
    }

    static FullHttpResponse page(String type, String text) {
        return of(HttpResponseStatus.OK, type, text);
    }

    static FullHttpResponse unauthorized() {
        FullHttpResponse refused = line(HttpResponseStatus.UNAUTHORIZED, "The token of the run is needed.");
        refused.headers().set(HttpHeaderNames.WWW_AUTHENTICATE, "Bearer");
        return refused;
    }

    static FullHttpResponse only(HttpMethod method) {
        FullHttpResponse refused = line(HttpResponseStatus.METHOD_NOT_ALLOWED, method.name() + " is served here.");
        refused.headers().set(HttpHeaderNames.ALLOW, method.asciiName());
        return refused;
    }

    static FullHttpResponse reply(CueTaker.Reply reply) {
        return switch (reply.kind()) {
            case TAKEN -> line(HttpResponseStatus.ACCEPTED, reply.line());
            case REFUSED -> line(HttpResponseStatus.BAD_REQUEST, reply.line());
            case NOTHING_PLAYS -> line(HttpResponseStatus.CONFLICT, reply.line());
        };
    }

    private static FullHttpResponse of(HttpResponseStatus status, String type, String text) {
        ByteBuf content = Unpooled.copiedBuffer(text, StandardCharsets.UTF_8);
        FullHttpResponse response = new DefaultFullHttpResponse(HttpVersion.HTTP_1_1, status, content);
        response.headers()
                .set(HttpHeaderNames.CONTENT_TYPE, type)
                .set(HttpHeaderNames.CONTENT_LENGTH, content.readableBytes())
                .set(HttpHeaderNames.CACHE_CONTROL, HttpHeaderValues.NO_STORE)
                .set(HttpHeaderNames.CONNECTION, HttpHeaderValues.CLOSE);
        return response;
    }
}
