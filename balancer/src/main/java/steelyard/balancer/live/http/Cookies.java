package steelyard.balancer.live.http;

import io.netty.handler.codec.http.HttpHeaderNames;
import io.netty.handler.codec.http.HttpHeaders;
import java.util.Iterator;
import org.jspecify.annotations.Nullable;

/** Finds one cookie of a request (RFC 6265, 4.2.1) without reading the others. */
final class Cookies {
    private Cookies() {}

    /** The value of the first cookie of that name, or null. */
    static @Nullable String value(HttpHeaders headers, String name) {
        Iterator<String> fields = headers.valueStringIterator(HttpHeaderNames.COOKIE);
        while (fields.hasNext()) {
            String found = value(fields.next(), name);
            if (found != null) {
                return found;
            }
        }
        return null;
    }

    private static @Nullable String value(String field, String name) {
        int from = 0;
        while (from < field.length()) {
            int to = field.indexOf(';', from);
            to = to < 0 ? field.length() : to;
            while (from < to && field.charAt(from) == ' ') {
                from++;
            }
            int value = from + name.length() + 1;
            if (value <= to && field.charAt(value - 1) == '=' && field.startsWith(name, from)) {
                return field.substring(value, to).strip();
            }
            from = to + 1;
        }
        return null;
    }
}
