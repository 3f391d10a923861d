package steelyard.balancer.live;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.List;
import java.util.Locale;
import java.util.concurrent.BlockingQueue;
import java.util.concurrent.LinkedBlockingQueue;
import java.util.concurrent.TimeUnit;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;
import org.junit.jupiter.api.extension.ExtendWith;
import steelyard.balancer.core.decide.Outcome;

/** What passes through, and how it is changed on the way. */
@Timeout(60)
@ExtendWith(Accounting.class)
class ForwardingTest {
    private static final String OK = "HTTP/1.1 200 OK\r\nContent-Length: 2\r\n\r\nok";
    private static final String GET = "GET /sailings HTTP/1.1\r\nHost: skerry.example\r\n\r\n";

    private final BlockingQueue<String> heads = new LinkedBlockingQueue<>();

    private FakeBackend capturing(String answer) throws Exception {
        return FakeBackend.playing(wire -> {
            for (String head = wire.readHead(); head != null; head = wire.readHead()) {
                String content = wire.read(Wire.contentLength(head));
                heads.add(head + content);
                wire.send(answer);
            }
        });
    }

    private String captured() throws InterruptedException {
        String head = heads.poll(20, TimeUnit.SECONDS);
        assertThat(head).as("a request reached the backend").isNotNull();
        return head;
    }

    @Test
    void forwarding_twoRequestsOnOneConnection_reuseOneBackendConnection() throws Exception {
        try (FakeBackend backend = FakeBackend.answering(OK);
                LivePlay play = LivePlay.of(backend.address());
                Wire client = play.client()) {
            for (int i = 0; i < 3; i++) {
                client.send(GET);
                assertThat(client.readAnswer())
                        .startsWith("HTTP/1.1 200 OK\r\n")
                        .endsWith("ok");
            }
            assertThat(backend.connections()).isEqualTo(1);
            assertThat(play.decisions.outcomes())
                    .isEqualTo(List.of(Outcome.ANSWERED, Outcome.ANSWERED, Outcome.ANSWERED));
        }
    }

    @Test
    void forwarding_request_losesHopByHopFieldsAndGainsVia() throws Exception {
        try (FakeBackend backend = capturing(OK);
                LivePlay play = LivePlay.of(backend.address())) {
            play.ask("GET /a%2Fb//c/../d?x=%41&&y=1;z HTTP/1.1\r\nHost: skerry.example\r\nConnection: , x-HOP ,\r\n"
                    + "X-Hop: 1\r\nConnection: keep-alive\r\nKeep-Alive: 5\r\nProxy-Connection: x\r\nTE: trailers\r\n"
                    + "Upgrade: x\r\nX-L: 1\r\nX-O: a\r\nX-L: 2\r\nVia: 1.0 fred\r\n\r\n");
            assertThat(captured().toLowerCase())
                    .startsWith("get /a%2fb//c/../d?x=%41&&y=1;z http/1.1\r\n")
                    .doesNotContain("x-hop", "connection:", "keep-alive", "te:", "upgrade", "forwarded:")
                    .containsSubsequence("x-l: 1", "x-l: 2")
                    .containsSubsequence("via: 1.0 fred", "via: 1.1 steelyard");
        }
    }

    @Test
    void forwarding_answer_losesHopByHopFieldsAndGainsDate() throws Exception {
        String answer = "HTTP/1.1 299 \r\nConnection: X-Secret\r\nX-Secret: 1\r\nKeep-Alive: 5\r\nForwarded: for=x\r\n"
                + "Set-Cookie: a=1; Expires=Wed, 09 Jun 2027 10:18:14 GMT\r\nSet-Cookie: b=2\r\nContent-Length: 0\r\n\r\n";
        try (FakeBackend backend = FakeBackend.answering(answer);
                LivePlay play = LivePlay.of(backend.address())) {
            String got = play.ask(GET).toLowerCase();
            assertThat(got)
                    .startsWith("http/1.1 299 \r\n")
                    .doesNotContain("x-secret", "keep-alive", "connection", "forwarded")
                    .containsSubsequence("set-cookie: a=1; expires=wed, 09 jun 2027 10:18:14 gmt", "set-cookie: b=2");
            assertThat(got.split("date: ")).hasSize(2);
        }
    }

    @Test
    void forwarding_askedForForwarded_appendsOwnElementLast() throws Exception {
        try (FakeBackend backend = capturing(OK);
                LivePlay play = LivePlay.of(Pool::forwarding, backend.address())) {
            play.ask("GET / HTTP/1.1\r\nHost: a.example:81\r\nForwarded: for=192.0.2.43\r\n\r\n");
            assertThat(captured())
                    .containsSubsequence(
                            "for=192.0.2.43\r\n",
                            "for=127.0.0.1;by=\"127.0.0.1:" + play.front().getPort()
                                    + "\";host=\"a.example:81\";proto=http\r\n");
        }
    }

    @Test
    void forwarding_requestNumber_isKeptOrMadeUpAndAttemptAdded() throws Exception {
        try (FakeBackend backend = capturing(OK);
                LivePlay play = LivePlay.of(backend.address())) {
            play.ask("GET / HTTP/1.1\r\nHost: a\r\nSteelyard-Request: 417\r\nSteelyard-Attempt: 9\r\n\r\n");
            assertThat(captured().toLowerCase()).contains("steelyard-request: 417\r\n", "steelyard-attempt: 1\r\n");
            play.ask("GET / HTTP/1.1\r\nHost: a\r\nSteelyard-Request: 4x7\r\n\r\n");
            assertThat(captured().toLowerCase()).contains("steelyard-request: -1\r\n");
            assertThat(play.decisions.picks().get(0).request()).isEqualTo(417);
            assertThat(play.decisions.picks().get(1).request()).isEqualTo(-1);
        }
    }

    @Test
    void forwarding_contentWithLength_arrivesWhole() throws Exception {
        try (FakeBackend backend = capturing(OK);
                LivePlay play = LivePlay.of(backend.address())) {
            String content = "GET /x HTTP/1.1\r\n\r\n";
            play.ask("POST /holds HTTP/1.1\r\nHost: a\r\nContent-Length: " + content.length() + "\r\n\r\n" + content);
            assertThat(captured()).endsWith("\r\n\r\n" + content);
        }
    }

    @Test
    @Duty({"H084", "H086"})
    void forwarding_head_hasNoContentAndNextAnswerIsAligned() throws Exception {
        try (FakeBackend backend = FakeBackend.playing(wire -> {
                    wire.readHead();
                    wire.send("HTTP/1.1 200 OK\r\nContent-Length: 100\r\n\r\n");
                    wire.readHead();
                    wire.send("HTTP/1.1 304 Not Modified\r\nContent-Length: 10\r\n\r\n");
                    wire.readHead();
                    wire.send("HTTP/1.1 204 No Content\r\nContent-Length: 0\r\n\r\n");
                    wire.readHead();
                    wire.send(OK);
                    wire.readHead();
                });
                LivePlay play = LivePlay.of(backend.address());
                Wire client = play.client()) {
            client.send(GET.replace("GET", "HEAD"));
            assertThat(client.readHead()).startsWith("HTTP/1.1 200 ").containsIgnoringCase("content-length: 100");
            client.send(GET);
            assertThat(client.readHead()).startsWith("HTTP/1.1 304 ");
            client.send(GET);
            assertThat(client.readHead()).startsWith("HTTP/1.1 204 ").doesNotContainIgnoringCase("content-length");
            client.send(GET);
            assertThat(client.readAnswer()).endsWith("ok");
            assertThat(backend.connections()).isEqualTo(1);
        }
    }

    @Test
    @Duty("H127")
    void forwarding_pipelinedRequests_areAnsweredInOrder() throws Exception {
        try (FakeBackend slow = answeringPath(100);
                FakeBackend quick = answeringPath(0);
                LivePlay play = LivePlay.of(slow.address(), quick.address());
                Wire client = play.client()) {
            StringBuilder all = new StringBuilder();
            for (int i = 0; i < 10; i++) {
                all.append("GET /").append(i).append(" HTTP/1.1\r\nHost: a\r\n\r\n");
            }
            client.send(all.toString());
            for (int i = 0; i < 10; i++) {
                assertThat(client.readAnswer()).endsWith("\r\n\r\n/" + i);
            }
            assertThat(slow.connections() + quick.connections()).isEqualTo(2);
        }
    }

    @Test
    void forwarding_answer_carriesViaAfterThoseOfOthers() throws Exception {
        try (FakeBackend backend =
                        FakeBackend.answering("HTTP/1.1 200 OK\r\nVia: 1.1 inner\r\nContent-Length: 0\r\n\r\n");
                LivePlay play = LivePlay.of(backend.address())) {
            assertThat(play.ask("GET / HTTP/1.1\r\nHost: a\r\n\r\n").toLowerCase(Locale.ROOT))
                    .containsSubsequence("via: 1.1 inner", "via: 1.1 steelyard");
        }
    }

    @Test
    void forwarding_answerOfAnOldBackend_saysSoInVia() throws Exception {
        try (FakeBackend backend = FakeBackend.answering("HTTP/1.0 200 OK\r\nContent-Length: 0\r\n\r\n");
                LivePlay play = LivePlay.of(backend.address())) {
            assertThat(play.ask("GET / HTTP/1.1\r\nHost: a\r\n\r\n")).containsIgnoringCase("via: 1.0 steelyard");
        }
    }

    @Test
    void forwarding_interimAnswer_losesWhatIsForOneHop() throws Exception {
        try (FakeBackend backend = FakeBackend.answering("HTTP/1.1 103 Early Hints\r\nConnection: x-hop\r\n"
                        + "X-Hop: 1\r\nLink: </a>\r\n\r\nHTTP/1.1 200 OK\r\nContent-Length: 0\r\n\r\n");
                LivePlay play = LivePlay.of(backend.address());
                Wire client = play.client()) {
            client.send("GET / HTTP/1.1\r\nHost: a\r\n\r\n");
            assertThat(client.readHead())
                    .startsWith("HTTP/1.1 103")
                    .containsIgnoringCase("link: </a>")
                    .containsIgnoringCase("via: 1.1 steelyard")
                    .doesNotContainIgnoringCase("connection:")
                    .doesNotContainIgnoringCase("x-hop");
            assertThat(client.readHead()).startsWith("HTTP/1.1 200");
        }
    }

    private static FakeBackend answeringPath(long pauseMillis) throws Exception {
        return FakeBackend.playing(wire -> {
            for (String head = wire.readHead(); head != null; head = wire.readHead()) {
                try {
                    Thread.sleep(pauseMillis);
                } catch (InterruptedException e) {
                    return;
                }
                String path = head.split(" ")[1];
                wire.send("HTTP/1.1 200 OK\r\nContent-Length: " + path.length() + "\r\n\r\n" + path);
            }
        });
    }

    @Test
    void forwarding_chunkedAnswer_isRelayedInChunks() throws Exception {
        try (FakeBackend backend = FakeBackend.answering("HTTP/1.1 200 OK\r\nTransfer-Encoding: chunked\r\n\r\n"
                        + "5;a=b\r\nhello\r\n0\r\nX-Sum: 1\r\n\r\n");
                LivePlay play = LivePlay.of(backend.address());
                Wire client = play.client()) {
            client.send(GET);
            assertThat(client.readHead()).containsIgnoringCase("transfer-encoding: chunked");
            assertThat(client.read(15)).isEqualTo("5\r\nhello\r\n0\r\n\r\n");
        }
    }

    @Test
    void forwarding_oldClient_getsNoChunksAndIsClosed() throws Exception {
        try (FakeBackend backend = FakeBackend.playing(wire -> {
                    heads.add(wire.readHead());
                    wire.send("HTTP/1.1 103 Early Hints\r\n\r\nHTTP/1.1 200 OK\r\nTransfer-Encoding: chunked\r\n\r\n"
                            + "5\r\nhello\r\n0\r\n\r\n");
                    wire.readHead();
                });
                LivePlay play = LivePlay.of(backend.address());
                Wire client = play.client()) {
            client.send("GET / HTTP/1.0\r\nConnection: keep-alive\r\n\r\n");
            assertThat(client.readToEnd())
                    .startsWith("HTTP/1.1 200 OK\r\n")
                    .endsWith("\r\n\r\nhello")
                    .containsIgnoringCase("connection: close")
                    .doesNotContainIgnoringCase("transfer-encoding");
            assertThat(captured()).startsWith("GET / HTTP/1.1\r\n").containsIgnoringCase("via: 1.0 steelyard");
        }
    }

    @Test
    void forwarding_answerEndedByClosing_becomesChunked() throws Exception {
        try (FakeBackend backend = FakeBackend.playing(wire -> {
                    wire.readHead();
                    wire.send("HTTP/1.0 200 OK\r\n\r\nhello");
                });
                LivePlay play = LivePlay.of(backend.address());
                Wire client = play.client()) {
            client.send(GET);
            assertThat(client.readHead()).startsWith("HTTP/1.1 200").containsIgnoringCase("transfer-encoding: chunked");
            assertThat(client.read(15)).isEqualTo("5\r\nhello\r\n0\r\n\r\n");
        }
    }

    @Test
    @Duty("H091")
    void forwarding_interimAnswers_areForwarded() throws Exception {
        try (FakeBackend backend = FakeBackend.playing(wire -> {
                    String head = wire.readHead();
                    wire.send("HTTP/1.1 100 Continue\r\n\r\n");
                    String content = wire.read(5);
                    heads.add(head + content);
                    wire.send("HTTP/1.1 103 Early Hints\r\nLink: x\r\n\r\n" + OK);
                    wire.readHead();
                });
                LivePlay play = LivePlay.of(backend.address());
                Wire client = play.client()) {
            client.send("POST / HTTP/1.1\r\nHost: a\r\nContent-Length: 5\r\nExpect: 100-continue\r\n\r\n");
            assertThat(client.readHead()).startsWith("HTTP/1.1 100 ");
            client.send("hello");
            assertThat(client.readHead()).startsWith("HTTP/1.1 103 ").containsIgnoringCase("link: x");
            assertThat(client.readAnswer()).startsWith("HTTP/1.1 200 ").endsWith("ok");
            assertThat(captured()).containsIgnoringCase("expect: 100-continue").endsWith("hello");
        }
    }

    @Test
    void forwarding_connectionCloseFromClient_isHonoured() throws Exception {
        try (FakeBackend backend = FakeBackend.answering(OK);
                LivePlay play = LivePlay.of(backend.address());
                Wire client = play.client()) {
            client.send("GET / HTTP/1.1\r\nHost: a\r\nConnection: close\r\n\r\n" + GET);
            assertThat(client.readToEnd())
                    .containsIgnoringCase("connection: close")
                    .endsWith("ok");
            assertThat(play.decisions.picks()).hasSize(1);
        }
    }

    @Test
    @Duty("H132")
    void forwarding_connectionCloseFromBackend_isNotReused() throws Exception {
        try (FakeBackend backend =
                        FakeBackend.answering("HTTP/1.1 200 OK\r\nConnection: close\r\nContent-Length: 2\r\n\r\nok");
                LivePlay play = LivePlay.of(backend.address());
                Wire client = play.client()) {
            for (int i = 0; i < 2; i++) {
                client.send(GET);
                assertThat(client.readAnswer()).doesNotContainIgnoringCase("connection:");
            }
            assertThat(backend.connections()).isEqualTo(2);
        }
    }

    @Test
    @Duty("H087")
    void forwarding_secondAnswerToOneRequest_reachesNobody() throws Exception {
        try (FakeBackend backend = FakeBackend.answering(OK + OK.replace("200", "250"));
                LivePlay play = LivePlay.of(backend.address());
                Wire client = play.client()) {
            for (int i = 0; i < 3; i++) {
                client.send(GET);
                assertThat(client.readAnswer()).startsWith("HTTP/1.1 200 ");
            }
            assertThat(backend.connections()).isEqualTo(3);
        }
    }

    @Test
    void forwarding_countingConnections_keepsTheBackendOfAConnection() throws Exception {
        try (FakeBackend one = FakeBackend.answering(OK);
                FakeBackend other = FakeBackend.answering(OK);
                LivePlay play = LivePlay.of(Pool::countingConnections, one.address(), other.address());
                Wire first = play.client();
                Wire second = play.client()) {
            for (int i = 0; i < 3; i++) {
                first.send(GET);
                first.readAnswer();
                second.send(GET);
                second.readAnswer();
            }
            assertThat(play.decisions.picks().stream().map(Decisions.Pick::backend))
                    .containsExactly(0, 1, 0, 1, 0, 1);
        }
    }
}
