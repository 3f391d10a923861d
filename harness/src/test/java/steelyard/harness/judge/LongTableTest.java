package steelyard.harness.judge;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.HashMap;
import java.util.Map;
import java.util.Random;
import org.junit.jupiter.api.Test;

class LongTableTest {

    /** A table with one column. */
    private static final class Values extends LongTable {
        private long[] values = new long[capacity()];

        void put(long key, long value) {
            int place = find(key);
            values[place < 0 ? add(key) : place] = value;
        }

        @Override
        void moved(int from, int to) {
            values[to] = values[from];
        }

        @Override
        void grown(int capacity, int[] places) {
            long[] old = values;
            values = new long[capacity];
            for (int place = 0; place < places.length; place++) {
                if (places[place] >= 0) {
                    values[places[place]] = old[place];
                }
            }
        }
    }

    @Test
    void table_randomAddsAndRemoves_agreesWithAMapAfterEach() {
        Random random = new Random(42);
        Values table = new Values();
        Map<Long, Long> map = new HashMap<>();
        for (int step = 0; step < 200_000; step++) {
            // Few keys, some far apart, so that probes meet, and enough for two growths.
            long key = random.nextInt(3_000) * (random.nextBoolean() ? 1L : 1L << 32);
            if (random.nextInt(5) < 3) {
                if (!map.containsKey(key) || random.nextBoolean()) {
                    table.put(key, step);
                    map.put(key, (long) step);
                }
            } else if (map.remove(key) != null) {
                table.remove(table.find(key));
            }
            assertThat(table.size()).isEqualTo(map.size());
        }
        for (int key = 0; key < 3_000; key++) {
            check(table, map, key);
            check(table, map, (long) key << 32);
        }
        assertThat(table.capacity()).isGreaterThan(2_048);
    }

    private static void check(Values table, Map<Long, Long> map, long key) {
        int place = table.find(key);
        Long expected = map.get(key);
        assertThat(place >= 0).isEqualTo(expected != null);
        if (expected != null) {
            assertThat(table.values[place]).isEqualTo(expected);
        }
    }
}
