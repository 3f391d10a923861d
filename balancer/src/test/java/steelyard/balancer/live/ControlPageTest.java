package steelyard.balancer.live;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.HashMap;
import java.util.HashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;
import java.util.concurrent.CopyOnWriteArrayList;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;
import org.junit.jupiter.api.extension.ExtendWith;
import steelyard.balancer.live.control.CueTaker;

/** The control page. */
@Timeout(60)
@ExtendWith(Accounting.class)
class ControlPageTest {
    private static final String GET = "GET / HTTP/1.1\r\nHost: a\r\n\r\n";
    private static final String OK = "HTTP/1.1 200 OK\r\nContent-Length: 2\r\n\r\nok";

    private static String bearer(ControlAddress control) {
        return "Authorization: Bearer " + control.token() + "\r\n";
    }

    private static String send(ControlAddress control, String cue, String authorization) throws Exception {
        try (Wire wire = Wire.to(control.address())) {
            wire.send("POST /cues HTTP/1.1\r\nHost: a\r\n" + authorization + "Content-Length: " + cue.length()
                    + "\r\n\r\n" + cue);
            return wire.readAnswer();
        }
    }

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
            ControlAddress control = play.balancer.openControl(0, CueTaker.NOBODY);
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
            ControlAddress control = play.balancer.openControl(0, CueTaker.NOBODY);
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
            ControlAddress control = waiting.openControl(0, CueTaker.NOBODY);
            assertThat(control.base()).matches("http://127\\.0\\.0\\.1:\\d+");
            assertThat(read(control, "/metrics", "Authorization: Bearer " + control.token() + "\r\n"))
                    .startsWith("HTTP/1.1 503 ");
        }
    }

    @Test
    void page_otherPath_is404() throws Exception {
        try (LivePlay play = LivePlay.of(FakeBackend.deadAddress())) {
            ControlAddress control = play.balancer.openControl(0, CueTaker.NOBODY);
            assertThat(read(control, "/", "Authorization: Bearer " + control.token() + "\r\n"))
                    .startsWith("HTTP/1.1 404 ");
        }
    }

    @Test
    void page_loopback_onlyThere() throws Exception {
        try (LivePlay play = LivePlay.of(FakeBackend.deadAddress())) {
            assertThat(play.balancer
                            .openControl(0, CueTaker.NOBODY)
                            .address()
                            .getAddress()
                            .isLoopbackAddress())
                    .isTrue();
            assertThat(play.front().getAddress().isLoopbackAddress()).isTrue();
        }
    }

    @Test
    void state_withToken_saysHowEveryBackendStands() throws Exception {
        try (FakeBackend backend = FakeBackend.answering(OK);
                LivePlay play = LivePlay.of(backend.address(), backend.address())) {
            ControlAddress control = play.balancer.openControl(0, CueTaker.NOBODY);
            play.balancer.reweigh(1, 7);
            play.balancer.withdraw(0);
            String page = read(control, "/state", bearer(control));
            assertThat(page)
                    .startsWith("HTTP/1.1 200 ")
                    .containsIgnoringCase("content-type: application/json\r\n")
                    .containsIgnoringCase("cache-control: no-store\r\n");
            assertThat(page.substring(page.indexOf("\r\n\r\n") + 4))
                    .startsWith("{\"pools\":[{\"pool\":\"terns\",\"waiting\":0,\"backends\":[")
                    .contains("{\"backend\":\"tern-1\",\"standing\":\"withdrawn\",\"pickable\":false,\"in-flight\":0,"
                            + "\"weight\":1,")
                    .contains("{\"backend\":\"tern-2\",\"standing\":\"up\",\"pickable\":true,\"in-flight\":0,"
                            + "\"weight\":7,\"headroom\":1.0,\"effective-weight\":1.0,\"entitled-share\":1.0");
        }
    }

    @Test
    void cue_sent_isHandedOnAndAnsweredByWhatBecameOfIt() throws Exception {
        List<String> sent = new CopyOnWriteArrayList<>();
        CueTaker taker = cue -> {
            sent.add(cue);
            return switch (cue) {
                case "{\"drain\":\"tern-1\"}" -> CueTaker.Reply.taken("drain tern-1");
                case "over" -> CueTaker.Reply.nothingPlays();
                default -> CueTaker.Reply.refused("cue:1:1: no cue; write one");
            };
        };
        try (LivePlay play = LivePlay.of(FakeBackend.deadAddress())) {
            ControlAddress control = play.balancer.openControl(0, taker);
            assertThat(send(control, "{\"drain\":\"tern-1\"}", bearer(control)))
                    .startsWith("HTTP/1.1 202 ")
                    .endsWith("\r\n\r\ndrain tern-1\n");
            assertThat(send(control, "x", bearer(control)))
                    .startsWith("HTTP/1.1 400 ")
                    .endsWith("\r\n\r\ncue:1:1: no cue; write one\n");
            assertThat(send(control, "over", bearer(control))).startsWith("HTTP/1.1 409 ");
            assertThat(send(control, "x", "")).startsWith("HTTP/1.1 401 ");
            assertThat(sent).containsExactly("{\"drain\":\"tern-1\"}", "x", "over");
            assertThat(send(control, "x".repeat(20_000), bearer(control))).startsWith("HTTP/1.1 413 ");
            assertThat(read(control, "/cues", bearer(control)))
                    .startsWith("HTTP/1.1 405 ")
                    .containsIgnoringCase("allow: POST\r\n");
        }
    }

    @Test
    void cue_beforeThePlay_is409() throws Exception {
        try (Balancer waiting = LivePlay.waiting(FakeBackend.deadAddress()).balancer) {
            ControlAddress control = waiting.openControl(0, cue -> CueTaker.Reply.taken(cue));
            assertThat(send(control, "x", bearer(control))).startsWith("HTTP/1.1 409 ");
        }
    }

    @Test
    void token_shownTwice_is401() throws Exception {
        try (LivePlay play = LivePlay.of(FakeBackend.deadAddress())) {
            ControlAddress control = play.balancer.openControl(0, CueTaker.NOBODY);
            for (String path : List.of("/metrics", "/state", "/nothing")) {
                assertThat(read(control, path, "Authorization: Bearer x\r\n" + bearer(control)))
                        .startsWith("HTTP/1.1 401 ")
                        .doesNotContain("tern");
            }
        }
    }

    /** By the text format of OpenMetrics 1.0, from memory: families in one piece, counters in _total, an end. */
    @Test
    void metrics_always_keepToTheTextFormat() throws Exception {
        try (LivePlay play = LivePlay.of(FakeBackend.deadAddress())) {
            ControlAddress control = play.balancer.openControl(0, CueTaker.NOBODY);
            String page = read(control, "/metrics", bearer(control));
            String text = page.substring(page.indexOf("\r\n\r\n") + 4);
            assertThat(text).endsWith("\n# EOF\n").doesNotContain("\r").doesNotContain("\n\n");
            Map<String, String> types = new HashMap<>();
            Set<String> samples = new HashSet<>();
            String family = "";
            for (String line : text.split("\n")) {
                if (line.startsWith("# TYPE ")) {
                    String[] words = line.split(" ");
                    family = words[2];
                    assertThat(types.put(family, words[3]))
                            .as("type of %s", family)
                            .isNull();
                    assertThat(words[3]).isIn("counter", "gauge");
                } else if (!line.startsWith("#")) {
                    assertThat(line)
                            .matches("[a-z_]+\\{([a-z_]+=\"[^\"\\\\]*\"(,(?=[a-z]))?)+\\} -?[0-9.]+(E-?[0-9]+)?");
                    String name = line.substring(0, line.indexOf('{'));
                    String suffix = "counter".equals(types.get(family)) ? "_total" : "";
                    assertThat(name).isEqualTo(family + suffix);
                    assertThat(samples.add(line.substring(0, line.indexOf('}'))))
                            .as("said once: %s", line)
                            .isTrue();
                }
            }
            assertThat(samples).hasSizeGreaterThan(20);
        }
    }
}
