package steelyard.harness.forecast;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.List;
import org.junit.jupiter.api.Test;
import steelyard.balancer.core.standing.Standing;
import steelyard.balancer.core.standing.Transition;
import steelyard.drills.model.Drill;
import steelyard.drills.read.DrillReader;
import steelyard.harness.record.Cast;
import steelyard.harness.record.TestDrill;

class BandsTest {
    /** @param backends in each of two zones */
    private static Drill drill(int backends, String zones) {
        String text = """
                drill: Many
                about: Many backends.
                stage:
                  hosts: {north-quay: {%s}, south-quay: {%s}}
                  pools:
                    seats:
                      method: round-robin
                      serves: {workers: 2, time: {fixed: 1ms}}
                      backends:
                        fulmar: {times: %d, host: north-quay}
                        gannet: {times: %d, host: south-quay}
                traffic:
                  - {to: seats, rate: 100/s, requests: [{get: /sailings, share: 100%%}]}
                lasts: 1s
                """.formatted(zones.isEmpty() ? "" : "zone: north", zones, backends, backends);
        return DrillReader.read("drill", text).value().orElseThrow();
    }

    @Test
    void groups_ofFewBackends_areTheBackends() {
        List<Group> groups = Group.of(new Cast(drill(3, "zone: south")));
        assertThat(groups)
                .extracting(Group::name)
                .startsWith("fulmar-1", "fulmar-2")
                .hasSize(6);
        assertThat(groups).allMatch(group -> group.members().size() == 1);
    }

    @Test
    void groups_ofManyBackends_areTheirZones() {
        List<Group> groups = Group.of(new Cast(drill(20, "zone: south")));
        assertThat(groups).extracting(Group::name).containsExactly("zone north", "zone south");
        assertThat(groups.get(1).members()).hasSize(20).startsWith(20);
    }

    @Test
    void groups_ofManyBackendsWithoutZones_areThePool() {
        List<Group> groups = Group.of(new Cast(drill(20, "")));
        assertThat(groups).extracting(Group::name).containsExactly("all");
        assertThat(groups.get(0).members()).hasSize(40);
    }

    /** 10 slices of 17 and 6 times 6 columns: 530 values a play. */
    @Test
    void bands_ofMoreValuesThanAreKept_areOfTheFirstPlays() {
        long ofAPlay = 10 * (17 + 6 * 6);
        int most = (int) (Bands.MOST_VALUES / ofAPlay);
        Bands bands = new Bands(Series.of(drill(3, "zone: south"), 1, most + 5));
        assertThat(bands.slicesOf(most - 1)).isNotNull();
        assertThat(bands.slicesOf(most)).isNull();
        Bands few = new Bands(Series.of(drill(3, "zone: south"), 1, 5));
        assertThat(few.slicesOf(4)).isNotNull();
        assertThat(few.slicesOf(5)).isNull();
    }

    @Test
    void columns_thatOnlySomeStagesHave_areBehindTheSharesWithBandsOfTheirOwn() {
        Drill byLoad =
                new TestDrill().load(TestDrill.S).waiting(20).lasts(TestDrill.S).build();
        Bands bands = new Bands(Series.of(byLoad, 1, 2));

        assertThat(bands.extras())
                .containsExactly(
                        "pool seats:offered",
                        "pool seats:failed",
                        "pool seats:waiting",
                        "pool cargo:offered",
                        "pool cargo:failed",
                        "fulmar:headroom",
                        "gannet:headroom",
                        "petrel:headroom");
        assertThat(List.of(new SliceFile(bands).text().strip().split(",")))
                .containsSubsequence(
                        "skua:standing-share", "pool seats:offered", "petrel:headroom", "offered:low", "offered:high")
                .contains("pool seats:waiting:high", "fulmar:headroom:mean");
        assertThat(new Bands(Series.of(drill(3, ""), 1, 2)).extras()).isEmpty();
    }

    @Test
    void band_ofValues_hasTheirQuantilesAndMean() {
        Band band = new Band(2);
        double[] values = new double[30];
        for (int play = 0; play < 19; play++) {
            values[play] = 19 - play;
        }
        band.put(1, values, 19);
        assertThat(band.low[1]).isEqualTo(1);
        assertThat(band.median[1]).isEqualTo(10);
        assertThat(band.high[1]).isEqualTo(19);
        assertThat(band.mean[1]).isEqualTo(10);
        assertThat(band.median[0]).isNaN();
    }

    @Test
    void changes_thatPlaysHaveInCommon_areOneWithItsSpread() {
        Changes changes = new Changes();
        changes.add(List.of(down(3_000), up(5_000), down(9_000)));
        changes.add(List.of(down(1_000), up(6_000)));
        List<Changes.Change> found = changes.inOrder();
        assertThat(found)
                .extracting(each -> each.kind().to() + " " + each.kind().time())
                .containsExactly("DOWN 1", "UP 1", "DOWN 2");
        assertThat(found.get(0).at().median()).isEqualTo(2_000);
        assertThat(found.get(0).at().plays()).isEqualTo(2);
        assertThat(found.get(2).at().plays()).isEqualTo(1);
    }

    private static Transition down(long atNanos) {
        return new Transition(0, Standing.UP, Standing.DOWN, Transition.Cause.MISSES, atNanos);
    }

    private static Transition up(long atNanos) {
        return new Transition(0, Standing.DOWN, Standing.UP, Transition.Cause.PASSES, atNanos);
    }
}
