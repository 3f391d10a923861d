package steelyard.balancer.live.http;

import io.netty.channel.Channel;
import java.net.Inet6Address;
import java.net.InetAddress;
import java.net.InetSocketAddress;
import java.net.SocketAddress;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.settings.FrontSettings;

/** The element that the balancer appends to Forwarded (RFC 7239): for, by, host, proto. */
final class ForwardedElement {
    private ForwardedElement() {}

    /** @param host of the request, which goes on; {@code for} and {@code by} are made up where the pool hides them */
    static String of(Channel client, @Nullable String host, PoolFront pool) {
        FrontSettings front = pool.settings().front();
        SocketAddress from = client.remoteAddress();
        SocketAddress at = client.localAddress();
        boolean hidden = front.forwarded() == FrontSettings.Forwarded.HIDDEN;
        StringBuilder element = new StringBuilder("for=")
                .append(hidden ? pool.hiddenNames().of(from, false) : node(from, false))
                .append(";by=")
                .append(hidden ? pool.hiddenNames().of(at, true) : node(at, true));
        if (host != null && !host.isEmpty()) {
            element.append(";host=").append(value(host));
        }
        return element.append(front.tls() == null ? ";proto=http" : ";proto=https")
                .toString();
    }

    /** Quoted where it holds a colon (RFC 7239, 4 and 6). */
    static String node(@Nullable SocketAddress of, boolean withPort) {
        if (!(of instanceof InetSocketAddress address) || address.getAddress() == null) {
            return "unknown";
        }
        InetAddress ip = address.getAddress();
        String text = ip.getHostAddress();
        if (ip instanceof Inet6Address) {
            int zone = text.indexOf('%');
            text = "[" + (zone < 0 ? text : text.substring(0, zone)) + "]";
        }
        return value(withPort ? text + ":" + address.getPort() : text);
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
