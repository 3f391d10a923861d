package steelyard.balancer.live.tcp;

import static org.assertj.core.api.Assertions.assertThat;

import io.netty.channel.embedded.EmbeddedChannel;
import java.util.concurrent.TimeUnit;
import org.junit.jupiter.api.AfterEach;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import steelyard.balancer.live.Leaks;

/** On a loop whose time is moved by hand. */
class DeadlineTest {
    static {
        Leaks.watch();
    }

    private final EmbeddedChannel channel = new EmbeddedChannel();
    private int passed;
    private final Deadline deadline = new Deadline(channel.eventLoop(), () -> passed++);

    @BeforeEach
    void stopTime() {
        channel.freezeTime();
    }

    @AfterEach
    void close() {
        channel.finishAndReleaseAll();
    }

    private void advance(long nanos) {
        channel.advanceTimeBy(nanos, TimeUnit.NANOSECONDS);
        channel.runScheduledPendingTasks();
    }

    @Test
    void deadline_reached_passesOnce() {
        deadline.in(100);
        advance(99);
        assertThat(passed).isZero();
        advance(1);
        assertThat(passed).isEqualTo(1);
        advance(1000);
        assertThat(passed).isEqualTo(1);
    }

    @Test
    void deadline_movedLater_passesAtTheLaterInstant() {
        deadline.in(100);
        advance(60);
        deadline.in(100);
        advance(99);
        assertThat(passed).isZero();
        advance(1);
        assertThat(passed).isEqualTo(1);
    }

    @Test
    void deadline_movedEarlier_passesAtTheEarlierInstant() {
        deadline.in(100);
        deadline.in(10);
        advance(10);
        assertThat(passed).isEqualTo(1);
        advance(1000);
        assertThat(passed).isEqualTo(1);
    }

    @Test
    void deadline_cleared_doesNotPassUntilSetAgain() {
        deadline.in(100);
        deadline.clear();
        advance(200);
        assertThat(passed).isZero();
        deadline.in(50);
        advance(50);
        assertThat(passed).isEqualTo(1);
    }

    @Test
    void deadline_stopped_leavesNoTimer() {
        deadline.in(100);
        deadline.stop();
        assertThat(channel.runScheduledPendingTasks()).isEqualTo(-1);
    }
}
