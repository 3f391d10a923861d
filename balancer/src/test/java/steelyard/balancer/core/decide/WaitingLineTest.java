package steelyard.balancer.core.decide;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.ArrayList;
import java.util.List;
import java.util.SplittableRandom;
import org.junit.jupiter.api.Test;

/** The line against a list. */
class WaitingLineTest {

    @Test
    void joinAndRemove_atRandom_keepTheOrderOfComing() {
        WaitingLine line = new WaitingLine(100, 50);
        List<Long> model = new ArrayList<>();
        SplittableRandom random = new SplittableRandom(3);
        Ask ask = new Ask();
        for (int step = 0; step < 20_000; step++) {
            if (random.nextInt(100) < 52 && line.hasRoom()) {
                ask.ticket = step;
                line.join(ask, step);
                model.add((long) step);
            } else if (!model.isEmpty()) {
                int place = random.nextBoolean() ? 0 : random.nextInt(model.size());
                assertThat(line.find(model.get(place))).isEqualTo(place);
                line.remove(place);
                model.remove(place);
            }
            assertThat(line.waiting()).isEqualTo(model.size());
            if (!model.isEmpty()) {
                assertThat(line.at(0).ticket).isEqualTo(model.get(0));
                assertThat(line.untilNanos(0)).isEqualTo(model.get(0) + 50);
            }
        }
        assertThat(line.find(-5)).isEqualTo(-1);
    }
}
