package steelyard.balancer.live;

import static org.assertj.core.api.Assertions.assertThat;
import static org.awaitility.Awaitility.await;

import java.io.IOException;
import java.util.ArrayList;
import java.util.Collections;
import java.util.List;
import java.util.Random;
import java.util.concurrent.CountDownLatch;
import java.util.concurrent.TimeUnit;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.extension.ExtendWith;
import steelyard.balancer.core.decide.Outcome;
import steelyard.balancer.settings.InFlightSettings;

/** Requests and connections that wait for a place on a backend. */
@ExtendWith(Accounting.class)
class WaitingTest {
    private static final String REQUEST = "GET / HTTP/1.1\r\nHost: quay\r\n\r\n";
    private static final String ANSWER = "HTTP/1.1 200 OK\r\nContent-Length: 4\r\n\r\ntern";

    private static Pool oneAtATime(Pool pool, int waiting, double seconds) {
        InFlightSettings settings = new InFlightSettings(1, waiting, (long) (seconds * LivePlay.SECOND));
        return pool.with(builder -> builder.inFlight(settings));
    }

    /** Answers once it may. */
    private static FakeBackend held(CountDownLatch may) throws IOException {
        return FakeBackend.playing(wire -> {
            while (wire.readHead() != null) {
                try {
                    may.await();
                } catch (InterruptedException e) {
                    Thread.currentThread().interrupt();
                }
                wire.send(ANSWER);
            }
        });
    }

    @Test
    void request_thatWaited_isServedWhenAPlaceIsFree() throws Exception {
        CountDownLatch may = new CountDownLatch(1);
        try (FakeBackend backend = held(may);
                LivePlay play = LivePlay.of(pool -> oneAtATime(pool, 5, 20), backend.address());
                Wire first = play.client();
                Wire second = play.client()) {
            first.send(REQUEST);
            await().until(() -> play.inFlight() == 1);
            second.send(REQUEST);
            await().until(() -> play.decisions.waited() == 1);
            may.countDown();
            assertThat(first.readAnswer()).endsWith("tern");
            assertThat(second.readAnswer()).endsWith("tern");
            play.settle();
            assertThat(play.decisions.outcomes()).containsExactly(Outcome.ANSWERED, Outcome.ANSWERED);
        }
    }

    @Test
    void request_thatWaitsTooLong_gets503() throws Exception {
        CountDownLatch may = new CountDownLatch(1);
        try (FakeBackend backend = held(may);
                LivePlay play = LivePlay.of(pool -> oneAtATime(pool, 5, 0.2), backend.address());
                Wire first = play.client();
                Wire second = play.client()) {
            first.send(REQUEST);
            await().until(() -> play.inFlight() == 1);
            second.send(REQUEST);
            assertThat(second.readAnswer())
                    .contains("503")
                    .contains("error=destination_unavailable")
                    .contains("retry-after");
            may.countDown();
            assertThat(first.readAnswer()).endsWith("tern");
            second.send(REQUEST);
            assertThat(second.readAnswer()).endsWith("tern");
        }
    }

    @Test
    void request_beyondTheRoom_gets503AtOnce() throws Exception {
        CountDownLatch may = new CountDownLatch(1);
        try (FakeBackend backend = held(may);
                LivePlay play = LivePlay.of(pool -> oneAtATime(pool, 0, 20), backend.address());
                Wire first = play.client();
                Wire second = play.client()) {
            first.send(REQUEST);
            await().until(() -> play.inFlight() == 1);
            second.send(REQUEST);
            assertThat(second.readAnswer()).contains("503");
            assertThat(play.decisions.waited()).isZero();
            may.countDown();
            first.readAnswer();
        }
    }

    @Test
    void client_thatLeavesWhileItWaits_losesItsTurn() throws Exception {
        CountDownLatch may = new CountDownLatch(1);
        try (FakeBackend backend = held(may);
                LivePlay play = LivePlay.of(pool -> oneAtATime(pool, 1, 20), backend.address());
                Wire first = play.client();
                Wire third = play.client()) {
            first.send(REQUEST);
            await().until(() -> play.inFlight() == 1);
            try (Wire second = play.client()) {
                second.send(REQUEST);
                await().until(() -> play.decisions.waited() == 1);
            }
            // There is room for one: the third can wait only once the second has left.
            await().until(() -> {
                third.send(REQUEST);
                boolean waits = !third.answers(200);
                if (!waits) {
                    third.readAnswer();
                }
                return waits;
            });
            may.countDown();
            assertThat(first.readAnswer()).endsWith("tern");
            assertThat(third.readAnswer()).endsWith("tern");
            play.settle();
            assertThat(play.decisions.outcomes()).containsOnly(Outcome.ANSWERED);
        }
    }

    /** Who leaves just as it is given a place has to hand it back: a crowd on three loops that seldom stays. */
    @Test
    void clients_thatLeaveAtAnyMoment_handTheirPlacesBack() throws Exception {
        try (FakeBackend backend = FakeBackend.answering(ANSWER);
                LivePlay play = LivePlay.onLoops(3, pool -> oneAtATime(pool, 100, 0.02), backend.address())) {
            crowd(play, REQUEST);
            assertThat(play.decisions.waited()).isPositive();
            assertThat(play.ask(REQUEST)).endsWith("tern");
        }
    }

    @Test
    void connections_thatLeaveAtAnyMoment_handTheirPlacesBack() throws Exception {
        try (FakeBackend backend = FakeBackend.playing(wire -> wire.send("got " + wire.readToEnd()));
                LivePlay play = LivePlay.onLoops(3, pool -> oneAtATime(pool.passing(), 100, 0.02), backend.address())) {
            crowd(play, "one");
            assertThat(play.decisions.waited()).isPositive();
            try (Wire last = play.client()) {
                last.send("last");
                last.finish();
                assertThat(last.readToEnd()).isEqualTo("got last");
            }
        }
    }

    /** Sixty times ten clients, who leave after up to 3 ms, in order or with a reset. Returns when nothing is in flight. */
    private static void crowd(LivePlay play, String says) throws Exception {
        Random seeded = new Random(7);
        for (int round = 0; round < 60; round++) {
            List<Wire> clients = new ArrayList<>();
            for (int i = 0; i < 10; i++) {
                Wire client = play.client();
                clients.add(client);
                client.send(says);
            }
            Collections.shuffle(clients, seeded);
            for (Wire client : clients) {
                TimeUnit.MICROSECONDS.sleep(seeded.nextInt(300));
                if (seeded.nextBoolean()) {
                    client.reset();
                } else {
                    client.close();
                }
            }
        }
        play.settle();
    }

    @Test
    void connection_thatWaited_isPassedOnWhenAPlaceIsFree() throws Exception {
        try (FakeBackend backend = FakeBackend.playing(wire -> wire.send("got " + wire.readToEnd()));
                LivePlay play = LivePlay.of(pool -> oneAtATime(pool.passing(), 5, 20), backend.address());
                Wire first = play.client();
                Wire second = play.client()) {
            first.send("one");
            await().until(() -> play.inFlight() == 1);
            second.send("two");
            second.finish();
            await().until(() -> play.decisions.waited() == 1);
            first.finish();
            assertThat(first.readToEnd()).isEqualTo("got one");
            assertThat(second.readToEnd()).isEqualTo("got two");
        }
    }

    @Test
    void connection_thatWaitsTooLong_isClosed() throws Exception {
        try (FakeBackend backend = FakeBackend.playing(Wire::readToEnd);
                LivePlay play = LivePlay.of(pool -> oneAtATime(pool.passing(), 5, 0.2), backend.address());
                Wire first = play.client()) {
            first.send("one");
            await().until(() -> play.inFlight() == 1);
            try (Wire second = play.client()) {
                assertThat(second.readToEnd()).isEmpty();
            }
            first.finish();
            first.readToEnd();
        }
    }
}
