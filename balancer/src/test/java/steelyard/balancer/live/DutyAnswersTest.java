package steelyard.balancer.live;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.List;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.extension.ExtendWith;

/** Answers of backends: RFC 9112, 6 and 7; RFC 9110, 6.6.1, 8.6, 9.3.2 and 15. */
@ExtendWith(Accounting.class)
class DutyAnswersTest {
    private static final String GET = "GET / HTTP/1.1\r\nHost: a\r\n\r\n";
    private static final String CHUNKED =
            "HTTP/1.1 200 OK\r\nTransfer-Encoding: chunked\r\n\r\n5\r\nhello\r\n5\r\ngulls\r\n0\r\n\r\n";

    @Test
    @Duty({"H075", "H076"})
    void chunked_answer_isChunkedOnce() throws Exception { // RFC 9112, 6.1 and 6.2; Message takes no doubled framing
        Duties.of().answering(CHUNKED).ask(GET, seen -> {
            assertThat(seen.answer().content()).isEqualTo("hellogulls");
            assertThat(seen.answer().value("transfer-encoding")).isEqualToIgnoringCase("chunked");
            assertThat(seen.answer().has("content-length")).isFalse();
            assertThat(seen.harmless()).isTrue();
        });
    }

    @Test
    @Duty("H077")
    void chunked_toAnOldClient_endsByClosing() throws Exception { // RFC 9112, 6.1
        Duties.of().answering(CHUNKED).ask("GET / HTTP/1.0\r\n\r\n", seen -> {
            assertThat(seen.answer().has("transfer-encoding")).isFalse();
            assertThat(seen.answer().content()).isEqualTo("hellogulls");
            assertThat(seen.harmless()).isFalse();
        });
    }

    @Test
    @Duty({"H078", "H079"})
    void empty_answers_haveNoFraming() throws Exception { // RFC 9112, 6.1; RFC 9110, 8.6
        for (String framing : List.of("Transfer-Encoding: chunked", "Content-Length: 0")) {
            Duties.of()
                    .answering("HTTP/1.1 204 No Content\r\n" + framing + "\r\n\r\n")
                    .ask(GET, seen -> {
                        assertThat(seen.answer().status()).isEqualTo(204);
                        assertThat(seen.answer().has("transfer-encoding")).isFalse();
                        assertThat(seen.answer().has("content-length")).isFalse();
                        assertThat(seen.harmless()).isTrue();
                    });
        }
        String early = "HTTP/1.1 103 Early Hints\r\nContent-Length: 0\r\nLink: </a>\r\n\r\n" + Duties.OK;
        Duties.of().answering(early).ask(GET, seen -> {
            assertThat(seen.interim()).hasSize(1);
            assertThat(seen.interim().get(0).has("content-length")).isFalse();
            assertThat(seen.harmless()).isTrue();
        });
    }

    @Test
    @Duty("H083")
    void length_invalidInAnAnswer_is502() throws Exception { // RFC 9112, 6.3 item 5
        for (String length : List.of("5, 6", "x", "-1", "5\r\nContent-Length: 6", "+5")) {
            Duties.of()
                    .answering("HTTP/1.1 200 OK\r\nContent-Length: " + length + "\r\n\r\nhello!")
                    .ask(GET, seen -> {
                        assertThat(seen.answer().status()).as(length).isEqualTo(502);
                        assertThat(seen.answer().content()).doesNotContain("hello");
                        assertThat(seen.harmless()).isTrue();
                    });
        }
    }

    @Test
    @Duty("H083")
    void length_invalidInAnAnswer_connectionIsNotUsedAgain() throws Exception { // RFC 9112, 6.3 item 5
        try (KeepingBackend backend =
                        new KeepingBackend(request -> "HTTP/1.1 200 OK\r\nContent-Length: 5, 6\r\n\r\nhello!");
                LivePlay play = LivePlay.of(backend.address())) {
            for (int i = 0; i < 3; i++) {
                assertThat(play.ask(GET)).startsWith("HTTP/1.1 502 ");
            }
            assertThat(backend.connections()).isEqualTo(3);
        }
    }

    @Test
    @Duty("H085")
    void head_answeredWithContent_losesIt() throws Exception { // RFC 9110, 9.3.2
        Duties.of()
                .answering("HTTP/1.1 200 OK\r\nContent-Length: 5\r\n\r\nhello")
                .ask("HEAD / HTTP/1.1\r\nHost: a\r\n\r\n", seen -> {
                    assertThat(seen.answer().value("content-length")).isEqualTo("5");
                    assertThat(seen.harmless()).isTrue(); // read as a head, so none of "hello" came
                });
    }

    @Test
    @Duty("H089")
    void date_missing_isAppended() throws Exception { // RFC 9110, 6.6.1
        Duties.of()
                .ask(
                        GET,
                        seen -> assertThat(seen.answer().value("date"))
                                .matches(
                                        "(Mon|Tue|Wed|Thu|Fri|Sat|Sun), [0-9]{2} [A-Z][a-z]{2} [0-9]{4} [0-9:]{8} GMT"));
        String date = "Tue, 15 Nov 1994 08:12:31 GMT";
        Duties.of()
                .answering("HTTP/1.1 200 OK\r\nDate: " + date + "\r\nContent-Length: 2\r\n\r\nok")
                .ask(GET, seen -> assertThat(seen.answer().value("date")).isEqualTo(date));
    }

    @Test
    @Duty("H114")
    void invalid_orNoAnswer_is502() throws Exception { // RFC 9110, 15.6.3
        Duties.of().closing().ask(GET, seen -> {
            assertThat(seen.answer().status()).isEqualTo(502);
            assertThat(seen.harmless()).isTrue();
        });
        for (String octets : List.of(
                "220 ready\r\n\r\n",
                "HTTP/1.1 200 OK\r\nnothing\r\n\r\n",
                "HTTP/1.1 2x0 OK\r\n\r\n",
                "HTTP/1.1 200 OK\r\nTransfer-Encoding: gzip, chunked\r\n\r\n",
                "HTTP/1.1 200 OK\r\nX: a\u0000b\r\n\r\n",
                "\u0016\u0003\u0001x\r\n\r\n")) {
            Duties.of().answering(octets).ask(GET, seen -> {
                assertThat(seen.answer().status()).as(octets).isEqualTo(502);
                assertThat(seen.harmless()).isTrue();
            });
        }
        try (FakeBackend inside = FakeBackend.playing(wire -> {
                    wire.readHead();
                    wire.send("HTTP/1.1 200 OK\r\nContent-");
                });
                LivePlay play = LivePlay.of(inside.address())) {
            assertThat(play.ask(GET)).startsWith("HTTP/1.1 502 ");
        }
    }

    @Test
    @Duty("H118")
    void errors_ofOurOwn_explainThemselves() throws Exception { // RFC 9110, 15.6
        Duties.of().closing().ask(GET, seen -> {
            assertThat(seen.answer().value("content-type")).startsWith("text/plain");
            assertThat(seen.answer().content()).isNotBlank();
            assertThat(seen.answer().values("proxy-status")).isNotEmpty();
        });
        Duties.of().closing().ask("HEAD / HTTP/1.1\r\nHost: a\r\n\r\n", seen -> {
            assertThat(Integer.parseInt(seen.answer().value("content-length"))).isPositive();
            assertThat(seen.answer().content()).isEmpty();
            assertThat(seen.harmless()).isTrue();
        });
    }
}
