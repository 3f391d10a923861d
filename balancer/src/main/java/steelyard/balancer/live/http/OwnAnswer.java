package steelyard.balancer.live.http;

import io.netty.channel.ConnectTimeoutException;
import io.netty.handler.codec.http.HttpResponseStatus;
import io.netty.handler.ssl.SslHandshakeTimeoutException;
import javax.net.ssl.SSLException;
import org.jspecify.annotations.Nullable;

/** Answers that the balancer gives itself. Error types are those of RFC 9209, section 2.3. */
enum OwnAnswer {
    NOBODY(HttpResponseStatus.SERVICE_UNAVAILABLE, "destination_unavailable", "No backend can be picked."),
    REFUSED(HttpResponseStatus.BAD_GATEWAY, "connection_refused", "The backend refused the connection."),
    UNREACHED(HttpResponseStatus.GATEWAY_TIMEOUT, "connection_timeout", "No connection to the backend in time."),
    NO_TLS(HttpResponseStatus.BAD_GATEWAY, "tls_protocol_error", "The backend does not speak TLS as it should."),
    RESET(HttpResponseStatus.BAD_GATEWAY, "connection_terminated", "The backend closed before it answered."),
    BROKEN(HttpResponseStatus.BAD_GATEWAY, "connection_terminated", "The backend closed inside its answer."),
    MALFORMED(HttpResponseStatus.BAD_GATEWAY, "http_protocol_error", "The backend did not answer in HTTP."),
    LATE(HttpResponseStatus.GATEWAY_TIMEOUT, "http_response_timeout", "The backend did not answer in time."),
    STALLED(HttpResponseStatus.GATEWAY_TIMEOUT, "connection_read_timeout", "The backend fell silent."),
    LOOP(
            HttpResponseStatus.BAD_GATEWAY,
            "proxy_loop_detected",
            "The request came back to the balancer that passed it on."),
    CUT(
            HttpResponseStatus.SERVICE_UNAVAILABLE,
            "connection_terminated; details=\"cut\"",
            "The backend was taken out of service."),

    FAULTY(HttpResponseStatus.BAD_REQUEST, null, "The request is not valid HTTP."),
    FAULTY_HOST(HttpResponseStatus.BAD_REQUEST, null, "The request needs exactly one valid Host."),
    FAULTY_FRAMING(HttpResponseStatus.BAD_REQUEST, null, "The length of the request's content is not clear."),
    TOO_LONG_TARGET(HttpResponseStatus.REQUEST_URI_TOO_LONG, null, "The request line is too long."),
    TOO_LARGE_FIELDS(HttpResponseStatus.REQUEST_HEADER_FIELDS_TOO_LARGE, null, "The header section is too large."),
    TOO_LARGE_CONTENT(
            HttpResponseStatus.REQUEST_ENTITY_TOO_LARGE, null, "The request's content is larger than is taken here."),
    LONG_METHOD(HttpResponseStatus.NOT_IMPLEMENTED, null, "No method of that length is served here."),
    SLOW_HEAD(HttpResponseStatus.REQUEST_TIMEOUT, null, "The request's head did not come in time."),
    SLOW_CLIENT(HttpResponseStatus.REQUEST_TIMEOUT, null, "The request's content did not come in time."),
    NO_TUNNEL(HttpResponseStatus.NOT_IMPLEMENTED, null, "CONNECT is not served here."),
    OTHER_VERSION(HttpResponseStatus.HTTP_VERSION_NOT_SUPPORTED, null, "Only version 1.1 is served here."),
    NO_ECHO(HttpResponseStatus.METHOD_NOT_ALLOWED, null, "TRACE is not served here."),
    OPTIONS_HERE(HttpResponseStatus.OK, null, "The balancer itself.");

    private final HttpResponseStatus status;
    private final @Nullable String error;
    private final String text;

    OwnAnswer(HttpResponseStatus status, @Nullable String error, String text) {
        this.status = status;
        this.error = error;
        this.text = text;
    }

    /** For a connection to a backend that did not come to stand. */
    static OwnAnswer unopened(Throwable why) {
        if (why instanceof ConnectTimeoutException || why instanceof SslHandshakeTimeoutException) {
            return UNREACHED;
        }
        return why instanceof SSLException ? NO_TLS : REFUSED;
    }

    HttpResponseStatus status() {
        return status;
    }

    /** The error parameter of Proxy-Status with what follows it, or null where the fault is not behind the balancer. */
    @Nullable
    String error() {
        return error;
    }

    String text() {
        return text;
    }
}
