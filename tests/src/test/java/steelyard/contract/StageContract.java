package steelyard.contract;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.tuple;

import java.util.Collections;
import java.util.List;
import java.util.concurrent.ConcurrentLinkedQueue;
import java.util.stream.IntStream;
import java.util.stream.LongStream;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;
import steelyard.backends.behave.Chance;
import steelyard.balancer.core.decide.Outcome;
import steelyard.balancer.core.standing.Standing;
import steelyard.balancer.core.standing.Transition;
import steelyard.drills.model.Cause;
import steelyard.drills.model.Cue;
import steelyard.drills.model.Drill;
import steelyard.drills.read.DrillReader;
import steelyard.drills.read.Parsed;
import steelyard.harness.conduct.Conductor;
import steelyard.harness.judge.Judge;
import steelyard.harness.record.Cast;
import steelyard.harness.record.PlayListener;
import steelyard.harness.record.SelfCheck;
import steelyard.harness.record.Tee;
import steelyard.harness.stage.CannotPlay;
import steelyard.harness.stage.Stage;

/**
 * What every stage owes: small drills, and what must be decided in them, worked out by hand. Where real time has a say,
 * the bounds leave room for a machine that stands still for a second.
 */
@Timeout(60)
public abstract class StageContract {
    private static final long SEED = 7;
    private static final long MILLI = 1_000_000;
    private static final long SLACK = 1_500 * MILLI;

    /** The stage under test. */
    protected abstract Stage stage(Drill drill, long seed);

    @Test
    void weights_3_6_12_areServedInTheInterleavedOrder() throws CannotPlay {
        Heard heard = play(drill("""
                method: weighted-round-robin
                serves: {workers: 64, queue: 64, time: {fixed: 1ms}}
                backends: {fulmar: {weight: 3}, gannet: {weight: 6}, petrel: {weight: 12}}
                """, "rate: 105/s", "2s", ""));
        // Round r of a cycle serves, in list order, each backend with a weight of r or more.
        List<Integer> cycle = IntStream.rangeClosed(1, 12)
                .boxed()
                .flatMap(round -> IntStream.of(0, 1, 2)
                        .filter(each -> new int[] {3, 6, 12}[each] >= round)
                        .boxed())
                .toList();
        assertThat(heard.backendsPicked())
                .isEqualTo(Collections.nCopies(10, cycle).stream()
                        .flatMap(List::stream)
                        .toList());
        assertThat(heard.count(null)).isEqualTo(210);
        assertThat(heard.received).containsEntry(0, 30).containsEntry(1, 60).containsEntry(2, 120);
    }

    @Test
    void account_isWhole_orderedAndSampledAtEverySlice() throws CannotPlay {
        Heard heard = play(drill(roundRobin("fixed: 3ms"), "rate: 100/s", "1s", ""));
        assertThat(heard.monotone).isTrue();
        assertThat(heard.endings).isEqualTo(1);
        assertThat(heard.complete).isTrue();
        assertThat(heard.dues)
                .containsExactlyElementsOf(LongStream.range(0, 100)
                        .mapToObj(i -> 5 * MILLI + i * 10 * MILLI)
                        .toList());
        assertThat(heard.ends)
                .extracting(Heard.End::request)
                .doesNotHaveDuplicates()
                .hasSize(100);
        assertThat(heard.sampledNanos)
                .containsExactlyElementsOf(LongStream.rangeClosed(1, 10)
                        .mapToObj(i -> i * 100 * MILLI)
                        .toList());
    }

    @Test
    void killedBackend_withRetries_failsNobody() throws CannotPlay {
        Heard heard = play(drill(
                roundRobin("fixed: 3ms") + "retry: {at-most: 1, budget: 100%, bucket: 1000}\n",
                "rate: 100/s",
                "2s",
                "  - {at: 500ms, kill: fulmar}\n  - {at: 1500ms, revive: fulmar}"));
        assertThat(heard.ends).hasSize(200).allMatch(each -> each.cause() == null);
        long lost = heard.overs.stream()
                .filter(each -> each.outcome() == Outcome.REFUSED || each.outcome() == Outcome.RESET)
                .count();
        // Of the 100 requests while it was dead every other one met it; stalls blur both ends.
        assertThat(lost).isBetween(5L, 70L);
        assertThat(heard.picks.stream().filter(each -> each.attempt() == 2)).hasSize((int) lost);
        assertThat(heard.picks.stream().filter(each -> each.attempt() == 2)).allMatch(each -> each.backend() == 1);
    }

    @Test
    void killedBackend_withoutRetries_isRefused() throws CannotPlay {
        Heard heard = play(drill(roundRobin("fixed: 3ms"), "rate: 100/s", "1s", "  - {at: 0s, kill: fulmar}"));
        assertThat(heard.count(null) + heard.count(Cause.REFUSED) + heard.count(Cause.RESET))
                .isEqualTo(100);
        // Those that were sent before the backend had died are reset.
        assertThat(heard.count(Cause.REFUSED)).isBetween(20L, 50L);
    }

    @Test
    void hang_isFoundByProbes_inTheTimeThatTheirSettingsGive() throws CannotPlay {
        Heard heard = play(drill(
                roundRobin("fixed: 3ms")
                        + "probe: {path: /afloat, every: 300ms, within: 250ms, misses: 3, passes: 2}\n",
                "rate: 20/s, give-up: 500ms",
                "4s",
                "  - {at: 1s, hang: gannet}"));
        Transition found = heard.transitions.stream()
                .filter(each -> each.backend() == 1 && each.to() == Standing.DOWN)
                .findFirst()
                .orElseThrow();
        assertThat(found.cause()).isEqualTo(Transition.Cause.MISSES);
        long after = found.atNanos() - heard.cues.get(0).atNanos();
        // Three misses: at least two periods and the time limit, less the time a probe was under way already; at most
        // three.
        assertThat(after).isBetween((2 * 300 + 250 - 150) * MILLI, (3 * 300 + 250) * MILLI + SLACK);
        assertThat(heard.count(Cause.GAVE_UP)).isGreaterThan(3);
        assertThat(heard.dueBetween(1_000 + 1_150 + SLACK / MILLI, 4_000)).allMatch(each -> each.cause() == null);
    }

    @Test
    void drain_stopsNewWorkAndCutsWhatIsLeftAtItsLimit() throws CannotPlay {
        Heard heard =
                play(drill(roundRobin("fixed: 3s"), "rate: 10/s", "2s", "  - {at: 1s, drain: gannet, limit: 300ms}"));
        long drained = heard.cues.get(0).atNanos();
        assertThat(heard.transitions)
                .extracting(Transition::backend, Transition::to, Transition::cause)
                .contains(tuple(1, Standing.DRAINING, Transition.Cause.DRAIN));
        assertThat(heard.picks.stream().filter(each -> each.backend() == 1))
                .allMatch(each -> each.atNanos() <= drained + MILLI);
        // Ten requests came before the drain, every other one to gannet, and none of them is done by the limit.
        List<Heard.Over> cut = heard.overs.stream()
                .filter(each -> each.outcome() == Outcome.CUT)
                .toList();
        assertThat(cut).hasSize((int)
                heard.picks.stream().filter(each -> each.backend() == 1).count());
        // After a stall some of the ten are sent as late as the drain, and go elsewhere.
        assertThat(cut.size()).isBetween(1, 5);
        assertThat(cut)
                .allMatch(each ->
                        each.atNanos() - drained >= 299 * MILLI && each.atNanos() - drained < 300 * MILLI + SLACK);
        assertThat(heard.count(Cause.CUT)).isEqualTo(cut.size());
        assertThat(heard.count(null)).isEqualTo(20 - cut.size());
    }

    @Test
    void withdrawnPool_hasNobodyToPick_untilAdmitted() throws CannotPlay {
        Heard heard = play(drill(
                roundRobin("fixed: 1ms"),
                "rate: 100/s",
                "3s",
                "  - {at: 500ms, withdraw: {pool: seats}}\n  - {at: 2500ms, admit: {pool: seats}}"));
        assertThat(heard.dueBetween(500, 1_000))
                .hasSize(50)
                .allMatch(each -> each.cause() == Cause.NO_BACKEND && each.status() == 503);
        assertThat(heard.count(null) + heard.count(Cause.NO_BACKEND)).isEqualTo(300);
        assertThat(heard.count(Cause.NO_BACKEND)).isBetween(150L, 250L);
    }

    @Test
    void failingBackend_isABackendError() throws CannotPlay {
        Heard heard = play(drill(
                roundRobin("fixed: 1ms"), "rate: 100/s", "1s", "  - {at: 0s, fail: fulmar, status: 500, for: 2s}"));
        // Of a hundred every other one, less those that were sent before the fault was there.
        assertThat(heard.count(Cause.BACKEND_ERROR)).isBetween(25L, 50L);
        assertThat(heard.count(null)).isEqualTo(100 - heard.count(Cause.BACKEND_ERROR));
    }

    @Test
    void slow_setTwice_isTheLaterOneAlone_alsoAfterTheEndOfTheFirst() throws CannotPlay {
        Heard heard = play(drill(
                roundRobin("fixed: 20ms"),
                "rate: 40/s",
                "2s",
                "  - {at: 300ms, slow: fulmar, factor: 30, for: 1s}\n  - {at: 600ms, slow: fulmar, factor: 10}"));
        assertThat(heard.cues)
                .extracting(Heard.Applied::by)
                .containsExactly(PlayListener.By.DRILL, PlayListener.By.DRILL);
        List<Long> onFulmar = heard.picks.stream()
                .filter(each -> each.backend() == 0)
                .map(Heard.Pick::request)
                .toList();
        // 20 ms times 10: neither 20 ms, as after an end, nor 6 s, as of both.
        assertThat(heard.dueBetween(1_400, 2_000).stream()
                        .filter(each -> onFulmar.contains(each.request()))
                        .mapToLong(each -> each.atNanos() - each.dueNanos())
                        .min()
                        .orElseThrow())
                .isBetween(200 * MILLI, 200 * MILLI + SLACK);
    }

    @Test
    void surge_raisesTheRateWhileItLasts() throws CannotPlay {
        Heard heard = play(drill(
                roundRobin("fixed: 1ms"),
                "rate: 50/s",
                "2s",
                "  - {at: 500ms, surge: {pool: seats}, factor: 4, for: 1s}"));
        assertThat(heard.dueBetween(0, 500)).hasSize(25);
        assertThat(heard.dueBetween(500, 1_500)).hasSize(200);
        assertThat(heard.dueBetween(1_500, 2_000)).hasSize(25);
        assertThat(heard.cues)
                .extracting(Heard.Applied::by)
                .containsExactly(PlayListener.By.DRILL, PlayListener.By.END);
    }

    @Test
    void countConnections_keepsAClientOnItsBackend() throws CannotPlay {
        Heard heard =
                play(drill(roundRobin("fixed: 1ms") + "count: connections\n", "clients: 1, rate: 10/s", "2s", ""));
        List<Integer> picked = heard.backendsPicked();
        long moves = IntStream.range(1, picked.size())
                .filter(i -> !picked.get(i).equals(picked.get(i - 1)))
                .count();
        // By requests it would move 19 times; a client that meets a stall needs as many connections as requests then.
        assertThat(picked).hasSize(20);
        assertThat(moves).isLessThanOrEqualTo(12);
    }

    @Test
    void cookie_keepsEachClientOnItsBackend() throws CannotPlay {
        Heard heard = play(drill(roundRobin("fixed: 1ms") + "affinity: cookie\n", "clients: 1, rate: 20/s", "2s", ""));
        assertThat(heard.count(null)).isEqualTo(40);
        // Requests that a stall lets go out together carry no cookie yet; none may be left without one after that.
        assertThat(heard.backendsPicked().subList(20, 40))
                .containsOnly(heard.backendsPicked().get(39));
    }

    @Test
    void fullBackends_letRequestsWaitInOrder() throws CannotPlay {
        Heard heard = play(drill(
                roundRobin("fixed: 150ms") + "in-flight: {most: 1, waiting: 100, wait: 20s}\n",
                "rate: 20/s",
                "1s",
                ""));
        assertThat(heard.count(null)).isEqualTo(20);
        // Two at a time, 150 ms each, is 13.3 a second: the rest of the 20 wait.
        assertThat(heard.waited).hasSizeBetween(8, 18);
        // First come, first served; in what order requests come that a stall sends out together is the wire's affair.
        assertThat(heard.picks.stream().map(Heard.Pick::request).filter(heard.waited::contains))
                .containsExactlyElementsOf(heard.waited);
    }

    @Test
    void admit_isToldBeforeThePlacesThatItGives() throws CannotPlay {
        Heard heard = play(drill(
                roundRobin("fixed: 600ms") + "in-flight: {most: 2, waiting: 5, wait: 20s}\n",
                "rate: 20/s",
                "3s",
                "  - {at: 300ms, drain: fulmar, limit: 20s}\n  - {at: 2500ms, admit: fulmar}"));
        // Both are full from 175 ms on, and five wait at every later instant: two of them go to fulmar at the admit.
        int drained = heard.cues.get(0).picks();
        int admitted = heard.cues.get(1).picks();
        assertThat(heard.backendsPicked().subList(drained, admitted))
                .isNotEmpty()
                .containsOnly(1);
        assertThat(heard.backendsPicked().subList(admitted, heard.picks.size())).contains(0);
    }

    @Test
    void waitThatIsTooLong_isNobodysTurn() throws CannotPlay {
        Heard heard = play(drill(
                roundRobin("fixed: 4s") + "in-flight: {most: 1, waiting: 100, wait: 300ms}\n", "rate: 20/s", "1s", ""));
        assertThat(heard.count(null)).isEqualTo(2);
        assertThat(heard.count(Cause.NO_BACKEND)).isEqualTo(18);
        assertThat(heard.ends.stream().filter(each -> each.cause() != null))
                .allMatch(each -> each.status() == 503 && each.atNanos() - each.dueNanos() >= 300 * MILLI);
    }

    @Test
    void connectionPassedThrough_staysWhereItWasPicked() throws CannotPlay {
        Heard heard = play(drill(
                roundRobin("fixed: 1ms") + "count: connections\nfront: {kind: tcp}\n",
                "clients: 2, rate: 20/s",
                "2s",
                ""));
        assertThat(heard.count(null)).isEqualTo(40);
        // A client that meets a stall needs as many connections as requests then; by requests it would be 40 picks.
        assertThat(heard.picks).hasSizeBetween(2, 30).allMatch(each -> each.request() < 0 && each.attempt() == 1);
        assertThat(heard.overs)
                .hasSameSizeAs(heard.picks)
                .allMatch(each -> each.outcome() == Outcome.ANSWERED && each.request() < 0);
        assertThat(heard.received.values().stream().mapToInt(each -> each).sum())
                .isEqualTo(40);
    }

    @Test
    void tunnel_staysInFlightUntilItsClientClosesIt() throws CannotPlay {
        Heard heard = play(drill(
                roundRobin("fixed: 1ms"),
                "rate: 10/s, requests: [{get: /bridge, upgrade: websocket, open: 500ms}]",
                "1s",
                ""));
        assertThat(heard.ends).hasSize(10).allMatch(each -> each.cause() == null && each.status() == 101);
        assertThat(heard.ends).allMatch(each -> each.atNanos() - each.dueNanos() >= 500 * MILLI);
        assertThat(heard.overs).hasSize(10).allMatch(each -> each.outcome() == Outcome.ANSWERED);
        for (Heard.Over over : heard.overs) {
            long picked = heard.picks.stream()
                    .filter(each -> each.request() == over.request())
                    .findFirst()
                    .orElseThrow()
                    .atNanos();
            assertThat(over.atNanos() - picked).isBetween(500 * MILLI, 500 * MILLI + SLACK);
        }
    }

    @Test
    void tunnel_isCutAtTheLimitOfADrain() throws CannotPlay {
        Heard heard = play(drill(
                roundRobin("fixed: 1ms"),
                "rate: 10/s, requests: [{get: /bridge, upgrade: websocket, open: 8s}]",
                "1s",
                "  - {at: 800ms, drain: [fulmar, gannet], limit: 2s}"));
        // Nobody is left to be picked once both drain.
        assertThat(heard.count(Cause.CUT) + heard.count(Cause.NO_BACKEND)).isEqualTo(10);
        assertThat(heard.count(Cause.CUT)).isBetween(1L, 8L);
        assertThat(heard.overs).allMatch(each -> each.outcome() == Outcome.CUT);
    }

    @Test
    void tls_onBothSides_changesNothingElse() throws CannotPlay {
        Heard heard = play(
                drill(roundRobin("fixed: 1ms") + "front: {tls: true}\nbackend-tls: true\n", "rate: 20/s", "2s", ""));
        assertThat(heard.count(null)).isEqualTo(40);
        assertThat(heard.received).containsEntry(0, 20).containsEntry(1, 20);
    }

    @Test
    void failures_benchABackend_andItsTimeFreesIt() throws CannotPlay {
        Heard heard = play(drill(
                roundRobin("fixed: 1ms") + "bench: {after: 3, time: 1s}\n",
                "rate: 40/s",
                "3s",
                "  - {at: 0s, fail: fulmar, status: 500, for: 500ms}"));
        assertThat(heard.transitions)
                .extracting(Transition::backend, Transition::to)
                .startsWith(tuple(0, Standing.BENCHED), tuple(0, Standing.UP))
                .hasSize(2);
        long benched =
                heard.transitions.get(1).atNanos() - heard.transitions.get(0).atNanos();
        assertThat(benched).isBetween(1_000 * MILLI, 1_000 * MILLI + SLACK);
        // What is under way when it is benched fails too; after a stall that may be all of half a second and more.
        assertThat(heard.count(Cause.BACKEND_ERROR)).isBetween(3L, 30L);
    }

    @Test
    void load_thatACueSets_lowersTheWeightAtTheNextReading() throws CannotPlay {
        Heard heard = play(drill("""
                method: stride
                weights: load
                load: {every: 200ms, within: 2s, stale-after: 20s, gauges: {memory: 100%}}
                serves: {workers: 64, time: {fixed: 1ms}, gauges: {memory: 20%}}
                backends: {fulmar: {}, gannet: {}}
                """, "rate: 100/s", "4s", "  - {at: 1s, load: fulmar, gauge: memory, to: 70%}"));
        assertThat(heard.readings).allMatch(Heard.Read::fresh);
        assertThat(heard.readings.stream().filter(each -> each.backend() == 0))
                .extracting(Heard.Read::headroomMilli)
                .startsWith(800)
                .endsWith(300)
                .containsOnly(800, 300);
        assertThat(heard.readings.stream().filter(each -> each.backend() == 1))
                .extracting(Heard.Read::headroomMilli)
                .containsOnly(800);
        // Of the last hundred requests, due from the third second on, 100 x 3 / 11 = 27.3; a stride is off by one.
        assertThat(heard.backendsPicked().subList(300, 400).stream().filter(each -> each == 0))
                .hasSizeBetween(25, 30);
    }

    @Test
    void fill_lowersTheWeightAtTheNextReading_untilItIsHealed() throws CannotPlay {
        Heard heard = play(drill("""
                method: stride
                weights: load
                load: {every: 200ms, within: 2s, stale-after: 20s, gauges: {disk: 100%}}
                serves: {workers: 64, time: {fixed: 1ms}, gauges: {disk: 20%}}
                backends: {fulmar: {}, gannet: {}}
                """, "rate: 50/s", "8s", "  - {at: 1s, fill: fulmar, to: 95%, for: 4s}"));
        // 1 - 95 % would be 5 %; no headroom falls below a tenth.
        assertThat(heard.readings.stream().filter(each -> each.backend() == 0))
                .extracting(Heard.Read::headroomMilli)
                .startsWith(800)
                .contains(100)
                .containsOnly(800, 100)
                .endsWith(800);
        assertThat(heard.readings.stream().filter(each -> each.backend() == 1))
                .extracting(Heard.Read::headroomMilli)
                .containsOnly(800);
        // Of requests 150 to 249, due from the third second to the fifth, 100 x 1 / 9 = 11.1; a stride is off by one.
        assertThat(heard.backendsPicked().subList(150, 250).stream().filter(each -> each == 0))
                .hasSizeBetween(9, 13);
        // Both the same again: every other one of the last fifty.
        assertThat(heard.backendsPicked().subList(350, 400).stream().filter(each -> each == 0))
                .hasSizeBetween(23, 27);
    }

    @Test
    void loadThatCannotBeRead_goesStaleOnce_andTheSetWeightStandsAgain() throws CannotPlay {
        Heard heard = play(drill("""
                method: stride
                weights: load
                load: {every: 300ms, within: 2s, stale-after: 3s, gauges: {memory: 100%}}
                serves: {workers: 64, time: {fixed: 1ms}, gauges: {memory: 80%}}
                backends: {fulmar: {}, gannet: {}}
                """, "rate: 20/s, give-up: 500ms", "9s", "  - {at: 2s, hang: fulmar}"));
        long hung = heard.cues.get(0).atNanos();
        List<Heard.Read> read =
                heard.readings.stream().filter(each -> each.backend() == 0).toList();
        assertThat(read.stream().filter(Heard.Read::fresh))
                .isNotEmpty()
                .allMatch(each -> each.headroomMilli() == 200 && each.atNanos() <= hung + MILLI);
        assertThat(read.stream().filter(each -> !each.fresh())).singleElement().satisfies(stale -> {
            assertThat(stale.headroomMilli()).isEqualTo(1_000);
            // The last that was read came in a period and a time limit before the hang at the earliest.
            assertThat(stale.atNanos() - hung).isBetween((3_000 - 300 - 2_000) * MILLI, 3_000 * MILLI + SLACK);
        });
        assertThat(heard.readings.stream().filter(each -> each.backend() == 1))
                .allMatch(each -> each.fresh() && each.headroomMilli() == 200);
        // From then on 1 to 0.2: of the 40 requests of the last two seconds 40 x 5 / 6 = 33.3.
        assertThat(heard.backendsPicked().subList(140, 180).stream().filter(each -> each == 0))
                .hasSizeBetween(31, 36);
    }

    @Test
    void retunedMethod_picksFromThenOn() throws CannotPlay {
        Heard heard = play(drill(
                roundRobin("fixed: 1ms").replace("gannet: {}", "gannet: {weight: 3}"),
                "rate: 40/s",
                "3s",
                "  - {at: 1s, retune: {pool: seats}, method: stride}"));
        long retuned = heard.cues.get(0).atNanos();
        // Half of the picks are the first backend's before, a quarter afterwards; a few may be told on the other side.
        List<Heard.Pick> before =
                heard.picks.stream().filter(each -> each.atNanos() < retuned).toList();
        List<Heard.Pick> after =
                heard.picks.stream().filter(each -> each.atNanos() >= retuned).toList();
        assertThat(before.stream().filter(each -> each.backend() == 0).count())
                .isBetween(before.size() / 2L - 4, before.size() / 2L + 4);
        assertThat(after.stream().filter(each -> each.backend() == 0).count())
                .isBetween(after.size() / 4L - 4, after.size() / 4L + 4);
        assertThat(after).hasSizeGreaterThan(60);
    }

    @Test
    void retunedProbes_findABackendSooner() throws CannotPlay {
        Heard heard = play(drill(
                roundRobin("fixed: 3ms") + "probe: {path: /afloat, every: 2s, within: 300ms, misses: 3, passes: 2}\n",
                "rate: 20/s, give-up: 500ms",
                "7s",
                "  - {at: 500ms, retune: {pool: seats}, probe: {every: 400ms}}\n  - {at: 3s, hang: gannet}"));
        long hung = heard.cues.get(1).atNanos();
        Transition found = heard.transitions.stream()
                .filter(each -> each.backend() == 1 && each.to() == Standing.DOWN && each.atNanos() > hung)
                .findFirst()
                .orElseThrow();
        // Three misses at the old period take two periods and more: 4 s.
        assertThat(found.atNanos() - hung).isLessThanOrEqualTo((3 * 400 + 300) * MILLI + SLACK);
    }

    @Test
    void retunedDrain_cutsAtItsNewLimit() throws CannotPlay {
        Heard heard = play(drill(
                roundRobin("fixed: 3s") + "drain: {limit: 30s}\n",
                "rate: 10/s",
                "2s",
                "  - {at: 500ms, retune: {pool: seats}, drain: {limit: 300ms}}\n  - {at: 1s, drain: gannet}"));
        long drained = heard.cues.get(1).atNanos();
        assertThat(heard.overs.stream().filter(each -> each.outcome() == Outcome.CUT))
                .isNotEmpty()
                .allMatch(each -> each.backend() == 1)
                .allMatch(each -> each.atNanos() >= drained + 290 * MILLI)
                .allMatch(each -> each.atNanos() <= drained + 300 * MILLI + SLACK);
    }

    @Test
    void drainThatKeepsClients_servesThoseHeldByCookieUntilItsLimit() throws CannotPlay {
        Heard heard = play(drill(
                roundRobin("fixed: 1ms") + "affinity: cookie\ndrain: {limit: 2s, keep-clients: true}\n",
                "clients: 8, rate: 40/s",
                "6s",
                "  - {at: 1s, drain: gannet}"));
        long drained = heard.cues.get(0).atNanos();
        List<Heard.Pick> kept = heard.picks.stream()
                .filter(each -> each.backend() == 1 && each.atNanos() > drained)
                .toList();
        assertThat(kept).hasSizeGreaterThan(5).allMatch(each -> each.atNanos() <= drained + 2_000 * MILLI + SLACK);
        assertThat(heard.ends).allMatch(each -> each.cause() == null);
    }

    @Test
    void cueByHand_takesEffectLikeThoseOfTheDrill() throws CannotPlay {
        Drill drill = drill(roundRobin("fixed: 1ms"), "rate: 50/s", "3s", "");
        Conductor conductor = new Conductor(drill, new Chance(SEED), new ConcurrentLinkedQueue<>());
        Cue withdraw = value(DrillReader.readCue("{withdraw: gannet}", drill));
        Heard heard = new Heard(500 * MILLI, () -> conductor.byHand(withdraw));
        play(drill, conductor, heard);
        assertThat(heard.cues).singleElement().satisfies(cue -> {
            assertThat(cue.by()).isEqualTo(PlayListener.By.HAND);
            assertThat(cue.atNanos()).isBetween(500 * MILLI, 1_000 * MILLI + SLACK);
        });
        assertThat(heard.picks.stream().filter(each -> each.backend() == 1))
                .isNotEmpty()
                .allMatch(each -> each.atNanos() <= heard.cues.get(0).atNanos() + MILLI);
        assertThat(heard.count(null)).isEqualTo(150);
    }

    @Test
    void interrupt_endsThePlaySoonAndSaysSo() throws CannotPlay {
        Drill drill = drill(roundRobin("fixed: 1ms"), "rate: 50/s", "50s", "");
        Stage[] holder = new Stage[1];
        Heard heard = new Heard(500 * MILLI, () -> holder[0].interrupt());
        try (Stage stage = stage(drill, SEED)) {
            holder[0] = stage;
            stage.open(heard);
            stage.play(new Conductor(drill, new Chance(SEED), new ConcurrentLinkedQueue<>()));
        }
        assertThat(heard.complete).isFalse();
        assertThat(heard.endings).isEqualTo(1);
        assertThat(heard.dues.size()).isBetween(20, 500);
        assertThat(heard.ends).hasSizeLessThanOrEqualTo(heard.dues.size());
        assertThat(heard.interruptedNanos).isBetween(500 * MILLI, 10_000 * MILLI);
        assertThat(heard.dues).allMatch(due -> due <= heard.interruptedNanos);
    }

    @Test
    void interrupt_whileRequestsHang_tellsNoEndOfThem() throws CannotPlay {
        Drill drill = drill(
                roundRobin("fixed: 1ms"), "rate: 50/s", "50s", "  - {at: 1s, hang: [fulmar, gannet], as: both hang}");
        Stage[] holder = new Stage[1];
        Heard heard = new Heard(1_500 * MILLI, () -> holder[0].interrupt());
        try (Stage stage = stage(drill, SEED)) {
            holder[0] = stage;
            stage.open(heard);
            stage.play(new Conductor(drill, new Chance(SEED), new ConcurrentLinkedQueue<>()));
        }
        assertThat(heard.complete).isFalse();
        assertThat(heard.ends).isNotEmpty().allMatch(each -> each.cause() == null);
        assertThat(heard.dues.size() - heard.ends.size()).isGreaterThan(5);
    }

    /** A pool of two in turn; further lines of the pool may follow. */
    private static String roundRobin(String time) {
        return """
                method: round-robin
                serves: {workers: 64, queue: 64, time: {%s}}
                timeouts: {connect: 5s, first-byte: 10s, idle: 20s}
                backends: {fulmar: {}, gannet: {}}
                """.formatted(time);
    }

    private static Drill drill(String pool, String traffic, String lasts, String cues) {
        String giveUp = traffic.contains("give-up") ? "" : ", give-up: 20s";
        String text =
                "drill: Contract\nabout: Even arrivals, so that every number is known.\nstage:\n  pools:\n    seats:\n"
                        + pool.strip().indent(6)
                        + "traffic:\n  - {to: seats, arrivals: even, " + traffic + giveUp + "}\nlasts: " + lasts + "\n"
                        + (cues.isEmpty() ? "" : "cues:\n" + cues + "\n");
        return value(DrillReader.read("contract", text));
    }

    private static <T> T value(Parsed<T> parsed) {
        return parsed.value().orElseThrow(() -> new AssertionError(parsed.problems()));
    }

    private Heard play(Drill drill) throws CannotPlay {
        Heard heard = new Heard();
        play(drill, new Conductor(drill, new Chance(SEED), new ConcurrentLinkedQueue<>()), heard);
        return heard;
    }

    /** Plays to the end; the account must add up, whatever the drill is about. Lateness is the machine's own affair. */
    private void play(Drill drill, Conductor conductor, Heard heard) throws CannotPlay {
        Judge judge = new Judge(drill, new Cast(drill));
        try (Stage stage = stage(drill, SEED)) {
            stage.open(new Tee(judge, heard));
            stage.play(conductor);
        }
        assertThat(judge.verdict().checks())
                .filteredOn(each -> !each.check().startsWith("lateness"))
                .allMatch(SelfCheck::ok);
    }
}
