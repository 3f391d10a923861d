package steelyard.balancer.core.standing;

import static org.assertj.core.api.Assertions.assertThat;

import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;
import steelyard.balancer.settings.BenchSettings;

/** The bench: every state with every event, then how long it lasts and what its window forgets. */
class BenchTest {
    private static final long ORIGIN = Long.MAX_VALUE - 50;
    private static final BenchSettings THREE_IN_A_ROW = new BenchSettings(3, 0, 100, 4, 100, 800, 1_000, 0.5);
    private static final BenchSettings HALF_OF_FOUR = new BenchSettings(99, 0.5, 100, 4, 100, 800, 1_000, 0.5);

    /** The table of the class: a state and an event lead to benched or free. */
    @ParameterizedTest
    @CsvSource({
        // failures before, benched before, event, room, benched after
        "0, false, failure, true,  false",
        "1, false, failure, true,  false",
        "2, false, failure, true,  true",
        "2, false, failure, false, false",
        "9, false, failure, true,  true",
        "2, false, success, true,  false",
        "0, true,  failure, true,  true",
        "0, true,  success, true,  true",
        "0, true,  early,   true,  true",
        "0, true,  time,    true,  false",
        "2, false, time,    true,  false",
    })
    void event_inEveryState_leadsWhereTheTableSays(
            int failures, boolean benchedBefore, String event, boolean room, boolean benchedAfter) {
        Bench bench = new Bench(THREE_IN_A_ROW);
        long now = ORIGIN;
        if (benchedBefore) {
            fail(bench, 3, now);
        }
        for (int i = 0; i < failures; i++) {
            bench.ended(true, () -> false, now);
        }
        boolean changed = switch (event) {
            case "failure" -> bench.ended(true, () -> room, now);
            case "success" -> bench.ended(false, () -> room, now);
            case "early" -> bench.frees(now + 99);
            default -> bench.frees(now + 100);
        };

        assertThat(bench.benched()).isEqualTo(benchedAfter);
        assertThat(changed).isEqualTo(benchedBefore != benchedAfter);
    }

    @Test
    void ended_successBetween_beginsTheRunAnew() {
        Bench bench = new Bench(THREE_IN_A_ROW);
        fail(bench, 2, 0);
        bench.ended(false, () -> true, 1);
        fail(bench, 2, 2);
        assertThat(bench.benched()).isFalse();
        fail(bench, 1, 3);
        assertThat(bench.benched()).isTrue();
    }

    /** Two of four is a half, and four are enough; two of three are more than half of too few. */
    @ParameterizedTest
    @ValueSource(longs = {0, -1, Long.MAX_VALUE - 10, Long.MIN_VALUE})
    void ended_shareOfTheWindow_benchesFromTheLeastNumberOn(long origin) {
        Bench bench = new Bench(HALF_OF_FOUR);
        fail(bench, 1, origin);
        bench.ended(false, () -> true, origin + 1);
        fail(bench, 1, origin + 2);
        assertThat(bench.benched()).isFalse();
        fail(bench, 1, origin + 3);
        assertThat(bench.benched()).isTrue();
    }

    /** Three failures and, 101 later, one more: the window of 100 holds one of them only. */
    @Test
    void ended_failuresOlderThanTheWindow_areForgotten() {
        Bench bench = new Bench(HALF_OF_FOUR);
        fail(bench, 3, 0);
        fail(bench, 1, 101);

        assertThat(bench.benched()).isFalse();
    }

    /** 100, 200, 400, 800, then the most; freed for two quiet times, two doublings fewer: 800 again would be 200. */
    @Test
    void deadline_benchedAgainAndAgain_doublesToTheMostAndDecaysWhenQuiet() {
        Bench bench = new Bench(THREE_IN_A_ROW);
        long now = ORIGIN;
        for (long expected : new long[] {100, 200, 400, 800, 800}) {
            fail(bench, 3, now);
            assertThat(bench.deadlineNanos() - now).isEqualTo(expected);
            now += expected;
            assertThat(bench.frees(now)).isTrue();
        }
        now += 2_999;
        fail(bench, 3, now);
        assertThat(bench.deadlineNanos() - now).isEqualTo(200);
    }

    @Test
    void ended_withoutSettings_neverBenches() {
        Bench bench = new Bench(null);
        fail(bench, 100, 0);

        assertThat(bench.benched()).isFalse();
    }

    private static void fail(Bench bench, int times, long now) {
        for (int i = 0; i < times; i++) {
            bench.ended(true, () -> true, now);
        }
    }
}
