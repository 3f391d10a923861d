package steelyard.harness.stage.live;

import io.netty.channel.Channel;
import io.netty.handler.ssl.SslContext;
import io.netty.handler.ssl.SslContextBuilder;
import java.net.InetSocketAddress;
import java.security.cert.X509Certificate;
import javax.net.ssl.SSLException;
import org.jspecify.annotations.Nullable;

/**
 * How the clients of a traffic stream reach their pool.
 *
 * @param front where they connect to
 * @param idleLimitNanos after how long the balancer closes an idle connection
 * @param tls null for a front without it
 */
record Way(
        InetSocketAddress front,
        long idleLimitNanos,
        @Nullable SslContext tls) {

    /** @param shown the certificate of a front with TLS: the one that its clients believe; null for one without */
    static Way to(InetSocketAddress front, long idleLimitNanos, @Nullable X509Certificate shown) {
        return new Way(front, idleLimitNanos, shown == null ? null : believing(shown));
    }

    /** The front is reached by address, so the name in its certificate is not looked at. */
    private static SslContext believing(X509Certificate shown) {
        try {
            return SslContextBuilder.forClient()
                    .protocols("TLSv1.3", "TLSv1.2")
                    .endpointIdentificationAlgorithm(null)
                    .trustManager(shown)
                    .build();
        } catch (SSLException e) {
            throw new IllegalStateException("this Java has no TLS", e);
        }
    }

    /** Puts TLS on a new connection where the front speaks it. */
    void secure(Channel channel) {
        if (tls != null) {
            channel.pipeline().addFirst(tls.newHandler(channel.alloc()));
        }
    }

    String authority() {
        return front.getAddress().getHostAddress() + ":" + front.getPort();
    }
}
