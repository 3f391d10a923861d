package steelyard.balancer.live.tls;

import io.netty.pkitesting.CertificateBuilder;
import io.netty.pkitesting.X509Bundle;
import java.util.List;

/** Makes an identity for one play: a certificate for this machine's loopback names, which only hearsay makes believed. */
final class ThrowAway {
    private ThrowAway() {}

    static Identity make() {
        try {
            X509Bundle made = new CertificateBuilder()
                    .ecp256()
                    .subject("CN=steelyard.invalid")
                    .addSanIpAddress("127.0.0.1")
                    .addSanDnsName("localhost")
                    .setIsCertificateAuthority(true)
                    .buildSelfSigned();
            return new Identity(made.getKeyPair().getPrivate(), List.of(made.getCertificatePath()));
        } catch (Exception e) { // as declared there; nothing in it depends on this machine
            throw new IllegalStateException("no certificate could be made", e);
        }
    }
}
