package steelyard.harness.stage.live;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.ArrayList;
import java.util.List;
import java.util.Set;
import org.junit.jupiter.api.Test;
import steelyard.drills.model.Traffic.Request;

class GiveUpsTest {
    private static final Request GET = new Request("GET", "/", 1, 0, Set.of());

    private final GiveUps giveUps = new GiveUps(2);
    private final List<Long> givenUp = new ArrayList<>();

    @Test
    void expire_atTheDeadline_handsOutWhatHasNotEnded() {
        Exchange first = add(1, 0, 100);
        add(2, 0, 110);
        add(3, 1, 105);
        first.end();
        assertThat(giveUps.nextNanos()).isEqualTo(105);
        expire(104);
        assertThat(givenUp).isEmpty();
        expire(110);
        assertThat(givenUp).containsExactlyInAnyOrder(2L, 3L);
        assertThat(giveUps.nextNanos()).isEqualTo(Long.MAX_VALUE);
    }

    @Test
    void expire_withTheGreatestInstant_handsOutAll() {
        add(1, 0, 100);
        add(2, 1, Long.MAX_VALUE - 1);
        expire(Long.MAX_VALUE);
        assertThat(givenUp).containsExactly(1L, 2L);
    }

    private Exchange add(long request, int traffic, long deadlineNanos) {
        Exchange exchange = new Exchange(request, deadlineNanos - 10, traffic, 0, GET, 10);
        giveUps.add(exchange);
        return exchange;
    }

    private void expire(long nowNanos) {
        giveUps.expire(nowNanos, each -> givenUp.add(each.request));
    }
}
