package steelyard.harness.stage.virtual;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.ArrayDeque;
import java.util.Random;
import org.junit.jupiter.api.Test;

class LaneTest {

    @Test
    void send_delaysEachMessageAlike_andKeepsAllOfIt() {
        Lane lane = new Lane(50);
        lane.send(10, 7, Long.MIN_VALUE, 3);
        lane.send(10, 8, 1, 0);
        assertThat(lane.nextNanos()).isEqualTo(60);
        assertThat(lane.what()).isEqualTo(7);
        assertThat(lane.where()).isEqualTo(Long.MIN_VALUE);
        assertThat(lane.tag()).isEqualTo(3);
        lane.drop();
        assertThat(lane.what()).isEqualTo(8);
        lane.drop();
        assertThat(lane.isEmpty()).isTrue();
        assertThat(lane.nextNanos()).isEqualTo(Lane.NEVER);
    }

    @Test
    void messages_comingAndGoingAtRandom_leaveInTheirOrder() {
        Random random = new Random(5);
        Lane lane = new Lane(1_000);
        ArrayDeque<long[]> expected = new ArrayDeque<>();
        long now = 0;
        for (int step = 0; step < 100_000; step++) {
            now += random.nextInt(3);
            // Long stretches of mostly sends and of mostly drops, so that the ring grows while it is wrapped round.
            boolean sends = random.nextInt(10) < (step / 5_000 % 2 == 0 ? 7 : 3);
            if (sends) {
                lane.send(now, step, -step, step & 7);
                expected.add(new long[] {now + 1_000, step});
            } else if (!expected.isEmpty()) {
                long[] first = expected.remove();
                assertThat(lane.nextNanos()).isEqualTo(first[0]);
                assertThat(lane.what()).isEqualTo(first[1]);
                assertThat(lane.where()).isEqualTo(-first[1]);
                assertThat(lane.tag()).isEqualTo((int) first[1] & 7);
                lane.drop();
            }
            assertThat(lane.isEmpty()).isEqualTo(expected.isEmpty());
        }
    }
}
