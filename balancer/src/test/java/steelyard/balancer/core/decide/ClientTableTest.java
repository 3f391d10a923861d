package steelyard.balancer.core.decide;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.LinkedHashMap;
import java.util.Map;
import java.util.SplittableRandom;
import org.junit.jupiter.api.Test;

/** Whom clients are held to, against a map that is known to be right. */
class ClientTableTest {

    @Test
    void heldBy_awayForAsLongAsAffinityLasts_isNobody() {
        ClientTable table = new ClientTable(100, 4);
        table.hold(7, 2, Long.MAX_VALUE - 10);

        assertThat(table.heldBy(7, Long.MIN_VALUE + 88)).isEqualTo(2);
        assertThat(table.heldBy(7, Long.MIN_VALUE + 89)).isEqualTo(Decider.NOBODY);
        assertThat(table.heldBy(8, 0)).isEqualTo(Decider.NOBODY);
    }

    @Test
    void hold_oneTooMany_takesThePlaceOfWhoStayedAwayLongest() {
        ClientTable table = new ClientTable(100, 2);
        table.hold(1, 10, 0);
        table.hold(2, 20, 1);
        table.hold(1, 10, 2);
        table.hold(3, 30, 3);

        assertThat(table.heldBy(2, 4)).isEqualTo(Decider.NOBODY);
        assertThat(table.heldBy(1, 4)).isEqualTo(10);
        assertThat(table.heldBy(3, 4)).isEqualTo(30);
        assertThat(table.size()).isEqualTo(2);
    }

    @Test
    void hold_atRandom_agreesWithAMapInOrderOfUse() {
        int most = 256;
        ClientTable table = new ClientTable(Long.MAX_VALUE, most);
        Map<Long, Integer> model = new LinkedHashMap<>(16, 0.75f, true) {
            private static final long serialVersionUID = 1;

            @Override
            protected boolean removeEldestEntry(Map.Entry<Long, Integer> eldest) {
                return size() > most;
            }
        };
        SplittableRandom random = new SplittableRandom(5);
        for (int step = 0; step < 50_000; step++) {
            // Keys of four low bits share chains.
            long key = (long) random.nextInt(600) << 8 | random.nextInt(4);
            table.hold(key, step, step);
            model.put(key, step);
        }

        assertThat(table.size()).isEqualTo(most);
        model.forEach((key, backend) -> assertThat(table.heldBy(key, 50_000)).isEqualTo(backend));
    }
}
