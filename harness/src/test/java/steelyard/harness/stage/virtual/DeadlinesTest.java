package steelyard.harness.stage.virtual;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.Arrays;
import java.util.Random;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

class DeadlinesTest {

    @Test
    void first_ofNobody_isNever() {
        Deadlines deadlines = new Deadlines(3);
        assertThat(deadlines.first()).isEqualTo(Lane.NEVER);
        deadlines.set(1, 5);
        deadlines.set(1, Lane.NEVER);
        assertThat(deadlines.first()).isEqualTo(Lane.NEVER);
    }

    @ParameterizedTest
    @ValueSource(ints = {1, 2, 3, 5, 8, 100})
    void first_afterRandomChanges_isTheLeastAndLeftmost(int size) {
        Random random = new Random(size);
        Deadlines deadlines = new Deadlines(size);
        long[] plain = new long[size];
        Arrays.fill(plain, Lane.NEVER);
        for (int step = 0; step < 20_000; step++) {
            int who = random.nextInt(size);
            plain[who] = random.nextInt(4) == 0 ? Lane.NEVER : random.nextInt(20);
            deadlines.set(who, plain[who]);
            long least = Arrays.stream(plain).min().orElseThrow();
            assertThat(deadlines.first()).isEqualTo(least);
            if (least != Lane.NEVER) {
                int leftmost = 0;
                while (plain[leftmost] != least) {
                    leftmost++;
                }
                assertThat(deadlines.whoIsFirst()).isEqualTo(leftmost);
            }
        }
    }
}
