package steelyard.balancer.live.tls;

import io.netty.channel.Channel;
import io.netty.handler.ssl.SslContext;
import io.netty.handler.ssl.SslContextBuilder;
import io.netty.handler.ssl.SslHandler;
import java.nio.file.Path;
import java.security.cert.X509Certificate;
import java.util.concurrent.TimeUnit;
import java.util.concurrent.atomic.LongAdder;
import java.util.function.Function;
import javax.net.ssl.SSLException;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.settings.TlsSettings;

/** TLS of one front: the certificate that it shows to everybody, and the handlers of its connections. */
public final class FrontTls {
    static final String[] PROTOCOLS = {"TLSv1.3", "TLSv1.2"};

    private final SslContext context;
    private final X509Certificate certificate;
    private final long handshakeNanos;
    private final LongAdder failed = new LongAdder();

    private FrontTls(SslContext context, X509Certificate certificate, long handshakeNanos) {
        this.context = context;
        this.certificate = certificate;
        this.handshakeNanos = handshakeNanos;
    }

    /**
     * Reads, or makes, the certificate.
     *
     * @param environment gives the value of a variable of the environment, or null
     * @param handshakeNanos how long a client may take to agree on keys
     */
    public static FrontTls open(
            TlsSettings settings, Function<String, @Nullable String> environment, long handshakeNanos)
            throws BadCertificate {
        Identity identity = identity(settings, environment);
        try {
            SslContext context = SslContextBuilder.forServer(identity.key(), identity.chain())
                    .protocols(PROTOCOLS)
                    .build();
            return new FrontTls(context, identity.certificate(), handshakeNanos);
        } catch (SSLException e) {
            throw new BadCertificate("the certificate cannot be served: make it anew", e);
        }
    }

    private static Identity identity(TlsSettings settings, Function<String, @Nullable String> environment)
            throws BadCertificate {
        Path certificate = settings.certificate();
        Path key = settings.key();
        if (certificate != null && key != null) {
            return PemFiles.read(certificate, key);
        }
        Path store = settings.store();
        String variable = settings.passwordFrom();
        return store != null && variable != null ? StoreFile.read(store, variable, environment) : ThrowAway.make();
    }

    /** What is shown to clients. */
    public X509Certificate certificate() {
        return certificate;
    }

    /** The first handler of a new connection. */
    public SslHandler handler(Channel channel) {
        SslHandler handler = context.newHandler(channel.alloc());
        handler.setHandshakeTimeout(handshakeNanos, TimeUnit.NANOSECONDS);
        handler.handshakeFuture().addListener(done -> {
            if (!done.isSuccess()) {
                failed.increment();
            }
        });
        return handler;
    }

    /** Connections whose handshake failed or was left so far. */
    public long failedHandshakes() {
        return failed.sum();
    }
}
