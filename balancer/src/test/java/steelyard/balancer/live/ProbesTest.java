package steelyard.balancer.live;

import static org.assertj.core.api.Assertions.assertThat;
import static org.awaitility.Awaitility.await;

import java.time.Duration;
import java.util.concurrent.BlockingQueue;
import java.util.concurrent.LinkedBlockingQueue;
import java.util.concurrent.TimeUnit;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;
import org.junit.jupiter.api.extension.ExtendWith;
import steelyard.balancer.core.standing.Standing;
import steelyard.balancer.core.standing.Transition;

/** Probes on the wire; one miss makes a backend down here, one pass up. */
@Timeout(60)
@ExtendWith(Accounting.class)
class ProbesTest {
    private static final String GOOD = "HTTP/1.1 204 No Content\r\n\r\n";
    private static final String BAD = "HTTP/1.1 500 Bad\r\nContent-Length: 0\r\n\r\n";

    private static void awaitStanding(LivePlay play, Standing... words) {
        await().atMost(Duration.ofSeconds(20))
                .untilAsserted(
                        () -> assertThat(play.decisions.transitions().stream().map(Transition::to))
                                .startsWith(words));
    }

    @Test
    void http_goodAnswers_pass() throws Exception {
        BlockingQueue<String> heads = new LinkedBlockingQueue<>();
        try (FakeBackend backend = FakeBackend.playing(wire -> {
                    heads.add(String.valueOf(wire.readHead()));
                    wire.send(GOOD);
                });
                LivePlay play = LivePlay.of(pool -> pool.probing("/afloat", 50, 10_000), backend.address())) {
            String first = heads.poll(20, TimeUnit.SECONDS);
            String second = heads.poll(20, TimeUnit.SECONDS);
            assertThat(first).startsWith("GET /afloat HTTP/1.1\r\n").containsIgnoringCase("steelyard-probe: 0\r\n");
            assertThat(second).containsIgnoringCase("steelyard-probe: 1\r\n");
            await().until(() -> play.decisions.probes().size() >= 2);
            assertThat(play.decisions.probes()).doesNotContain(false);
            assertThat(backend.connections())
                    .as("each on a connection of its own")
                    .isGreaterThanOrEqualTo(2);
        }
    }

    @Test
    void http_badThenGoodAnswers_goDownAndUp() throws Exception {
        try (FakeBackend backend = FakeBackend.answering(BAD);
                LivePlay play = LivePlay.of(pool -> pool.probing("/afloat", 50, 10_000), backend.address())) {
            awaitStanding(play, Standing.DOWN);
            backend.play(wire -> {
                wire.readHead();
                wire.send(GOOD);
            });
            awaitStanding(play, Standing.DOWN, Standing.UP);
        }
    }

    @Test
    void http_noAnswerInTime_isMissedAndItsConnectionCloses() throws Exception {
        BlockingQueue<Boolean> closed = new LinkedBlockingQueue<>();
        try (FakeBackend backend = FakeBackend.playing(wire -> {
                    wire.readHead();
                    closed.add(wire.readHead() == null);
                });
                LivePlay play = LivePlay.of(pool -> pool.probing("/afloat", 100, 100), backend.address())) {
            awaitStanding(play, Standing.DOWN);
            assertThat(closed.poll(20, TimeUnit.SECONDS)).isTrue();
        }
    }

    @Test
    void http_closedWithoutAnswer_isMissed() throws Exception {
        try (FakeBackend backend = FakeBackend.playing(Wire::readHead);
                LivePlay play = LivePlay.of(pool -> pool.probing("/afloat", 50, 10_000), backend.address())) {
            awaitStanding(play, Standing.DOWN);
        }
    }

    @Test
    void http_refused_isMissed() throws Exception {
        try (LivePlay play = LivePlay.of(pool -> pool.probing("/afloat", 50, 10_000), FakeBackend.deadAddress())) {
            awaitStanding(play, Standing.DOWN);
        }
    }

    @Test
    void tcp_connects_passes() throws Exception {
        try (FakeBackend backend = FakeBackend.playing(wire -> wire.readToEnd());
                LivePlay play = LivePlay.of(pool -> pool.probing(null, 50, 10_000), backend.address())) {
            await().until(() -> play.decisions.probes().size() >= 2);
            assertThat(play.decisions.probes()).doesNotContain(false);
        }
    }

    @Test
    void tcp_refused_isMissed() throws Exception {
        try (LivePlay play = LivePlay.of(pool -> pool.probing(null, 50, 10_000), FakeBackend.deadAddress())) {
            awaitStanding(play, Standing.DOWN);
        }
    }
}
