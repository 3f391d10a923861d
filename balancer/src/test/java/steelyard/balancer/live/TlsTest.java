package steelyard.balancer.live;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import io.netty.pkitesting.CertificateBuilder;
import io.netty.pkitesting.X509Bundle;
import java.io.ByteArrayOutputStream;
import java.io.IOException;
import java.net.InetSocketAddress;
import java.nio.file.Files;
import java.nio.file.Path;
import java.security.KeyStore;
import java.security.cert.X509Certificate;
import java.util.List;
import java.util.function.UnaryOperator;
import javax.net.ssl.KeyManagerFactory;
import javax.net.ssl.SNIHostName;
import javax.net.ssl.SSLContext;
import javax.net.ssl.SSLException;
import javax.net.ssl.SSLParameters;
import javax.net.ssl.SSLServerSocket;
import javax.net.ssl.SSLSocket;
import javax.net.ssl.TrustManagerFactory;
import org.awaitility.Awaitility;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.extension.ExtendWith;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;
import steelyard.balancer.core.decide.Outcome;
import steelyard.balancer.live.control.CueTaker;
import steelyard.balancer.settings.TlsSettings;

/** TLS on both sides, with the sockets of the JDK at the other ends. */
@ExtendWith(Accounting.class)
class TlsTest {
    private static final String REQUEST = "GET / HTTP/1.1\r\nHost: quay\r\n\r\n";
    private static final String ANSWER = "HTTP/1.1 200 OK\r\nContent-Length: 4\r\n\r\ntern";

    @TempDir
    Path folder;

    private static X509Bundle made() throws Exception {
        return new CertificateBuilder()
                .ecp256()
                .subject("CN=tern")
                .addSanIpAddress("127.0.0.1")
                .setIsCertificateAuthority(true)
                .buildSelfSigned();
    }

    private static SSLSocket socket(InetSocketAddress to, X509Certificate believed) throws Exception {
        KeyStore store = KeyStore.getInstance("PKCS12");
        store.load(null, null);
        store.setCertificateEntry("front", believed);
        TrustManagerFactory trust = TrustManagerFactory.getInstance("PKIX");
        trust.init(store);
        SSLContext context = SSLContext.getInstance("TLS");
        context.init(null, trust.getTrustManagers(), null);
        return (SSLSocket) context.getSocketFactory().createSocket(to.getAddress(), to.getPort());
    }

    private static SSLSocket socket(LivePlay play) throws Exception {
        return socket(play.front(), play.balancer.frontCertificate(0));
    }

    private static String askOver(SSLSocket socket) throws IOException {
        try (Wire wire = new Wire(socket)) {
            wire.send(REQUEST);
            return wire.readAnswer();
        }
    }

    private static FakeBackend secureBackend(X509Bundle shown, FakeBackend.Script script) throws Exception {
        KeyManagerFactory keys = shown.toKeyManagerFactory();
        SSLContext context = SSLContext.getInstance("TLS");
        context.init(keys.getKeyManagers(), null, null);
        SSLServerSocket server =
                (SSLServerSocket) context.getServerSocketFactory().createServerSocket();
        return FakeBackend.playing(script, server);
    }

    private static FakeBackend.Script answering() {
        return wire -> {
            while (wire.readHead() != null) {
                wire.send(ANSWER);
            }
        };
    }

    private static UnaryOperator<Pool> secured() {
        return pool -> pool.securedBy(TlsSettings.THROW_AWAY);
    }

    @ParameterizedTest
    @ValueSource(strings = {"TLSv1.2", "TLSv1.3"})
    void front_protocolsOfToday_serves(String protocol) throws Exception {
        try (FakeBackend backend = FakeBackend.answering(ANSWER);
                LivePlay play = LivePlay.of(secured(), backend.address());
                SSLSocket socket = socket(play)) {
            socket.setEnabledProtocols(new String[] {protocol});
            assertThat(askOver(socket)).contains("200 OK").endsWith("tern");
            assertThat(socket.getSession().getProtocol()).isEqualTo(protocol);
        }
    }

    @Test
    void front_olderProtocol_refusesAndCounts() throws Exception {
        try (FakeBackend backend = FakeBackend.answering(ANSWER);
                LivePlay play = LivePlay.of(secured(), backend.address());
                Wire client = play.client()) {
            // A ClientHello of TLS 1.1 written out (RFC 4346, 7.4.1.2): version 3.2, 32 octets of random, no session,
            // one cipher suite (TLS_RSA_WITH_AES_128_CBC_SHA), no compression. 45 octets of handshake in a record.
            byte[] hello = new byte[50];
            byte[] start = {22, 3, 1, 0, 45, 1, 0, 0, 41, 3, 2};
            System.arraycopy(start, 0, hello, 0, start.length);
            byte[] end = {0, 0, 2, 0, 47, 1, 0};
            System.arraycopy(end, 0, hello, hello.length - end.length, end.length);
            client.send(hello);
            byte[] alert = client.readOctets(7);
            assertThat(alert[0]).as("an alert record").isEqualTo((byte) 21);
            assertThat(alert[6]).as("protocol_version (RFC 5246, 7.2.2)").isEqualTo((byte) 70);
            Awaitility.await().until(() -> play.balancer.failedHandshakes(0) == 1);
            assertThat(play.decisions.picks()).isEmpty();
        }
    }

    @Test
    void front_anyServerName_serves() throws Exception {
        try (FakeBackend backend = FakeBackend.answering(ANSWER);
                LivePlay play = LivePlay.of(secured(), backend.address());
                SSLSocket socket = socket(play)) {
            SSLParameters parameters = socket.getSSLParameters();
            parameters.setServerNames(List.of(new SNIHostName("elsewhere.example")));
            socket.setSSLParameters(parameters);
            assertThat(askOver(socket)).contains("200 OK");
        }
    }

    @Test
    void front_protocolsOffered_choosesNone() throws Exception {
        try (FakeBackend backend = FakeBackend.answering(ANSWER);
                LivePlay play = LivePlay.of(secured(), backend.address());
                SSLSocket socket = socket(play)) {
            SSLParameters parameters = socket.getSSLParameters();
            parameters.setApplicationProtocols(new String[] {"h2", "http/1.1"});
            socket.setSSLParameters(parameters);
            assertThat(askOver(socket)).contains("200 OK");
            assertThat(socket.getApplicationProtocol()).isEmpty();
        }
    }

    @Test
    void front_plainText_isRefused() throws Exception {
        try (FakeBackend backend = FakeBackend.answering(ANSWER);
                LivePlay play = LivePlay.of(secured(), backend.address());
                Wire client = play.client()) {
            client.send(REQUEST);
            assertThat(client.readToEnd()).doesNotContain("HTTP/1.1");
            Awaitility.await().until(() -> play.balancer.failedHandshakes(0) == 1);
            ControlAddress control = play.balancer.openControl(0, CueTaker.NOBODY);
            try (Wire page = Wire.to(control.address())) {
                page.send("GET /metrics HTTP/1.1\r\nHost: a\r\nAuthorization: Bearer " + control.token() + "\r\n\r\n");
                assertThat(page.readToEnd()).contains("steelyard_failed_handshakes_total{pool=\"terns\"} 1.0\n");
            }
        }
    }

    @Test
    void bothSides_overTls_forward() throws Exception {
        X509Bundle shown = made();
        try (FakeBackend backend = secureBackend(shown, answering());
                LivePlay play = LivePlay.of(pool -> secured().apply(pool).towardsTls(), backend.address());
                SSLSocket socket = socket(play)) {
            assertThat(askOver(socket)).contains("200 OK").endsWith("tern");
        }
    }

    @Test
    void backend_withTheKnownCertificate_isBelieved() throws Exception {
        X509Bundle shown = made();
        try (FakeBackend backend = secureBackend(shown, answering());
                LivePlay play = LivePlay.believing(shown.getCertificate(), Pool::towardsTls, backend.address())) {
            assertThat(play.ask(REQUEST)).contains("200 OK");
        }
    }

    @Test
    void backend_withAnotherCertificate_isABadGateway() throws Exception {
        try (FakeBackend backend = secureBackend(made(), answering());
                LivePlay play = LivePlay.believing(made().getCertificate(), Pool::towardsTls, backend.address())) {
            assertThat(play.ask(REQUEST)).contains("502").contains("error=tls_protocol_error");
            assertThat(play.decisions.outcomes()).containsExactly(Outcome.REFUSED);
        }
    }

    @Test
    void backend_thatSpeaksNoTls_isABadGateway() throws Exception {
        try (FakeBackend backend = FakeBackend.playing(wire -> {
                    wire.read(1);
                    wire.send(ANSWER);
                });
                LivePlay play = LivePlay.of(Pool::towardsTls, backend.address())) {
            assertThat(play.ask(REQUEST)).contains("502").contains("error=tls_protocol_error");
        }
    }

    @Test
    void backend_thatStaysSilent_isAGatewayTimeout() throws Exception {
        try (FakeBackend backend = FakeBackend.playing(Wire::readToEnd);
                LivePlay play = LivePlay.of(pool -> pool.towardsTls().patience(0.3, 5, 5), backend.address())) {
            assertThat(play.ask(REQUEST)).contains("504").contains("error=connection_timeout");
        }
    }

    @Test
    void probes_overTls_pass() throws Exception {
        try (FakeBackend backend = secureBackend(made(), answering());
                LivePlay play = LivePlay.of(pool -> pool.towardsTls().probing("/afloat", 100, 90), backend.address())) {
            Awaitility.await().until(() -> play.decisions.probes().contains(true));
        }
    }

    @Test
    void octets_overTlsOnBothSides_arriveWithTheirEnds() throws Exception {
        X509Bundle shown = made();
        try (FakeBackend backend = secureBackend(shown, wire -> wire.send("got " + wire.read(3)));
                LivePlay play =
                        LivePlay.of(pool -> secured().apply(pool).towardsTls().passing(), backend.address());
                SSLSocket socket = socket(play);
                Wire wire = new Wire(socket)) {
            wire.send("all");
            assertThat(wire.readToEnd()).isEqualTo("got all");
        }
    }

    // ---- files

    private TlsSettings pem(X509Bundle bundle) throws IOException {
        Path certificate = folder.resolve("front.pem");
        Path key = folder.resolve("front.key");
        Files.writeString(certificate, bundle.getCertificatePathPEM());
        Files.writeString(key, bundle.getPrivateKeyPEM());
        return new TlsSettings(certificate, key, null, null);
    }

    @Test
    void front_certificateFromPemFiles_isShown() throws Exception {
        X509Bundle bundle = made();
        TlsSettings settings = pem(bundle);
        try (FakeBackend backend = FakeBackend.answering(ANSWER);
                LivePlay play = LivePlay.of(pool -> pool.securedBy(settings), backend.address());
                SSLSocket socket = socket(play.front(), bundle.getCertificate())) {
            assertThat(askOver(socket)).contains("200 OK");
            assertThat(play.balancer.frontCertificate(0)).isEqualTo(bundle.getCertificate());
        }
    }

    private String refusal(TlsSettings settings) throws Exception {
        try (FakeBackend backend = FakeBackend.answering(ANSWER)) {
            Throwable[] thrown = new Throwable[1];
            assertThatThrownBy(() -> LivePlay.of(pool -> pool.securedBy(settings), backend.address())
                            .close())
                    .isInstanceOf(CannotStart.class)
                    .satisfies(e -> thrown[0] = e);
            String message = String.valueOf(thrown[0].getMessage());
            assertThat(message).startsWith("the front of pool terns: ").doesNotContain("\n");
            return message;
        }
    }

    @Test
    void front_missingFile_saysWhich() throws Exception {
        Path missing = folder.resolve("none.pem");
        TlsSettings settings = pem(made());
        assertThat(refusal(new TlsSettings(missing, settings.key(), null, null)))
                .contains(missing + ": cannot be read");
    }

    @Test
    void front_keyOfAnotherCertificate_saysSo() throws Exception {
        TlsSettings settings = pem(made());
        Path other = folder.resolve("other.key");
        Files.writeString(other, made().getPrivateKeyPEM());
        assertThat(refusal(new TlsSettings(settings.certificate(), other, null, null)))
                .contains(other + ": not the key of the certificate in");
    }

    @Test
    void front_fileOfSomethingElse_saysSo() throws Exception {
        Path text = folder.resolve("text.pem");
        Files.writeString(text, "a herring gull\n");
        TlsSettings settings = pem(made());
        assertThat(refusal(new TlsSettings(settings.certificate(), text, null, null)))
                .contains(text + ": holds no PKCS#8 key");
        assertThat(refusal(new TlsSettings(text, settings.key(), null, null))).contains(text + ": ");
    }

    private Path store(X509Bundle bundle, String password) throws Exception {
        Path file = folder.resolve("front.p12");
        Files.write(file, stored(bundle, password));
        return file;
    }

    private static byte[] stored(X509Bundle bundle, String password) throws Exception {
        KeyStore store = KeyStore.getInstance("PKCS12");
        store.load(null, null);
        store.setKeyEntry(
                "front", bundle.getKeyPair().getPrivate(), password.toCharArray(), bundle.getCertificatePath());
        ByteArrayOutputStream out = new ByteArrayOutputStream();
        store.store(out, password.toCharArray());
        return out.toByteArray();
    }

    @Test
    void front_storeWhosePasswordIsNotTheVariables_saysSo() throws Exception {
        // PATH is set wherever tests run, and is no password.
        TlsSettings settings = new TlsSettings(null, null, store(made(), "fulmar"), "PATH");
        assertThat(refusal(settings)).contains("the password in PATH does not open it");
    }

    @Test
    void front_storeWhosePasswordIsNotSet_saysSo() throws Exception {
        TlsSettings settings = new TlsSettings(null, null, store(made(), "fulmar"), "STEELYARD_NOT_SET");
        assertThat(refusal(settings)).contains("STEELYARD_NOT_SET").contains("export it");
    }

    @Test
    void front_storeWithTheRightPassword_isShown() throws Exception {
        String password = System.getenv("PATH");
        X509Bundle bundle = made();
        TlsSettings settings = new TlsSettings(null, null, store(bundle, password), "PATH");
        try (FakeBackend backend = FakeBackend.answering(ANSWER);
                LivePlay play = LivePlay.of(pool -> pool.securedBy(settings), backend.address());
                SSLSocket socket = socket(play.front(), bundle.getCertificate())) {
            assertThat(askOver(socket)).contains("200 OK");
        }
    }

    @Test
    void client_withoutTrust_failsTheHandshake() throws Exception {
        try (FakeBackend backend = FakeBackend.answering(ANSWER);
                LivePlay play = LivePlay.of(secured(), backend.address());
                SSLSocket socket = socket(play.front(), made().getCertificate())) {
            assertThatThrownBy(socket::startHandshake).isInstanceOf(SSLException.class);
        }
    }
}
