package steelyard.balancer.live;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.net.SocketException;
import java.nio.charset.StandardCharsets;
import java.util.List;
import java.util.Locale;
import java.util.Random;
import java.util.concurrent.ArrayBlockingQueue;
import java.util.concurrent.BlockingQueue;
import java.util.concurrent.TimeUnit;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;
import org.junit.jupiter.api.extension.ExtendWith;
import steelyard.balancer.core.decide.Outcome;

/** Upgrade and the tunnel behind it: RFC 9110, 3.7, 7.8 and 9.3.6; RFC 6455. */
@Timeout(60)
@ExtendWith(Accounting.class)
class DutyTunnelTest {
    private static final int MUCH = 1_000_000;
    private static final String GET = "GET / HTTP/1.1\r\nHost: a\r\n\r\n";
    private static final String KEY = "Sec-WebSocket-Key: dGhlIHNhbXBsZSBub25jZQ==\r\n";
    private static final String ACCEPT = "Sec-WebSocket-Accept: s3pPLMBiTxaQ9kYGzzhZRbK+xOo=\r\n";
    private static final String ASK =
            "GET /berths HTTP/1.1\r\nHost: a\r\nConnection: keep-alive, Upgrade\r\nUpgrade: websocket\r\n" + KEY
                    + "Sec-WebSocket-Version: 13\r\n\r\n";
    private static final String AGREED =
            "HTTP/1.1 101 Switching Protocols\r\nUpgrade: websocket\r\nConnection: Upgrade\r\n" + ACCEPT + "\r\n";

    private final BlockingQueue<String> heads = new ArrayBlockingQueue<>(100);

    private String head() throws InterruptedException {
        String head = heads.poll(20, TimeUnit.SECONDS);
        if (head == null) {
            throw new AssertionError("no head came");
        }
        return head;
    }

    /** Answers each head with these octets. */
    private FakeBackend answering(String answer) throws Exception {
        return FakeBackend.playing(wire -> {
            for (String head = wire.readHead(); head != null; head = wire.readHead()) {
                heads.add(head);
                wire.send(answer);
            }
        });
    }

    /** Agrees to the first head, then goes on with this. */
    private FakeBackend agreeing(FakeBackend.Script tunnel) throws Exception {
        return FakeBackend.playing(wire -> {
            String head = wire.readHead();
            if (head != null) {
                heads.add(head);
                wire.send(AGREED);
                tunnel.play(wire);
            }
        });
    }

    private static byte[] random(int octets) {
        byte[] random = new byte[octets];
        new Random(11).nextBytes(random);
        return random;
    }

    @Test
    @Duty({"H102", "H108"})
    void upgrade_handshake_reachesBothEndsAsItIs() throws Exception { // RFC 9110, 7.8; RFC 6455, 4.2.2
        try (FakeBackend backend = agreeing(Wire::readToEnd);
                LivePlay play = LivePlay.of(backend.address());
                Wire client = play.client()) {
            client.send(ASK);
            String answer = client.readHead();
            assertThat(head().toLowerCase(Locale.ROOT))
                    .contains("connection: upgrade\r\n")
                    .contains("upgrade: websocket\r\n")
                    .contains("sec-websocket-key: dghlihnhbxbszsbub25jzq==\r\n");
            assertThat(answer).startsWith("HTTP/1.1 101 ").contains(ACCEPT.strip());
            assertThat(answer.toLowerCase(Locale.ROOT))
                    .contains("connection: upgrade\r\n")
                    .contains("upgrade: websocket\r\n");
            assertThat(play.inFlight()).isEqualTo(1);
            client.finish();
            assertThat(client.readToEnd()).isEmpty();
            play.settle();
            assertThat(play.decisions.ends()).containsExactly(new Decisions.End(0, -1, 1, Outcome.ANSWERED, 101));
        }
    }

    @Test
    @Duty("H103")
    void upgrade_fromAnOldClient_isIgnored() throws Exception { // RFC 9110, 7.8
        try (FakeBackend backend = answering(Duties.OK);
                LivePlay play = LivePlay.of(backend.address());
                Wire client = play.client()) {
            client.send("GET / HTTP/1.0\r\nConnection: Upgrade\r\nUpgrade: websocket\r\n\r\n");
            assertThat(client.readAnswer()).contains(" 200 ");
            assertThat(head()).doesNotContainIgnoringCase("upgrade");
        }
    }

    @Test
    @Duty({"H104", "H105"})
    void switching_thatWasNotAskedForOrNamesNothing_isABadGateway() throws Exception { // RFC 9110, 7.8
        List<String> wrong = List.of(
                AGREED.replace("Upgrade: websocket\r\n", "Upgrade: tide\r\n"),
                AGREED.replace("Upgrade: websocket\r\n", ""),
                AGREED.replace("Upgrade: websocket\r\n", "Upgrade: websocket, tide\r\n"));
        for (String answer : wrong) {
            assertThat(onceOver(ASK, answer)).contains(" 502 ").contains("error=http_protocol_error");
        }
        assertThat(onceOver(GET, AGREED)).contains(" 502 ");
        assertThat(onceOver("GET / HTTP/1.1\r\nHost: a\r\nUpgrade: websocket\r\n\r\n", AGREED))
                .as("Upgrade without the option")
                .contains(" 502 ");
    }

    private String onceOver(String request, String answer) throws Exception {
        try (FakeBackend backend = answering(answer);
                LivePlay play = LivePlay.of(backend.address())) {
            return play.ask(request);
        }
    }

    @Test
    @Duty("H106")
    void upgrade_withContentThatAwaits100_getsBothInOrder() throws Exception { // RFC 9110, 7.8
        try (FakeBackend backend = FakeBackend.playing(wire -> {
                    wire.readHead();
                    wire.send("HTTP/1.1 100 Continue\r\n\r\n");
                    String content = wire.read(4);
                    wire.send(AGREED + content);
                    wire.send(wire.read(4));
                });
                LivePlay play = LivePlay.of(backend.address());
                Wire client = play.client()) {
            client.send(ASK.replace("GET", "POST")
                    .replace("Host: a\r\n", "Host: a\r\nExpect: 100-continue\r\nContent-Length: 4\r\n"));
            assertThat(client.readHead()).startsWith("HTTP/1.1 100 ");
            client.send("holdtide");
            assertThat(client.readHead()).startsWith("HTTP/1.1 101 ");
            client.finish();
            assertThat(client.readToEnd()).isEqualTo("holdtide");
        }
    }

    @Test
    @Duty({"H107", "H109", "H110"})
    void handshake_thatTheBackendRefuses_isAnOrdinaryAnswer() throws Exception { // RFC 6455, 4.1, 4.2.1, 4.4
        String refusal = "HTTP/1.1 426 Upgrade Required\r\nSec-WebSocket-Version: 13\r\nContent-Length: 2\r\n\r\nno";
        for (String request : List.of(
                ASK,
                ASK.replace(KEY, ""),
                ASK.replace("Version: 13", "Version: 25"),
                ASK.replace("Sec-WebSocket-Version: 13\r\n", ""),
                ASK.replace("Upgrade: websocket\r\n", ""),
                ASK.replace(", Upgrade", ""))) {
            try (FakeBackend backend = answering(refusal);
                    LivePlay play = LivePlay.of(backend.address());
                    Wire client = play.client()) {
                client.send(request + GET);
                assertThat(client.readAnswer())
                        .startsWith("HTTP/1.1 426 ")
                        .containsIgnoringCase("sec-websocket-version: 13\r\n")
                        .endsWith("no");
                assertThat(client.readAnswer()).as("the next request").endsWith("no");
            }
        }
    }

    @Test
    @Duty("H111")
    void tunnel_muchBothWays_arrivesAsItWas() throws Exception { // RFC 6455, 5.1
        byte[] sent = random(MUCH);
        try (FakeBackend backend = agreeing(wire -> wire.send(wire.readOctets(MUCH)));
                LivePlay play = LivePlay.of(backend.address());
                Wire client = play.client()) {
            client.send(ASK);
            client.readHead();
            client.send(sent);
            assertThat(client.readOctets(MUCH)).isEqualTo(sent);
        }
    }

    @Test
    @Duty("H112")
    void tunnel_octetsInTheSegmentsOfTheHandshake_areNotLost() throws Exception { // RFC 9110, 3.7
        String early = "GET is no request here\r\n\r\n\0\1\2";
        try (FakeBackend backend = FakeBackend.playing(wire -> {
                    wire.readHead();
                    wire.send(AGREED + "HTTP/1.1 is no answer here");
                    wire.send(" " + wire.readToEnd());
                });
                LivePlay play = LivePlay.of(backend.address());
                Wire client = play.client()) {
            client.send(ASK + early);
            assertThat(client.readHead()).startsWith("HTTP/1.1 101 ");
            client.finish();
            assertThat(client.readToEnd()).isEqualTo("HTTP/1.1 is no answer here " + early);
            play.settle();
            assertThat(play.decisions.outcomes()).containsExactly(Outcome.ANSWERED);
        }
    }

    @Test
    @Duty("H113")
    void tunnel_backendWritesMuchAndCloses_clientReadsItAllThenTheEnd() throws Exception { // RFC 9110, 9.3.6
        byte[] sent = random(MUCH);
        try (FakeBackend backend = agreeing(wire -> wire.send(sent));
                LivePlay play = LivePlay.of(backend.address());
                Wire client = play.client()) {
            client.send(ASK);
            client.readHead();
            assertThat(client.readOctets(MUCH)).isEqualTo(sent);
            assertThat(client.readToEnd()).isEmpty();
        }
    }

    @Test
    void tunnel_drainLimit_cutsIt() throws Exception {
        try (FakeBackend backend = agreeing(Wire::readToEnd);
                LivePlay play = LivePlay.of(pool -> pool.drainingWithin(0.2), backend.address());
                Wire client = play.client()) {
            client.send(ASK);
            client.readHead();
            play.balancer.drain(0, 0);
            assertThatThrownBy(() -> client.read(1)).isInstanceOf(SocketException.class);
            play.settle();
            assertThat(play.decisions.outcomes()).containsExactly(Outcome.CUT);
        }
    }

    @Test
    void tunnel_thatStandsStill_endsAtTheIdleLimit() throws Exception {
        try (FakeBackend backend = agreeing(Wire::readToEnd);
                LivePlay play = LivePlay.of(pool -> pool.patience(5, 5, 0.3), backend.address());
                Wire client = play.client()) {
            client.send(ASK);
            client.readHead();
            assertThatThrownBy(() -> client.read(1)).isInstanceOf(SocketException.class);
            play.settle();
            assertThat(play.decisions.outcomes()).containsExactly(Outcome.STALLED);
        }
    }

    @Test
    void tunnel_backendResets_clientIsReset() throws Exception {
        try (FakeBackend backend = agreeing(wire -> {
                    wire.read(1);
                    wire.reset();
                });
                LivePlay play = LivePlay.of(backend.address());
                Wire client = play.client()) {
            client.send(ASK);
            client.readHead();
            client.send("x".getBytes(StandardCharsets.US_ASCII));
            assertThatThrownBy(() -> client.read(1)).isInstanceOf(SocketException.class);
            play.settle();
            assertThat(play.decisions.outcomes()).containsExactly(Outcome.BROKEN);
        }
    }
}
