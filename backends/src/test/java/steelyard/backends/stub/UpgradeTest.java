package steelyard.backends.stub;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatExceptionOfType;

import java.net.SocketException;
import java.time.Duration;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;
import steelyard.backends.behave.Change;

/** Requests that ask for another protocol, and the tunnels that they become. */
class UpgradeTest {

    private static String ask(String protocol, String... fields) {
        return "GET /deck HTTP/1.1\r\nHost: gannet\r\nSteelyard-Request: 4\r\nSteelyard-Attempt: 1\r\nConnection: Upgrade\r\n"
                + "Upgrade: " + protocol + "\r\n" + String.join("", fields) + "\r\n";
    }

    private static String echo(RawClient client, String text) throws Exception {
        client.send(text);
        return read(client, text.length());
    }

    private static String read(RawClient client, int length) throws Exception {
        StringBuilder back = new StringBuilder();
        for (int i = 0; i < length; i++) {
            back.append((char) client.readByte());
        }
        return back.toString();
    }

    @Test
    void upgrade_anyName_is101ThenAnEchoUntilTheClientEndsItsSide() throws Exception {
        try (OneStub stub = OneStub.of(OneStub.NO_TIME);
                RawClient client = stub.client()) {
            RawClient.Received answer = client.send(ask("tide-table/2, other")).receive();
            assertThat(answer.status()).isEqualTo(101);
            assertThat(answer.headers())
                    .contains("upgrade: tide-table/2", "connection: upgrade")
                    .noneMatch(line -> line.startsWith("content-length") || line.startsWith("transfer-encoding"));
            assertThat(echo(client, "GET / HTTP/1.1\r\n\r\n")).isEqualTo("GET / HTTP/1.1\r\n\r\n");
            assertThat(stub.figures().tunnels()).isEqualTo(1);
            assertThat(stub.figures().inService()).isZero();
            assertThat(stub.figures().answered()).isEqualTo(1);
            stub.untilHeard("answered #4.1 101");

            client.send("last words");
            client.endOutput();
            assertThat(client.readAll()).isEqualTo("last words");
            stub.until(figures -> figures.tunnels() == 0);
            assertThat(stub.figures().tunnelled()).isEqualTo(1);
            assertThat(stub.heard.lines).containsExactly("received #4.1", "answered #4.1 101");
        }
    }

    @Test
    void upgrade_takesItsServiceTimeLikeAnyRequest() throws Exception {
        try (OneStub stub = OneStub.of(OneStub.TEN_SECONDS);
                RawClient client = stub.client()) {
            client.send(ask("deck"));
            stub.until(figures -> figures.inService() == 1);
            assertThat(stub.figures().tunnels()).isZero();
            stub.pass(Duration.ofSeconds(10));
            assertThat(client.receive().status()).isEqualTo(101);
        }
    }

    @Test
    void upgrade_octetsSentAheadOfThe101_areEchoed() throws Exception {
        try (OneStub stub = OneStub.of(OneStub.TEN_SECONDS);
                RawClient client = stub.client()) {
            client.send(ask("deck") + "  \r\nahead ");
            stub.until(figures -> figures.inService() == 1);
            client.send("and more");
            stub.pass(Duration.ofSeconds(10));
            assertThat(client.receive().status()).isEqualTo(101);
            assertThat(read(client, 18)).isEqualTo("  \r\nahead and more");
        }
    }

    @Test
    void upgrade_moreThanBuffersHold_comesBackWhole() throws Exception {
        String much = "0123456789".repeat(400_000);
        try (OneStub stub = OneStub.of(OneStub.NO_TIME);
                RawClient client = stub.client()) {
            client.send(ask("deck")).receive();
            Thread writer = new Thread(() -> {
                try {
                    client.send(much);
                    client.endOutput();
                } catch (java.io.IOException failure) {
                    throw new java.io.UncheckedIOException(failure);
                }
            });
            writer.start();
            assertThat(client.readAll()).isEqualTo(much);
            writer.join(20_000);
            stub.until(figures -> figures.tunnels() == 0);
        }
    }

    // A failed one stays with HTTP, and what was sent behind it is read as HTTP.
    @Test
    void upgrade_struckByAFault_isAnsweredAndTheConnectionGoesOn() throws Exception {
        try (OneStub stub = OneStub.of(OneStub.NO_TIME);
                RawClient client = stub.client()) {
            stub.apply(new Change.Fail(1, 500, Change.When.AT_ONCE, false));
            client.send(ask("deck") + "GET /afloat HTTP/1.1\r\nHost: gannet\r\n\r\n");
            assertThat(client.receive().status()).isEqualTo(500);
            assertThat(client.receive().status()).isEqualTo(200);
            assertThat(stub.figures().tunnelled()).isZero();
        }
    }

    @Test
    void kill_resetsTunnels() throws Exception {
        try (OneStub stub = OneStub.of(OneStub.NO_TIME);
                RawClient client = stub.client()) {
            client.send(ask("deck")).receive();
            assertThat(echo(client, "x")).isEqualTo("x");
            stub.apply(new Change.Kill());
            assertThatExceptionOfType(SocketException.class)
                    .isThrownBy(client::readByte)
                    .withMessageContaining("reset");
            stub.until(figures -> figures.tunnels() == 0);
        }
    }

    @Test
    void close_withATunnelOpen_endsItInOrder() throws Exception {
        OneStub stub = OneStub.of(OneStub.NO_TIME);
        try (RawClient client = stub.client()) {
            client.send(ask("deck")).receive();
            assertThat(echo(client, "x")).isEqualTo("x");
            stub.close();
            assertThat(client.readByte()).isEqualTo(-1);
        }
    }

    // The example of RFC 6455, 1.3.
    @Test
    void webSocket_theKeyOfTheStandard_getsItsAnswer() throws Exception {
        try (OneStub stub = OneStub.of(OneStub.NO_TIME);
                RawClient client = stub.client()) {
            RawClient.Received answer = client.send(ask(
                            "websocket",
                            "Sec-WebSocket-Key: dGhlIHNhbXBsZSBub25jZQ==\r\n",
                            "Sec-WebSocket-Version: 13\r\n"))
                    .receive();
            assertThat(answer.status()).isEqualTo(101);
            assertThat(answer.headers()).contains("sec-websocket-accept: s3pplmbitxaq9kygzzhzrbk+xoo=");
            assertThat(Upgrade.accept("dGhlIHNhbXBsZSBub25jZQ==")).isEqualTo("s3pPLMBiTxaQ9kYGzzhZRbK+xOo=");
        }
    }

    @ParameterizedTest
    @CsvSource({
        "Sec-WebSocket-Version: 13, 400",
        "Sec-WebSocket-Key: dGhlIHNhbXBsZSBub25jZQ==, 426",
        "'Sec-WebSocket-Version: 13\r\nSec-WebSocket-Key: c2hvcnQ=', 400",
        "'Sec-WebSocket-Version: 13\r\nSec-WebSocket-Key: ?', 400",
        "'Sec-WebSocket-Version: 8\r\nSec-WebSocket-Key: dGhlIHNhbXBsZSBub25jZQ==', 426"
    })
    void webSocket_badHandshake_isRefusedAndStaysHttp(String fields, int status) throws Exception {
        try (OneStub stub = OneStub.of(OneStub.NO_TIME);
                RawClient client = stub.client()) {
            assertThat(client.send(ask("websocket", fields + "\r\n")).receive().status())
                    .isEqualTo(status);
            assertThat(client.get("/", 5).receive().status()).isEqualTo(200);
        }
    }

    @ParameterizedTest
    @ValueSource(
            strings = {
                "GET / HTTP/1.1\r\nHost: gannet\r\nConnection: Upgrade\r\nUpgrade: h2c\r\n\r\n",
                "GET / HTTP/1.1\r\nHost: gannet\r\nConnection: Upgrade\r\nUpgrade: TLS/1.2\r\n\r\n",
                "GET / HTTP/1.1\r\nHost: gannet\r\nUpgrade: deck\r\n\r\n",
                "GET / HTTP/1.1\r\nHost: gannet\r\nConnection: Upgrade\r\n\r\n",
                "GET / HTTP/1.0\r\nConnection: keep-alive, Upgrade\r\nUpgrade: deck\r\n\r\n",
                "GET /afloat HTTP/1.1\r\nHost: gannet\r\nConnection: Upgrade\r\nUpgrade: deck\r\n\r\n"
            })
    void upgrade_notForUs_isAnsweredAsHttp(String request) throws Exception {
        try (OneStub stub = OneStub.of(OneStub.NO_TIME);
                RawClient client = stub.client()) {
            assertThat(client.send(request).receive().status()).isEqualTo(200);
            assertThat(client.get("/", 5).receive().status()).isEqualTo(200);
            assertThat(stub.figures().tunnelled()).isZero();
        }
    }
}
