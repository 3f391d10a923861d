package steelyard.balancer.core.pick;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.util.List;
import java.util.stream.IntStream;
import org.assertj.core.data.Offset;
import org.junit.jupiter.api.Nested;
import org.junit.jupiter.api.Test;

/** The method that hashes, over each of its tables. */
class HashTest {
    private static final int[] NONE = {};
    private static final int KEYS = 20_000;
    private static final int PRIME = 2_003;

    @Nested
    class OverRing extends Tables {
        @Override
        Hash hash(int members, double bound, Ramp ramp) {
            return Hash.overRing(names(members), 100, bound, ramp);
        }

        @Test
        void pick_afterManyPassedOver_isStillTheSame() {
            Hash hash = all(8);
            int[] before = owners(hash);
            for (int member = 1; member < 8; member++) {
                hash.leave(member);
            }
            // Far more are passed over than there are points, so the ring is copied without those that are out.
            assertThat(owners(hash)).containsOnly(0);
            for (int member = 1; member < 8; member++) {
                hash.enter(member);
            }
            assertThat(owners(hash)).isEqualTo(before);
        }
    }

    @Nested
    class ByRendezvous extends Tables {
        @Override
        Hash hash(int members, double bound, Ramp ramp) {
            return Hash.byRendezvous(names(members), bound, ramp);
        }
    }

    @Nested
    class OverPermutation extends Tables {
        @Override
        Hash hash(int members, double bound, Ramp ramp) {
            return Hash.overPermutation(names(members), PRIME, bound, ramp);
        }

        @Override
        boolean movesOthers() {
            return true;
        }

        @Test
        void overPermutation_sizeThatIsNoPrime_isRefused() {
            assertThatThrownBy(() -> Hash.overPermutation(names(2), 21, 0, Ramp.NONE))
                    .isInstanceOf(IllegalArgumentException.class)
                    .hasMessageContaining("prime, not 21");
        }
    }

    /** What the method owes over any table. */
    abstract static class Tables extends PickerContract {
        abstract Hash hash(int members, double bound, Ramp ramp);

        /** Whether a member that goes moves keys of others too. */
        boolean movesOthers() {
            return false;
        }

        @Override
        Picker picker(int members, Ramp ramp) {
            return hash(members, 0, ramp);
        }

        final Hash all(int members) {
            return open(hash(members, 0, Ramp.NONE), members);
        }

        static Hash open(Hash hash, int members) {
            for (int member = 0; member < members; member++) {
                hash.enter(member);
            }
            return hash;
        }

        @Test
        void pick_sameKey_isTheSameMember() {
            Hash hash = all(9);
            assertThat(owners(hash)).isEqualTo(owners(hash));
        }

        @Test
        void leaveAndEnter_always_restoreTheMap() {
            Hash hash = all(9);
            int[] before = owners(hash);
            hash.leave(4);
            int[] without = owners(hash);
            hash.enter(4);

            assertThat(without).doesNotContain(4);
            assertThat(owners(hash)).isEqualTo(before);
            if (!movesOthers()) {
                assertThat(moved(before, without, 4)).isZero();
            }
        }

        @Test
        void pick_triedOwner_goesWhereTheKeyWouldGoWithoutIt() {
            Hash hash = all(9);
            int[] before = owners(hash);
            int[] next = new int[KEYS];
            for (int i = 0; i < KEYS; i++) {
                next[i] = hash.pick(i, 2, Keys.of(i), new int[] {before[i]}, 1, 0);
                assertThat(next[i]).isNotEqualTo(before[i]);
            }
            if (!movesOthers()) {
                hash.leave(4);
                int[] without = owners(hash);
                for (int i = 0; i < KEYS; i++) {
                    assertThat(before[i] == 4 ? next[i] : before[i]).isEqualTo(without[i]);
                }
            }
        }

        /** The owner is full: its keys pass on, no other key moves over any table, and it finds all its own again. */
        @Test
        void block_owner_passesItsKeysOnAndMovesNoOther() {
            Hash hash = all(9);
            int[] before = owners(hash);
            hash.block(4);
            int[] meanwhile = owners(hash);
            hash.enter(4);

            assertThat(meanwhile).doesNotContain(4);
            assertThat(moved(before, meanwhile, 4)).isZero();
            assertThat(owners(hash)).isEqualTo(before);
        }

        @Test
        void weigh_threeOfFive_ownsThreeFifths() {
            Hash hash = all(3);
            hash.weigh(2, 3_000);
            long owned = IntStream.of(owners(hash)).filter(owner -> owner == 2).count();
            // A ring of 500 points: the share is Beta(300, 200), standard deviation 0.022; the others are closer.
            assertThat(owned / (double) KEYS).isBetween(0.6 - 0.088, 0.6 + 0.088);
        }

        @Test
        void weigh_thereAndBack_restoresTheMap() {
            Hash hash = all(5);
            int[] before = owners(hash);
            hash.weigh(2, 3_000);
            int[] heavier = owners(hash);
            hash.weigh(2, 1_000);

            assertThat(owners(hash)).isEqualTo(before);
            if (!movesOthers()) {
                // What moves, moves to the one that became heavier.
                for (int i = 0; i < KEYS; i++) {
                    assertThat(heavier[i] == before[i] || heavier[i] == 2).isTrue();
                }
            }
        }

        @Test
        void pick_whileOneWarms_itsKeysComeBackOnceAndForGood() {
            long[] fraction = {0};
            Ramp ramp = (member, nowNanos) -> member == 1 ? fraction[0] : Ramp.FULL;
            Hash hash = open(hash(4, 0, ramp), 4);
            fraction[0] = Ramp.FULL;
            int[] full = owners(hash);
            int[] earlier = new int[KEYS];
            long owned = IntStream.of(full).filter(owner -> owner == 1).count();
            for (int tenth = 1; tenth <= 10; tenth++) {
                fraction[0] = tenth * (Ramp.FULL / 10);
                int[] now = owners(hash);
                long back = IntStream.of(now).filter(owner -> owner == 1).count();
                // Binomial over about 5,000 keys: 4 standard deviations are at most 142.
                assertThat(back).isCloseTo(owned * tenth / 10, Offset.offset(142L));
                for (int i = 0; i < KEYS; i++) {
                    assertThat(full[i] == 1 || now[i] == full[i]).isTrue();
                    assertThat(earlier[i] != 1 || now[i] == 1).isTrue();
                }
                earlier = now;
            }
            assertThat(earlier).isEqualTo(full);
        }

        /** Mirrokni et al. 2018: nobody holds more than the bound times the mean allows, rounded up. */
        @Test
        void pick_bounded_nobodyIsEverAboveTheBound() {
            int members = 10;
            double bound = 1.25;
            Hash hash = open(hash(members, bound, Ramp.NONE), members);
            int[] inFlight = new int[members];
            for (int all = 0; all < 1_000; all++) {
                // Nine in ten are the same key: without a bound one member would hold nearly all.
                long key = all % 10 == 0 ? Keys.of(all) : Keys.of(1);
                int picked = hash.pick(all, 1, key, NONE, 0, 0);
                hash.began(picked, ++inFlight[picked], 0);
                assertThat((double) inFlight[picked]).isLessThanOrEqualTo(Math.ceil(bound * (all + 1) / members));
            }
            assertThat(inFlight).doesNotContain(0);
        }

        @Test
        void pick_boundedAndFree_isTheOwner() {
            Hash hash = open(hash(9, 1, Ramp.NONE), 9);
            assertThat(owners(hash)).isEqualTo(owners(all(9)));
        }

        @Test
        void pick_boundOfOne_spreadsEvenly() {
            Hash hash = open(hash(4, 1, Ramp.NONE), 4);
            int[] inFlight = new int[4];
            for (int i = 0; i < 400; i++) {
                int picked = hash.pick(i, 1, Keys.of(1), NONE, 0, 0);
                hash.began(picked, ++inFlight[picked], 0);
            }
            assertThat(inFlight).containsOnly(100);
        }
    }

    /** The small example of Eisenbud et al., section 3.4 (from memory; recomputed by hand). */
    @Test
    void permutation_sevenPlaces_isTheSmallExample() {
        Permutation table = new Permutation(new int[] {3, 0, 3}, new int[] {4, 2, 1}, 7);
        for (int member = 0; member < 3; member++) {
            table.weigh(member, 1_000);
            table.enter(member);
        }
        assertThat(table.places()).containsExactly(1, 0, 1, 0, 2, 2, 0);
        table.leave(1);
        assertThat(table.places()).containsExactly(0, 0, 0, 0, 2, 2, 2);
    }

    private static List<String> names(int members) {
        return IntStream.range(0, members).mapToObj(i -> "tern-" + i).toList();
    }

    private static int[] owners(Hash hash) {
        return IntStream.range(0, KEYS)
                .map(i -> hash.pick(i, 1, Keys.of(i), NONE, 0, 0))
                .toArray();
    }

    private static int moved(int[] before, int[] after, int gone) {
        return (int) IntStream.range(0, KEYS)
                .filter(i -> before[i] != gone && before[i] != after[i])
                .count();
    }
}
