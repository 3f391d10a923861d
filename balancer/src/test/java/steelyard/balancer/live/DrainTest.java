package steelyard.balancer.live;

import static org.assertj.core.api.Assertions.assertThat;
import static org.awaitility.Awaitility.await;

import java.util.concurrent.CountDownLatch;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;
import org.junit.jupiter.api.extension.ExtendWith;
import steelyard.balancer.core.decide.Outcome;
import steelyard.balancer.core.standing.Standing;
import steelyard.balancer.live.guard.BackendReadings;

/** Taking backends out by hand. */
@Timeout(60)
@ExtendWith(Accounting.class)
class DrainTest {
    private static final String GET = "GET / HTTP/1.1\r\nHost: a\r\n\r\n";
    private static final String OK = "HTTP/1.1 200 OK\r\nContent-Length: 2\r\n\r\nok";

    private final CountDownLatch asked = new CountDownLatch(1);
    private final CountDownLatch released = new CountDownLatch(1);

    private FakeBackend waiting() throws Exception {
        return FakeBackend.playing(wire -> {
            while (wire.readHead() != null) {
                asked.countDown();
                try {
                    released.await();
                } catch (InterruptedException e) {
                    return;
                }
                wire.send(OK);
            }
        });
    }

    @Test
    void drain_answerInFlight_saysCloseAndClientConnectionCloses() throws Exception {
        try (FakeBackend backend = waiting();
                LivePlay play = LivePlay.of(backend.address());
                Wire client = play.client()) {
            client.send(GET);
            asked.await();
            play.balancer.drain(0, 0);
            released.countDown();
            assertThat(client.readToEnd())
                    .startsWith("HTTP/1.1 200 ")
                    .containsIgnoringCase("connection: close")
                    .endsWith("ok");
            assertThat(play.decisions.outcomes()).containsExactly(Outcome.ANSWERED);
        }
    }

    @Test
    void drain_limitReached_cutsWhatIsLeft() throws Exception {
        try (FakeBackend backend = waiting();
                LivePlay play = LivePlay.of(pool -> pool.drainingWithin(0.2), backend.address());
                Wire client = play.client()) {
            client.send(GET);
            asked.await();
            play.balancer.drain(0, 0);
            assertThat(client.readAnswer())
                    .startsWith("HTTP/1.1 503 ")
                    .containsIgnoringCase("error=connection_terminated; details=\"cut\"\r\n");
            assertThat(play.decisions.outcomes()).containsExactly(Outcome.CUT);
            released.countDown();
        }
    }

    @Test
    void drain_limitReachedInsideAnAnswer_closesTheClientShort() throws Exception {
        try (FakeBackend backend = FakeBackend.playing(wire -> {
                    wire.readHead();
                    wire.send("HTTP/1.1 200 OK\r\nContent-Length: 10\r\n\r\nhello");
                    asked.countDown();
                    wire.readHead();
                });
                LivePlay play = LivePlay.of(backend.address());
                Wire client = play.client()) {
            client.send(GET);
            assertThat(client.readHead()).startsWith("HTTP/1.1 200 ");
            play.balancer.drain(0, 50_000_000);
            assertThat(client.readToEnd()).isEqualTo("hello");
            assertThat(play.decisions.outcomes()).containsExactly(Outcome.CUT);
        }
    }

    @Test
    void withdraw_inFlight_goesOnAndAdmitBringsBack() throws Exception {
        try (FakeBackend backend = waiting();
                LivePlay play = LivePlay.of(backend.address());
                Wire client = play.client()) {
            client.send(GET);
            asked.await();
            play.balancer.withdraw(0);
            assertThat(play.ask(GET)).startsWith("HTTP/1.1 503 ");
            released.countDown();
            assertThat(client.readAnswer()).endsWith("ok");
            play.balancer.admit(0);
            assertThat(play.ask(GET)).endsWith("ok");
        }
    }

    @Test
    void sample_afterHandCommands_showsThem() throws Exception {
        try (FakeBackend backend = FakeBackend.answering(OK);
                LivePlay play = LivePlay.of(backend.address(), backend.address())) {
            play.balancer.drain(0, 0);
            play.balancer.reweigh(1, 7);
            BackendReadings readings = new BackendReadings(2);
            await().untilAsserted(() -> {
                play.balancer.sample(readings);
                assertThat(readings.standing(0)).isEqualTo(Standing.DRAINING);
                assertThat(readings.weight(1)).isEqualTo(7);
                assertThat(readings.entitledShare(1)).isEqualTo(1.0);
            });
        }
    }
}
