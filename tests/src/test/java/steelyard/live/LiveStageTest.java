package steelyard.live;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.io.IOException;
import java.net.InetAddress;
import java.net.InetSocketAddress;
import java.net.ServerSocket;
import java.net.URI;
import java.net.http.HttpClient;
import java.net.http.HttpRequest;
import java.net.http.HttpResponse;
import java.time.Duration;
import java.util.List;
import java.util.concurrent.CompletableFuture;
import java.util.concurrent.ConcurrentLinkedQueue;
import java.util.concurrent.TimeUnit;
import org.awaitility.Awaitility;
import org.junit.jupiter.api.BeforeAll;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.extension.ExtendWith;
import steelyard.accounting.Accounting;
import steelyard.backends.behave.Chance;
import steelyard.balancer.live.ControlAddress;
import steelyard.contract.Heard;
import steelyard.contract.StageContract;
import steelyard.drills.model.Drill;
import steelyard.drills.read.DrillReader;
import steelyard.drills.read.Parsed;
import steelyard.harness.conduct.Conductor;
import steelyard.harness.record.PlayListener;
import steelyard.harness.stage.CannotPlay;
import steelyard.harness.stage.Stage;
import steelyard.harness.stage.live.CuesByHand;
import steelyard.harness.stage.live.LiveStage;

@ExtendWith(Accounting.class)
class LiveStageTest extends StageContract {
    /** The first play of a process loads classes for most of a second. */
    @BeforeAll
    static void firstSteps() throws CannotPlay {
        play(drill("", "rate: 500/s", "1s", "  - {at: 500ms, hang: fulmar, for: 100ms}"));
    }

    @Override
    protected Stage stage(Drill drill, long seed) {
        return new LiveStage(drill, seed);
    }

    @Test
    void close_afterAPlay_leavesNoThread() throws CannotPlay {
        play(drill("", "rate: 200/s", "1s", "  - {at: 300ms, kill: fulmar}"));
        // Netty's own executor for shutdown and the like goes to rest after a second.
        Awaitility.await()
                .atMost(Duration.ofSeconds(20))
                .untilAsserted(() -> assertThat(threads()).isEmpty());
    }

    @Test
    void open_onATakenPort_saysSoInOneLineAndLeavesNothingOpen() throws IOException {
        try (ServerSocket taken = new ServerSocket(0, 1, InetAddress.getLoopbackAddress())) {
            Drill drill = drill("front: {port: " + taken.getLocalPort() + "}\n", "rate: 50/s", "1s", "");
            try (LiveStage stage = new LiveStage(drill, 7)) {
                assertThatThrownBy(() -> stage.open(new PlayListener() {}))
                        .isInstanceOf(CannotPlay.class)
                        .hasMessageContaining("seats")
                        .hasMessageContaining(String.valueOf(taken.getLocalPort()))
                        .message()
                        .doesNotContain("\n");
            }
        }
    }

    @Test
    void cue_postedToTheControlPage_isCarriedOutAndRecordedAsByHand() throws Exception {
        Drill drill = drill("", "rate: 50/s", "2s", "");
        Heard heard = new Heard();
        Conductor conductor = conductor(drill);
        try (LiveStage stage = new LiveStage(drill, 7)) {
            stage.open(heard);
            ControlAddress control = stage.openControl(new CuesByHand(drill, conductor));
            assertThat(post(control, "{\"withdraw\": \"fulmar\"}")).isEqualTo(409);
            CompletableFuture<Integer> status = CompletableFuture.supplyAsync(() -> {
                Awaitility.await().until(() -> post(control, "{\"withdraw\": \"albatross\"}") == 400);
                return post(control, "{\"withdraw\": \"fulmar\"}");
            });
            stage.play(conductor);
            assertThat(status.get(20, TimeUnit.SECONDS)).isEqualTo(202);
            assertThat(post(control, "{\"admit\": \"fulmar\"}")).isEqualTo(409);
        }
        assertThat(heard.cues).hasSize(1).allSatisfy(each -> {
            assertThat(each.by()).isEqualTo(PlayListener.By.HAND);
            assertThat(each.cue().text()).isEqualTo("withdraw fulmar");
        });
    }

    @Test
    void fill_showsOnTheLoadPage() throws Exception {
        Drill drill = whole("""
                method: stride
                weights: load
                load: {gauges: {disk: 100%}}
                serves: {workers: 8, time: {fixed: 2ms}, gauges: {disk: 20%}}
                backends: {fulmar: {}}
                """, "rate: 50/s", "1s", "  - {at: 300ms, fill: fulmar, to: 95%}");
        try (LiveStage stage = new LiveStage(drill, 7)) {
            stage.open(new PlayListener() {});
            stage.play(conductor(drill));
            // The stage stands until it is closed, and what was filled is filled; the page is there for whoever asks.
            assertThat(page(stage.frontAddress(0), "/load")).contains("{gauge=\"disk\"} 0.95\n");
        }
    }

    private static String page(InetSocketAddress front, String path) throws IOException, InterruptedException {
        URI uri = URI.create("http://127.0.0.1:" + front.getPort() + path);
        return HttpClient.newHttpClient()
                .send(HttpRequest.newBuilder(uri).build(), HttpResponse.BodyHandlers.ofString())
                .body();
    }

    private static int post(ControlAddress control, String cue) {
        HttpRequest request = HttpRequest.newBuilder(URI.create(control.base() + "/cues"))
                .header("Authorization", "Bearer " + control.token())
                .POST(HttpRequest.BodyPublishers.ofString(cue))
                .build();
        try {
            return HttpClient.newHttpClient()
                    .send(request, HttpResponse.BodyHandlers.ofString())
                    .statusCode();
        } catch (IOException | InterruptedException e) {
            throw new IllegalStateException(e);
        }
    }

    @Test
    void open_withMoreTrafficThanTheGeneratorSends_isRefused() {
        Drill drill = drill("", "rate: 9000/s", "4s", "  - {at: 1s, surge: {pool: seats}, factor: 3}");
        try (LiveStage stage = new LiveStage(drill, 7)) {
            assertThatThrownBy(() -> stage.open(new PlayListener() {}))
                    .isInstanceOf(CannotPlay.class)
                    .hasMessage("the drill offers 27000 requests a second at its peak, more than the 20000 that the"
                            + " generator sends: forecast it, or lower its rates or its surge");
        }
    }

    @Test
    void listener_thatFails_endsThePlayWithItsFailure() throws CannotPlay {
        PlayListener full = new PlayListener() {
            @Override
            public void requestSent(long atNanos, long request, long dueNanos) {
                throw new IllegalStateException("no room on the disk");
            }
        };
        Drill drill = drill("", "rate: 50/s", "60s", "");
        try (LiveStage stage = new LiveStage(drill, 7)) {
            stage.open(full);
            assertThatThrownBy(() -> stage.play(conductor(drill))).hasMessage("no room on the disk");
        }
    }

    @Test
    void hostWeights_9_15_24_overTwoPools_holdForTheHosts() throws CannotPlay {
        Drill drill = value(DrillReader.read("hosts", """
                drill: Uneven hosts
                about: Two pools on three hosts, Poisson traffic.
                stage:
                  hosts: {north-quay: {weight: 9}, south-quay: {weight: 15}, east-quay: {weight: 24}}
                  pools:
                    seats:
                      method: weighted-round-robin
                      weights: host
                      serves: {workers: 64, queue: 64, time: {fixed: 1ms}}
                      backends: {fulmar: {host: north-quay}, gannet: {host: south-quay}, petrel: {host: east-quay}}
                    cargo:
                      method: weighted-round-robin
                      weights: host
                      serves: {workers: 64, queue: 64, time: {fixed: 1ms}}
                      backends: {skua: {host: south-quay}, tern: {host: east-quay}}
                traffic:
                  - {to: seats, rate: 200/s, give-up: 20s}
                  - {to: cargo, rate: 200/s, give-up: 20s}
                lasts: 4s
                """));
        Heard heard = play(drill);
        List<Integer> picked = heard.backendsPicked();
        assertThat(share(picked, 0)).isBetween(0.16, 0.22);
        assertThat(share(picked, 1, 3)).isBetween(0.28, 0.34);
        assertThat(share(picked, 2, 4)).isBetween(0.47, 0.53);
    }

    private static double share(List<Integer> picked, Integer... backends) {
        return (double) picked.stream().filter(List.of(backends)::contains).count() / picked.size();
    }

    private static List<String> threads() {
        return Thread.getAllStackTraces().keySet().stream()
                .map(Thread::getName)
                .filter(each -> each.startsWith("generator")
                        || each.startsWith("backends")
                        || each.startsWith("steelyard-balancer")
                        || each.startsWith("account"))
                .toList();
    }

    private static Heard play(Drill drill) throws CannotPlay {
        Heard heard = new Heard();
        try (LiveStage stage = new LiveStage(drill, 7)) {
            stage.open(heard);
            stage.play(conductor(drill));
        }
        assertThat(heard.inFlight()).isZero();
        return heard;
    }

    private static Conductor conductor(Drill drill) {
        return new Conductor(drill, new Chance(7), new ConcurrentLinkedQueue<>());
    }

    private static Drill drill(String pool, String traffic, String lasts, String cues) {
        String lines = """
                method: round-robin
                serves: {workers: 64, queue: 64, time: {fixed: 2ms}}
                backends: {fulmar: {}, gannet: {}}
                """;
        return whole(lines + pool, traffic, lasts, cues);
    }

    private static Drill whole(String pool, String traffic, String lasts, String cues) {
        return value(DrillReader.read(
                "live",
                "drill: Live\nabout: Short.\nstage:\n  pools:\n    seats:\n"
                        + pool.strip().indent(6)
                        + "traffic:\n  - {to: seats, " + traffic + "}\nlasts: " + lasts + "\n"
                        + (cues.isEmpty() ? "" : "cues:\n" + cues + "\n")));
    }

    private static <T> T value(Parsed<T> parsed) {
        return parsed.value().orElseThrow(() -> new AssertionError(parsed.problems()));
    }
}
