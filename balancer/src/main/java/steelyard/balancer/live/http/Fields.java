package steelyard.balancer.live.http;

import io.netty.handler.codec.http.HttpHeaderNames;
import io.netty.handler.codec.http.HttpHeaderValues;
import io.netty.handler.codec.http.HttpHeaders;
import io.netty.util.AsciiString;
import java.util.List;
import java.util.stream.Stream;

/** Header fields of our own, and the removal of those that are meant for one connection only (RFC 9110, 7.6.1). */
final class Fields {
    /** The number of a request, given by the client or the balancer. */
    static final AsciiString REQUEST = AsciiString.cached("steelyard-request");

    /** Which attempt at the request this is, from 1; set towards the backend. */
    static final AsciiString ATTEMPT = AsciiString.cached("steelyard-attempt");

    static final AsciiString FORWARDED = AsciiString.cached("forwarded");
    static final AsciiString PROXY_STATUS = AsciiString.cached("proxy-status");
    private static final AsciiString KEEP_ALIVE = AsciiString.cached("keep-alive");
    private static final AsciiString PROXY_CONNECTION = AsciiString.cached("proxy-connection");

    /** Values of {@link #ATTEMPT} that are met again and again. */
    private static final List<AsciiString> ATTEMPTS =
            Stream.of("1", "2", "3", "4").map(AsciiString::cached).toList();

    private Fields() {}

    /** The value of {@link #ATTEMPT}. */
    static CharSequence attempt(int number) {
        return number <= ATTEMPTS.size() ? ATTEMPTS.get(number - 1) : Integer.toString(number);
    }

    /**
     * Removes the fields of one hop, but Transfer-Encoding, which is framing.
     *
     * @return false if Connection names a field that belongs to the message itself, which no honest sender does
     */
    static boolean removeHopByHop(HttpHeaders headers) {
        boolean honest = true;
        if (headers.contains(HttpHeaderNames.CONNECTION)) {
            honest = removeNamed(headers, headers.getAll(HttpHeaderNames.CONNECTION));
            headers.remove(HttpHeaderNames.CONNECTION);
        }
        headers.remove(KEEP_ALIVE);
        headers.remove(PROXY_CONNECTION);
        headers.remove(HttpHeaderNames.TE);
        headers.remove(HttpHeaderNames.UPGRADE);
        headers.remove(HttpHeaderNames.TRAILER); // trailer fields are not passed on
        return honest;
    }

    private static boolean removeNamed(HttpHeaders headers, List<String> connection) {
        boolean honest = true;
        for (String list : connection) {
            if (HttpHeaderValues.KEEP_ALIVE.contentEqualsIgnoreCase(list)
                    || HttpHeaderValues.CLOSE.contentEqualsIgnoreCase(list)) {
                continue;
            }
            for (String option : list.split(",", -1)) {
                String name = option.strip();
                if (ofTheMessage(name)) {
                    honest = false;
                } else if (!name.isEmpty()) {
                    headers.remove(name);
                }
            }
        }
        return honest;
    }

    private static boolean ofTheMessage(String name) {
        return HttpHeaderNames.HOST.contentEqualsIgnoreCase(name)
                || HttpHeaderNames.CONTENT_LENGTH.contentEqualsIgnoreCase(name)
                || HttpHeaderNames.TRANSFER_ENCODING.contentEqualsIgnoreCase(name);
    }
}
