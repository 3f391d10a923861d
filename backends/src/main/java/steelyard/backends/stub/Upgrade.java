package steelyard.backends.stub;

import io.netty.handler.codec.http.FullHttpResponse;
import io.netty.handler.codec.http.HttpHeaderNames;
import io.netty.handler.codec.http.HttpHeaderValues;
import io.netty.handler.codec.http.HttpHeaders;
import io.netty.handler.codec.http.HttpRequest;
import io.netty.handler.codec.http.HttpResponseStatus;
import io.netty.handler.codec.http.HttpVersion;
import io.netty.handler.codec.http.websocketx.WebSocketServerHandshaker13;
import java.nio.charset.StandardCharsets;
import java.security.MessageDigest;
import java.security.NoSuchAlgorithmException;
import java.util.Base64;
import java.util.Locale;
import java.util.Set;
import org.jspecify.annotations.Nullable;

/**
 * The wish of a request to go on in another protocol (RFC 9110, 7.8). A stub agrees to any name but those that say what the
 * octets after it mean to HTTP itself; whatever it agrees to, it echoes octets.
 *
 * @param protocol the first name asked for
 * @param key the WebSocket key, or null if there is none
 * @param version the WebSocket version, or null if there is none
 */
record Upgrade(
        String protocol, @Nullable String key, @Nullable String version) {

    /** HTTP/2 and TLS on the same connection: the wish is ignored, as a server may. */
    private static final Set<String> NOT_OURS = Set.of("h2c", "http", "tls");

    private static final String WEB_SOCKET_VERSION = "13";
    private static final int KEY_BYTES = 16;

    /** What a request asks for, or null if it stays with HTTP. One of HTTP/1.0 cannot ask. */
    static @Nullable Upgrade asked(HttpRequest head) {
        HttpHeaders headers = head.headers();
        String protocols = headers.get(HttpHeaderNames.UPGRADE);
        if (protocols == null
                || !head.protocolVersion().equals(HttpVersion.HTTP_1_1)
                || !headers.containsValue(HttpHeaderNames.CONNECTION, HttpHeaderValues.UPGRADE, true)) {
            return null;
        }
        int comma = protocols.indexOf(',');
        String first = (comma < 0 ? protocols : protocols.substring(0, comma)).strip();
        int slash = first.indexOf('/');
        String name = (slash < 0 ? first : first.substring(0, slash)).toLowerCase(Locale.ROOT);
        return name.isEmpty() || NOT_OURS.contains(name)
                ? null
                : new Upgrade(
                        first,
                        headers.get(HttpHeaderNames.SEC_WEBSOCKET_KEY),
                        headers.get(HttpHeaderNames.SEC_WEBSOCKET_VERSION));
    }

    /** 101; or, for a WebSocket handshake that is not one, 426 for its version or 400 for its key (RFC 6455, 4.2). */
    FullHttpResponse answer(Replies replies, boolean headOnly) {
        if (!protocol.toLowerCase(Locale.ROOT).equals("websocket")) {
            return replies.switching(protocol);
        }
        if (!WEB_SOCKET_VERSION.equals(version)) {
            FullHttpResponse other = replies.shortText(HttpResponseStatus.UPGRADE_REQUIRED.code(), headOnly);
            other.headers().set(HttpHeaderNames.SEC_WEBSOCKET_VERSION, WEB_SOCKET_VERSION);
            other.headers().set(HttpHeaderNames.UPGRADE, protocol);
            other.headers().set(HttpHeaderNames.CONNECTION, HttpHeaderValues.UPGRADE);
            return other;
        }
        if (key == null || !isKey(key)) {
            return replies.shortText(HttpResponseStatus.BAD_REQUEST.code(), headOnly);
        }
        FullHttpResponse agreed = replies.switching(protocol);
        agreed.headers().set(HttpHeaderNames.SEC_WEBSOCKET_ACCEPT, accept(key));
        return agreed;
    }

    /** RFC 6455, 4.2.2, item 5.4. */
    static String accept(String key) {
        try {
            byte[] joined =
                    (key + WebSocketServerHandshaker13.WEBSOCKET_13_ACCEPT_GUID).getBytes(StandardCharsets.US_ASCII);
            return Base64.getEncoder()
                    .encodeToString(MessageDigest.getInstance("SHA-1").digest(joined));
        } catch (NoSuchAlgorithmException impossible) {
            throw new IllegalStateException("every Java platform has SHA-1", impossible);
        }
    }

    private static boolean isKey(String key) {
        try {
            return Base64.getDecoder().decode(key).length == KEY_BYTES;
        } catch (IllegalArgumentException notBase64) {
            return false;
        }
    }
}
