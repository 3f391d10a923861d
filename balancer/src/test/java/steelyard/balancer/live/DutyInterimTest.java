package steelyard.balancer.live;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.List;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;
import org.junit.jupiter.api.extension.ExtendWith;

/** Expect, interim answers and Max-Forwards: RFC 9110, 7.6.2, 9.3, 10.1.1 and 15.2. */
@Timeout(60)
@ExtendWith(Accounting.class)
class DutyInterimTest {
    private static final String GET = "GET / HTTP/1.1\r\nHost: a\r\n\r\n";

    @Test
    @Duty("H090")
    void expect_continue_headGoesOnAtOnce() throws Exception { // RFC 9110, 10.1.1
        try (FakeBackend backend = FakeBackend.playing(wire -> {
                    wire.readHead();
                    wire.send("HTTP/1.1 100 Continue\r\n\r\n");
                    String content = wire.read(4);
                    wire.send("HTTP/1.1 200 OK\r\nContent-Length: 4\r\n\r\n" + content);
                    wire.readHead();
                    wire.send(Duties.OK);
                });
                LivePlay play = LivePlay.of(backend.address());
                Wire client = play.client()) {
            client.send("POST / HTTP/1.1\r\nHost: a\r\nExpect: 100-continue\r\nContent-Length: 4\r\n\r\n");
            assertThat(client.readHead()).startsWith("HTTP/1.1 100 ");
            client.send("hold" + GET);
            assertThat(client.readAnswer()).endsWith("hold");
            assertThat(client.readAnswer()).endsWith("ok");
        }
    }

    @Test
    @Duty({"H091", "H092"})
    void interim_several_arePassedOnAndTheFinalIsMatched() throws Exception { // RFC 9110, 15.2
        String early = "HTTP/1.1 103 Early Hints\r\nLink: </a>\r\n\r\n";
        Duties.of().answering(early + early + Duties.OK).ask(GET, seen -> {
            assertThat(seen.interim()).extracting(Message::status).containsExactly(103, 103);
            assertThat(seen.answer().content()).isEqualTo("ok");
            assertThat(seen.harmless()).isTrue();
        });
        Duties.of().answering("HTTP/1.1 100 Continue\r\n\r\n" + Duties.OK).ask(GET, seen -> {
            assertThat(seen.answer().content()).isEqualTo("ok");
            assertThat(seen.harmless()).isTrue();
        });
    }

    @Test
    @Duty("H093")
    void interim_toAnOldClient_isKeptBack() throws Exception { // RFC 9110, 15.2
        Duties.of().answering("HTTP/1.1 103 Early Hints\r\n\r\n" + Duties.OK).ask("GET / HTTP/1.0\r\n\r\n", seen -> {
            assertThat(seen.interim()).isEmpty();
            assertThat(seen.answer().content()).isEqualTo("ok");
        });
    }

    @Test
    @Duty("H094")
    void expect_ofAnOldClient_isIgnored() throws Exception { // RFC 9110, 10.1.1
        Duties.of().ask("POST / HTTP/1.0\r\nExpect: 100-continue\r\nContent-Length: 4\r\n\r\nhold", seen -> {
            assertThat(seen.request().has("expect")).isFalse();
            assertThat(seen.interim()).isEmpty();
            assertThat(seen.answer().content()).isEqualTo("ok");
        });
    }

    @Test
    @Duty("H095")
    void expect_somethingElse_isTheBackendsToAnswer() throws Exception { // RFC 9110, 10.1.1: 417 is allowed, not owed
        Duties.of().ask("GET / HTTP/1.1\r\nHost: a\r\nExpect: x\r\n\r\n", seen -> {
            assertThat(seen.request().value("expect")).isEqualTo("x");
            assertThat(seen.answer().status()).isEqualTo(200);
            assertThat(seen.harmless()).isTrue();
        });
    }

    @Test
    @Duty("H096")
    void expect_answeredHere_saysClose() throws Exception { // RFC 9110, 10.1.1
        try (LivePlay play = LivePlay.of(FakeBackend.deadAddress());
                Wire client = play.client()) {
            play.balancer.withdraw(0);
            client.send("POST / HTTP/1.1\r\nHost: a\r\nExpect: 100-continue\r\nContent-Length: 4\r\n\r\n");
            Message answer = Message.answer(client, false);
            assertThat(answer).isNotNull();
            assertThat(answer.status()).isEqualTo(503);
            assertThat(answer.value("connection")).isEqualTo("close");
            client.send(Duties.HARMLESS);
            assertThat(Message.answer(client, false)).isNull();
        }
    }

    @Test
    @Duty("H097")
    void maxForwards_zero_isAnsweredHere() throws Exception { // RFC 9110, 7.6.2
        for (String target : List.of("/", "*")) {
            Duties.of().ask("OPTIONS " + target + " HTTP/1.1\r\nHost: a\r\nMax-Forwards: 0\r\n\r\n", seen -> {
                assertThat(seen.answer().status()).isEqualTo(200);
                assertThat(seen.answer().has("allow")).isTrue();
                assertThat(seen.requests()).isEmpty();
                assertThat(seen.harmless()).isTrue();
            });
        }
    }

    @Test
    @Duty({"H097", "H101"})
    void maxForwards_zeroOfTrace_isRefusedWithoutAnEcho() throws Exception { // RFC 9110, 7.6.2 and 9.3.8
        String trace =
                "TRACE / HTTP/1.1\r\nHost: a\r\nCookie: secret\r\nAuthorization: secret\r\nMax-Forwards: 0\r\n\r\n";
        Duties.of().ask(trace, seen -> {
            assertThat(seen.answer().status()).isEqualTo(405);
            assertThat(seen.answer().toString()).doesNotContain("secret");
            assertThat(seen.requests()).isEmpty();
            assertThat(seen.harmless()).isTrue();
        });
    }

    @Test
    @Duty({"H098", "H099", "H100"})
    void maxForwards_above_isCountedDownForOptionsAndTrace() throws Exception { // RFC 9110, 7.6.2 and 9.3.7
        for (String method : List.of("OPTIONS", "TRACE")) {
            Duties.of()
                    .ask(
                            method + " / HTTP/1.1\r\nHost: a\r\nMax-Forwards: 5\r\n\r\n",
                            seen -> assertThat(seen.request().value("max-forwards"))
                                    .isEqualTo("4"));
            Duties.of()
                    .ask(
                            method + " / HTTP/1.1\r\nHost: a\r\n\r\n",
                            seen -> assertThat(seen.request().has("max-forwards"))
                                    .isFalse());
        }
        Duties.of().ask("GET / HTTP/1.1\r\nHost: a\r\nMax-Forwards: 0\r\n\r\n", seen -> {
            assertThat(seen.request().value("max-forwards")).isEqualTo("0"); // may be ignored for GET, and is
            assertThat(seen.harmless()).isTrue();
        });
        Duties.of().refuses("OPTIONS / HTTP/1.1\r\nHost: a\r\nMax-Forwards: x\r\n\r\n", 400);
        Duties.of().refuses("OPTIONS / HTTP/1.1\r\nHost: a\r\nMax-Forwards: -1\r\n\r\n", 400);
        Duties.of().refuses("OPTIONS / HTTP/1.1\r\nHost: a\r\nMax-Forwards: +1\r\n\r\n", 400);
    }
}
