package steelyard.balancer.core.pick;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.Random;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

class TournamentTest {

    @Test
    void best_nobodyEntered_isNobody() {
        Tournament tournament = new Tournament(5, (a, b) -> false);

        assertThat(tournament.best()).isEqualTo(Tournament.NOBODY);
        assertThat(tournament.bestAfter(2)).isEqualTo(Tournament.NOBODY);
    }

    @Test
    void best_equalKeys_isTheFirstInListOrder() {
        Tournament tournament = new Tournament(4, (a, b) -> false);
        tournament.enter(3);
        tournament.enter(1);

        assertThat(tournament.best()).isEqualTo(1);
        assertThat(tournament.bestAfter(1)).isEqualTo(3);
        assertThat(tournament.bestAfter(3)).isEqualTo(1);
    }

    @Test
    void best_ofASinglePlace_isThatPlace() {
        Tournament tournament = new Tournament(1, (a, b) -> false);
        tournament.enter(0);

        assertThat(tournament.best()).isZero();
        assertThat(tournament.bestAfter(0)).isZero();
    }

    /** Against a plain walk over the list, for every size from 1 to 40 and random changes. */
    @Test
    void best_randomChanges_agreesWithAWalkOverTheList() {
        Random random = new Random(11);
        for (int size = 1; size <= 40; size++) {
            int[] key = new int[size];
            boolean[] in = new boolean[size];
            Tournament tournament = new Tournament(size, (a, b) -> key[a] < key[b]);
            for (int change = 0; change < 300; change++) {
                int place = random.nextInt(size);
                key[place] = random.nextInt(4);
                in[place] = random.nextInt(4) > 0;
                if (in[place]) {
                    tournament.enter(place);
                } else {
                    tournament.leave(place);
                }
                int last = random.nextInt(size);
                assertThat(tournament.best()).isEqualTo(walk(key, in, -1));
                assertThat(tournament.bestAfter(last)).isEqualTo(walk(key, in, last));
            }
        }
    }

    /** The cost of a change and of a look-up: a match a level at most, whatever the size. */
    @ParameterizedTest
    @ValueSource(ints = {3, 16, 256, 10_000})
    void anyCall_ofEverySize_playsAMatchALevelAtMost(int size) {
        int levels = Integer.SIZE - Integer.numberOfLeadingZeros(size - 1);
        int[] key = new int[size];
        int[] matches = {0};
        Tournament tournament = new Tournament(size, (a, b) -> {
            matches[0]++;
            return key[a] < key[b];
        });
        for (int place = 0; place < size; place++) {
            tournament.enter(place);
        }
        for (int change = 0; change < 3 * size; change++) {
            int place = tournament.best();
            key[place]++;
            matches[0] = 0;
            tournament.changed(place);
            assertThat(matches[0]).isLessThanOrEqualTo(levels);
            matches[0] = 0;
            tournament.bestAfter(place);
            assertThat(matches[0]).isLessThanOrEqualTo(levels);
        }
    }

    private static int walk(int[] key, boolean[] in, int last) {
        int best = Tournament.NOBODY;
        for (int step = 1; step <= key.length; step++) {
            int place = (last + step) % key.length;
            if (in[place] && (best == Tournament.NOBODY || key[place] < key[best])) {
                best = place;
            }
        }
        return best;
    }
}
