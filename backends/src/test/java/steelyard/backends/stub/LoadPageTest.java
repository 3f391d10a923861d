package steelyard.backends.stub;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatExceptionOfType;
import static org.assertj.core.api.Assertions.assertThatIllegalArgumentException;

import java.net.SocketTimeoutException;
import java.time.Duration;
import java.util.List;
import java.util.Map;
import org.junit.jupiter.api.Test;
import steelyard.backends.behave.BehaviourSettings;
import steelyard.backends.behave.Change;
import steelyard.backends.behave.Gauge;
import steelyard.backends.behave.LoadPage;
import steelyard.backends.fleet.BackendSpec;

/** The load page as whoever reads it sees it. */
class LoadPageTest {

    private static final String READ = "GET /load HTTP/1.1\r\nHost: gannet\r\n\r\n";
    private static final int SILENCE_MILLIS = 200;
    private static final long SECOND = 1_000_000_000L;

    private static OneStub stub(BehaviourSettings settings, long costNanos) throws Exception {
        LoadPage page = new LoadPage(costNanos, List.of(new Gauge("memory", 0.25, 0.125), Gauge.constant("disk", 0.5)));
        return new OneStub(new BackendSpec("gannet", settings.withLoad(page), "/afloat", "/load", null, false));
    }

    // The OpenMetrics text format, from memory: families with TYPE and HELP, one sample a line, "# EOF" at the end.
    @Test
    void page_idle_isOpenMetricsTextOfEveryGauge() throws Exception {
        try (OneStub stub = stub(OneStub.NO_TIME, 0);
                RawClient client = stub.client()) {
            RawClient.Received page = client.send(READ).receive();
            assertThat(page.status()).isEqualTo(200);
            assertThat(page.headers())
                    .contains("content-type: application/openmetrics-text; version=1.0.0; charset=utf-8");
            assertThat(page.body().lines())
                    .contains(
                            "# TYPE load_ratio gauge",
                            "load_ratio{gauge=\"cpu\"} 0.0",
                            "load_ratio{gauge=\"memory\"} 0.25",
                            "load_ratio{gauge=\"disk\"} 0.5")
                    .last()
                    .isEqualTo("# EOF");
            assertThat(stub.figures().readings()).isEqualTo(1);
            assertThat(stub.figures().received()).isZero();
            assertThat(stub.figures().probes()).isZero();
            assertThat(stub.heard.lines).isEmpty();
        }
    }

    // One of one worker busy for half a second of the last one; one held: 0.25 + 0.125.
    @Test
    void page_underLoad_followsTheWork() throws Exception {
        try (OneStub stub = stub(OneStub.TEN_SECONDS, 0);
                RawClient client = stub.client();
                RawClient reader = stub.client()) {
            client.get("/", 0);
            stub.until(figures -> figures.inService() == 1);
            stub.pass(Duration.ofMillis(500));
            assertThat(reader.send(READ).receive().body())
                    .contains("load_ratio{gauge=\"cpu\"} 0.5\n", "load_ratio{gauge=\"memory\"} 0.375\n");
        }
    }

    @Test
    void page_withACost_waitsForAWorkerAndTakesItsTime() throws Exception {
        try (OneStub stub = stub(OneStub.TEN_SECONDS, 2 * SECOND);
                RawClient client = stub.client();
                RawClient reader = stub.client()) {
            client.get("/", 0);
            stub.until(figures -> figures.inService() == 1);
            reader.send(READ);
            stub.until(figures -> figures.readings() == 1);
            stub.pass(Duration.ofSeconds(11));
            assertThat(client.receive().status()).isEqualTo(200);
            reader.longestRead(SILENCE_MILLIS);
            assertThatExceptionOfType(SocketTimeoutException.class).isThrownBy(reader::readByte);
            reader.longestRead(20_000);
            stub.pass(Duration.ofSeconds(1));
            assertThat(reader.receive().body()).contains("load_ratio{gauge=\"cpu\"} 1.0\n");
        }
    }

    @Test
    void page_noRoomForAReading_isA503() throws Exception {
        try (OneStub stub = stub(OneStub.TEN_SECONDS, SECOND);
                RawClient one = stub.client();
                RawClient other = stub.client();
                RawClient reader = stub.client()) {
            one.get("/", 0);
            other.get("/", 1);
            stub.until(figures -> figures.inService() + figures.waiting() == 2);
            assertThat(reader.send(READ).receive().status()).isEqualTo(503);
            assertThat(stub.figures().readingsFailed()).isEqualTo(1);
        }
    }

    @Test
    void loadAndFill_areShownUntilHealed() throws Exception {
        try (OneStub stub = stub(OneStub.NO_TIME, 0);
                RawClient client = stub.client()) {
            stub.apply(new Change.Load("cpu", 0.9));
            stub.apply(new Change.Load("queue", 0.4));
            stub.apply(new Change.Fill(0.95));
            assertThat(client.send(READ).receive().body())
                    .contains(
                            "load_ratio{gauge=\"cpu\"} 0.9\n",
                            "load_ratio{gauge=\"queue\"} 0.4\n",
                            "load_ratio{gauge=\"disk\"} 0.95\n");
            stub.apply(Change.Heal.all());
            assertThat(client.send(READ).receive().body())
                    .contains("load_ratio{gauge=\"cpu\"} 0.0\n", "load_ratio{gauge=\"disk\"} 0.5\n")
                    .doesNotContain("queue");
        }
    }

    @Test
    void hang_readingsMeetSilence() throws Exception {
        try (OneStub stub = stub(OneStub.NO_TIME, 0);
                RawClient client = stub.client()) {
            stub.apply(new Change.Hang());
            client.send(READ);
            stub.until(figures -> figures.readingsFailed() == 1);
            client.longestRead(SILENCE_MILLIS);
            assertThatExceptionOfType(SocketTimeoutException.class).isThrownBy(client::readByte);
        }
    }

    @Test
    void withoutALoadPage_thePathIsTraffic() throws Exception {
        try (OneStub stub = OneStub.of(OneStub.NO_TIME);
                RawClient client = stub.client()) {
            assertThat(client.send(READ).receive().body()).startsWith("served by");
            assertThat(stub.figures().received()).isEqualTo(1);
        }
    }

    @Test
    void text_nameThatNeedsEscaping_isEscaped() {
        String page = new String(new LoadText().page(Map.of("a\"b\\c", 0.5)), java.nio.charset.StandardCharsets.UTF_8);
        assertThat(page).contains("load_ratio{gauge=\"a\\\"b\\\\c\"} 0.5\n");
    }

    @Test
    void spec_loadPathWithoutAPageOrThatOfTheProbe_isRefused() {
        assertThatIllegalArgumentException()
                .isThrownBy(() -> new BackendSpec("gannet", OneStub.NO_TIME, "/afloat", "/load", null, false))
                .withMessageContaining("gannet");
        assertThatIllegalArgumentException()
                .isThrownBy(() -> new BackendSpec(
                        "gannet",
                        OneStub.NO_TIME.withLoad(new LoadPage(0, List.of())),
                        "/afloat",
                        "/afloat",
                        null,
                        false))
                .withMessageContaining("both /afloat");
    }
}
