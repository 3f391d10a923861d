package steelyard.balancer.core.decide;

import static org.assertj.core.api.Assertions.assertThat;

import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.EnumSource;
import steelyard.balancer.core.pick.Keys;
import steelyard.balancer.settings.PoolSettings.Method;

/** Pools under methods that draw lots or hash: what the Decider tells them, and what follows from the numbers of a request. */
class PoolPicksTest {
    private static final int MEMBERS = 5;
    private static final int REQUESTS = 5_000;

    private final Trace trace = new Trace();

    @Test
    void pick_byLot_followsTheRequestsNumberOnly() {
        int[] there = order(open(Method.WEIGHTED_RANDOM), 0, 1);
        int[] back = order(open(Method.WEIGHTED_RANDOM), REQUESTS - 1, -1);
        // The first draws of a pool come from the tree of sums, which maps lots otherwise than the table does later.
        int settled = 10 * MEMBERS;
        for (int request = settled; request < REQUESTS - settled; request++) {
            assertThat(back[request]).isEqualTo(there[request]);
        }
    }

    @ParameterizedTest
    @EnumSource(
            value = Method.class,
            names = {"RANDOM", "JOIN_IDLE_QUEUE"})
    void pick_methodThatDoesNotWeigh_servesWeightZeroLikeTheOthers(Method method) {
        Decider decider = open(method);
        decider.reweigh(0, 0, 0);
        decider.reweigh(1, 3, 0);
        int[] served = new int[MEMBERS];
        for (int backend : order(decider, 0, 1)) {
            served[backend]++;
        }
        // Binomial with p = 1/5: 1,000, 4 standard deviations are 113.
        for (int count : served) {
            assertThat(count).isBetween(1_000 - 113, 1_000 + 113);
        }
        assertThat(decider.entitledShare(1, 0)).isEqualTo(0.2);
    }

    @Test
    void pick_byKey_isTheSameBackendAndItsRetryAnother() {
        Decider decider = open(Method.HASH);
        Ask ask = new Ask();
        for (int request = 0; request < 100; request++) {
            ask.clear();
            ask.request = request;
            ask.key = Keys.of("berth " + request % 10);
            int backend = pick(decider, ask);
            ask.again(backend);
            int next = pick(decider, ask);
            assertThat(next).isNotEqualTo(backend);
            ask.clear();
            assertThat(pick(decider, ask)).isEqualTo(backend);
            ask.again(backend);
            assertThat(pick(decider, ask)).isEqualTo(next);
        }
    }

    private Decider open(Method method) {
        return new Decider(
                Stand.settings(Stand.of(method, MEMBERS)), (draw, a, b) -> Keys.of(Keys.of(a, 1), b), trace, trace, 0);
    }

    private static int[] order(Decider decider, int first, int step) {
        int[] picked = new int[REQUESTS];
        Ask ask = new Ask();
        for (int request = first; request >= 0 && request < REQUESTS; request += step) {
            ask.request = request;
            picked[request] = pick(decider, ask);
        }
        return picked;
    }

    private static int pick(Decider decider, Ask ask) {
        int backend = decider.pick(ask, 0);
        decider.ended(backend, ask.request, ask.attempt, Outcome.ANSWERED, 200, 0);
        return backend;
    }
}
