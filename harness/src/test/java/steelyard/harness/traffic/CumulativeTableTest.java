package steelyard.harness.traffic;

import static org.assertj.core.api.Assertions.assertThat;

import org.junit.jupiter.api.Test;

class CumulativeTableTest {
    private static final double JUST_BELOW_ONE = Math.nextDown(1.0);

    @Test
    void at_bordersOfShares_areTheNextThings() {
        CumulativeTable table = CumulativeTable.of(new double[] {1, 2, 1});
        assertThat(table.at(0)).isEqualTo(0);
        assertThat(table.at(Math.nextDown(0.25))).isEqualTo(0);
        assertThat(table.at(0.25)).isEqualTo(1);
        assertThat(table.at(0.75)).isEqualTo(2);
        assertThat(table.at(JUST_BELOW_ONE)).isEqualTo(2);
    }

    @Test
    void at_thingsWithoutShare_areNeverPicked() {
        CumulativeTable table = CumulativeTable.of(new double[] {0, 1, 0, 1, 0});
        assertThat(table.at(0)).isEqualTo(1);
        assertThat(table.at(0.5)).isEqualTo(3);
        assertThat(table.at(JUST_BELOW_ONE)).isEqualTo(3);
    }

    @Test
    void even_spreadsOverAll() {
        CumulativeTable table = CumulativeTable.even(3);
        assertThat(table.at(0)).isEqualTo(0);
        assertThat(table.at(0.34)).isEqualTo(1);
        assertThat(table.at(JUST_BELOW_ONE)).isEqualTo(2);
    }
}
