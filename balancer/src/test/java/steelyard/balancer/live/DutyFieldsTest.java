package steelyard.balancer.live;

import static org.assertj.core.api.Assertions.assertThat;

import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.extension.ExtendWith;

/** Header fields on their way through: RFC 9110, 5, 6.5, 7.6.1 and 10.1.4. */
@ExtendWith(Accounting.class)
class DutyFieldsTest {
    private static String get(String fields) {
        return "GET /sailings HTTP/1.1\r\nHost: a\r\n" + fields + "\r\n\r\n";
    }

    @Test
    @Duty({"H001", "H002"})
    void connection_namedFields_areDropped() throws Exception { // RFC 9110, 7.6.1
        Duties.of().ask(get("Connection: X-Hop\r\nX-Hop: 1"), seen -> {
            assertThat(seen.request().has("x-hop")).isFalse();
            assertThat(seen.request().values("connection")).noneMatch(value -> value.contains("X-Hop"));
            assertThat(seen.answer().status()).isEqualTo(200);
            assertThat(seen.harmless()).isTrue();
        });
    }

    @Test
    @Duty({"H003", "H004"})
    void connection_severalListsOfAnyCase_areOne() throws Exception { // RFC 9110, 7.6.1 with 5.2
        Duties.of().ask(get("Connection: keep-alive\r\nConnection: , x-HOP ,\r\nX-Hop: 1"), seen -> {
            assertThat(seen.request().has("x-hop")).isFalse();
            assertThat(seen.harmless()).isTrue();
        });
    }

    @Test
    @Duty({"H005", "H074"})
    void trailers_anyWhatever_areDropped() throws Exception { // RFC 9110, 7.6.1; RFC 9112, 7.1.2
        String request = "POST /holds HTTP/1.1\r\nHost: a\r\nConnection: X-T\r\nTransfer-Encoding: chunked\r\n"
                + "Trailer: X-T, X-Sum\r\n\r\n3\r\nabc\r\n0\r\nX-T: 1\r\nX-Sum: 1\r\n\r\n";
        Duties.of().ask(request, seen -> {
            assertThat(seen.request().content()).isEqualTo("abc");
            assertThat(seen.request().has("x-t")).isFalse();
            assertThat(seen.request().has("x-sum")).isFalse();
            assertThat(seen.request().trailers()).isEmpty();
            assertThat(seen.harmless()).isTrue();
        });
    }

    @Test
    @Duty("H006")
    void connection_ofAnAnswer_isKeptToAsWell() throws Exception { // RFC 9110, 7.6.1
        Duties.of()
                .answering("HTTP/1.1 200 OK\r\nConnection: X-Secret\r\nX-Secret: 1\r\nContent-Length: 2\r\n\r\nok")
                .ask(get("X-A: 1"), seen -> {
                    assertThat(seen.answer().has("x-secret")).isFalse();
                    assertThat(seen.answer().has("connection")).isFalse();
                    assertThat(seen.harmless()).isTrue();
                });
    }

    @Test
    @Duty("H007")
    void hopByHop_fieldsThatConnectionDoesNotName_areDropped() throws Exception { // RFC 9110, 7.6.1
        Duties.of()
                .ask(get("Keep-Alive: 5\r\nProxy-Connection: keep-alive\r\nTE: trailers\r\nUpgrade: foo/2"), seen -> {
                    for (String name : new String[] {"keep-alive", "proxy-connection", "te", "upgrade"}) {
                        assertThat(seen.request().has(name)).as(name).isFalse();
                    }
                    assertThat(seen.harmless()).isTrue();
                });
        String chunked = "POST / HTTP/1.1\r\nHost: a\r\nTransfer-Encoding: Chunked\r\n\r\n3\r\nabc\r\n0\r\n\r\n";
        Duties.of().ask(chunked, seen -> {
            assertThat(seen.request().value("transfer-encoding")).isEqualToIgnoringCase("chunked"); // its own framing
            assertThat(seen.request().content()).isEqualTo("abc");
        });
    }

    @Test
    @Duty("H008")
    void connection_namesFieldsOfTheMessage_isRefused() throws Exception { // RFC 9110, 7.6.1
        Duties.of()
                .refuses(
                        "POST / HTTP/1.1\r\nHost: a\r\nConnection: Host, Content-Length\r\nContent-Length: 5\r\n\r\nhello",
                        400);
    }

    @Test
    @Duty("H009")
    void te_isNeverMadeUp() throws Exception { // RFC 9110, 6.5.1 and 10.1.4
        Duties.of()
                .ask(get("X-A: 1"), seen -> assertThat(seen.request().has("te")).isFalse());
        Duties.of().ask(get("TE: trailers\r\nConnection: TE"), seen -> {
            assertThat(seen.request().has("te")).isFalse(); // no trailers are passed on, so none are asked for
            assertThat(seen.harmless()).isTrue();
        });
    }

    @Test
    @Duty("H010")
    void unknownField_passesBothWays() throws Exception { // RFC 9110, 5.1
        Duties.of()
                .answering("HTTP/1.1 200 OK\r\nX-Unknown-9f: w\r\nContent-Length: 2\r\n\r\nok")
                .ask(get("X-Unknown-9f: v"), seen -> {
                    assertThat(seen.request().value("x-unknown-9f")).isEqualTo("v");
                    assertThat(seen.answer().value("x-unknown-9f")).isEqualTo("w");
                });
    }

    @Test
    @Duty("H011")
    void linesOfOneName_keepTheirOrder() throws Exception { // RFC 9110, 5.3
        Duties.of()
                .ask(
                        get("X-L: 1\r\nX-O: a\r\nX-L: 2"),
                        seen -> assertThat(seen.request().values("x-l")).containsExactly("1", "2"));
    }

    @Test
    @Duty("H012")
    void setCookie_linesStayApart() throws Exception { // RFC 9110, 5.3
        Duties.of()
                .answering("HTTP/1.1 200 OK\r\nSet-Cookie: a=1; Expires=Wed, 09 Jun 2027 10:18:14 GMT\r\n"
                        + "Set-Cookie: b=2\r\nContent-Length: 2\r\n\r\nok")
                .ask(
                        get("X-A: 1"),
                        seen -> assertThat(seen.answer().values("set-cookie"))
                                .containsExactly("a=1; Expires=Wed, 09 Jun 2027 10:18:14 GMT", "b=2"));
    }

    @Test
    @Duty("H013")
    void head_half_reachesNobody() throws Exception { // RFC 9110, 5.3
        try (KeepingBackend backend = new KeepingBackend(request -> Duties.OK);
                LivePlay play = LivePlay.of(backend.address());
                Wire other = play.client()) {
            try (Wire client = play.client()) {
                client.send("GET / HTTP/1.1\r\nHost: a\r\nX-A");
            }
            other.send(Duties.HARMLESS);
            assertThat(Message.answer(other, false)).isNotNull();
            assertThat(backend.requests())
                    .hasSize(1)
                    .allMatch(request -> request.target().equals("/harmless"));
            assertThat(backend.connections()).isEqualTo(1);
        }
    }
}
