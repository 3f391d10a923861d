package steelyard.balancer.live;

import static org.assertj.core.api.Assertions.assertThat;
import static org.awaitility.Awaitility.await;

import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.util.List;
import java.util.concurrent.atomic.AtomicReference;
import java.util.function.UnaryOperator;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.extension.ExtendWith;
import steelyard.balancer.settings.LoadSettings;
import steelyard.balancer.settings.PickSettings;
import steelyard.balancer.settings.PoolSettings;

/** Load pages on the wire. */
@ExtendWith(Accounting.class)
class ReadingsTest {
    private static UnaryOperator<Pool> weighingByLoad() {
        LoadSettings load = new LoadSettings(
                "/load",
                100_000_000L,
                90_000_000L,
                500_000_000L,
                0.1,
                List.of(new LoadSettings.Gauge("cpu", 1, 1), new LoadSettings.Gauge("memory", 0.8, 1)));
        return pool -> pool.with(builder -> builder.pick(PickSettings.of(PoolSettings.Method.WEIGHTED_ROUND_ROBIN)
                        .with(PoolSettings.Weights.LOAD))
                .load(load));
    }

    private static FakeBackend showing(AtomicReference<String> page) throws IOException {
        return FakeBackend.playing(wire -> {
            while (wire.readHead() != null) {
                String content = page.get();
                wire.send("HTTP/1.1 " + (content.isEmpty() ? "500 Adrift" : "200 OK") + "\r\nContent-Length: "
                        + content.getBytes(StandardCharsets.UTF_8).length + "\r\n\r\n" + content);
            }
        });
    }

    @Test
    void page_inOpenMetrics_setsTheHeadroom() throws Exception {
        // Headroom is the least of 1 - 0.25/1 = 0.75 and 1 - 0.6/0.8 = 0.25.
        AtomicReference<String> page = new AtomicReference<>("""
                # TYPE load_ratio gauge
                # UNIT load_ratio ratio
                # HELP load_ratio Utilisation, by gauge
                load_ratio{gauge="cpu"} 0.25
                load_ratio{zone="north, \\"old\\" quay",gauge="memory"} 0.6 1760000000.0
                # EOF
                """);
        try (FakeBackend backend = showing(page);
                LivePlay play = LivePlay.of(weighingByLoad(), backend.address())) {
            await().until(() -> play.decisions.headroomMilli() == 250);
            page.set("cpu 0.5\nmemory 0\n");
            await().until(() -> play.decisions.headroomMilli() == 500);
        }
    }

    @Test
    void page_thatFails_goesStale() throws Exception {
        AtomicReference<String> page = new AtomicReference<>("cpu 0.5\nmemory 0\n");
        try (FakeBackend backend = showing(page);
                LivePlay play = LivePlay.of(weighingByLoad(), backend.address())) {
            await().until(() -> play.decisions.headroomMilli() == 500);
            page.set("");
            await().until(() -> play.decisions.headroomMilli() == 1000);
            assertThat(play.decisions.fresh()).endsWith(false);
        }
    }
}
