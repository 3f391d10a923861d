package steelyard.balancer.live;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.io.IOException;
import java.util.ArrayList;
import java.util.List;
import java.util.concurrent.CompletableFuture;
import java.util.concurrent.TimeUnit;
import java.util.concurrent.atomic.AtomicInteger;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;
import org.junit.jupiter.api.extension.ExtendWith;

/** Connections, pipelining, retries and slow clients: RFC 9112, 8 and 9; RFC 9110, 9.2.2 and 15.5. */
@Timeout(60)
@ExtendWith(Accounting.class)
class DutyPersistenceTest {
    private static final String GET = "GET / HTTP/1.1\r\nHost: a\r\n\r\n";
    private static final String POST = "POST / HTTP/1.1\r\nHost: a\r\nContent-Length: 4\r\n\r\nhold";

    @Test
    @Duty("H119")
    void head_trickled_is408() throws Exception { // RFC 9110, 15.5.9
        try (KeepingBackend backend = new KeepingBackend(request -> Duties.OK);
                LivePlay play = LivePlay.of(pool -> pool.clientsWithin(0.3, 30), backend.address());
                Wire client = play.client()) {
            client.send("GET / HTTP/1.1\r\nX-A: ");
            CompletableFuture<Void> trickle = trickle(client);
            Message answer = Message.answer(client, false);
            assertThat(answer).isNotNull();
            assertThat(answer.status()).isEqualTo(408);
            assertThat(answer.value("connection")).isEqualTo("close");
            assertThat(Message.answer(client, false)).isNull();
            trickle.cancel(true);
            assertThat(backend.connections()).isZero();
        }
    }

    /** An octet every 20 ms, for at most 20 s. */
    private static CompletableFuture<Void> trickle(Wire client) {
        CompletableFuture<Void> done = new CompletableFuture<>();
        CompletableFuture.runAsync(() -> {
            try {
                for (int i = 0; i < 1000 && !done.isDone(); i++) {
                    client.send("x");
                    TimeUnit.MILLISECONDS.sleep(20);
                }
            } catch (IOException | InterruptedException e) {
                done.completeExceptionally(e);
            }
        });
        return done;
    }

    @Test
    @Duty("H119")
    void head_ofTheSecondRequestTrickled_is408() throws Exception { // RFC 9110, 15.5.9
        try (KeepingBackend backend = new KeepingBackend(request -> Duties.OK);
                LivePlay play = LivePlay.of(pool -> pool.clientsWithin(0.3, 30), backend.address());
                Wire client = play.client()) {
            client.send(GET + "GET /second HTTP/1.1\r\nHost:");
            assertThat(client.readAnswer()).endsWith("ok");
            assertThat(client.readAnswer()).startsWith("HTTP/1.1 408 ");
            assertThat(client.readToEnd()).isEmpty();
            assertThat(backend.requests()).hasSize(1);
        }
    }

    @Test
    @Duty("H119")
    void content_standingStill_is408() throws Exception { // RFC 9110, 15.5.9
        try (KeepingBackend backend = new KeepingBackend(request -> Duties.OK);
                LivePlay play = LivePlay.of(pool -> pool.clientsWithin(30, 0.3), backend.address());
                Wire client = play.client()) {
            client.send("POST / HTTP/1.1\r\nHost: a\r\nContent-Length: 10\r\n\r\nhold");
            assertThat(client.readAnswer()).startsWith("HTTP/1.1 408 ").containsIgnoringCase("connection: close");
            assertThat(client.readToEnd()).isEmpty();
            assertThat(backend.requests()).isEmpty();
        }
    }

    @Test
    @Duty({"H120", "H133"})
    void content_tooLarge_answerCanBeReadWhileWriting() throws Exception { // RFC 9110, 15.5.14; RFC 9112, 9.6
        try (KeepingBackend backend = new KeepingBackend(request -> Duties.OK);
                LivePlay play = LivePlay.of(pool -> pool.limited(8000, 32_768, 100_000), backend.address())) {
            for (String framing : List.of("Content-Length: 10000000", "Transfer-Encoding: chunked")) {
                try (Wire client = play.client()) {
                    client.send("PUT / HTTP/1.1\r\nHost: a\r\n" + framing + "\r\n\r\n");
                    String piece = framing.startsWith("C") ? "x".repeat(1000) : "3e8\r\n" + "x".repeat(1000) + "\r\n";
                    client.send(piece.repeat(10_000));
                    assertThat(client.readAnswer())
                            .startsWith("HTTP/1.1 413 ")
                            .containsIgnoringCase("connection: close");
                    assertThat(client.readToEnd()).isEmpty();
                }
            }
            assertThat(backend.requests()).isEmpty();
        }
    }

    @Test
    @Duty("H124")
    void retry_failedToo_isNotMadeAgain() throws Exception { // RFC 9110, 9.2.2
        try (KeepingBackend one = new KeepingBackend(request -> null);
                KeepingBackend two = new KeepingBackend(request -> null);
                KeepingBackend three = new KeepingBackend(request -> Duties.OK);
                LivePlay play = LivePlay.of(Pool::retrying, one.address(), two.address(), three.address())) {
            assertThat(play.ask(GET)).startsWith("HTTP/1.1 502 ");
            assertThat(three.connections()).isZero();
        }
    }

    @Test
    @Duty("H125")
    void retry_insideAnAnswer_isNotMade() throws Exception { // RFC 9110, 9.2.2 with RFC 9112, 8
        String half = "HTTP/1.1 200 OK\r\nConnection: close\r\nContent-Length: 10\r\n\r\nhalf";
        try (KeepingBackend one = new KeepingBackend(request -> half);
                KeepingBackend two = new KeepingBackend(request -> Duties.OK);
                LivePlay play = LivePlay.of(Pool::retrying, one.address(), two.address());
                Wire client = play.client()) {
            client.send(GET + Duties.HARMLESS);
            assertThatThrownBy(() -> Message.answer(client, false)).hasMessageContaining("ended after 4 of 10");
            assertThat(two.connections()).isZero();
        }
    }

    @Test
    @Duty("H128")
    void pipelined_behindAPost_waitsForItsAnswer() throws Exception { // RFC 9112, 9.3.2
        AtomicInteger at = new AtomicInteger();
        AtomicInteger most = new AtomicInteger();
        try (KeepingBackend one = new KeepingBackend(request -> alone(at, most));
                KeepingBackend two = new KeepingBackend(request -> alone(at, most));
                LivePlay play = LivePlay.of(one.address(), two.address());
                Wire client = play.client()) {
            client.send(POST + GET + POST + GET);
            for (int i = 0; i < 4; i++) {
                assertThat(client.readAnswer()).endsWith("ok");
            }
            assertThat(most).hasValue(1);
            assertThat(one.requests()).extracting(Message::method).containsExactly("POST", "POST");
            assertThat(two.requests()).extracting(Message::method).containsExactly("GET", "GET");
        }
    }

    private static String alone(AtomicInteger at, AtomicInteger most) {
        most.accumulateAndGet(at.incrementAndGet(), Math::max);
        try {
            TimeUnit.MILLISECONDS.sleep(30);
        } catch (InterruptedException e) {
            return "";
        }
        at.decrementAndGet();
        return Duties.OK;
    }

    /** No request is sent to a backend behind another one, so that a failure concerns the request that it met. */
    @Test
    @Duty("H129")
    void pipelined_backendDiesBetween_firstAnswerIsPassedOn() throws Exception { // RFC 9112, 9.3.2
        try (KeepingBackend backend =
                        new KeepingBackend(request -> request.method().equals("GET") ? Duties.OK : null);
                LivePlay play = LivePlay.of(Pool::retrying, backend.address());
                Wire client = play.client()) {
            client.send(GET + POST + Duties.HARMLESS);
            assertThat(client.readAnswer()).startsWith("HTTP/1.1 200 ").endsWith("ok");
            assertThat(client.readAnswer()).startsWith("HTTP/1.1 502 ");
            assertThat(client.readAnswer()).startsWith("HTTP/1.1 200 ").endsWith("ok");
            assertThat(backend.requests()).extracting(Message::method).containsExactly("GET", "POST", "GET");
        }
    }

    @Test
    @Duty("H130")
    void answers_overFewConnections_goToWhoAsked() throws Exception { // RFC 9112, 9.2
        try (KeepingBackend backend = new KeepingBackend(request -> "HTTP/1.1 200 OK\r\nContent-Length: "
                        + request.target().length() + "\r\n\r\n" + request.target());
                LivePlay play = LivePlay.of(backend.address())) {
            List<Wire> clients = new ArrayList<>();
            for (int client = 0; client < 4; client++) {
                StringBuilder all = new StringBuilder();
                for (int i = 0; i < 250; i++) {
                    all.append("GET /").append(client).append('-').append(i).append(" HTTP/1.1\r\nHost: a\r\n\r\n");
                }
                clients.add(play.client());
                clients.get(client).send(all.toString());
            }
            for (int i = 0; i < 250; i++) {
                for (int client = 0; client < 4; client++) {
                    assertThat(clients.get(client).readAnswer()).endsWith("\r\n\r\n/" + client + "-" + i);
                }
            }
            assertThat(backend.connections()).isLessThanOrEqualTo(4);
            for (Wire client : clients) {
                client.close();
            }
        }
    }

    @Test
    @Duty("H131")
    void close_askedFor_nothingMoreIsServed() throws Exception { // RFC 9112, 9.6
        Duties.of().ask("GET / HTTP/1.1\r\nHost: a\r\nConnection: close\r\n\r\n", seen -> {
            assertThat(seen.answer().value("connection")).isEqualTo("close");
            assertThat(seen.harmless()).isFalse();
        });
    }

    @Test
    @Duty({"H134", "H135"})
    void oldClient_isClosedWhateverItAsks() throws Exception { // RFC 9112, 9.3
        for (String fields : List.of("", "Connection: keep-alive\r\n")) {
            Duties.of().ask("GET / HTTP/1.0\r\n" + fields + "\r\n", seen -> {
                assertThat(seen.answer().content()).isEqualTo("ok");
                assertThat(seen.harmless()).isFalse();
            });
        }
    }
}
