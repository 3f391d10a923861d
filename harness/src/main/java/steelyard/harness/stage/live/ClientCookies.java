package steelyard.harness.stage.live;

import io.netty.handler.codec.http.HttpHeaderNames;
import io.netty.handler.codec.http.HttpHeaders;
import io.netty.handler.codec.http.cookie.ClientCookieDecoder;
import io.netty.handler.codec.http.cookie.Cookie;
import java.util.LinkedHashMap;
import java.util.Map;
import java.util.stream.Collectors;
import org.jspecify.annotations.Nullable;

/**
 * The cookies that one client was given, by name; whatever their path, since they all come from one pool. Lives on the
 * generator's loop.
 */
final class ClientCookies {
    private final Map<String, String> kept = new LinkedHashMap<>();
    private @Nullable String field;

    /** Keeps, or drops, what an answer gives. */
    void take(HttpHeaders answer) {
        if (!answer.contains(HttpHeaderNames.SET_COOKIE)) {
            return;
        }
        for (String given : answer.getAll(HttpHeaderNames.SET_COOKIE)) {
            Cookie cookie = ClientCookieDecoder.LAX.decode(given);
            if (cookie != null && cookie.maxAge() == 0) {
                kept.remove(cookie.name());
            } else if (cookie != null) {
                kept.put(cookie.name(), cookie.value());
            }
        }
        field = kept.isEmpty()
                ? null
                : kept.entrySet().stream()
                        .map(each -> each.getKey() + "=" + each.getValue())
                        .collect(Collectors.joining("; "));
    }

    /** Shows them in a request, behind those that it has already (RFC 6265, 5.4: one field). */
    void show(HttpHeaders request) {
        if (field != null) {
            String own = request.get(HttpHeaderNames.COOKIE);
            request.set(HttpHeaderNames.COOKIE, own == null ? field : own + "; " + field);
        }
    }
}
