package steelyard.balancer.live.tls;

import io.netty.channel.Channel;
import io.netty.handler.ssl.SslContext;
import io.netty.handler.ssl.SslContextBuilder;
import io.netty.handler.ssl.SslHandler;
import io.netty.handler.ssl.util.InsecureTrustManagerFactory;
import java.security.cert.X509Certificate;
import java.util.Collection;
import java.util.concurrent.TimeUnit;
import javax.net.ssl.SSLException;
import org.jspecify.annotations.Nullable;

/**
 * TLS to the backends of one pool.
 *
 * <p>A backend is believed when it shows one of the certificates that its starter handed over; its name is not looked at,
 * since it is reached by address. Where none was handed over every certificate is believed: the caller makes sure that
 * such a backend is on the loopback network.
 */
public final class BackendTls {
    private final SslContext context;
    private final long handshakeNanos;

    private BackendTls(SslContext context, long handshakeNanos) {
        this.context = context;
        this.handshakeNanos = handshakeNanos;
    }

    /**
     * @param certificates those that are believed; empty for any
     * @param handshakeNanos how long a backend may take to agree on keys
     */
    public static BackendTls believing(Collection<X509Certificate> certificates, long handshakeNanos) {
        SslContextBuilder builder =
                SslContextBuilder.forClient().protocols(FrontTls.PROTOCOLS).endpointIdentificationAlgorithm(null);
        if (certificates.isEmpty()) {
            builder.trustManager(InsecureTrustManagerFactory.INSTANCE);
        } else {
            builder.trustManager(certificates);
        }
        try {
            return new BackendTls(builder.build(), handshakeNanos);
        } catch (SSLException e) {
            throw new IllegalStateException("this Java has no TLS", e);
        }
    }

    /** Puts TLS on a new connection, if there is any. */
    public static void secure(@Nullable BackendTls tls, Channel channel) {
        if (tls != null) {
            channel.pipeline().addFirst(tls.handler(channel));
        }
    }

    private SslHandler handler(Channel channel) {
        SslHandler handler = context.newHandler(channel.alloc());
        handler.setHandshakeTimeout(handshakeNanos, TimeUnit.NANOSECONDS);
        return handler;
    }
}
