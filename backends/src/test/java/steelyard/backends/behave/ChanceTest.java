package steelyard.backends.behave;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.Arrays;
import java.util.HashSet;
import java.util.Set;
import java.util.SplittableRandom;
import org.junit.jupiter.api.Test;

class ChanceTest {

    // The generator of the same paper, as the JDK ships it, started where the hash of the other keys starts. The JDK's
    // variant hashes with the same finaliser (its Javadoc: SplittableRandom, Steele, Lea & Flood) after each step.
    @Test
    void bits_overTheSecondKey_areThoseOfSplitMix64() {
        Chance chance = new Chance(42);
        long start = unmix(chance.bits(Stream.PICK, 17, 0));
        SplittableRandom reference = new SplittableRandom(start);
        for (long b = 1; b < 1_000; b++) {
            assertThat(chance.bits(Stream.PICK, 17, b)).isEqualTo(reference.nextLong());
        }
    }

    @Test
    void bits_sameKey_sameDraw() {
        assertThat(new Chance(1).bits(Stream.SERVICE, 2, 3)).isEqualTo(new Chance(1).bits(Stream.SERVICE, 2, 3));
    }

    @Test
    void bits_anyOtherKey_otherDraw() {
        Set<Long> seen = new HashSet<>();
        int draws = 0;
        for (long seed = 0; seed < 10; seed++) {
            Chance chance = new Chance(seed);
            for (Stream stream : Stream.values()) {
                for (long a = -20; a < 20; a++) {
                    for (long b = -3; b < 3; b++) {
                        seen.add(chance.bits(stream, a, b));
                        draws++;
                    }
                }
            }
        }
        assertThat(seen).hasSize(draws);
    }

    // A recorded play stands on these: a change of them changes the meaning of every seed.
    @Test
    void streams_numbersAreFixed() {
        assertThat(Arrays.stream(Stream.values()).map(stream -> stream + "=" + stream.number()))
                .containsExactly(
                        "ARRIVALS=1",
                        "MIX=2",
                        "CLIENT=3",
                        "SERVICE=4",
                        "PICK=5",
                        "FAULT=6",
                        "PROBE_PHASE=7",
                        "PROBE_JITTER=8",
                        "READING_PHASE=9");
    }

    @Test
    void unit_manyDraws_staysInItsInterval() {
        Chance chance = new Chance(-1);
        for (long a = 0; a < 100_000; a++) {
            assertThat(chance.unit(Stream.MIX, a, 0)).isGreaterThanOrEqualTo(0).isLessThan(1);
            assertThat(chance.positiveUnit(Stream.MIX, a, 0)).isGreaterThan(0).isLessThanOrEqualTo(1);
            assertThat(chance.exponential(Stream.MIX, a, 0))
                    .isGreaterThanOrEqualTo(0)
                    .isFinite();
        }
    }

    /** Undoes the finaliser: each step is invertible. */
    private static long unmix(long z) {
        z = unshift(z, 31) * inverse(0x94D049BB133111EBL);
        z = unshift(z, 27) * inverse(0xBF58476D1CE4E5B9L);
        return unshift(z, 30);
    }

    private static long unshift(long z, int by) {
        long undone = z;
        for (int known = by; known < 64; known += by) {
            undone = z ^ (undone >>> by);
        }
        return undone;
    }

    /** Inverse modulo 2^64 by Newton's method: each turn doubles the number of right bits. */
    private static long inverse(long odd) {
        long inverse = odd;
        for (int turn = 0; turn < 6; turn++) {
            inverse *= 2 - odd * inverse;
        }
        return inverse;
    }
}
