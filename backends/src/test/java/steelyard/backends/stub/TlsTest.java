package steelyard.backends.stub;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatExceptionOfType;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.io.ByteArrayOutputStream;
import java.io.IOException;
import java.net.SocketException;
import java.net.URI;
import java.net.http.HttpClient;
import java.net.http.HttpRequest;
import java.net.http.HttpResponse;
import java.nio.charset.StandardCharsets;
import java.security.KeyStore;
import java.security.cert.X509Certificate;
import java.time.Duration;
import javax.net.ssl.SSLContext;
import javax.net.ssl.SSLException;
import javax.net.ssl.SSLHandshakeException;
import javax.net.ssl.SSLSocket;
import javax.net.ssl.TrustManagerFactory;
import org.jspecify.annotations.Nullable;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;
import steelyard.backends.behave.Change;
import steelyard.backends.fleet.BackendSpec;

/** A stub behind TLS, as the JDK's own client sees it. */
class TlsTest {

    private static final String GET = "GET / HTTP/1.1\r\nHost: gannet\r\nSteelyard-Request: 1\r\n\r\n";
    private static final Duration LONGEST = Duration.ofSeconds(20);

    private static OneStub stub() throws Exception {
        return new OneStub(new BackendSpec("gannet", OneStub.NO_TIME, "/afloat", null, null, true));
    }

    private static SSLContext trusting(@Nullable X509Certificate certificate) throws Exception {
        KeyStore store = KeyStore.getInstance("PKCS12");
        store.load(null, null);
        store.setCertificateEntry("backends", certificate);
        TrustManagerFactory trust = TrustManagerFactory.getInstance(TrustManagerFactory.getDefaultAlgorithm());
        trust.init(store);
        SSLContext context = SSLContext.getInstance("TLS");
        context.init(null, trust.getTrustManagers(), null);
        return context;
    }

    private static SSLSocket connect(OneStub stub, String... protocols) throws Exception {
        SSLSocket socket = (SSLSocket) trusting(stub.fleet.certificate())
                .getSocketFactory()
                .createSocket(stub.address().getAddress(), stub.address().getPort());
        socket.setSoTimeout((int) LONGEST.toMillis());
        socket.setEnabledProtocols(protocols);
        return socket;
    }

    private static String head(SSLSocket socket) throws IOException {
        ByteArrayOutputStream head = new ByteArrayOutputStream();
        while (!head.toString(StandardCharsets.ISO_8859_1).endsWith("\r\n\r\n")) {
            int next = socket.getInputStream().read();
            assertThat(next).isNotNegative();
            head.write(next);
        }
        return head.toString(StandardCharsets.ISO_8859_1);
    }

    @ParameterizedTest
    @ValueSource(strings = {"TLSv1.2", "TLSv1.3"})
    void tls_ofToday_serves(String protocol) throws Exception {
        try (OneStub stub = stub();
                SSLSocket socket = connect(stub, protocol)) {
            socket.getOutputStream().write(GET.getBytes(StandardCharsets.US_ASCII));
            assertThat(head(socket)).startsWith("HTTP/1.1 200 ");
            assertThat(socket.getSession().getProtocol()).isEqualTo(protocol);
            stub.until(figures -> figures.answered() == 1);
        }
    }

    @Test
    void tls_ofYesterday_isRefused() throws Exception {
        try (OneStub stub = stub();
                SSLSocket socket = connect(stub, "TLSv1.1")) {
            assertThatThrownBy(socket::startHandshake).isInstanceOf(SSLException.class);
        }
    }

    // The JDK's client checks that the certificate is meant for this address.
    @Test
    void certificate_isForTheAddressAndBelievedByThoseWhoAreGivenIt() throws Exception {
        try (OneStub stub = stub()) {
            HttpRequest request = HttpRequest.newBuilder(
                            URI.create("https://127.0.0.1:" + stub.address().getPort() + "/"))
                    .timeout(LONGEST)
                    .build();
            HttpClient trusting = HttpClient.newBuilder()
                    .sslContext(trusting(stub.fleet.certificate()))
                    .version(HttpClient.Version.HTTP_1_1)
                    .build();
            assertThat(trusting.send(request, HttpResponse.BodyHandlers.ofString())
                            .statusCode())
                    .isEqualTo(200);
            HttpClient stranger = HttpClient.newHttpClient();
            assertThatExceptionOfType(SSLHandshakeException.class)
                    .isThrownBy(() -> stranger.send(request, HttpResponse.BodyHandlers.ofString()));
        }
    }

    @Test
    void plainHttp_toTheTlsPort_isNoTraffic() throws Exception {
        try (OneStub stub = stub();
                RawClient client = stub.client()) {
            client.send(GET);
            assertThatThrownBy(client::receive).isInstanceOf(IOException.class);
            assertThat(stub.figures().received()).isZero();
        }
    }

    @Test
    void kill_resetsWithoutAFarewell() throws Exception {
        try (OneStub stub = stub();
                SSLSocket socket = connect(stub, "TLSv1.3")) {
            socket.getOutputStream().write(GET.getBytes(StandardCharsets.US_ASCII));
            assertThat(head(socket)).startsWith("HTTP/1.1 200 ");
            socket.getInputStream().readNBytes(40);
            stub.apply(new Change.Kill());
            assertThatThrownBy(() -> socket.getInputStream().read())
                    .isInstanceOfAny(SocketException.class, SSLException.class)
                    .hasMessageContaining("reset");
        }
    }

    @Test
    void upgrade_overTls_echoes() throws Exception {
        try (OneStub stub = stub()) {
            try (SSLSocket socket = connect(stub, "TLSv1.3")) {
                socket.getOutputStream()
                        .write("GET / HTTP/1.1\r\nHost: gannet\r\nConnection: Upgrade\r\nUpgrade: deck\r\n\r\nahead"
                                .getBytes(StandardCharsets.US_ASCII));
                assertThat(head(socket)).startsWith("HTTP/1.1 101 ");
                assertThat(socket.getInputStream().readNBytes(5))
                        .isEqualTo("ahead".getBytes(StandardCharsets.US_ASCII));
            }
            stub.until(figures -> figures.tunnels() == 0 && figures.tunnelled() == 1);
        }
    }

    @Test
    void certificate_withoutTls_isNone() throws Exception {
        try (OneStub stub = OneStub.of(OneStub.NO_TIME)) {
            assertThat(stub.fleet.certificate()).isNull();
        }
    }
}
