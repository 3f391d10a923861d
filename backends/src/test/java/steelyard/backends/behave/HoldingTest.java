package steelyard.backends.behave;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.ArrayDeque;
import java.util.Comparator;
import java.util.Deque;
import java.util.PriorityQueue;
import java.util.SplittableRandom;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

/** The primitive collections against those of the JDK, under random use. */
class HoldingTest {

    private static final int STEPS = 20_000;

    private record Finish(int place, long sinceOrigin, int order) {}

    @ParameterizedTest
    @ValueSource(longs = {0, Long.MAX_VALUE - 50, Long.MIN_VALUE})
    void finishHeap_randomUse_givesEarliestFirstAndEqualOnesInOrder(long origin) {
        SplittableRandom random = new SplittableRandom(3);
        FinishHeap heap = new FinishHeap();
        PriorityQueue<Finish> reference = new PriorityQueue<>(
                Comparator.comparingLong(Finish::sinceOrigin).thenComparingInt(Finish::order));
        for (int step = 0; step < STEPS; step++) {
            if (random.nextInt(5) < (step < STEPS / 2 ? 3 : 2)) {
                long since = random.nextLong(100);
                heap.add(step, origin + since);
                reference.add(new Finish(step, since, step));
            } else if (!reference.isEmpty()) {
                assertThat(heap.firstNanos())
                        .isEqualTo(origin + reference.element().sinceOrigin());
                assertThat(heap.remove()).isEqualTo(reference.remove().place());
            }
            assertThat(heap.isEmpty()).isEqualTo(reference.isEmpty());
        }
    }

    @Test
    void waitingLine_randomUse_isFirstInFirstOut() {
        SplittableRandom random = new SplittableRandom(4);
        WaitingLine line = new WaitingLine();
        Deque<Integer> reference = new ArrayDeque<>();
        for (int step = 0; step < STEPS; step++) {
            if (random.nextInt(5) < (step < STEPS / 2 ? 3 : 2)) {
                line.add(step);
                reference.add(step);
            } else if (!reference.isEmpty()) {
                assertThat(line.remove()).isEqualTo(reference.remove());
            }
            assertThat(line.size()).isEqualTo(reference.size());
        }
    }

    @Test
    void places_freedAndTakenAgain_startClean() {
        Places places = new Places();
        int[] taken = new int[40];
        for (int i = 0; i < taken.length; i++) {
            taken[i] = places.take(100 + i, i, 0, Places.Task.REQUEST, 0, 0);
        }
        places.abandoned[taken[7]] = true;
        places.faultStatus[taken[7]] = 500;
        places.free(taken[7]);
        assertThat(places.holds(taken[7], 107)).isFalse();
        assertThat(places.holds(taken[8], 108)).isTrue();
        int again = places.take(1, 2, 3, Places.Task.PROBE, 4, 5);
        assertThat(again).isEqualTo(taken[7]);
        assertThat(places.abandoned[again]).isFalse();
        assertThat(places.faultStatus[again]).isZero();
        assertThat(places.used()).isEqualTo(taken.length);
    }
}
