package steelyard.harness.stage.virtual;

import static org.assertj.core.api.Assertions.assertThat;
import static steelyard.harness.stage.virtual.Witness.HOP;
import static steelyard.harness.stage.virtual.Witness.MILLI;

import java.util.List;
import org.junit.jupiter.api.Test;
import steelyard.drills.model.Cause;

/** Load pages as they are read over the hops of a play, and what becomes of weights. */
class VirtualReadingsTest {
    private static final String POOL = "method: stride, weights: load,"
            + " load: {every: 100ms, within: 50ms, stale-after: 300ms, gauges: {memory: 100%%} %s},"
            + " serves: {workers: 8, time: 1ms, gauges: {memory: 20%%}}, backends: {fulmar: , gannet: }";

    // Memory 20 % of a ceiling of 100 % leaves 800 thousandths; at 70 %, 300.
    @Test
    void load_thatACueSets_movesTheWeightAtTheNextReading() {
        Witness told = Witness.of(
                POOL.formatted(""), "rate: 100/s, give-up: 2s", "2s", "{at: 1s, load: fulmar, gauge: memory, to: 70%}");
        List<Witness.Reading> fulmars =
                told.readings.stream().filter(each -> each.backend() == 0).toList();
        assertThat(fulmars)
                .extracting(Witness.Reading::headroomMilli)
                .startsWith(800)
                .endsWith(300);
        assertThat(fulmars).allMatch(Witness.Reading::fresh);
        Witness.Reading moved = fulmars.stream()
                .filter(each -> each.headroomMilli() == 300)
                .findFirst()
                .orElseThrow();
        // Read within a period, and there a hop later.
        assertThat(moved.atNanos()).isBetween(1_000 * MILLI, 1_100 * MILLI + 4 * HOP);
        // Before: 1 to 1. After: 300 to 800.
        long before = told.picks.stream()
                .filter(each -> each.atNanos() < 1_000 * MILLI && each.backend() == 0)
                .count();
        assertThat(before).isBetween(49L, 51L);
        long after = told.picks.stream()
                .filter(each -> each.atNanos() >= 1_100 * MILLI && each.backend() == 0)
                .count();
        // 90 requests x 3 / 11 = 24.5.
        assertThat(after).isBetween(23L, 26L);
    }

    // A connection of its own: 1 hop there, 2 for the accept and the asking, 1 back. Started at a point of the period,
    // and
    // one period after another.
    @Test
    void reading_costsTheHopsOfAProbe() {
        Witness told = Witness.of(POOL.formatted(""), "rate: 10/s, give-up: 2s", "1s", "");
        List<Long> fulmars = told.readings.stream()
                .filter(each -> each.backend() == 0)
                .map(Witness.Reading::atNanos)
                .toList();
        assertThat(fulmars).hasSize(10);
        for (int i = 1; i < fulmars.size(); i++) {
            assertThat(fulmars.get(i) - fulmars.get(i - 1)).isEqualTo(100 * MILLI);
        }
    }

    // Every reading keeps one of one workers busy for 40 ms of every 100, so requests that come meanwhile wait.
    @Test
    void cost_isWorkerTime() {
        String oneWorker = POOL.replace("workers: 8", "workers: 1").replace(", gannet: ", "");
        Witness free = Witness.of(oneWorker.formatted(""), "rate: 100/s, give-up: 2s", "2s", "");
        Witness costly = Witness.of(oneWorker.formatted(", cost: 40ms"), "rate: 100/s, give-up: 2s", "2s", "");
        assertThat(free.ends).allMatch(each -> each.tookNanos() < 2 * MILLI);
        assertThat(costly.count(null)).isEqualTo(200);
        long held = costly.ends.stream()
                .filter(each -> each.tookNanos() > 2 * MILLI)
                .count();
        // 4 of 10 requests come in those 40 ms, and some more queue behind them.
        assertThat(held).isBetween(75L, 110L);
    }

    @Test
    void silentBackend_fallsBackToTheSetWeight() {
        Witness told = Witness.of(POOL.formatted(""), "rate: 100/s, give-up: 100ms", "2s", "{at: 1s, hang: fulmar}");
        assertThat(told.readings)
                .filteredOn(each -> !each.fresh())
                .singleElement()
                .satisfies(each -> {
                    assertThat(each.backend()).isZero();
                    assertThat(each.headroomMilli()).isEqualTo(1_000);
                    assertThat(each.atNanos()).isBetween(1_200 * MILLI, 1_300 * MILLI + 4 * HOP);
                });
        assertThat(told.count(Cause.GAVE_UP)).isPositive();
    }
}
