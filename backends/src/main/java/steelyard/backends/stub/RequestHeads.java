package steelyard.backends.stub;

import io.netty.handler.codec.http.HttpRequest;
import org.jspecify.annotations.Nullable;

/** Reads what a stub needs to know from the head of a request. */
final class RequestHeads {

    private RequestHeads() {}

    /** The path and query of a request target, also of one in absolute form (RFC 9112, 3.2.2). */
    static String target(String uri) {
        if (uri.startsWith("/")) {
            return uri;
        }
        int scheme = uri.indexOf("://");
        int path = scheme < 0 ? -1 : uri.indexOf('/', scheme + 3);
        return path < 0 ? "/" : uri.substring(path);
    }

    /** Whether a request target is this path, with whatever query where the path names none; never for null. */
    static boolean asksFor(String uri, @Nullable String path) {
        if (path == null) {
            return false;
        }
        String target = target(uri);
        return target.startsWith(path)
                && (target.length() == path.length() || target.charAt(path.length()) == '?' && path.indexOf('?') < 0);
    }

    /** The decimal number in a header field, or -1 if it is absent or no number of 0 or above. */
    static long number(HttpRequest head, String field) {
        String text = head.headers().get(field);
        if (text == null || text.isEmpty() || text.length() > 18) {
            return -1;
        }
        long number = 0;
        for (int i = 0; i < text.length(); i++) {
            int digit = text.charAt(i) - '0';
            if (digit < 0 || digit > 9) {
                return -1;
            }
            number = number * 10 + digit;
        }
        return number;
    }
}
