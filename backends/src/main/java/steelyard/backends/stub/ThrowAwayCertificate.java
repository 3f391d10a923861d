package steelyard.backends.stub;

import io.netty.handler.ssl.SslContext;
import io.netty.handler.ssl.SslContextBuilder;
import io.netty.handler.ssl.SslProvider;
import io.netty.pkitesting.CertificateBuilder;
import io.netty.pkitesting.X509Bundle;
import java.security.cert.X509Certificate;

/**
 * A key and a self-signed certificate of this moment, for 127.0.0.1 and localhost, which never leave the process: enough for
 * TLS between parts that one play has started. TLS 1.2 and 1.3. Immutable, any thread.
 */
public final class ThrowAwayCertificate {

    private final X509Certificate certificate;
    private final SslContext server;

    private ThrowAwayCertificate(X509Certificate certificate, SslContext server) {
        this.certificate = certificate;
        this.server = server;
    }

    /** Takes some tenths of a second the first time, for the classes behind it. */
    public static ThrowAwayCertificate make() {
        try {
            X509Bundle made = new CertificateBuilder()
                    .ecp256()
                    .subject("CN=backends of one play")
                    .addSanIpAddress("127.0.0.1")
                    .addSanDnsName("localhost")
                    .setIsCertificateAuthority(true)
                    .buildSelfSigned();
            SslContext server = SslContextBuilder.forServer(made.getKeyPair().getPrivate(), made.getCertificatePath())
                    .sslProvider(SslProvider.JDK)
                    .protocols("TLSv1.3", "TLSv1.2")
                    .build();
            return new ThrowAwayCertificate(made.getCertificate(), server);
        } catch (Exception failure) {
            throw new IllegalStateException("no certificate could be made: " + failure.getMessage(), failure);
        }
    }

    /** What a peer has to trust. */
    public X509Certificate certificate() {
        return certificate;
    }

    SslContext server() {
        return server;
    }
}
