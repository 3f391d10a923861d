package steelyard.harness.stage.live;

import io.netty.buffer.ByteBuf;
import io.netty.buffer.Unpooled;
import io.netty.handler.codec.http.DefaultFullHttpRequest;
import io.netty.handler.codec.http.DefaultHttpHeadersFactory;
import io.netty.handler.codec.http.EmptyHttpHeaders;
import io.netty.handler.codec.http.FullHttpRequest;
import io.netty.handler.codec.http.HttpHeaderNames;
import io.netty.handler.codec.http.HttpHeaders;
import io.netty.handler.codec.http.HttpMethod;
import io.netty.handler.codec.http.HttpVersion;
import steelyard.backends.stub.StubHeaders;
import steelyard.drills.model.Traffic;

/** Makes the messages of one traffic stream. Bodies are zeros, shared by all requests of a kind. */
final class RequestMaker {
    private final String authority;
    private final HttpMethod[] methods;
    private final String[] paths;
    private final ByteBuf[] bodies;

    /** @param authority host and port of the front */
    RequestMaker(Traffic traffic, String authority) {
        this.authority = authority;
        this.methods = traffic.requests().stream()
                .map(each -> HttpMethod.valueOf(each.method()))
                .toArray(HttpMethod[]::new);
        this.paths = traffic.requests().stream().map(Traffic.Request::path).toArray(String[]::new);
        this.bodies = traffic.requests().stream()
                .map(each -> Unpooled.unreleasableBuffer(
                        Unpooled.wrappedBuffer(new byte[each.bodyBytes()]).asReadOnly()))
                .toArray(ByteBuf[]::new);
    }

    FullHttpRequest make(long request, int kind) {
        HttpHeaders headers = DefaultHttpHeadersFactory.headersFactory().newHeaders();
        headers.set(HttpHeaderNames.HOST, authority);
        headers.set(StubHeaders.REQUEST, Long.toString(request));
        ByteBuf body = bodies[kind].duplicate();
        if (body.isReadable()) {
            headers.set(HttpHeaderNames.CONTENT_LENGTH, Integer.toString(body.readableBytes()));
        }
        return new DefaultFullHttpRequest(
                HttpVersion.HTTP_1_1, methods[kind], paths[kind], body, headers, EmptyHttpHeaders.INSTANCE);
    }
}
