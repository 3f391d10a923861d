package steelyard.backends.stub;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatIllegalArgumentException;

import io.netty.channel.EventLoopGroup;
import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.time.Duration;
import java.util.concurrent.CompletableFuture;
import java.util.concurrent.TimeUnit;
import java.util.stream.Stream;
import org.junit.jupiter.api.AfterAll;
import org.junit.jupiter.api.BeforeAll;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.MethodSource;
import org.junit.jupiter.params.provider.ValueSource;
import steelyard.backends.behave.Change;
import steelyard.backends.behave.Figures;

/** The control port drives a stub exactly as calls in the same process do. */
class ControlFrontTest {

    private static final String TOKEN = "a-token-of-this-play";

    private static EventLoopGroup loops;
    private static OneStub stub;
    private static ControlFront front;

    @BeforeAll
    static void start() throws Exception {
        loops = Transport.best().loops(1, "control");
        stub = OneStub.of(OneStub.NO_TIME);
        StubControl control = new StubControl() {
            @Override
            public CompletableFuture<Long> apply(Change change) {
                return stub.fleet.apply(0, change);
            }

            @Override
            public CompletableFuture<Figures> figures() {
                return stub.fleet.figures(0);
            }
        };
        front = OneStub.now(ControlFront.start(control, Transport.best(), loops.next(), 0, TOKEN));
    }

    @AfterAll
    static void stop() throws Exception {
        OneStub.now(front.close());
        stub.close();
        loops.shutdownGracefully(0, 5, TimeUnit.SECONDS).await(5_000);
    }

    @Test
    void remoteControl_changesAndFigures_areThoseOfTheStub() throws Exception {
        RemoteControl remote = new RemoteControl(front.address(), TOKEN);
        long at = OneStub.now(remote.apply(new Change.Fail(1, 500, Change.When.AT_ONCE, false)));
        assertThat(at).isEqualTo(stub.clock.get());
        try (RawClient client = stub.client()) {
            assertThat(client.get("/", 0).receive().status()).isEqualTo(500);
        }
        OneStub.now(remote.apply(Change.Heal.all()));
        Figures figures = OneStub.now(remote.figures());
        assertThat(figures.failed()).isEqualTo(1);
        assertThat(figures).isEqualTo(stub.figures());
    }

    @Test
    void remoteControl_wrongToken_isTurnedAway() {
        RemoteControl remote = new RemoteControl(front.address(), "guessed");
        assertThat(remote.figures())
                .failsWithin(Duration.ofSeconds(20))
                .withThrowableThat()
                .withCauseInstanceOf(IOException.class)
                .withMessageContaining("token");
    }

    @Test
    void noToken_is401() throws Exception {
        try (RawClient client = new RawClient(front.address())) {
            assertThat(client.send("GET /figures HTTP/1.1\r\nHost: x\r\n\r\n")
                            .receive()
                            .status())
                    .isEqualTo(401);
        }
    }

    @ParameterizedTest
    @ValueSource(
            strings = {
                "{",
                "{\"kind\":\"MELT\"}",
                "null",
                "{\"kind\":\"FLAP_PROBE\",\"periodNanos\":0}",
                "{\"kind\":\"LOAD\",\"gauge\":\"memory\",\"to\":1.5}"
            })
    void badChange_is400WithTheReason(String json) throws Exception {
        try (RawClient client = new RawClient(front.address())) {
            client.send("POST /change HTTP/1.1\r\nHost: x\r\nAuthorization: Bearer " + TOKEN + "\r\nContent-Length: "
                    + json.length() + "\r\n\r\n" + json);
            RawClient.Received answer = client.receive();
            assertThat(answer.status()).isEqualTo(400);
            assertThat(answer.body()).startsWith("{\"problem\":\"").doesNotContain("steelyard.backends.stub");
        }
    }

    @Test
    void otherPath_is404() throws Exception {
        try (RawClient client = new RawClient(front.address())) {
            client.send("GET /change HTTP/1.1\r\nHost: x\r\nAuthorization: Bearer " + TOKEN + "\r\n\r\n");
            assertThat(client.receive().status()).isEqualTo(404);
        }
    }

    static Stream<Change> changes() {
        return Stream.of(
                new Change.Slow(2.5, 1_000, true),
                new Change.Fail(0.25, 503, Change.When.AFTER_WORK, true),
                new Change.Hang(),
                new Change.Refuse(),
                new Change.Kill(),
                new Change.Revive(),
                new Change.FailProbe(),
                new Change.FlapProbe(4_000),
                new Change.Load("memory", 0.9),
                new Change.Fill(0.95),
                new Change.Heal(Change.Kind.SLOW),
                Change.Heal.all());
    }

    @Test
    void changes_ofThisTest_coverEveryKind() {
        assertThat(changes().map(Change::kind)).contains(Change.Kind.values());
    }

    @ParameterizedTest
    @MethodSource("changes")
    void change_writtenAndRead_isTheSame(Change change) {
        assertThat(ControlJson.readChange(ControlJson.write(change))).isEqualTo(change);
    }

    @Test
    void figures_writtenAndRead_areTheSame() {
        Figures figures = new Figures(
                Long.MIN_VALUE,
                2,
                3,
                4,
                5,
                6,
                7,
                8,
                9,
                10,
                11,
                12,
                13,
                14,
                15,
                Long.MAX_VALUE,
                17,
                18,
                19,
                20,
                21,
                22,
                23);
        assertThat(ControlJson.readFigures(ControlJson.write(figures))).isEqualTo(figures);
    }

    @Test
    void change_missingField_isNamed() {
        byte[] json = "{\"kind\":\"SLOW\",\"factor\":2}".getBytes(StandardCharsets.UTF_8);
        assertThatIllegalArgumentException()
                .isThrownBy(() -> ControlJson.readChange(json))
                .withMessageContaining("plusNanos");
    }
}
