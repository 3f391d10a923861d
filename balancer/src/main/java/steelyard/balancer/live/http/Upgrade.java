package steelyard.balancer.live.http;

import io.netty.handler.codec.http.HttpHeaderNames;
import io.netty.handler.codec.http.HttpHeaderValues;
import io.netty.handler.codec.http.HttpHeaders;
import io.netty.handler.codec.http.HttpRequest;
import io.netty.handler.codec.http.HttpResponse;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import org.jspecify.annotations.Nullable;

/** What is asked for and agreed to in the field Upgrade (RFC 9110, 7.8). */
final class Upgrade {
    private Upgrade() {}

    /** The protocols that a request as it came names, or null where it asks for none or is too old to. */
    static @Nullable String asked(HttpRequest request) {
        HttpHeaders headers = request.headers();
        boolean asks = headers.contains(HttpHeaderNames.UPGRADE)
                && request.protocolVersion().minorVersion() > 0
                && headers.containsValue(HttpHeaderNames.CONNECTION, HttpHeaderValues.UPGRADE, true);
        return asks ? String.join(", ", headers.getAll(HttpHeaderNames.UPGRADE)) : null;
    }

    /** Writes the field and the option that goes with it. */
    static void set(HttpHeaders headers, String protocols) {
        headers.set(HttpHeaderNames.CONNECTION, HttpHeaderValues.UPGRADE);
        headers.set(HttpHeaderNames.UPGRADE, protocols);
    }

    /** The protocol that a 101 goes over to, if it names any and only such as the request does; null otherwise. */
    static @Nullable String agreed(HttpHeaders request, HttpResponse answer) {
        List<String> asked = names(request.getAll(HttpHeaderNames.UPGRADE));
        List<String> given = names(answer.headers().getAll(HttpHeaderNames.UPGRADE));
        return given.isEmpty() || !asked.containsAll(given)
                ? null
                : String.join(", ", answer.headers().getAll(HttpHeaderNames.UPGRADE));
    }

    private static List<String> names(List<String> fields) {
        List<String> names = new ArrayList<>();
        for (String field : fields) {
            for (String name : field.split(",")) {
                if (!name.isBlank()) {
                    names.add(name.strip().toLowerCase(Locale.ROOT));
                }
            }
        }
        return names;
    }
}
