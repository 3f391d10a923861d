package steelyard.outside.core;

import static org.assertj.core.api.Assertions.assertThat;
import static steelyard.outside.CheckTable.number;

import java.util.Arrays;
import java.util.List;
import java.util.Map;
import java.util.function.Predicate;
import java.util.stream.IntStream;
import org.apache.commons.math3.stat.inference.ChiSquareTest;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;
import steelyard.balancer.core.pick.Hash;
import steelyard.balancer.core.pick.Keys;
import steelyard.balancer.core.pick.Ramp;
import steelyard.outside.CheckTable;
import steelyard.outside.behave.Sample;

/** Keys that move when a member leaves, and how evenly keys are spread, against hash.csv; sources in the README beside it. */
class KeysThatMoveTest {
    private static final int[] NONE = {};
    private static final int KEYS = 100_000;
    private static final int RINGS = 20;
    private static final int TABLES = 50;
    private static final double LEAST_P = 1e-4;

    @ParameterizedTest
    @CsvSource({"10, 1", "5, 10", "5, 100", "10, 10", "10, 100"})
    void ring_oneLeaves_movesItsKeysAndNoOthers(int members, int points) {
        Map<String, String> row =
                row("ring", r -> number(r, "backends_n") == members && number(r, "points_per_backend_v") == points);
        Sample moved = new Sample(RINGS);
        Sample most = new Sample(RINGS);
        for (int ring = 0; ring < RINGS; ring++) {
            add(Hash.overRing(names(members, ring), points, 0, Ramp.NONE), members, moved, most);
        }
        isAsTold(row, moved);
        most.mustAgreeWith(
                "greatest over mean",
                number(row, "max_over_mean_load"),
                number(row, "max_over_mean_standard_error"),
                0.1);
    }

    @ParameterizedTest
    @ValueSource(ints = {3, 10, 20})
    void rendezvous_oneLeaves_movesItsKeysAndNoOthers(int members) {
        Map<String, String> row = row("rendezvous", r -> number(r, "backends_n") == members);
        Sample moved = new Sample(RINGS);
        Sample most = new Sample(RINGS);
        for (int draw = 0; draw < RINGS; draw++) {
            add(Hash.byRendezvous(names(members, draw), 0, Ramp.NONE), members, moved, most);
        }
        isAsTold(row, moved);
        most.mustAgreeWith(
                "greatest over mean",
                number(row, "max_over_mean_load"),
                number(row, "max_over_mean_standard_error"),
                0.1);
    }

    /** Adds what one table shows: the share that moves when its last member leaves, and the greatest share over the mean. */
    private static void add(Hash hash, int members, Sample moved, Sample most) {
        int gone = members - 1;
        open(hash, members);
        int[] before = owners(hash);
        hash.leave(gone);
        int[] after = owners(hash);
        hash.enter(gone);

        assertThat(owners(hash)).isEqualTo(before);
        assertThat(IntStream.range(0, KEYS).filter(i -> before[i] != gone && before[i] != after[i]))
                .isEmpty();
        long[] counts = counts(before, members);
        moved.add((double) counts[gone] / KEYS);
        most.add(Arrays.stream(counts).max().orElseThrow() * (double) members / KEYS);
    }

    /** 4 standard deviations of the mean of so many rings, as the law of a single one has it. */
    private static void isAsTold(Map<String, String> row, Sample moved) {
        double widest = 4 * number(row, "sd_with_100000_random_keys") / Math.sqrt(RINGS);
        assertThat(Math.abs(moved.mean() - number(row, "expected_fraction_moved_when_one_leaves")))
                .isLessThanOrEqualTo(widest);
    }

    /** The keys of a member that leaves go evenly to the others. */
    @Test
    void rendezvous_oneLeaves_spreadsItsKeysEvenly() {
        int members = 10;
        Hash hash = Hash.byRendezvous(names(members, 0), 0, Ramp.NONE);
        open(hash, members);
        int[] before = owners(hash);
        hash.leave(9);
        int[] after = owners(hash);
        int[] takers = IntStream.range(0, KEYS)
                .filter(i -> before[i] == 9)
                .map(i -> after[i])
                .toArray();
        double[] even = new double[9];
        Arrays.fill(even, takers.length / 9.0);
        assertThat(new ChiSquareTest().chiSquareTest(even, counts(takers, 9))).isGreaterThan(LEAST_P);
    }

    @Test
    void rendezvous_weighted_spreadsKeysByWeight() {
        Hash hash = Hash.byRendezvous(names(4, 0), 0, Ramp.NONE);
        open(hash, 4);
        double[] expected = new double[4];
        for (int member = 0; member < 4; member++) {
            hash.weigh(member, (member + 1) * 1_000L);
            expected[member] = KEYS * (member + 1) / 10.0;
        }
        assertThat(new ChiSquareTest().chiSquareTest(expected, counts(owners(hash), 4)))
                .isGreaterThan(LEAST_P);
    }

    /**
     * Over 50 tables: the number of them below the median is binomial with p = 1/2 (25, 4 standard deviations are 14), that above
     * the 99 % quantile with p = 1/100 (5 or more have a chance of 1.5e-4). Places owned differ by one at most, exactly.
     */
    @ParameterizedTest
    @CsvSource({"3, 251", "5, 1021", "10, 65537", "100, 65537"})
    void permutation_oneLeaves_movesFewWithoutNeed(int members, int size) {
        Map<String, String> row =
                row("lookup table", r -> number(r, "backends_n") == members && number(r, "table_size_M") == size);
        int belowMedian = 0;
        int aboveMost = 0;
        for (int table = 0; table < TABLES; table++) {
            Hash hash = Hash.overPermutation(names(members, table), size, 0, Ramp.NONE);
            open(hash, members);
            int[] before = places(hash, size);
            hash.leave(members - 1);
            int[] after = places(hash, size);
            hash.enter(members - 1);
            assertThat(places(hash, size)).isEqualTo(before);
            long most = Arrays.stream(counts(before, members)).max().orElseThrow();
            assertThat(most).isEqualTo((size + members - 1) / members);
            double needless = IntStream.range(0, size)
                            .filter(i -> before[i] != members - 1 && before[i] != after[i])
                            .count()
                    / (double) size;
            belowMedian += needless < number(row, "median_needless") ? 1 : 0;
            aboveMost += needless > number(row, "q99_needless") ? 1 : 0;
        }
        assertThat(belowMedian).isBetween(11, 39);
        assertThat(aboveMost).isLessThanOrEqualTo(4);
    }

    private static Map<String, String> row(String method, Predicate<Map<String, String>> fits) {
        return CheckTable.row(
                KeysThatMoveTest.class, "hash.csv", r -> r.get("method").equals(method) && fits.test(r));
    }

    /** Other names make another ring, other lots and other permutations. */
    private static List<String> names(int members, int series) {
        return IntStream.range(0, members)
                .mapToObj(i -> "skua-" + series + "-" + i)
                .toList();
    }

    private static void open(Hash hash, int members) {
        for (int member = 0; member < members; member++) {
            hash.enter(member);
        }
    }

    private static int[] owners(Hash hash) {
        return IntStream.range(0, KEYS)
                .map(i -> owner(hash, Keys.of("berth " + i)))
                .toArray();
    }

    /** The owner of each place of a table, by a key in the middle of the stretch of keys that belong there. */
    private static int[] places(Hash hash, int size) {
        return IntStream.range(0, size)
                .map(i -> owner(hash, (long) ((i + 0.5) / size * 0x1p63) << 1))
                .toArray();
    }

    private static int owner(Hash hash, long key) {
        return hash.pick(0, 1, key, NONE, 0, 0);
    }

    private static long[] counts(int[] owners, int members) {
        long[] counts = new long[members];
        for (int owner : owners) {
            counts[owner]++;
        }
        return counts;
    }
}
