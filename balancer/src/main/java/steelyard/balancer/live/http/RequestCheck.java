package steelyard.balancer.live.http;

import io.netty.handler.codec.http.HttpHeaderNames;
import io.netty.handler.codec.http.HttpHeaderValues;
import io.netty.handler.codec.http.HttpHeaders;
import io.netty.handler.codec.http.HttpMethod;
import io.netty.handler.codec.http.HttpRequest;
import io.netty.handler.codec.http.HttpUtil;
import io.netty.handler.codec.http.TooLongHttpHeaderException;
import java.util.Iterator;
import java.util.List;
import org.jspecify.annotations.Nullable;

/** Says what is wrong with the head of a request, before anything is done with it. */
final class RequestCheck {
    private RequestCheck() {}

    /** @return the answer that the request gets here, after which the connection closes; null for a request to forward */
    static @Nullable OwnAnswer refusal(HttpRequest request) {
        if (request.decoderResult().isFailure()) {
            return faulty(request.decoderResult().cause());
        }
        if (request.protocolVersion().majorVersion() != 1) {
            return OwnAnswer.OTHER_VERSION;
        }
        if (HttpMethod.CONNECT.equals(request.method())) {
            return namesPort(request.uri()) ? OwnAnswer.NO_TUNNEL : OwnAnswer.FAULTY;
        }
        HttpHeaders headers = request.headers();
        if (!framingClear(request, headers)) {
            return OwnAnswer.FAULTY_FRAMING;
        }
        return hostValid(request, headers) ? null : OwnAnswer.FAULTY_HOST;
    }

    /** The answer to a message whose decoding failed so. */
    static OwnAnswer faulty(Throwable cause) {
        if (cause instanceof Refusal refusal) {
            return refusal.answer();
        }
        return cause instanceof TooLongHttpHeaderException ? OwnAnswer.TOO_LARGE_FIELDS : OwnAnswer.FAULTY;
    }

    /** The target of CONNECT is host and port, and a port that is empty or none is refused (RFC 9110, 9.3.6). */
    private static boolean namesPort(String target) {
        int colon = target.lastIndexOf(':');
        String port = target.substring(colon + 1);
        return colon > 0 && port.matches("[0-9]{1,5}") && Integer.parseInt(port) <= 65_535;
    }

    /** The decoder refuses both lengths at once and lists of lengths; left are transfer codings other than chunked. */
    private static boolean framingClear(HttpRequest request, HttpHeaders headers) {
        String coding = headers.get(HttpHeaderNames.TRANSFER_ENCODING);
        if (coding == null) {
            return true;
        }
        return request.protocolVersion().minorVersion() > 0
                && HttpHeaderValues.CHUNKED.contentEqualsIgnoreCase(coding)
                && headers.getAll(HttpHeaderNames.TRANSFER_ENCODING).size() == 1
                && !headers.contains(HttpHeaderNames.CONTENT_LENGTH);
    }

    private static boolean hostValid(HttpRequest request, HttpHeaders headers) {
        Iterator<String> hosts = headers.valueStringIterator(HttpHeaderNames.HOST);
        if (!hosts.hasNext()) {
            return request.protocolVersion().minorVersion() == 0;
        }
        String host = hosts.next();
        return !hosts.hasNext() && Authority.valid(host);
    }

    /** Whether the method may be repeated after a failure (RFC 9110, 9.2.2). */
    static boolean idempotent(HttpMethod method) {
        return IDEMPOTENT.contains(method);
    }

    private static final List<HttpMethod> IDEMPOTENT = List.of(
            HttpMethod.GET, HttpMethod.HEAD, HttpMethod.PUT, HttpMethod.DELETE, HttpMethod.OPTIONS, HttpMethod.TRACE);

    /** Whether content follows the head of a request (RFC 9112, 6.3, items 4 to 7). */
    static boolean hasContent(HttpRequest request) {
        HttpHeaders headers = request.headers();
        if (headers.contains(HttpHeaderNames.TRANSFER_ENCODING)) {
            return true;
        }
        return headers.contains(HttpHeaderNames.CONTENT_LENGTH) && HttpUtil.getContentLength(request, 0L) > 0;
    }
}
