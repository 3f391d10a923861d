package steelyard.harness.stage.live;

import io.netty.buffer.ByteBuf;
import io.netty.buffer.Unpooled;
import io.netty.handler.codec.http.DefaultFullHttpRequest;
import io.netty.handler.codec.http.DefaultHttpHeadersFactory;
import io.netty.handler.codec.http.EmptyHttpHeaders;
import io.netty.handler.codec.http.FullHttpRequest;
import io.netty.handler.codec.http.HttpHeaderNames;
import io.netty.handler.codec.http.HttpHeaderValues;
import io.netty.handler.codec.http.HttpHeaders;
import io.netty.handler.codec.http.HttpMethod;
import io.netty.handler.codec.http.HttpVersion;
import java.util.List;
import steelyard.backends.stub.StubHeaders;
import steelyard.drills.model.Traffic;
import steelyard.harness.stage.Clientele;

/** Makes the messages of one traffic stream. Bodies are zeros, shared by all requests of a kind. */
final class RequestMaker {
    /** 16 octets in base64 (RFC 6455, 4.1); the one of the examples there, since nobody is to be kept from guessing it. */
    private static final String WEBSOCKET_KEY = "dGhlIHNhbXBsZSBub25jZQ==";

    private static final String WEBSOCKET_VERSION = "13";

    private final Clientele clientele;
    private final int stream;
    private final String authority;
    private final List<Traffic.Request> kinds;
    private final HttpMethod[] methods;
    private final ByteBuf[] bodies;

    /**
     * @param stream the number of the traffic
     * @param authority host and port of the front
     */
    RequestMaker(Clientele clientele, int stream, Traffic traffic, String authority) {
        this.clientele = clientele;
        this.stream = stream;
        this.authority = authority;
        this.kinds = traffic.requests();
        this.methods =
                kinds.stream().map(each -> HttpMethod.valueOf(each.method())).toArray(HttpMethod[]::new);
        this.bodies = kinds.stream()
                .map(each -> Unpooled.unreleasableBuffer(
                        Unpooled.wrappedBuffer(new byte[each.bodyBytes()]).asReadOnly()))
                .toArray(ByteBuf[]::new);
    }

    FullHttpRequest make(long request, int kind, Client client) {
        Traffic.Request asks = kinds.get(kind);
        int number = client.numberInStream();
        HttpHeaders headers = DefaultHttpHeadersFactory.headersFactory().newHeaders();
        headers.set(HttpHeaderNames.HOST, authority);
        asks.headers().forEach((name, value) -> headers.set(name, clientele.filled(value, stream, number)));
        headers.set(StubHeaders.REQUEST, Long.toString(request));
        client.cookies().show(headers);
        ByteBuf body = bodies[kind].duplicate();
        if (body.isReadable()) {
            headers.set(HttpHeaderNames.CONTENT_LENGTH, Integer.toString(body.readableBytes()));
        }
        String upgrade = asks.upgrade();
        if (upgrade != null) {
            upgrade(headers, upgrade);
        }
        return new DefaultFullHttpRequest(
                HttpVersion.HTTP_1_1,
                methods[kind],
                clientele.filled(asks.path(), stream, number),
                body,
                headers,
                EmptyHttpHeaders.INSTANCE);
    }

    private static void upgrade(HttpHeaders headers, String protocol) {
        headers.set(HttpHeaderNames.CONNECTION, HttpHeaderValues.UPGRADE);
        headers.set(HttpHeaderNames.UPGRADE, protocol);
        if (HttpHeaderValues.WEBSOCKET.contentEqualsIgnoreCase(protocol)) {
            headers.set(HttpHeaderNames.SEC_WEBSOCKET_KEY, WEBSOCKET_KEY);
            headers.set(HttpHeaderNames.SEC_WEBSOCKET_VERSION, WEBSOCKET_VERSION);
        }
    }
}
