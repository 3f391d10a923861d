package steelyard.contract;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.ArrayDeque;
import java.util.Arrays;
import java.util.Comparator;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import java.util.TreeMap;
import java.util.stream.Collectors;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;
import org.junit.jupiter.api.extension.ExtendWith;
import steelyard.accounting.Accounting;
import steelyard.backends.behave.Chance;
import steelyard.balancer.core.standing.Transition;
import steelyard.drills.model.Cause;
import steelyard.drills.model.Drill;
import steelyard.drills.read.DrillReader;
import steelyard.harness.conduct.Conductor;
import steelyard.harness.stage.CannotPlay;
import steelyard.harness.stage.Stage;
import steelyard.harness.stage.live.LiveStage;
import steelyard.harness.stage.virtual.Transport;
import steelyard.harness.stage.virtual.VirtualStage;

/**
 * The same small drills, live and in virtual time: what was decided is held side by side. Where the wire has no say it is
 * equal; where it has, both lie in bounds that leave room for a machine that stands still for a second.
 */
@Timeout(60)
@ExtendWith(Accounting.class)
class StagesAgreeTest {
    private static final long SEED = 9;
    private static final long MILLI = 1_000_000;
    /** Due half a second after the fault. */
    private static final long FAULT_IS_THERE = 100;

    private record Both(Heard live, Heard virtual) {}

    @Test
    void orders_byWeightsAndPoissonArrivals_areEqualPickByPick() throws CannotPlay {
        for (String method : List.of("round-robin", "weighted-round-robin", "stride")) {
            Both both = play(
                    "{method: %s, serves: {workers: 64, time: 1ms}, backends: {fulmar: {weight: 2}, gannet: {weight: 5},"
                                    .formatted(method)
                            + " petrel: {weight: 3}}}",
                    "arrivals: poisson, rate: 200/s",
                    "1s",
                    "");
            assertThat(both.live.dues).isEqualTo(both.virtual.dues).hasSizeGreaterThan(100);
            // Two requests that are due together may pass each other on the wire; the order of the picks is the
            // method's.
            assertThat(both.live.backendsPicked()).isEqualTo(both.virtual.backendsPicked());
        }
    }

    // Lots are drawn by request, and keys come of the same text, whatever the wire does to the order.
    @Test
    void picks_byLotAndByKey_areEqualRequestByRequest() throws CannotPlay {
        for (String method : List.of(
                "random",
                "weighted-random",
                "hash, hash: {by: client}",
                "hash, hash: {by: path, table: rendezvous}",
                "hash, hash: {by: {header: x-cabin}, table: permutation}",
                "hash, hash: {by: {cookie: cabin}}")) {
            Both both = play(
                    "{method: %s, serves: {workers: 64, time: 1ms}, backends: {fulmar: {weight: 2}, gannet: {weight: 5},"
                                    .formatted(method)
                            + " petrel: {weight: 3}}}",
                    "arrivals: even, rate: 200/s, clients: 50, requests: [{get: '/holds/{client}', headers: {X-Cabin:"
                            + " 'deck-{client}', Cookie: 'line=7; cabin={client}'}}]",
                    "1s",
                    "");
            assertThat(both.live.backendByRequest())
                    .as(method)
                    .isEqualTo(both.virtual.backendByRequest())
                    .hasSize(200)
                    .containsValues(0, 1, 2);
        }
    }

    // Whether a fault strikes is drawn by request and attempt, so the same requests are tried again, as often, and
    // fail. The first may reach a backend before the fault does.
    @Test
    void retries_ofFailuresDrawnByRequest_areEqualRequestByRequest() throws CannotPlay {
        Both both = play(
                "{method: round-robin, retry: {at-most: 2, budget: 100%, bucket: 10000, also: [503]},"
                        + " serves: {workers: 64, time: 1ms}, backends: {fulmar: , gannet: , petrel: }}",
                "arrivals: even, rate: 200/s", "2s", "[{at: 0s, fail: {pool: seats}, share: 50%, status: 503}]");
        assertThat(attempts(both.live)).isEqualTo(attempts(both.virtual));
        assertThat(failures(both.live)).isEqualTo(failures(both.virtual)).hasSizeBetween(20, 90);
    }

    @Test
    void kill_foundByProbesAndUndone_isDecidedTheSameWay() throws CannotPlay {
        Both both = play(
                "{method: round-robin, probe: {path: /afloat, every: 300ms, within: 5s, misses: 2, passes: 2},"
                        + " warm-up: 500ms, serves: {workers: 64, time: 3ms}, backends: {fulmar: , gannet: }}",
                "arrivals: even, rate: 100/s",
                "4s",
                "[{at: 1s, kill: fulmar}, {at: 2s, revive: fulmar}]");
        assertThat(steps(both.live))
                .isEqualTo(steps(both.virtual))
                .containsExactly("0 up down misses", "0 down warming passes", "0 warming up ramped");
        long found = both.virtual.transitions.get(0).atNanos() - 1_000 * MILLI;
        // Two misses, of probes that are refused at once; a stall makes none, since there is time enough for an answer.
        assertThat(found).isBetween(300 * MILLI, 600 * MILLI + MILLI);
        assertThat(both.live.transitions.get(0).atNanos() - 1_000 * MILLI).isBetween(300 * MILLI, 2_100 * MILLI);
        // A stall of the machine makes requests of before the kill late, so live only the causes are sure.
        assertThat(both.live.ends)
                .extracting(Heard.End::cause)
                .isSubsetOf(Arrays.asList(null, Cause.REFUSED, Cause.RESET));
        assertThat(both.virtual.ends.stream().filter(end -> end.cause() != null))
                .isNotEmpty()
                .allMatch(end -> end.cause() == Cause.REFUSED || end.cause() == Cause.RESET)
                .allMatch(end -> end.dueNanos() >= 995 * MILLI && end.dueNanos() < 1_000 * MILLI + found);
    }

    @Test
    void drain_andAdmit_isDecidedTheSameWay() throws CannotPlay {
        Both both = play(
                "{method: round-robin, drain: {limit: 10s}, serves: {workers: 64, time: 3ms}, backends: {fulmar: , gannet: }}",
                "arrivals: even, rate: 100/s",
                "2s",
                "[{at: 500ms, drain: gannet}, {at: 1500ms, admit: gannet}]");
        assertThat(steps(both.live))
                .isEqualTo(steps(both.virtual))
                .containsExactly("1 up draining drain", "1 draining up admit");
        assertThat(both.live.ends).hasSize(200).allMatch(end -> end.cause() == null);
        assertThat(both.virtual.ends).hasSize(200).allMatch(end -> end.cause() == null);
    }

    private static Both play(String pool, String traffic, String lasts, String cues) throws CannotPlay {
        String text = """
                drill: Side by side
                about: Small, and played on both stages.
                stage: {pools: {seats: %s}}
                traffic: [{to: seats, give-up: 20s, %s}]
                lasts: %s
                cues: %s
                """.formatted(pool, traffic, lasts, cues.isEmpty() ? "[]" : cues);
        Drill drill = DrillReader.read("drill", text).value().orElseThrow(() -> new AssertionError(text));
        return new Both(
                play(drill, new LiveStage(drill, SEED)), play(drill, new VirtualStage(drill, SEED, Transport.USUAL)));
    }

    private static Heard play(Drill drill, Stage stage) throws CannotPlay {
        Heard heard = new Heard();
        try (stage) {
            stage.open(heard);
            stage.play(new Conductor(drill, new Chance(SEED), new ArrayDeque<>()));
        }
        assertThat(heard.inFlight()).isZero();
        return heard;
    }

    private static Map<Long, Long> attempts(Heard heard) {
        return heard.picks.stream()
                .filter(each -> each.request() >= FAULT_IS_THERE)
                .collect(Collectors.groupingBy(Heard.Pick::request, TreeMap::new, Collectors.counting()));
    }

    private static List<String> failures(Heard heard) {
        return heard.ends.stream()
                .filter(each -> each.cause() != null && each.request() >= FAULT_IS_THERE)
                .sorted(Comparator.comparingLong(Heard.End::request))
                .map(each -> each.request() + " " + each.cause() + " " + each.status())
                .toList();
    }

    private static List<String> steps(Heard heard) {
        return heard.transitions.stream().map(StagesAgreeTest::text).toList();
    }

    private static String text(Transition each) {
        return (each.backend() + " " + each.from() + " " + each.to() + " " + each.cause()).toLowerCase(Locale.ROOT);
    }
}
