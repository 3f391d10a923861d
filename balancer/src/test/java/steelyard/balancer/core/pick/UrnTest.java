package steelyard.balancer.core.pick;

import static org.assertj.core.api.Assertions.assertThat;

import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

/** Draws by weight, at rest by the alias table and after changes by the tree. */
class UrnTest {
    private static final int[] NONE = {};
    private static final Lots LOTS = (request, attempt, draw) -> Keys.of(Keys.of(request, attempt), draw);

    /** Points on an even grid, ten to a unit of the table's 5 cells of width 14: each place is hit by its weight exactly. */
    @Test
    void aliasTable_evenGrid_hitsEachByItsWeight() {
        long[] weights = {1, 0, 2, 6, 5};
        AliasTable table = new AliasTable(weights.length);
        table.fill(weights, 14);
        int[] hit = new int[weights.length];
        int points = 5 * 14 * 10;
        for (int point = 0; point < points; point++) {
            hit[table.draw((long) ((point + 0.5) / points * 0x1p63) << 1)]++;
        }
        assertThat(hit).containsExactly(50, 0, 100, 300, 250);
    }

    @ParameterizedTest
    @ValueSource(booleans = {true, false})
    void draw_atRestOrNot_followsTheWeights(boolean atRest) {
        Urn urn = new Urn(4, LOTS);
        long[] weights = {1, 2, 3, 4};
        for (int member = 0; member < 4; member++) {
            urn.put(member, weights[member]);
        }
        int draws = 100_000;
        int[] drawn = new int[4];
        for (int i = 0; i < draws; i++) {
            if (!atRest) {
                urn.put(0, 2);
                urn.put(0, 1);
            }
            drawn[urn.draw(i, 1, 0, NONE, 0, Urn.NOBODY)]++;
        }
        for (int member = 0; member < 4; member++) {
            double p = weights[member] / 10.0;
            // Binomial: 4 standard deviations.
            assertThat(Math.abs(drawn[member] - draws * p)).isLessThanOrEqualTo(4 * Math.sqrt(draws * p * (1 - p)));
        }
    }

    @Test
    void draw_heaviestLeftOut_followsTheOthers() {
        Urn urn = new Urn(3, LOTS);
        urn.put(0, 1);
        urn.put(1, 3);
        // Nearly everything: redraws run out in 94 draws of 100, and the tree has to say.
        urn.put(2, 1_000);
        int draws = 40_000;
        int first = 0;
        for (int i = 0; i < draws; i++) {
            int drawn = urn.draw(i, 1, 0, new int[] {2, 2}, 2, Urn.NOBODY);
            assertThat(drawn).isNotEqualTo(2);
            first += drawn == 0 ? 1 : 0;
        }
        // Binomial with p = 1/4: 4 standard deviations are 347.
        assertThat(first).isBetween(10_000 - 347, 10_000 + 347);
        assertThat(urn.draw(1, 1, 0, new int[] {0, 1}, 2, 2)).isEqualTo(Urn.NOBODY);
        assertThat(urn.draw(1, 1, 0, new int[] {0}, 1, 2)).isEqualTo(1);
    }

    @Test
    void draw_emptyAgain_saysNobody() {
        Urn urn = new Urn(1, LOTS);
        assertThat(urn.draw(1, 1, 0, NONE, 0, Urn.NOBODY)).isEqualTo(Urn.NOBODY);
        urn.put(0, 5);
        for (int i = 0; i < 5; i++) {
            assertThat(urn.draw(i, 1, 0, NONE, 0, Urn.NOBODY)).isZero();
        }
        urn.put(0, 0);
        assertThat(urn.draw(1, 1, 0, NONE, 0, Urn.NOBODY)).isEqualTo(Urn.NOBODY);
    }
}
