package steelyard.balancer.core.decide;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.util.List;
import java.util.SplittableRandom;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.EnumSource;
import steelyard.balancer.core.standing.Standing;
import steelyard.balancer.settings.AffinitySettings;
import steelyard.balancer.settings.BackendSettings;
import steelyard.balancer.settings.BenchSettings;
import steelyard.balancer.settings.DrainSettings;
import steelyard.balancer.settings.LoadSettings;
import steelyard.balancer.settings.PoolSettings.Method;
import steelyard.balancer.settings.RetrySettings;

/** Bench, tiers, last resort, limits, waiting, affinity, readings and changes in flight, through the Decider. */
class DeciderRulesTest {
    private static final BenchSettings TWO_IN_A_ROW = new BenchSettings(2, 0, 100, 9, 100, 800, 1_000, 0.5);
    private static final LoadSettings LOAD =
            new LoadSettings("/load", 100, 40, 250, 0.1, List.of(new LoadSettings.Gauge("cpu", 1, 1)));

    private final Trace trace = new Trace();
    private final Ask ask = new Ask();

    // --- bench ------------------------------------------------------------------------------------------------------

    @Test
    void ended_failuresInARow_benchUpToTheCapAndRampAfterwards() {
        Decider decider =
                decider(Stand.of(Method.ROUND_ROBIN, 3).bench(TWO_IN_A_ROW).warmUp(50, 0.1));
        end(decider, 0, Outcome.RESET, 0, 1);
        end(decider, 0, Outcome.ANSWERED, 503, 2);
        // Half of three is one: the second has to stay.
        end(decider, 1, Outcome.LATE, 0, 3);
        end(decider, 1, Outcome.LATE, 0, 4);
        assertThat(decider.standing(0)).isEqualTo(Standing.BENCHED);
        assertThat(decider.pickable(1)).isTrue();
        assertThat(decider.nextDeadlineNanos()).isEqualTo(102);
        decider.poll(102);

        assertThat(decider.standing(0)).isEqualTo(Standing.WARMING);
        assertThat(trace.lines()).contains("2 0 UP -> BENCHED by FAILURES", "102 0 BENCHED -> WARMING by FREED");
        end(decider, 1, Outcome.LATE, 0, 103);
        assertThat(decider.standing(1)).isEqualTo(Standing.BENCHED);
    }

    @Test
    void ended_failuresWhileDraining_benchUnseenAndFreeInTime() {
        Decider decider = decider(Stand.of(Method.ROUND_ROBIN, 2).bench(TWO_IN_A_ROW));
        Ask pinned = new Ask();
        pinned.pinned = 0;
        decider.pick(pinned, 0);
        decider.pick(pinned, 0);
        decider.drain(0, 500, 1);
        decider.ended(0, 0, 1, Outcome.RESET, 0, 2);
        decider.ended(0, 0, 1, Outcome.RESET, 0, 3);
        assertThat(decider.standing(0)).isEqualTo(Standing.DRAINING);
        assertThat(decider.nextDeadlineNanos()).isEqualTo(103);
        decider.admit(0, 50);
        assertThat(decider.standing(0)).isEqualTo(Standing.BENCHED);
        decider.poll(103);
        assertThat(decider.standing(0)).isEqualTo(Standing.UP);
    }

    @ParameterizedTest
    @EnumSource(
            value = Outcome.class,
            names = {"CUT", "ABANDONED"})
    void ended_byTheBalancerOrTheClient_saysNothingOfTheBackend(Outcome outcome) {
        Decider decider = decider(Stand.of(Method.ROUND_ROBIN, 3).bench(TWO_IN_A_ROW));
        end(decider, 0, Outcome.RESET, 0, 1);
        end(decider, 0, outcome, 0, 2);
        assertThat(decider.standing(0)).isEqualTo(Standing.UP);
        end(decider, 0, Outcome.RESET, 0, 3);
        assertThat(decider.standing(0)).isEqualTo(Standing.BENCHED);
    }

    // --- tiers and the last resort ----------------------------------------------------------------------------------

    @Test
    void pick_tierTwo_isPickedOnlyBelowTheStandbyShareAndAtOnceInFull() {
        Decider decider = decider(
                Stand.of(Method.ROUND_ROBIN, 3).standingBy(1).reserve(0, 1).warmUp(100, 0.1));
        assertThat(decider.pickable(2)).isFalse();
        assertThat(decider.entitledShare(2, 0)).isZero();
        decider.withdraw(0, 1);

        assertThat(decider.pickable(2)).isTrue();
        assertThat(decider.standing(2)).isEqualTo(Standing.UP);
        assertThat(decider.entitledShare(2, 1)).isEqualTo(0.5);
        decider.admit(0, 2);
        assertThat(decider.pickable(2)).isFalse();
    }

    @Test
    void pick_lastResort_takesEveryAdmittedOne() {
        Decider decider = decider(Stand.of(Method.ROUND_ROBIN, 3).startingDown().reserve(0.3, 0));
        decider.withdraw(2, 1);

        assertThat(pick(decider, 0, 2)).isZero();
        assertThat(pick(decider, 1, 2)).isEqualTo(1);
        assertThat(pick(decider, 2, 2)).isZero();
        assertThat(decider.entitledShare(0, 2)).isEqualTo(0.5);
        assertThat(decider.pickable(2)).isFalse();
    }

    // --- limits and waiting -----------------------------------------------------------------------------------------

    @Test
    void pick_everyoneFull_waitsInOrderForPlaces() {
        Decider decider = decider(Stand.of(Method.ROUND_ROBIN, 1).inFlight(1, 2, 50));
        assertThat(pick(decider, 0, 1)).isZero();
        assertThat(pick(decider, 1, 2)).isEqualTo(Decider.WAITING);
        assertThat(pick(decider, 2, 3)).isEqualTo(Decider.WAITING);
        assertThat(pick(decider, 3, 4)).isEqualTo(Decider.NOBODY);
        assertThat(decider.waiting(0)).isEqualTo(2);
        assertThat(decider.nextDeadlineNanos()).isEqualTo(52);
        decider.ended(0, 0, 1, Outcome.ANSWERED, 200, 10);
        assertThat(decider.nextDeadlineNanos()).isEqualTo(53);
        decider.poll(53);

        assertThat(trace.lines())
                .containsExactly(
                        "1 picked 0 for 0/1, 1 in flight",
                        "2 waits in 0: 1/1, 1 of them",
                        "3 waits in 0: 2/1, 2 of them",
                        "4 nobody in 0 for 3/1",
                        "10 ended 0 for 0/1 ANSWERED, 0 in flight",
                        "10 picked 0 for 1/1, 1 in flight",
                        "ticket 1 gets 0",
                        "53 nobody in 0 for 2/1",
                        "ticket 2 gets -1");
        assertThat(decider.hasDeadline()).isFalse();
    }

    @Test
    void leave_aTicket_saysWhetherItWasStillWaiting() {
        Decider decider = decider(Stand.of(Method.ROUND_ROBIN, 1).inFlight(1, 2, 50));
        pick(decider, 0, 1);
        pick(decider, 1, 1);
        pick(decider, 2, 1);

        assertThat(decider.leave(1, 2)).isTrue();
        assertThat(decider.leave(1, 3)).isFalse();
        decider.ended(0, 0, 1, Outcome.ANSWERED, 200, 10);
        assertThat(trace.last()).isEqualTo("ticket 2 gets 0");
        assertThat(decider.leave(2, 11)).isFalse();
    }

    @Test
    void admit_ofAnotherBackend_givesPlacesToThoseThatWait() {
        Decider decider = decider(Stand.of(Method.ROUND_ROBIN, 2).inFlight(1, 2, 50));
        decider.withdraw(1, 0);
        pick(decider, 0, 1);
        pick(decider, 1, 1);
        decider.admit(1, 5);

        assertThat(trace.last()).isEqualTo("ticket 1 gets 1");
    }

    /** Backend 1 is full, backend 0 was tried: the retry waits and lets later first tries have what it cannot take. */
    @Test
    void serve_aRetryThatCannotTakeThePlace_isPassedOver() {
        Decider decider =
                decider(Stand.of(Method.ROUND_ROBIN, 2).inFlight(1, 3, 50).retry(Stand.RETRY));
        pick(decider, 0, 1);
        pick(decider, 1, 1);
        ask.clear();
        ask.request = 2;
        ask.ticket = 2;
        ask.again(0);
        assertThat(decider.pick(ask, 2)).isEqualTo(Decider.WAITING);
        assertThat(pick(decider, 3, 3)).isEqualTo(Decider.WAITING);
        decider.ended(0, 0, 1, Outcome.ANSWERED, 200, 4);
        assertThat(trace.last()).isEqualTo("ticket 3 gets 0");
        decider.ended(1, 1, 1, Outcome.ANSWERED, 200, 5);
        assertThat(trace.last()).isEqualTo("ticket 2 gets 1");
    }

    @Test
    void pick_nobodyOpen_waitsForOneThatReturns() {
        Decider decider = decider(Stand.of(Method.STRIDE, 2).inFlight(1, 2, 50));
        decider.withdraw(0, 1);
        decider.reweigh(1, 0, 1);

        assertThat(pick(decider, 0, 2)).isEqualTo(Decider.WAITING);
        decider.admit(0, 3);
        assertThat(trace.last()).isEqualTo("ticket 0 gets 0");
        assertThat(pick(decider, 1, 4)).isEqualTo(Decider.WAITING);
        decider.reweigh(1, 1, 5);
        assertThat(trace.last()).isEqualTo("ticket 1 gets 1");
    }

    // --- affinity ---------------------------------------------------------------------------------------------------

    @Test
    void pick_clientKnownByAddress_staysAndMovesForGoodWhenItsBackendGoes() {
        Decider decider = decider(Stand.of(Method.ROUND_ROBIN, 3).affinity(AffinitySettings.By.CLIENT));
        assertThat(pickFor(decider, 71, 1)).isZero();
        assertThat(pickFor(decider, 71, 2)).isZero();
        assertThat(pickFor(decider, 72, 3)).isEqualTo(1);
        decider.withdraw(0, 4);
        assertThat(pickFor(decider, 71, 5)).isEqualTo(2);
        decider.admit(0, 6);
        assertThat(pickFor(decider, 71, 7)).isEqualTo(2);
        // Away for as long as affinity lasts: free again, and the next in turn is the first.
        assertThat(pickFor(decider, 71, 1_007)).isZero();
    }

    @Test
    void pick_clientHeldByCookie_staysAndIsBoundAnewOnlyElsewhere() {
        Decider decider = decider(Stand.of(Method.ROUND_ROBIN, 2)
                .affinity(AffinitySettings.By.COOKIE)
                .inFlight(1, 0, 1));
        assertThat(pickHeld(decider, 1, 1)).isEqualTo(1);
        assertThat(ask.rebinds(1)).isFalse();
        assertThat(pickHeld(decider, 1, 2)).isZero();
        assertThat(ask.rebinds(0)).isTrue();
        assertThat(pickHeld(decider, 77, 3)).isEqualTo(Decider.NOBODY);
    }

    @Test
    void pick_heldByADrainingBackend_isServedUntilTheLimitWhereThePoolKeepsClients() {
        Decider keeping = decider(Stand.of(Method.ROUND_ROBIN, 2)
                .affinity(AffinitySettings.By.COOKIE)
                .keepingClients());
        keeping.drain(1, 100, 0);
        assertThat(pickHeld(keeping, 1, 99)).isEqualTo(1);
        keeping.poll(100);
        assertThat(pickHeld(keeping, 1, 100)).isZero();

        Decider other = decider(Stand.of(Method.ROUND_ROBIN, 2).affinity(AffinitySettings.By.COOKIE));
        other.drain(1, 100, 0);
        assertThat(pickHeld(other, 1, 1)).isZero();
    }

    // --- readings ---------------------------------------------------------------------------------------------------

    /** Headroom 500 and 1000: a third and two thirds; stale 250 after the reading, all is even again. */
    @ParameterizedTest
    @EnumSource(
            value = Method.class,
            names = {"WEIGHTED_ROUND_ROBIN", "STRIDE"})
    void read_headroom_movesWeightsUntilItIsStale(Method method) {
        Decider decider = decider(Stand.of(method, 2).load(LOAD));
        decider.poll(0);
        decider.read(0, 0, new double[] {0.5}, 10);
        assertThat(decider.headroom(0)).isEqualTo(500);
        assertThat(decider.headroom(1)).isEqualTo(1000);
        assertThat(decider.entitledShare(0, 10)).isEqualTo(1.0 / 3);
        int first = 0;
        for (int request = 0; request < 300; request++) {
            first += pick(decider, request, 11) == 0 ? 1 : 0;
        }
        assertThat(first).isBetween(99, 101);
        while (decider.nextDeadlineNanos() <= 260) {
            decider.poll(decider.nextDeadlineNanos());
        }

        assertThat(decider.entitledShare(0, 260)).isEqualTo(0.5);
        assertThat(trace.lines()).contains("10 reading 0 of 0: 500", "260 reading 2 of 0: 1000, stale");
    }

    // --- changes in flight ------------------------------------------------------------------------------------------

    @Test
    void retune_method_knowsWhatIsInFlightAndWhoMayBePicked() {
        Decider decider = decider(Stand.of(Method.ROUND_ROBIN, 3));
        pick(decider, 0, 1);
        decider.withdraw(1, 2);
        decider.retune(0, Method.LEAST_CONNECTIONS, 3);

        assertThat(pick(decider, 1, 4)).isEqualTo(2);
        decider.ended(0, 0, 1, Outcome.ANSWERED, 200, 5);
        assertThat(pick(decider, 2, 6)).isZero();
    }

    @Test
    void retune_methodThatHostsRuleOut_isRefusedAndChangesNothing() {
        Decider decider = decider(Stand.byHost(new BackendSettings("fulmar", 1, 0, false)));

        assertThatThrownBy(() -> decider.retune(0, Method.STRIDE, 1)).isInstanceOf(IllegalArgumentException.class);
        assertThat(pick(decider, 0, 2)).isZero();
    }

    @Test
    void retune_drain_countsForDrainsThatBeginLater() {
        Decider decider = decider(Stand.of(Method.ROUND_ROBIN, 2));
        decider.drain(0, 0, 0);
        decider.retune(0, new DrainSettings(10, false), 1);
        decider.drain(1, 0, 2);

        assertThat(decider.nextDeadlineNanos()).isEqualTo(12);
        decider.poll(12);
        assertThat(decider.nextDeadlineNanos()).isEqualTo(30_000);
    }

    // --- retries ----------------------------------------------------------------------------------------------------

    @Test
    void pick_retryThatFindsNobody_givesItsTokenBack() {
        Decider decider =
                decider(Stand.of(Method.ROUND_ROBIN, 1).retry(new RetrySettings(1, 0, 1, Stand.RETRY.also())));
        for (int request = 0; request < 3; request++) {
            int backend = pick(decider, request, 1);
            decider.ended(backend, request, 1, Outcome.REFUSED, 0, 2);
            assertThat(decider.retry(0, request, 1, Outcome.REFUSED, 0, true, false, true, 2))
                    .isTrue();
            ask.again(backend);
            assertThat(decider.pick(ask, 2)).isEqualTo(Decider.NOBODY);
        }
    }

    /** In a storm where everything fails: over any stretch, retries are at most the bucket plus a half of its first tries. */
    @Test
    void retry_inAStorm_keepsToTheBudgetOverAnyStretch() {
        Decider decider =
                decider(Stand.of(Method.ROUND_ROBIN, 4).retry(new RetrySettings(3, 0.5, 2, Stand.RETRY.also())));
        SplittableRandom random = new SplittableRandom(11);
        int requests = 5_000;
        // Retries less budget so far: no later value may exceed an earlier one by more than the bucket.
        double over = 0;
        double least = 0;
        for (int request = 0; request < requests; request++) {
            int backend = pick(decider, request, request);
            over -= 0.5;
            least = Math.min(least, over);
            boolean again = random.nextInt(5) > 0;
            decider.ended(backend, request, 1, Outcome.RESET, 0, request);
            while (again && decider.retry(0, request, ask.attempt, Outcome.RESET, 0, true, true, true, request)) {
                ask.again(backend);
                backend = decider.pick(ask, request);
                over++;
                assertThat(over - least).isLessThanOrEqualTo(2);
                decider.ended(backend, request, ask.attempt, Outcome.RESET, 0, request);
            }
        }
        assertThat(over).as("the budget is used").isGreaterThan(-requests * 0.05);
    }

    private int pick(Decider decider, long request, long now) {
        ask.clear();
        ask.request = request;
        ask.ticket = request;
        return decider.pick(ask, now);
    }

    private int pickFor(Decider decider, long client, long now) {
        ask.client = client;
        return pick(decider, now, now);
    }

    private int pickHeld(Decider decider, int held, long now) {
        ask.clear();
        ask.held = held;
        return decider.pick(ask, now);
    }

    private static void end(Decider decider, int backend, Outcome outcome, int status, long now) {
        Ask pinned = new Ask();
        pinned.pinned = backend;
        assertThat(decider.pick(pinned, now)).isEqualTo(backend);
        decider.ended(backend, 0, 1, outcome, status, now);
    }

    private Decider decider(Stand... pools) {
        return new Decider(Stand.settings(pools), (draw, a, b) -> 0, trace, trace, 0);
    }
}
