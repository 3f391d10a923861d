package steelyard.balancer.live;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.List;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.extension.ExtendWith;

/** Via and loops: RFC 9110, 7.6 and 7.6.3. */
@ExtendWith(Accounting.class)
class DutyViaTest {
    private static final String GET = "GET / HTTP/1.1\r\nHost: a\r\n\r\n";

    @Test
    @Duty({"H014", "H018"})
    void via_ofARequest_isAPseudonym() throws Exception { // RFC 9110, 7.6.3
        Duties.of().ask(GET, seen -> {
            assertThat(seen.request().values("via")).containsExactly("1.1 steelyard");
            assertThat(seen.answer().toString()).doesNotContain("127.0.0.1");
            assertThat(seen.harmless()).isTrue();
        });
    }

    @Test
    @Duty({"H015", "H019"})
    void via_ofOthers_staysInFront() throws Exception { // RFC 9110, 7.6.3
        Duties.of().ask("GET / HTTP/1.1\r\nHost: a\r\nVia: 1.0 fred\r\nVia: 1.0 a, 1.1 b\r\n\r\n", seen -> {
            assertThat(String.join(", ", seen.request().values("via")))
                    .isEqualTo("1.0 fred, 1.0 a, 1.1 b, 1.1 steelyard");
            assertThat(seen.harmless()).isTrue();
        });
    }

    @Test
    @Duty("H016")
    void via_ofAnOldRequest_saysSo() throws Exception { // RFC 9110, 7.6.3
        Duties.of()
                .ask(
                        "GET / HTTP/1.0\r\nHost: a\r\n\r\n",
                        seen -> assertThat(seen.request().values("via")).containsExactly("1.0 steelyard"));
    }

    @Test
    @Duty("H017")
    void via_ofAnAnswer_isAlwaysThere() throws Exception { // RFC 9110, 7.6.3: the stricter rule of a proxy is kept
        Duties.of()
                .answering("HTTP/1.1 200 OK\r\nVia: 1.1 inner\r\nContent-Length: 0\r\n\r\n")
                .ask(
                        GET,
                        seen -> assertThat(String.join(", ", seen.answer().values("via")))
                                .isEqualTo("1.1 inner, 1.1 steelyard"));
    }

    @Test
    @Duty("H020")
    void loop_backendIsTheBalancerItself_endsWithAnError() throws Exception { // RFC 9110, 7.6
        int port = FakeBackend.deadAddress().getPort();
        try (LivePlay play = LivePlay.onItself(port);
                Wire client = play.client()) {
            client.send(GET);
            Message answer = Message.answer(client, false);
            assertThat(answer).isNotNull();
            assertThat(answer.status()).isEqualTo(502);
            assertThat(answer.values("proxy-status")).anyMatch(value -> value.contains("proxy_loop_detected"));
            assertThat(play.decisions.picks()).hasSize(1);
            client.send(GET);
            assertThat(Message.answer(client, false)).isNotNull();
        }
    }

    @Test
    void via_namesTheBalancerAmongOthers_isALoop() throws Exception {
        for (String via : List.of("1.1 a, 1.1 Steelyard", "1.1 steelyard (x)", "1.0 b\r\nVia: HTTP/1.1 steelyard")) {
            Duties.of().ask("GET / HTTP/1.1\r\nHost: a\r\nVia: " + via + "\r\n\r\n", seen -> {
                assertThat(seen.answer().status()).as(via).isEqualTo(502);
                assertThat(seen.requests()).isEmpty();
                assertThat(seen.harmless()).isTrue();
            });
        }
    }
}
