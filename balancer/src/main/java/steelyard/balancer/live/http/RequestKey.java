package steelyard.balancer.live.http;

import io.netty.handler.codec.http.HttpRequest;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.pick.Keys;
import steelyard.balancer.settings.HashSettings;

/** What of a request a method of keys looks at. */
final class RequestKey {
    private RequestKey() {}

    /**
     * @param request prepared for the backend: its target is path and query
     * @param client the key of the client's address
     */
    static long of(HashSettings hash, HttpRequest request, long client) {
        return switch (hash.by()) {
            case CLIENT -> client;
            case PATH -> Keys.of(request.uri());
            case HEADER -> ofText(request.headers().get(hash.name()));
            case COOKIE -> ofText(Cookies.value(request.headers(), hash.name()));
        };
    }

    private static long ofText(@Nullable String text) {
        return Keys.of(text == null ? "" : text);
    }
}
