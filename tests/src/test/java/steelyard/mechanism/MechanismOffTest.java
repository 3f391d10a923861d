package steelyard.mechanism;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.List;
import java.util.stream.LongStream;
import java.util.stream.Stream;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.Arguments;
import org.junit.jupiter.params.provider.MethodSource;
import steelyard.drills.model.Drill;
import steelyard.drills.read.DrillLibrary;
import steelyard.harness.record.Finding;
import steelyard.harness.record.Verdict;

/**
 * A drill that cannot fail rehearses nothing: every bundled drill is met with its mechanisms on, and switching off any
 * one that it is about breaks the expectation that is about it.
 */
class MechanismOffTest {
    private static final long[] SEEDS = LongStream.rangeClosed(1, 10).toArray();

    /** Drill, mechanism, pattern in its text, replacement, words of the expectation that must break. */
    static Stream<Arguments> mechanisms() {
        return Stream.of(
                off("lose-one-of-three", "retry", " *retry: .*\n", "", "failed"),
                off("lose-one-of-three", "warm-up", " *warm-up: .*\n", "", "share of fulmar"),
                off("lose-one-of-three", "warm-up", " *warm-up: .*\n", "", "settled-in of fulmar"),
                off("lose-one-of-three", "misses", "misses: 3", "misses: 6", "detected-in of fulmar"),
                off("slow-one", "method", "method: least-connections", "method: round-robin", "share of fulmar"),
                off("slow-one", "method", "method: least-connections", "method: round-robin", "latency 99 %"),
                off("drain-for-patching", "drain", "limit: 5s", "limit: 1ms", "cut"),
                off("drain-for-patching", "probe", "misses: 2", "misses: 50", "share of petrel, from 35 s"),
                off("drain-for-patching", "probe", "misses: 2", "misses: 50", "failed"),
                off("drain-for-patching", "warm-up", " *warm-up: .*\n", "", "share of fulmar"),
                off("reweigh-live", "method", "weighted-round-robin", "round-robin", "share of petrel, from 1 s"),
                off("reweigh-live", "reweigh", "weight: 12, as", "weight: 3, as", "share of fulmar, from 21 s"),
                off("uneven-hosts", "host weights", "weights: host", "weights: backend", "share of host south-quay"),
                off("which-probe", "period", "every: 500ms", "every: 3s", "failed"),
                off("which-probe", "period", "every: 500ms", "every: 3s", "detected-in of fulmar"),
                off("which-probe", "limit", "within: 250ms", "within: 2500ms", "detected-in of fulmar"),
                off("which-probe", "misses", "misses: 3", "misses: 8", "failed"),
                off("which-probe", "misses", "misses: 3", "misses: 1", "standing-changes"),
                off("flapping-probe", "misses", "misses: 3", "misses: 1", "standing-changes of fulmar, from 6 s"),
                off("flapping-probe", "passes", "passes: 10", "passes: 2", "standing-changes of fulmar, from 20 s"),
                off("retry-storm", "budget", "budget: 10%", "budget: 100%, bucket: 1000", "retry-load, from 13 s"),
                off("lose-a-zone", "standby tier", "standby: 50%", "standby: 10%", "share of tern, from 11 s"),
                off("lose-a-zone", "last resort", " *last-resort: .*\n", "", "failed, from 42 s"),
                off("cold-return", "warm-up", " *warm-up: .*\n", "", "latency 99 % of pool gentle"),
                off("cold-return", "cold caches", "factor: 6", "factor: 1", "latency 95 % of pool abrupt"),
                off("sticky-drain", "keeping clients", ", keep-clients: true", "", "share of fulmar, from 16 s"),
                off(
                        "sticky-drain",
                        "affinity",
                        "affinity: cookie",
                        "affinity: {by: cookie, lasts: 1ms}",
                        "share of fulmar, from 37 s"),
                off("silent-berth", "bench", "after: 3,", "after: 100000,", "failed, from 12 s"),
                off("silent-berth", "bench", "after: 3,", "after: 100000,", "latency 98 %"),
                off("silent-berth", "time limit", "first-byte: 500ms", "first-byte: 5s", "detected-in as benched"),
                off(
                        "long-connections",
                        "count",
                        "count: connections",
                        "count: requests",
                        "fairness of pool by-connection"),
                off("stale-load", "load weights", "floor: 37%", "floor: 100%", "share of petrel"),
                off(
                        "stale-load",
                        "interval",
                        "every: 250ms, within: 240ms, stale-after: 2s",
                        "every: 4s, within: 2s, stale-after: 12s",
                        "latency 95 % of pool quick"));
    }

    private static Arguments off(
            String drill, String mechanism, String pattern, String replacement, String expectation) {
        return Arguments.of(drill, mechanism, pattern, replacement, expectation);
    }

    @ParameterizedTest
    @MethodSource("mechanisms")
    void forecast_mechanismOff_breaksTheExpectationThatIsAboutIt(
            String name, String mechanism, String pattern, String replacement, String expectation) {
        String text = DrillLibrary.text(name).orElseThrow();
        String without = text.replaceAll(pattern, replacement);
        assertThat(without).as("the drill has a %s to switch off", mechanism).isNotEqualTo(text);
        Drill drill = VirtualPlay.read(without);
        for (long seed : SEEDS) {
            Verdict verdict = VirtualPlay.judge(drill, seed);
            assertThat(verdict.fit()).as(verdict.text()).isTrue();
            assertThat(verdict.expectations().stream().filter(each -> !each.met()))
                    .as("broken under seed %d without %s", seed, mechanism)
                    .anyMatch(each -> each.text().startsWith(expectation));
        }
    }

    static List<String> drills() {
        // Two thousand backends take long: ManyQuaysTest plays them thinned out.
        return DrillLibrary.names().stream()
                .filter(each -> !each.equals("many-quays"))
                .toList();
    }

    @ParameterizedTest
    @MethodSource("drills")
    void forecast_mechanismsOn_meetsEveryExpectation(String name) {
        Drill drill = VirtualPlay.read(DrillLibrary.text(name).orElseThrow());
        for (long seed : SEEDS) {
            Verdict verdict = VirtualPlay.judge(drill, seed);
            assertThat(verdict.fit()).as(verdict.text()).isTrue();
            assertThat(verdict.expectations()).as("seed %d", seed).allMatch(Finding::met);
        }
    }
}
