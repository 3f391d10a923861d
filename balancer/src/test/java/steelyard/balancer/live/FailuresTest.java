package steelyard.balancer.live;

import static org.assertj.core.api.Assertions.assertThat;
import static org.awaitility.Awaitility.await;

import java.net.InetSocketAddress;
import java.util.List;
import java.util.concurrent.CountDownLatch;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;
import org.junit.jupiter.api.extension.ExtendWith;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;
import steelyard.balancer.core.decide.Outcome;

/** What a client sees, and what is reported, when the backend or the client fails. */
@Timeout(60)
@ExtendWith(Accounting.class)
class FailuresTest {
    private static final String OK = "HTTP/1.1 200 OK\r\nContent-Length: 2\r\n\r\nok";
    private static final String GET = "GET / HTTP/1.1\r\nHost: a\r\n\r\n";
    private static final String POST = "POST / HTTP/1.1\r\nHost: a\r\nContent-Length: 4\r\n\r\nhold";

    private static FakeBackend resetting() throws Exception {
        return FakeBackend.playing(wire -> {
            wire.readHead();
            wire.reset();
        });
    }

    private static FakeBackend silent() throws Exception {
        return FakeBackend.playing(wire -> {
            while (wire.readHead() != null) {
                // read on, say nothing
            }
        });
    }

    @Test
    void own_refusedBackend_is502() throws Exception {
        try (LivePlay play = LivePlay.of(FakeBackend.deadAddress());
                Wire client = play.client()) {
            client.send(GET);
            assertThat(client.readAnswer())
                    .startsWith("HTTP/1.1 502 ")
                    .containsIgnoringCase("proxy-status: steelyard; error=connection_refused\r\n")
                    .containsIgnoringCase("\r\ndate: ")
                    .endsWith("\n");
            client.send(GET);
            assertThat(client.readAnswer()).as("the connection stays").startsWith("HTTP/1.1 502 ");
            assertThat(play.decisions.outcomes()).containsOnly(Outcome.REFUSED);
        }
    }

    @Test
    void own_resetBeforeAnyByte_is502() throws Exception {
        try (FakeBackend backend = resetting();
                LivePlay play = LivePlay.of(backend.address())) {
            assertThat(play.ask(GET))
                    .startsWith("HTTP/1.1 502 ")
                    .containsIgnoringCase("error=connection_terminated\r\n");
            assertThat(play.decisions.outcomes()).containsExactly(Outcome.RESET);
        }
    }

    @Test
    void own_closedBeforeAnyByte_is502() throws Exception {
        try (FakeBackend backend = FakeBackend.playing(Wire::readHead);
                LivePlay play = LivePlay.of(backend.address())) {
            assertThat(play.ask(GET)).startsWith("HTTP/1.1 502 ");
            assertThat(play.decisions.outcomes()).containsExactly(Outcome.RESET);
        }
    }

    @Test
    void own_closedInsideTheHead_is502AndBroken() throws Exception {
        try (FakeBackend backend = FakeBackend.playing(wire -> {
                    wire.readHead();
                    wire.send("HTTP/1.1 200 OK\r\nContent-Le");
                });
                LivePlay play = LivePlay.of(backend.address())) {
            assertThat(play.ask(GET)).startsWith("HTTP/1.1 502 ");
            assertThat(play.decisions.outcomes()).containsExactly(Outcome.BROKEN);
        }
    }

    @Test
    void own_answerThatIsNoHttp_is502AndMalformed() throws Exception {
        for (String answer : List.of(
                "lorem ipsum dolor\r\n\r\n",
                "HTTP/1.1 200 OK\r\nContent-Length: 5, 6\r\n\r\nhello",
                "HTTP/1.1 200 OK\r\nTransfer-Encoding: gzip, chunked\r\n\r\n0\r\n\r\n",
                "HTTP/1.1 101 Switching Protocols\r\nUpgrade: x\r\nConnection: upgrade\r\n\r\n")) {
            try (FakeBackend backend = FakeBackend.answering(answer);
                    LivePlay play = LivePlay.of(backend.address())) {
                assertThat(play.ask(GET))
                        .as(answer)
                        .startsWith("HTTP/1.1 502 ")
                        .containsIgnoringCase("error=http_protocol_error\r\n");
                assertThat(play.decisions.outcomes()).as(answer).containsExactly(Outcome.MALFORMED);
            }
        }
    }

    @Test
    @Duty("H118")
    void own_headRequest_hasNoContent() throws Exception {
        try (LivePlay play = LivePlay.of(FakeBackend.deadAddress());
                Wire client = play.client()) {
            client.send("HEAD / HTTP/1.1\r\nHost: a\r\nConnection: close\r\n\r\n");
            assertThat(client.readToEnd())
                    .startsWith("HTTP/1.1 502 ")
                    .containsIgnoringCase("content-length: ")
                    .endsWith("\r\n\r\n");
        }
    }

    @Test
    @Duty({"H116", "H117"})
    void own_nobodyToPick_is503WithRetryAfter() throws Exception {
        try (LivePlay play = LivePlay.of(FakeBackend.deadAddress())) {
            play.balancer.withdraw(0);
            assertThat(play.ask(GET))
                    .startsWith("HTTP/1.1 503 ")
                    .containsIgnoringCase("retry-after: 1\r\n")
                    .containsIgnoringCase("error=destination_unavailable\r\n");
            assertThat(play.decisions.nobody()).isEqualTo(1);
            assertThat(play.decisions.picks()).isEmpty();
        }
    }

    @Test
    @Duty("H081")
    void own_nobodyWhileContentIsOwed_closesAfterTheAnswer() throws Exception {
        try (LivePlay play = LivePlay.of(FakeBackend.deadAddress());
                Wire client = play.client()) {
            play.balancer.withdraw(0);
            client.send("POST / HTTP/1.1\r\nHost: a\r\nContent-Length: 1000\r\n\r\n" + GET + GET);
            assertThat(client.readToEnd())
                    .startsWith("HTTP/1.1 503 ")
                    .containsIgnoringCase("connection: close")
                    .containsOnlyOnce("HTTP/1.1");
        }
    }

    @Test
    @Duty("H115")
    void own_firstByteLate_is504() throws Exception {
        try (FakeBackend backend = silent();
                LivePlay play = LivePlay.of(pool -> pool.patience(10, 0.2, 30), backend.address())) {
            assertThat(play.ask(GET))
                    .startsWith("HTTP/1.1 504 ")
                    .containsIgnoringCase("error=http_response_timeout\r\n");
            assertThat(play.decisions.outcomes()).containsExactly(Outcome.LATE);
        }
    }

    @Test
    void own_silenceInsideTheHead_is504AndStalled() throws Exception {
        try (FakeBackend backend = FakeBackend.playing(wire -> {
                    wire.readHead();
                    wire.send("HTTP/1.1 200 OK\r\n");
                    wire.readHead();
                });
                LivePlay play = LivePlay.of(pool -> pool.patience(10, 5, 0.3), backend.address())) {
            assertThat(play.ask(GET))
                    .startsWith("HTTP/1.1 504 ")
                    .containsIgnoringCase("error=connection_read_timeout\r\n");
            assertThat(play.decisions.outcomes()).containsExactly(Outcome.STALLED);
        }
    }

    @Test
    void client_owesContentTooLong_is408AndAbandoned() throws Exception {
        try (FakeBackend backend = silent();
                LivePlay play = LivePlay.of(pool -> pool.patience(10, 30, 0.3), backend.address());
                Wire client = play.client()) {
            client.send("POST / HTTP/1.1\r\nHost: a\r\nContent-Length: 10\r\n\r\nhel");
            assertThat(client.readToEnd()).startsWith("HTTP/1.1 408 ");
            assertThat(play.decisions.outcomes()).containsExactly(Outcome.ABANDONED);
        }
    }

    /** What is no chunk of RFC 9112, 7.1; the long one is 2^64 + 5. */
    @ParameterizedTest
    @ValueSource(
            strings = {
                "g\r\n",
                "0x5\r\nhello\r\n0\r\n\r\n",
                "-1\r\nhello\r\n0\r\n\r\n",
                " 5\r\nhello\r\n0\r\n\r\n",
                "5\r\nhello0\r\n\r\n",
                "10000000000000005\r\nhello\r\n0\r\n\r\n",
            })
    void client_sendsWhatIsNoChunk_is400AndAbandoned(String content) throws Exception {
        try (FakeBackend backend = silent();
                LivePlay play = LivePlay.of(pool -> pool.patience(10, 30, 5), backend.address());
                Wire client = play.client()) {
            client.send("POST / HTTP/1.1\r\nHost: a\r\nTransfer-Encoding: chunked\r\n\r\n" + content + GET);
            assertThat(client.readToEnd()).startsWith("HTTP/1.1 400 ").containsOnlyOnce("HTTP/1.1");
            assertThat(play.decisions.outcomes()).containsExactly(Outcome.ABANDONED);
        }
    }

    @Test
    @Duty("H088")
    void answer_brokenHalfway_closesTheClientShort() throws Exception {
        try (FakeBackend backend = FakeBackend.playing(wire -> {
                    wire.readHead();
                    wire.send("HTTP/1.1 200 OK\r\nContent-Length: 10\r\n\r\nhello");
                });
                LivePlay play = LivePlay.of(Pool::retrying, backend.address());
                Wire client = play.client()) {
            client.send(GET);
            assertThat(client.readToEnd()).startsWith("HTTP/1.1 200 ").endsWith("\r\n\r\nhello");
            assertThat(play.decisions.outcomes()).containsExactly(Outcome.BROKEN);
        }
    }

    @Test
    @Duty("H088")
    void answer_chunkedAndBroken_hasNoLastChunk() throws Exception {
        try (FakeBackend backend = FakeBackend.playing(wire -> {
                    wire.readHead();
                    wire.send("HTTP/1.1 200 OK\r\nTransfer-Encoding: chunked\r\n\r\n5\r\nhello\r\n");
                    wire.reset();
                });
                LivePlay play = LivePlay.of(backend.address());
                Wire client = play.client()) {
            client.send(GET);
            assertThat(client.readToEnd()).doesNotContain("\r\n0\r\n");
            assertThat(play.decisions.outcomes()).containsAnyOf(Outcome.BROKEN, Outcome.RESET);
        }
    }

    @Test
    @Duty("H122")
    void retry_refused_goesToTheOtherBackend() throws Exception {
        try (FakeBackend good = FakeBackend.playing(wire -> {
                    String head = wire.readHead();
                    String content = wire.read(Wire.contentLength(head));
                    boolean second = head.toLowerCase().contains("steelyard-attempt: 2") && content.equals("hold");
                    wire.send(second ? OK : OK.replace("200", "400"));
                });
                LivePlay play = LivePlay.of(Pool::retrying, FakeBackend.deadAddress(), good.address())) {
            assertThat(play.ask(POST)).startsWith("HTTP/1.1 200 ");
            assertThat(play.decisions.outcomes()).containsExactly(Outcome.REFUSED, Outcome.ANSWERED);
            assertThat(play.decisions.picks().get(1).attempt()).isEqualTo(2);
        }
    }

    @Test
    void retry_refusedBeforeItsContentCame_readsTheContentOnAKeptConnection() throws Exception {
        try (FakeBackend good = FakeBackend.playing(wire -> {
                    for (String head = wire.readHead(); head != null; head = wire.readHead()) {
                        wire.read(Wire.contentLength(head));
                        wire.send(OK);
                    }
                });
                LivePlay play = LivePlay.of(Pool::retrying, FakeBackend.deadAddress(), good.address());
                Wire client = play.client()) {
            for (int i = 0; i < 2; i++) {
                assertThat(play.ask(GET)).startsWith("HTTP/1.1 200 ");
            }
            client.send(POST.substring(0, POST.length() - "hold".length()));
            await().until(() -> play.decisions.picks().size() == 5);
            client.send("hold");
            assertThat(client.readAnswer()).startsWith("HTTP/1.1 200 ");
            assertThat(good.connections()).isEqualTo(1);
        }
    }

    @Test
    @Duty("H123")
    void retry_getResetBeforeAnyByte_isMadeOnce() throws Exception {
        try (FakeBackend bad = resetting();
                FakeBackend good = FakeBackend.answering(OK);
                LivePlay play = LivePlay.of(Pool::retrying, bad.address(), good.address())) {
            assertThat(play.ask(GET)).startsWith("HTTP/1.1 200 ");
            assertThat(play.decisions.outcomes()).containsExactly(Outcome.RESET, Outcome.ANSWERED);
        }
    }

    @Test
    @Duty("H121")
    void retry_postWhoseHeadWasSent_isNotMade() throws Exception {
        try (FakeBackend bad = resetting();
                FakeBackend good = FakeBackend.answering(OK);
                LivePlay play = LivePlay.of(Pool::retrying, bad.address(), good.address())) {
            assertThat(play.ask(POST)).startsWith("HTTP/1.1 502 ");
            assertThat(good.connections()).isZero();
            assertThat(play.decisions.retries()).containsExactly(false);
        }
    }

    @Test
    void retry_nobodyElse_answersWithTheFailure() throws Exception {
        try (LivePlay play = LivePlay.of(Pool::retrying, FakeBackend.deadAddress())) {
            assertThat(play.ask(GET)).startsWith("HTTP/1.1 502 ").containsIgnoringCase("connection_refused");
            assertThat(play.decisions.nobody()).isEqualTo(1);
        }
    }

    @Test
    void retry_listedStatus_isTriedElsewhereAndPassedOnWhereNobodyIs() throws Exception {
        String busy = "HTTP/1.1 503 Busy\r\nContent-Length: 4\r\n\r\nbusy";
        try (FakeBackend bad = FakeBackend.answering(busy);
                FakeBackend good = FakeBackend.answering(OK);
                LivePlay play = LivePlay.of(pool -> pool.retrying(503), bad.address(), good.address())) {
            assertThat(play.ask(GET)).startsWith("HTTP/1.1 200 ");
            assertThat(play.decisions.ends().get(0).status()).isEqualTo(503);
            play.balancer.withdraw(1);
            assertThat(play.ask(GET)).startsWith("HTTP/1.1 503 Busy\r\n").endsWith("busy");
            assertThat(play.ask(POST)).startsWith("HTTP/1.1 503 Busy\r\n").endsWith("busy");
        }
    }

    /** Answers one request on a connection, and resets it at the second. */
    private static FakeBackend dyingAtReuse() throws Exception {
        return FakeBackend.playing(wire -> {
            wire.readHead();
            wire.send(OK);
            wire.readHead();
            wire.reset();
        });
    }

    @Test
    @Duty("H126")
    void retry_keptConnectionDiesAtReuse_getIsRetried() throws Exception {
        try (FakeBackend bad = dyingAtReuse();
                FakeBackend good = FakeBackend.answering(OK);
                LivePlay play = LivePlay.of(Pool::retrying, bad.address(), good.address());
                Wire client = play.client()) {
            for (int i = 0; i < 3; i++) {
                client.send(GET);
                assertThat(client.readAnswer()).startsWith("HTTP/1.1 200 ");
            }
            assertThat(play.decisions.outcomes())
                    .containsExactly(Outcome.ANSWERED, Outcome.ANSWERED, Outcome.RESET, Outcome.ANSWERED);
        }
    }

    @Test
    @Duty("H126")
    void retry_keptConnectionDiesAtReuse_postIsNotRetried() throws Exception {
        try (FakeBackend bad = dyingAtReuse();
                FakeBackend good = FakeBackend.answering(OK);
                LivePlay play = LivePlay.of(Pool::retrying, bad.address(), good.address());
                Wire client = play.client()) {
            for (int i = 0; i < 2; i++) {
                client.send(GET);
                client.readAnswer();
            }
            client.send("POST / HTTP/1.1\r\nHost: a\r\nContent-Length: 0\r\n\r\n");
            assertThat(client.readAnswer()).startsWith("HTTP/1.1 502 ");
            assertThat(play.decisions.outcomes()).containsExactly(Outcome.ANSWERED, Outcome.ANSWERED, Outcome.RESET);
        }
    }

    @Test
    void retry_insideTheContentOntoAnIdleConnection_sendsAllOfIt() throws Exception {
        try (FakeBackend bad = dyingAtReuse();
                FakeBackend good = FakeBackend.playing(wire -> {
                    for (String head = wire.readHead(); head != null; head = wire.readHead()) {
                        String content = wire.read(Wire.contentLength(head));
                        wire.send("HTTP/1.1 200 OK\r\nContent-Length: " + content.length() + "\r\n\r\n" + content);
                    }
                });
                LivePlay play = LivePlay.of(Pool::retrying, bad.address(), good.address());
                Wire client = play.client()) {
            for (int i = 0; i < 2; i++) {
                client.send(GET);
                client.readAnswer();
            }
            client.send("PUT / HTTP/1.1\r\nHost: a\r\nContent-Length: 10\r\n\r\nhello");
            await().until(() -> play.decisions.picks().size() == 4);
            client.send("gulls");
            assertThat(client.readAnswer()).startsWith("HTTP/1.1 200 ").endsWith("hellogulls");
            assertThat(play.decisions.outcomes().subList(2, 4)).containsExactly(Outcome.RESET, Outcome.ANSWERED);
        }
    }

    @Test
    void retry_contentBeyondWhatIsKept_isNotMade() throws Exception {
        CountDownLatch dies = new CountDownLatch(1);
        try (FakeBackend bad = FakeBackend.playing(wire -> {
                    wire.readHead();
                    wire.read(200_000);
                    dies.countDown();
                    wire.reset();
                });
                FakeBackend good = FakeBackend.answering(OK);
                LivePlay play = LivePlay.of(Pool::retrying, bad.address(), good.address());
                Wire client = play.client()) {
            client.send("PUT / HTTP/1.1\r\nHost: a\r\nContent-Length: 300000\r\n\r\n" + "x".repeat(200_000));
            dies.await();
            assertThat(client.readHead()).startsWith("HTTP/1.1 502 ");
            assertThat(play.decisions.retries()).containsExactly(false);
            assertThat(good.connections()).isZero();
        }
    }

    @Test
    void client_leavesWhileWaiting_endsTheAttemptAsAbandoned() throws Exception {
        CountDownLatch asked = new CountDownLatch(1);
        CountDownLatch left = new CountDownLatch(1);
        try (FakeBackend backend = FakeBackend.playing(wire -> {
                    wire.readHead();
                    asked.countDown();
                    if (wire.readHead() == null) {
                        left.countDown();
                    }
                });
                LivePlay play = LivePlay.of(Pool::retrying, backend.address())) {
            Wire client = play.client();
            client.send(GET);
            asked.await();
            assertThat(play.inFlight()).isEqualTo(1);
            client.close();
            left.await();
            await().untilAsserted(() -> assertThat(play.decisions.outcomes()).containsExactly(Outcome.ABANDONED));
            assertThat(play.inFlight()).isZero();
        }
    }

    @Test
    @Duty("H082")
    void client_leavesInsideItsContent_backendIsNotGivenAWholeRequest() throws Exception {
        CountDownLatch over = new CountDownLatch(1);
        try (FakeBackend backend = FakeBackend.playing(wire -> {
                    wire.readHead();
                    try {
                        wire.read(10);
                    } finally {
                        over.countDown();
                    }
                    wire.send(OK);
                });
                LivePlay play = LivePlay.of(backend.address())) {
            try (Wire client = play.client()) {
                client.send("POST / HTTP/1.1\r\nHost: a\r\nContent-Length: 10\r\n\r\nhel");
                await().until(() -> play.inFlight() == 1);
            }
            over.await();
            await().untilAsserted(() -> assertThat(play.decisions.outcomes()).containsExactly(Outcome.ABANDONED));
        }
    }

    @Test
    void close_withAttemptsInFlight_endsThemAll() throws Exception {
        try (FakeBackend backend = silent()) {
            LivePlay play = LivePlay.of(backend.address());
            try (Wire client = play.client()) {
                client.send(GET);
                await().until(() -> play.inFlight() == 1);
                play.close();
                assertThat(play.decisions.outcomes()).containsExactly(Outcome.ABANDONED);
                assertThat(client.readToEnd()).isEmpty();
            }
        }
    }

    @Test
    void start_portTaken_saysSoInOneLine() throws Exception {
        try (FakeBackend taken = FakeBackend.answering(OK)) {
            InetSocketAddress address = taken.address();
            assertThat(LivePlay.startOn(address.getPort(), address))
                    .hasMessageContaining("terns")
                    .hasMessageContaining("port " + address.getPort() + " is taken: choose another one")
                    .hasMessageNotContaining("\n");
        }
    }

    @Test
    @Duty("H136")
    void idle_clientConnection_isClosedAtTheLimit() throws Exception {
        try (FakeBackend backend = FakeBackend.answering(OK);
                LivePlay play = LivePlay.of(pool -> pool.patience(10, 10, 0.3), backend.address());
                Wire client = play.client()) {
            client.send(GET);
            assertThat(client.readAnswer()).endsWith("ok");
            assertThat(client.readToEnd()).isEmpty();
        }
    }
}
