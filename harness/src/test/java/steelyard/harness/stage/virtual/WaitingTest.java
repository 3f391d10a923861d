package steelyard.harness.stage.virtual;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;
import static steelyard.harness.stage.virtual.Witness.HOP;
import static steelyard.harness.stage.virtual.Witness.MILLI;

import org.junit.jupiter.api.Test;
import steelyard.balancer.core.decide.Outcome;
import steelyard.drills.model.Cause;

/** Limits in flight, and tries that wait for a place below them. */
class WaitingTest {
    private static final String POOL = "method: round-robin, serves: {workers: 8, time: 150ms}, backends: {fulmar: }";

    // A request every 100 ms takes 150 ms, one at a time: the first, due at 50, is done at 200 and hops; the next, due
    // at
    // 150, starts then, and so on: number k is done at about 50 + 150 (k + 1).
    @Test
    void fullBackend_letsRequestsWaitInOrder() {
        Witness told = Witness.of(
                POOL + ", in-flight: {most: 1, waiting: 10, wait: 10s}", "rate: 10/s, give-up: 20s", "1s", "");
        assertThat(told.count(null)).isEqualTo(10);
        assertThat(told.waited).containsExactly(1L, 2L, 3L, 4L, 5L, 6L, 7L, 8L, 9L);
        assertThat(told.picks).extracting(Witness.Pick::request).isSorted().hasSize(10);
        assertThat(told.ends.get(9).atNanos()).isCloseTo((50 + 150 * 10) * MILLI, within(50 * HOP));
        // An attempt takes the place of the one before it in the instant in which that ends.
        assertThat(told.picks.get(1).atNanos()).isEqualTo(told.overs.get(0).atNanos());
    }

    @Test
    void waitThatIsTooLong_isA503() {
        Witness told = Witness.of(
                POOL.replace("150ms", "10s") + ", in-flight: {most: 1, waiting: 10, wait: 300ms}",
                "rate: 10/s, give-up: 20s",
                "1s",
                "");
        assertThat(told.count(Cause.NO_BACKEND)).isEqualTo(9);
        // Its new connection takes 3 hops, its 503 one.
        assertThat(told.ends.get(0).tookNanos()).isEqualTo(300 * MILLI + 4 * HOP);
        assertThat(told.ends.get(0).status()).isEqualTo(503);
    }

    @Test
    void noRoomToWait_isA503AtOnce() {
        Witness told = Witness.of(
                POOL.replace("150ms", "10s") + ", in-flight: {most: 1, waiting: 2, wait: 20s}",
                "rate: 10/s, give-up: 20s",
                "1s",
                "");
        assertThat(told.waited).containsExactly(1L, 2L);
        assertThat(told.ends.subList(0, 7))
                .allMatch(each -> each.cause() == Cause.NO_BACKEND && each.tookNanos() < MILLI);
    }

    // One place, 400 ms each. Patient requests come at 250 and 750 ms, hasty ones, which wait 100 ms, at 100, 300, 500,
    // 700
    // and 900. Those of 100 and 700 find the place free and give it up; those of 300, 500 and 900 give up waiting.
    @Test
    void client_thatGivesUpWhileItWaits_takesNoPlace() {
        Witness told = Witness.of(
                POOL.replace("150ms", "400ms") + ", in-flight: {most: 1, waiting: 10, wait: 20s}",
                "rate: 2/s, give-up: 20s}, {to: seats, arrivals: even, rate: 5/s, give-up: 100ms",
                "1s",
                "");
        // By due time: hasty, patient, hasty, hasty, hasty, patient, hasty.
        assertThat(told.waited).containsExactly(2L, 3L, 5L, 6L);
        assertThat(told.picks).extracting(Witness.Pick::request).containsExactly(0L, 1L, 4L, 5L);
        assertThat(told.count(Cause.GAVE_UP)).isEqualTo(5);
        assertThat(told.count(null)).isEqualTo(2);
    }

    // Two backends of one place each: when fulmar dies its request is tried again, and has to wait for gannet's.
    @Test
    void retry_waitsToo() {
        Witness told = Witness.of(
                "method: round-robin, serves: {workers: 8, time: 400ms}, backends: {fulmar: , gannet: },"
                        + " retry: {at-most: 1, budget: 100%}, in-flight: {most: 1, waiting: 10, wait: 20s}",
                "rate: 4/s, give-up: 20s", "500ms", "{at: 400ms, kill: fulmar}");
        assertThat(told.waited).containsExactly(0L);
        assertThat(told.picks.get(2)).satisfies(pick -> {
            assertThat(pick.request()).isZero();
            assertThat(pick.attempt()).isEqualTo(2);
            assertThat(pick.atNanos()).isEqualTo(told.overs.get(1).atNanos());
        });
        assertThat(told.overs.get(0).outcome()).isEqualTo(Outcome.RESET);
        assertThat(told.count(null)).isEqualTo(2);
    }

    // The same when no place frees in time: the client gets what the first attempt came to.
    @Test
    void retry_thatWaitsInVain_failsAsTheAttemptBefore() {
        Witness told = Witness.of(
                "method: round-robin, serves: {workers: 8, time: 900ms}, backends: {fulmar: , gannet: },"
                        + " retry: {at-most: 1, budget: 100%}, in-flight: {most: 1, waiting: 10, wait: 100ms}",
                "rate: 4/s, give-up: 20s", "500ms", "{at: 400ms, kill: fulmar}");
        assertThat(told.ends.get(0).cause()).isEqualTo(Cause.RESET);
        assertThat(told.ends.get(0).status()).isEqualTo(502);
        assertThat(told.ends.get(0).atNanos()).isEqualTo(500 * MILLI + 2 * HOP);
    }

    @Test
    void connectionPassedThrough_waitsWithWhatItsClientSent() {
        Witness told = Witness.of(
                "method: round-robin, count: connections, front: {kind: tcp}, serves: {workers: 8, time: 1ms},"
                        + " timeouts: {connect: 1s, first-byte: 10s, idle: 400ms}, backends: {fulmar: },"
                        + " in-flight: {most: 1, waiting: 10, wait: 20s}",
                "rate: 2/s, clients: 2, give-up: 20s",
                "1s",
                "{at: 0s, slow: fulmar, plus: 600ms}");
        assertThat(told.waited).containsExactly(-2L);
        assertThat(told.count(null)).isEqualTo(2);
        assertThat(told.picks.get(1).atNanos()).isEqualTo(told.overs.get(0).atNanos());
    }
}
