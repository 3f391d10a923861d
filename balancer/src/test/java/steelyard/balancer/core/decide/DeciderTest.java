package steelyard.balancer.core.decide;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.util.SplittableRandom;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.EnumSource;
import org.junit.jupiter.params.provider.ValueSource;
import steelyard.balancer.core.standing.Standing;
import steelyard.balancer.settings.BackendSettings;
import steelyard.balancer.settings.PoolSettings.Method;
import steelyard.balancer.settings.ProbeSettings;

/** The Decider by its trace: what it says, in order, for what it is told. */
class DeciderTest {

    private final Trace trace = new Trace();

    @Test
    void pick_andEnd_countInFlight() {
        Decider decider = decider(Stand.of(Method.LEAST_CONNECTIONS, 2));
        pick(decider, 0, 10);
        pick(decider, 1, 11);
        decider.ended(0, 0, 1, Outcome.ANSWERED, 200, 12);
        pick(decider, 2, 13);

        assertThat(decider.inFlight(0)).isEqualTo(1);
        assertThat(trace.lines())
                .containsExactly(
                        "10 picked 0 for 0/1, 1 in flight",
                        "11 picked 1 for 1/1, 1 in flight",
                        "12 ended 0 for 0/1 ANSWERED, 0 in flight",
                        "13 picked 0 for 2/1, 1 in flight");
    }

    @Test
    void ended_withNothingInFlight_isRefused() {
        Decider decider = decider(Stand.of(Method.ROUND_ROBIN, 1));

        assertThatThrownBy(() -> decider.ended(0, 7, 1, Outcome.ANSWERED, 200, 0))
                .isInstanceOf(IllegalStateException.class)
                .hasMessageContaining("request 7");
    }

    @Test
    void pick_nobodyPickable_saysSo() {
        Decider decider = decider(Stand.of(Method.STRIDE, 2));
        decider.withdraw(0, 1);
        decider.drain(1, 0, 2);

        assertThat(pick(decider, 5, 3)).isEqualTo(Decider.NOBODY);
        assertThat(trace.last()).isEqualTo("3 nobody in 0 for 5/1");
    }

    @Test
    void pick_retry_leavesOutWhoWasTriedAndTakesNoTurnOfFirstTries() {
        Decider decider = decider(Stand.of(Method.ROUND_ROBIN, 3));
        assertThat(pick(decider, 0, 1)).isZero();

        assertThat(decider.pick(again(0, 0, 0), 2)).isEqualTo(1);
        assertThat(pick(decider, 1, 3)).isEqualTo(1);
    }

    @Test
    void pick_inASecondPool_usesTheNumbersOfTheInstance() {
        Decider decider = decider(Stand.of(Method.ROUND_ROBIN, 2), Stand.of(Method.ROUND_ROBIN, 2));

        assertThat(decider.pick(ask(1, 0), 1)).isEqualTo(2);
        assertThat(decider.pick(again(1, 0, 2), 1)).isEqualTo(3);
    }

    @Test
    void pick_pinned_staysAtNoTurnUntilItsBackendMayNotBePicked() {
        Decider decider = decider(Stand.of(Method.ROUND_ROBIN, 3));
        assertThat(decider.pick(pinned(0, 2), 1)).isEqualTo(2);
        assertThat(decider.pick(pinned(1, 2), 2)).isEqualTo(2);
        assertThat(pick(decider, 2, 3)).isZero();
        decider.drain(2, 0, 4);

        assertThat(decider.pick(pinned(3, 2), 5)).isEqualTo(1);
    }

    @ParameterizedTest
    @CsvSource({
        // outcome, status, idempotent, headSent, replayable, granted
        "REFUSED,   0,   false, false, true,  true",
        "REFUSED,   0,   true,  false, false, false",
        "RESET,     0,   true,  true,  true,  true",
        "RESET,     0,   false, true,  true,  false",
        "RESET,     0,   false, false, true,  true",
        "ANSWERED,  503, true,  true,  true,  true",
        "ANSWERED,  503, false, true,  true,  false",
        "ANSWERED,  500, true,  true,  true,  false",
        "BROKEN,    200, true,  true,  true,  false",
        "MALFORMED, 0,   true,  true,  true,  false",
        "LATE,      0,   true,  true,  true,  false",
        "STALLED,   0,   true,  true,  true,  false",
        "CUT,       0,   true,  true,  true,  false",
        "ABANDONED, 0,   true,  true,  true,  false",
    })
    void retry_everyOutcome_followsTheRule(
            Outcome outcome, int status, boolean idempotent, boolean headSent, boolean replayable, boolean granted) {
        Decider decider = decider(Stand.of(Method.ROUND_ROBIN, 2).retry(Stand.RETRY));

        assertThat(decider.retry(0, 1, 1, outcome, status, idempotent, headSent, replayable, 5))
                .isEqualTo(granted);
        assertThat(trace.last()).isEqualTo("5 retry in 0 after 1/1: " + granted);
    }

    @Test
    void retry_ofARetryBeyondAtMost_isRefused() {
        Decider decider = decider(Stand.of(Method.ROUND_ROBIN, 2).retry(Stand.RETRY));

        assertThat(decider.retry(0, 1, 2, Outcome.REFUSED, 0, true, false, true, 5))
                .isFalse();
    }

    /** A bucket of two, full at the start; each first try adds a half, never beyond two. */
    @Test
    void retry_budget_emptiesByOneAndFillsByHalves() {
        Decider decider = decider(Stand.of(Method.ROUND_ROBIN, 2).retry(Stand.RETRY));

        assertThat(retries(decider, 3)).isEqualTo("yes yes no ");
        pick(decider, 0, 1);
        assertThat(retries(decider, 1)).isEqualTo("no ");
        pick(decider, 1, 2);
        assertThat(retries(decider, 2)).isEqualTo("yes no ");
        for (int request = 0; request < 50; request++) {
            pick(decider, request, 3);
        }
        assertThat(retries(decider, 3)).isEqualTo("yes yes no ");
    }

    @Test
    void retry_poolWithoutRetries_isRefusedAndNotTold() {
        Decider decider = decider(Stand.of(Method.ROUND_ROBIN, 2));

        assertThat(retries(decider, 1)).isEqualTo("no ");
        assertThat(trace.lines()).isEmpty();
    }

    @ParameterizedTest
    @ValueSource(longs = {0, -1, Long.MAX_VALUE - 2_000, Long.MIN_VALUE})
    void poll_probesOverAFailure_ordersAndTellsInOrder(long origin) {
        trace.origin = origin;
        ProbeSettings probe = new ProbeSettings("/afloat", 1_000, 400, 2, 1);
        Decider decider = new Decider(
                Stand.settings(Stand.of(Method.ROUND_ROBIN, 1).probe(probe).warmUp(500, 0.1)),
                (draw, a, b) -> 1L << 62,
                trace,
                trace,
                origin);
        run(decider, origin + 2_250);
        decider.probeAnswered(0, 2, true, origin + 2_260);
        run(decider, origin + 2_760);

        assertThat(trace.lines())
                .containsExactly(
                        "start probe 0 of 0",
                        "drop probe 0 of 0",
                        "650 probe 0 of 0 missed",
                        "start probe 1 of 0",
                        "drop probe 1 of 0",
                        "1650 probe 1 of 0 missed",
                        "1650 0 UP -> DOWN by MISSES",
                        "start probe 2 of 0",
                        "2260 0 DOWN -> WARMING by PASSES",
                        "2760 0 WARMING -> UP by RAMPED");
        assertThat(decider.nextDeadlineNanos()).isEqualTo(origin + 3_250);
    }

    @Test
    void drain_limitReached_ordersTheCutOnce() {
        Decider decider = decider(Stand.of(Method.ROUND_ROBIN, 2));
        pick(decider, 0, 1);
        decider.drain(0, 100, 10);
        assertThat(decider.saysClose(0)).isTrue();
        assertThat(decider.saysClose(1)).isFalse();
        run(decider, 1_000);

        assertThat(trace.lines())
                .containsExactly(
                        "1 picked 0 for 0/1, 1 in flight", "10 0 UP -> DRAINING by DRAIN", "cut everything on 0");
        assertThat(decider.hasDeadline()).isFalse();
    }

    @Test
    void drain_withoutALimitOfItsOwn_takesThePools() {
        Decider decider = decider(Stand.of(Method.ROUND_ROBIN, 2));
        decider.drain(0, 0, 10);

        assertThat(decider.nextDeadlineNanos()).isEqualTo(10 + 30_000);
    }

    @Test
    void reweigh_isTold_andCountsAtOnce() {
        Decider decider = decider(Stand.of(Method.STRIDE, 2));
        decider.reweigh(1, 3, 5);

        assertThat(trace.last()).isEqualTo("5 backend 1 weighs 3");
        assertThat(decider.weight(1)).isEqualTo(3);
        assertThat(decider.entitledShare(1, 5)).isEqualTo(0.75);
    }

    @ParameterizedTest
    @ValueSource(ints = {-1, BackendSettings.MOST_WEIGHT + 1})
    void reweigh_outOfRange_isRefusedAndChangesNothing(int weight) {
        Decider decider = decider(Stand.of(Method.STRIDE, 2));

        assertThatThrownBy(() -> decider.reweigh(1, weight, 5))
                .isInstanceOf(IllegalArgumentException.class)
                .hasMessageContaining(String.valueOf(weight));
        assertThatThrownBy(() -> decider.reweighHost(1, weight, 5))
                .isInstanceOf(IllegalArgumentException.class)
                .hasMessageContaining(String.valueOf(weight));
        assertThat(decider.weight(1)).isEqualTo(1);
        assertThat(decider.hostWeight(1)).isEqualTo(8);
    }

    @Test
    void entitledShare_whileWarming_followsTheRamp() {
        Decider decider = decider(Stand.of(Method.STRIDE, 2).warmUp(1_000, 0.1));
        decider.withdraw(0, 0);
        assertThat(decider.entitledShare(0, 0)).isZero();
        assertThat(decider.entitledShare(1, 0)).isEqualTo(1);
        decider.admit(0, 0);

        assertThat(decider.effectiveWeight(0, 500)).isEqualTo(0.5);
        assertThat(decider.entitledShare(0, 500)).isEqualTo(1.0 / 3);
        assertThat(decider.entitledShare(0, 1_000)).isEqualTo(0.5);
    }

    @Test
    void entitledShare_byHosts_splitsAHostsWeightAmongItsPickable() {
        Decider decider = decider(Stand.byHost(
                new BackendSettings("fulmar", 1, 0, false),
                new BackendSettings("gannet", 3, 0, false),
                new BackendSettings("petrel", 1, 1, false)));

        assertThat(decider.entitledShare(0, 1)).isEqualTo(0.125);
        assertThat(decider.entitledShare(1, 1)).isEqualTo(0.375);
        decider.withdraw(1, 2);
        assertThat(decider.entitledShare(0, 2)).isEqualTo(0.5);
        decider.reweighHost(1, 24, 3);
        assertThat(decider.entitledShare(0, 3)).isEqualTo(0.25);
    }

    @Test
    void effectiveWeight_ofOneThatMayNotBePicked_isWhatItWouldWeighIfItCameBackAlone() {
        Decider byHost = decider(Stand.byHost(
                new BackendSettings("fulmar", 1, 0, false),
                new BackendSettings("gannet", 3, 0, false),
                new BackendSettings("petrel", 1, 1, false)));
        double gannet = byHost.effectiveWeight(1, 1);
        double petrel = byHost.effectiveWeight(2, 1);
        byHost.drain(1, 0, 2);
        byHost.drain(2, 0, 2);
        assertThat(byHost.effectiveWeight(1, 3)).isEqualTo(gannet);
        assertThat(byHost.effectiveWeight(2, 3)).isEqualTo(petrel).isPositive();
        byHost.withdraw(0, 4);
        assertThat(byHost.effectiveWeight(1, 5)).isEqualTo(gannet * 4 / 3);
        assertThat(byHost.entitledShare(1, 5)).isZero();

        Decider alone = decider(Stand.of(Method.STRIDE, 2));
        alone.drain(0, 0, 1);
        assertThat(alone.effectiveWeight(0, 2)).isEqualTo(1);
    }

    /**
     * Over a ramp from floor m, the newcomer among n equals gets the mean of f / (n - 1 + f), that is
     * m^2/(n-1+m) + (1-m) - (n-1) ln(n/(n-1+m)): 0.1914 for n = 3, m = 0.1 (derived; checked by numerical integration).
     */
    @ParameterizedTest
    @EnumSource(
            value = Method.class,
            names = {"ROUND_ROBIN", "WEIGHTED_ROUND_ROBIN", "STRIDE"})
    void pick_overARamp_givesTheNewcomerItsPart(Method method) {
        int picks = 100_000;
        Decider decider = decider(Stand.of(method, 3).warmUp(picks, 0.1));
        decider.withdraw(0, 0);
        decider.admit(0, 0);
        int newcomer = 0;
        for (int request = 0; request < picks; request++) {
            int backend = pick(decider, request, request);
            decider.ended(backend, request, 1, Outcome.ANSWERED, 200, request);
            newcomer += backend == 0 ? 1 : 0;
        }

        assertThat((double) newcomer / picks).isBetween(0.1909, 0.1919);
    }

    @Test
    void standing_ofOneThatStartsDown_isDownUntilProbesPass() {
        Decider decider = decider(Stand.of(Method.ROUND_ROBIN, 1)
                .probe(new ProbeSettings(null, 100, 50, 3, 1))
                .startingDown());
        assertThat(decider.standing(0)).isEqualTo(Standing.DOWN);
        decider.poll(0);
        decider.probeAnswered(0, 0, true, 10);

        assertThat(decider.standing(0)).isEqualTo(Standing.UP);
        assertThat(pick(decider, 0, 11)).isZero();
    }

    /** Random events from an odd origin: nothing in flight is lost, nobody is picked who may not be. */
    @ParameterizedTest
    @EnumSource(Method.class)
    void anyCall_inAnyOrder_keepsTheInvariants(Method method) {
        SplittableRandom random = new SplittableRandom(17);
        long now = Long.MAX_VALUE - 40_000;
        ProbeSettings probe = new ProbeSettings(null, 300, 100, 2, 2);
        Decider decider = new Decider(
                Stand.settings(Stand.of(method, 5).probe(probe).warmUp(900, 0.1)),
                (draw, a, b) -> Math.round(a / 5.0 * (1L << 53)) << 11,
                trace,
                trace,
                now);
        int[] inFlight = new int[5];
        for (int step = 0; step < 20_000; step++) {
            now += random.nextInt(8);
            int backend = random.nextInt(5);
            switch (random.nextInt(9)) {
                case 0 -> decider.drain(backend, 50, now);
                case 1 -> decider.withdraw(backend, now);
                case 2, 3 -> decider.admit(backend, now);
                case 4 -> decider.reweigh(backend, random.nextInt(4), now);
                case 5 -> decider.probeAnswered(backend, trace.lastProbe[backend], random.nextInt(3) > 0, now);
                case 6 -> {
                    if (inFlight[backend] > 0) {
                        decider.ended(backend, step, 1, Outcome.ANSWERED, 200, now);
                        inFlight[backend]--;
                    }
                }
                default -> {
                    int picked = pick(decider, step, now);
                    if (picked != Decider.NOBODY) {
                        assertThat(decider.pickable(picked)).isTrue();
                        inFlight[picked]++;
                    }
                }
            }
            decider.poll(now);
            assertThat(decider.nextDeadlineNanos() - now).isPositive();
            assertThat(decider.inFlight(backend)).isEqualTo(inFlight[backend]);
        }
    }

    private static String retries(Decider decider, int times) {
        StringBuilder answers = new StringBuilder();
        for (int i = 0; i < times; i++) {
            answers.append(decider.retry(0, 1, 1, Outcome.REFUSED, 0, true, false, true, 0) ? "yes " : "no ");
        }
        return answers.toString();
    }

    private static Ask ask(int pool, long request) {
        Ask ask = new Ask();
        ask.pool = pool;
        ask.request = request;
        return ask;
    }

    private static Ask again(int pool, long request, int tried) {
        Ask ask = ask(pool, request);
        ask.again(tried);
        return ask;
    }

    private static Ask pinned(long request, int backend) {
        Ask ask = ask(0, request);
        ask.pinned = backend;
        return ask;
    }

    private static int pick(Decider decider, long request, long now) {
        return decider.pick(ask(0, request), now);
    }

    private static void run(Decider decider, long until) {
        while (decider.hasDeadline() && decider.nextDeadlineNanos() - until <= 0) {
            decider.poll(decider.nextDeadlineNanos());
        }
    }

    private Decider decider(Stand... pools) {
        return new Decider(Stand.settings(pools), (draw, a, b) -> 0, trace, trace, 0);
    }
}
