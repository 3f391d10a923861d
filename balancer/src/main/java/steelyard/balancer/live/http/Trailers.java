package steelyard.balancer.live.http;

import io.netty.handler.codec.http.DefaultLastHttpContent;
import io.netty.handler.codec.http.HttpContent;
import io.netty.handler.codec.http.LastHttpContent;

/** Trailer fields are dropped, as RFC 9112, 7.1.2, allows: none can then be taken for a header field. */
final class Trailers {
    private Trailers() {}

    static HttpContent dropped(HttpContent piece) {
        if (piece instanceof LastHttpContent last && !last.trailingHeaders().isEmpty()) {
            return new DefaultLastHttpContent(last.content());
        }
        return piece;
    }
}
