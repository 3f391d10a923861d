package steelyard.balancer.core.weigh;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.util.List;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;
import steelyard.balancer.core.weigh.LoadReader.Step;
import steelyard.balancer.settings.LoadSettings;

/** Readings every 100 within 40, stale after 250; one gauge with its ceiling at 100 %. */
class LoadReaderTest {
    private static final LoadSettings SETTINGS =
            new LoadSettings("/load", 100, 40, 250, 0.1, List.of(new LoadSettings.Gauge("cpu", 1, 1)));

    /**
     * Read at 10 (headroom 700); 1 and 2 run out of time at 140 and 240; 10 + 250 = 260 comes before the next start at 300.
     */
    @ParameterizedTest
    @ValueSource(longs = {0, -1, Long.MAX_VALUE - 100, Long.MIN_VALUE})
    void poll_readingsThatStop_dropThemAndGoStaleOnce(long origin) {
        LoadReader reader = new LoadReader(SETTINGS, origin);
        assertThat(reader.poll(origin)).isEqualTo(Step.START);
        assertThat(reader.read(0, new double[] {0.3}, origin + 10)).isTrue();
        assertThat(reader.headroomMilli()).isEqualTo(700);

        StringBuilder steps = new StringBuilder();
        while (reader.deadlineNanos() - origin <= 400) {
            long at = reader.deadlineNanos();
            steps.append(at - origin).append(' ').append(reader.poll(at)).append(", ");
        }
        assertThat(steps.toString())
                .isEqualTo("100 START, 140 DROP, 200 START, 240 DROP, 260 STALE, 300 START, 340 DROP, 400 START, ");
        assertThat(reader.fresh()).isFalse();
        assertThat(reader.headroomMilli()).isEqualTo(Headroom.FULL);
    }

    @Test
    void read_failedLateOrWithoutAGauge_leavesWhatWasReadLast() {
        LoadReader reader = new LoadReader(SETTINGS, 0);
        reader.poll(0);
        reader.read(0, new double[] {0.6}, 5);
        reader.poll(100);
        assertThat(reader.read(1, null, 105)).isFalse();
        reader.poll(200);
        assertThat(reader.read(2, new double[] {Double.NaN}, 205)).isFalse();

        assertThat(reader.headroomMilli()).isEqualTo(400);
        assertThat(reader.fresh()).isTrue();
        assertThat(reader.poll(255)).isEqualTo(Step.STALE);
        reader.poll(300);
        assertThat(reader.read(3, new double[] {0.1}, 340)).isFalse();
        assertThat(reader.fresh()).isFalse();
    }

    @Test
    void read_ofOneThatIsOver_isIgnored() {
        LoadReader reader = new LoadReader(SETTINGS, 0);
        reader.poll(0);
        reader.poll(40);
        assertThat(reader.read(0, new double[] {0.5}, 41)).isFalse();
        assertThat(reader.deadlineNanos()).isEqualTo(100);
    }

    @Test
    void read_ofAnotherNumberOfGauges_isRefused() {
        LoadReader reader = new LoadReader(SETTINGS, 0);
        reader.poll(0);
        assertThatThrownBy(() -> reader.read(0, new double[] {0.5, 0.5}, 1))
                .isInstanceOf(IllegalArgumentException.class)
                .hasMessageContaining("2 gauges");
    }
}
