package steelyard.harness.stage.virtual;

import static org.assertj.core.api.Assertions.assertThat;
import static steelyard.harness.stage.virtual.Witness.HOP;
import static steelyard.harness.stage.virtual.Witness.MILLI;

import java.util.List;
import org.junit.jupiter.api.Test;
import steelyard.balancer.core.decide.Outcome;
import steelyard.balancer.core.standing.Standing;

/** Settings of a pool that change while it is played. */
class RetuneTest {
    private static final String POOL =
            "method: round-robin, serves: {workers: 8, time: 1ms}, backends: {fulmar: , gannet: }";

    @Test
    void method_changesFromTheNextPickOn() {
        Witness told = Witness.of(
                POOL.replace("gannet: ", "gannet: {weight: 3}"),
                "rate: 40/s, give-up: 2s",
                "2s",
                "{at: 1s, retune: {pool: seats}, method: stride}");
        assertThat(told.picks.subList(0, 40))
                .filteredOn(each -> each.backend() == 0)
                .hasSize(20);
        assertThat(told.picks.subList(40, 80))
                .filteredOn(each -> each.backend() == 0)
                .hasSize(10);
    }

    @Test
    void method_thatComesBackToKeys_knowsThem() {
        Witness told = Witness.of(
                POOL.replace("round-robin", "hash, hash: {by: client}"),
                "rate: 40/s, clients: 1, give-up: 2s",
                "3s",
                "{at: 1s, retune: {pool: seats}, method: round-robin}, {at: 2s, retune: {pool: seats}, method: hash}");
        List<Integer> picked = told.backendsPicked();
        assertThat(picked.subList(40, 80)).contains(0, 1);
        assertThat(picked.subList(80, 120)).containsOnly(picked.get(0));
        assertThat(picked.subList(0, 40)).containsOnly(picked.get(0));
    }

    // Two misses every second would take 1 to 2 seconds; every 100 ms, 100 to 200 ms.
    @Test
    void probes_comeAtTheirNewPeriod() {
        Witness told = Witness.of(
                POOL + ", probe: {path: /afloat, every: 1s, within: 50ms, misses: 2, passes: 2}",
                "rate: 10/s, give-up: 50ms",
                "4s",
                "{at: 1s, retune: {pool: seats}, probe: {every: 100ms}}, {at: 3s, hang: gannet}");
        assertThat(told.transitions).singleElement().satisfies(each -> {
            assertThat(each.to()).isEqualTo(Standing.DOWN);
            assertThat(each.atNanos()).isBetween(3_150 * MILLI, 3_250 * MILLI + 4 * HOP);
        });
    }

    @Test
    void drains_thatBeginLater_keepToTheNewLimit() {
        List<Witness.Over> cut = Witness.of(
                        POOL.replace("time: 1ms", "time: 3s") + ", drain: {limit: 30s}",
                        "rate: 10/s, give-up: 10s",
                        "1s",
                        "{at: 400ms, retune: {pool: seats}, drain: {limit: 200ms}}, {at: 500ms, drain: gannet}")
                .overs
                .stream()
                .filter(each -> each.outcome() == Outcome.CUT)
                .toList();
        assertThat(cut).isNotEmpty().allMatch(each -> each.backend() == 1 && each.atNanos() == 700 * MILLI);
    }
}
