package steelyard.balancer.live.http;

import java.net.Inet6Address;
import java.net.InetAddress;
import java.net.InetSocketAddress;
import java.net.SocketAddress;
import org.jspecify.annotations.Nullable;

/** The element that the balancer appends to Forwarded (RFC 7239): for, host, proto. */
final class ForwardedElement {
    private ForwardedElement() {}

    static String of(@Nullable SocketAddress client, @Nullable String host) {
        StringBuilder element = new StringBuilder("for=").append(node(client));
        if (host != null && !host.isEmpty()) {
            element.append(";host=").append(value(host));
        }
        return element.append(";proto=http").toString();
    }

    private static String node(@Nullable SocketAddress client) {
        if (!(client instanceof InetSocketAddress address) || address.getAddress() == null) {
            return "unknown";
        }
        InetAddress ip = address.getAddress();
        if (!(ip instanceof Inet6Address)) {
            return ip.getHostAddress();
        }
        String text = ip.getHostAddress();
        int zone = text.indexOf('%');
        return "\"[" + (zone < 0 ? text : text.substring(0, zone)) + "]\"";
    }

    /** A token as it is, anything else as a quoted string (RFC 9110, 5.6). */
    private static String value(String text) {
        for (int i = 0; i < text.length(); i++) {
            char c = text.charAt(i);
            boolean token = c >= 'a' && c <= 'z'
                    || c >= 'A' && c <= 'Z'
                    || c >= '0' && c <= '9'
                    || "!#$%&'*+-.^_`|~".indexOf(c) >= 0;
            if (!token) {
                return '"' + text.replace("\\", "\\\\").replace("\"", "\\\"") + '"';
            }
        }
        return text;
    }
}
