package steelyard.balancer.live;

import static org.assertj.core.api.Assertions.assertThat;

import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;

/** The control page. */
@Timeout(60)
class ControlPageTest {
    private static final String GET = "GET / HTTP/1.1\r\nHost: a\r\n\r\n";
    private static final String OK = "HTTP/1.1 200 OK\r\nContent-Length: 2\r\n\r\nok";

    private static String read(ControlAddress control, String path, String authorization) throws Exception {
        try (Wire wire = Wire.to(control.address())) {
            wire.send("GET " + path + " HTTP/1.1\r\nHost: a\r\n" + authorization + "\r\n");
            return wire.readToEnd();
        }
    }

    @Test
    void page_withToken_showsWhatWasDecided() throws Exception {
        try (FakeBackend backend = FakeBackend.answering(OK);
                LivePlay play = LivePlay.of(Pool::retrying, FakeBackend.deadAddress(), backend.address())) {
            ControlAddress control = play.balancer.openControl(0);
            String bearer = "Authorization: Bearer " + control.token() + "\r\n";
            play.ask(GET);
            play.balancer.reweigh(1, 7);
            play.balancer.withdraw(0);
            assertThat(read(control, "/metrics", bearer))
                    .startsWith("HTTP/1.1 200 ")
                    .containsIgnoringCase(
                            "content-type: application/openmetrics-text; version=1.0.0; charset=utf-8\r\n")
                    .contains("steelyard_picks_total{backend=\"tern-1\",pool=\"terns\"} 1.0\n")
                    .contains("steelyard_picks_total{backend=\"tern-2\",pool=\"terns\"} 1.0\n")
                    .contains("steelyard_attempts_total{backend=\"tern-1\",outcome=\"refused\",pool=\"terns\"} 1.0\n")
                    .contains("steelyard_attempts_total{backend=\"tern-2\",outcome=\"answered\",pool=\"terns\"} 1.0\n")
                    .contains("steelyard_retries_total{answer=\"granted\",pool=\"terns\"} 1.0\n")
                    .contains(
                            "steelyard_transitions_total{backend=\"tern-1\",pool=\"terns\",standing=\"withdrawn\"} 1.0\n")
                    .contains("steelyard_standing{backend=\"tern-1\",pool=\"terns\",standing=\"withdrawn\"} 1.0\n")
                    .contains("steelyard_in_flight{backend=\"tern-2\",pool=\"terns\"} 0.0\n")
                    .contains("steelyard_weight{backend=\"tern-2\",pool=\"terns\"} 7.0\n")
                    .contains("steelyard_reweighs_total{backend=\"tern-2\",pool=\"terns\"} 1.0\n")
                    .contains("# HELP steelyard_in_flight Attempts in flight on a backend\n")
                    .doesNotContainPattern("# HELP \\S+ *\n")
                    .endsWith("# EOF\n");
            play.ask(GET);
            assertThat(read(control, "/metrics", bearer))
                    .as("a second page is of a later instant")
                    .contains("steelyard_picks_total{backend=\"tern-2\",pool=\"terns\"} 2.0\n");
        }
    }

    @Test
    void page_withoutTheToken_is401() throws Exception {
        try (LivePlay play = LivePlay.of(FakeBackend.deadAddress())) {
            ControlAddress control = play.balancer.openControl(0);
            for (String authorization : new String[] {
                "",
                "Authorization: Bearer \r\n",
                "Authorization: Bearer x" + control.token() + "\r\n",
                "Authorization: " + control.token() + "\r\n"
            }) {
                assertThat(read(control, "/metrics", authorization))
                        .startsWith("HTTP/1.1 401 ")
                        .containsIgnoringCase("www-authenticate: bearer\r\n")
                        .doesNotContain("steelyard_");
            }
        }
    }

    @Test
    void page_beforeThePlay_is503() throws Exception {
        try (Balancer waiting = LivePlay.waiting(FakeBackend.deadAddress()).balancer) {
            ControlAddress control = waiting.openControl(0);
            assertThat(control.url()).startsWith("http://127.0.0.1:").endsWith("/metrics");
            assertThat(read(control, "/metrics", "Authorization: Bearer " + control.token() + "\r\n"))
                    .startsWith("HTTP/1.1 503 ");
        }
    }

    @Test
    void page_otherPath_is404() throws Exception {
        try (LivePlay play = LivePlay.of(FakeBackend.deadAddress())) {
            ControlAddress control = play.balancer.openControl(0);
            assertThat(read(control, "/", "Authorization: Bearer " + control.token() + "\r\n"))
                    .startsWith("HTTP/1.1 404 ");
        }
    }

    @Test
    void page_loopback_onlyThere() throws Exception {
        try (LivePlay play = LivePlay.of(FakeBackend.deadAddress())) {
            assertThat(play.balancer.openControl(0).address().getAddress().isLoopbackAddress())
                    .isTrue();
            assertThat(play.front().getAddress().isLoopbackAddress()).isTrue();
        }
    }
}
