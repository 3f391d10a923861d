package steelyard.backends.stub;

import static org.assertj.core.api.Assertions.assertThat;
import static org.junit.jupiter.api.Assumptions.assumeTrue;

import io.netty.channel.EventLoopGroup;
import java.net.InetSocketAddress;
import java.net.ServerSocket;
import java.time.Duration;
import java.util.List;
import java.util.Map;
import java.util.concurrent.TimeUnit;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.EnumSource;
import steelyard.backends.behave.Behaviour;
import steelyard.backends.behave.BehaviourSettings;
import steelyard.backends.behave.Chance;
import steelyard.backends.behave.Reply;
import steelyard.backends.behave.ReplySink;
import steelyard.backends.behave.ServiceTime;
import steelyard.backends.fleet.BackendSpec;

/** A healthy stub, spoken to byte by byte. */
class StubTrafficTest {

    private static final Duration SERVICE = Duration.ofSeconds(10);

    @Test
    void requests_onOneConnection_areAnsweredOneAfterTheOther() throws Exception {
        try (OneStub stub = OneStub.of(OneStub.NO_TIME);
                RawClient client = stub.client()) {
            for (int request = 0; request < 3; request++) {
                RawClient.Received answer =
                        client.get("/sailings/today", request).receive();
                assertThat(answer.status()).isEqualTo(200);
                assertThat(answer.headers()).contains("content-length: 40");
                assertThat(answer.body()).hasSize(40).startsWith("served by");
            }
            stub.untilHeard("answered #2.1 200");
            assertThat(stub.heard.lines)
                    .containsExactly(
                            "received #0.1",
                            "answered #0.1 200",
                            "received #1.1",
                            "answered #1.1 200",
                            "received #2.1",
                            "answered #2.1 200");
        }
    }

    @Test
    void requests_pipelined_areAllAnswered() throws Exception {
        try (OneStub stub = OneStub.of(OneStub.NO_TIME);
                RawClient client = stub.client()) {
            int many = 200;
            for (int request = 0; request < many; request++) {
                client.get("/sailings/today", request);
            }
            for (int request = 0; request < many; request++) {
                assertThat(client.receive().status()).isEqualTo(200);
            }
            assertThat(stub.figures().answered()).isEqualTo(many);
        }
    }

    @Test
    void head_hasTheLengthButNoBody() throws Exception {
        try (OneStub stub = OneStub.of(OneStub.NO_TIME);
                RawClient client = stub.client()) {
            RawClient.Received answer =
                    client.send("HEAD / HTTP/1.1\r\nHost: gannet\r\n\r\n").receive(false);
            assertThat(answer.status()).isEqualTo(200);
            assertThat(answer.headers()).contains("content-length: 40");
            assertThat(client.get("/", 1).receive().status()).isEqualTo(200);
        }
    }

    @Test
    void connectionClose_isHonoured() throws Exception {
        try (OneStub stub = OneStub.of(OneStub.NO_TIME);
                RawClient client = stub.client()) {
            client.send("GET / HTTP/1.1\r\nHost: gannet\r\nConnection: close\r\n\r\n");
            assertThat(client.readAll()).startsWith("HTTP/1.1 200").containsIgnoringCase("connection: close");
        }
    }

    @Test
    void expectContinue_bodyIsAskedForThenAnswered() throws Exception {
        try (OneStub stub = OneStub.of(OneStub.NO_TIME);
                RawClient client = stub.client()) {
            client.send("POST /holds HTTP/1.1\r\nHost: gannet\r\nContent-Length: 5\r\nExpect: 100-continue\r\n\r\n");
            assertThat(client.receive().status()).isEqualTo(100);
            assertThat(client.send("hello").receive().status()).isEqualTo(200);
        }
    }

    @Test
    void malformed_isAnswered400AndClosed() throws Exception {
        try (OneStub stub = OneStub.of(OneStub.NO_TIME);
                RawClient client = stub.client()) {
            client.send("GET / HTTP/1.1\r\nContent-Length: x\r\n\r\n");
            assertThat(client.readAll()).startsWith("HTTP/1.1 400");
            assertThat(stub.heard.lines).isEmpty();
        }
    }

    @Test
    void unnumbered_isCountedApart() throws Exception {
        try (OneStub stub = OneStub.of(OneStub.NO_TIME);
                RawClient client = stub.client()) {
            client.send("GET / HTTP/1.1\r\nHost: gannet\r\n\r\n").receive();
            client.send("GET / HTTP/1.1\r\nHost: gannet\r\nSteelyard-Request: many\r\n\r\n")
                    .receive();
            stub.untilHeard("answered #-2.0 200");
            assertThat(stub.heard.lines).contains("received #-1.0", "answered #-1.0 200", "received #-2.0");
        }
    }

    // One worker, one place to wait, 10 s of work: the first is served, the second waits, the third is turned away.
    @Test
    void overload_getsSlowThen503() throws Exception {
        try (OneStub stub = OneStub.of(OneStub.TEN_SECONDS);
                RawClient first = stub.client();
                RawClient second = stub.client();
                RawClient third = stub.client()) {
            first.get("/", 0);
            stub.until(figures -> figures.inService() == 1);
            second.get("/", 1);
            stub.until(figures -> figures.waiting() == 1);
            assertThat(third.get("/", 2).receive().status()).isEqualTo(503);

            stub.pass(SERVICE);
            assertThat(first.receive().status()).isEqualTo(200);
            assertThat(stub.figures().inService()).isEqualTo(1);
            stub.pass(SERVICE);
            assertThat(second.receive().status()).isEqualTo(200);
            assertThat(stub.figures().waitNanos()).isEqualTo(SERVICE.toNanos());
        }
    }

    @Test
    void clientGone_workGoesOnAndIsDropped() throws Exception {
        try (OneStub stub = OneStub.of(OneStub.TEN_SECONDS)) {
            try (RawClient client = stub.client()) {
                client.get("/", 0);
                stub.until(figures -> figures.inService() == 1);
            }
            stub.untilHeard("broken #0.1 0");
            assertThat(stub.figures().abandoned()).isEqualTo(1);
            assertThat(stub.figures().inService()).isEqualTo(1);
            stub.pass(SERVICE);
            assertThat(stub.figures().dropped()).isEqualTo(1);
        }
    }

    @Test
    void probe_isAnsweredPastTheQueueAndIsNotTraffic() throws Exception {
        try (OneStub stub = OneStub.of(OneStub.TEN_SECONDS);
                RawClient client = stub.client();
                RawClient prober = stub.client()) {
            client.get("/", 0);
            stub.until(figures -> figures.inService() == 1);
            assertThat(prober.send("GET /afloat?deep=1 HTTP/1.1\r\nHost: gannet\r\n\r\n")
                            .receive()
                            .status())
                    .isEqualTo(200);
            assertThat(stub.heard.lines).containsExactly("received #0.1");
            assertThat(stub.figures().probes()).isEqualTo(1);
        }
    }

    @Test
    void probe_pathWithAQuery_isNotTraffic() throws Exception {
        try (OneStub stub = new OneStub(new BackendSpec("gannet", OneStub.NO_TIME, "/afloat?deep=1", null));
                RawClient client = stub.client()) {
            String probe = "GET /afloat?deep=1 HTTP/1.1\r\nHost: gannet\r\n\r\n";
            assertThat(client.send(probe).receive().status()).isEqualTo(200);
            assertThat(client.get("/afloat", 1).receive().status()).isEqualTo(200);
            assertThat(stub.figures().probes()).isEqualTo(1);
            assertThat(stub.figures().received()).isEqualTo(1);
        }
    }

    /** Probes that never arrived have numbers too: those that do must not draw what belongs to them. */
    @Test
    void probe_thatCarriesItsNumber_drawsByThatNumber() throws Exception {
        BehaviourSettings lossy = OneStub.NO_TIME.withProbeLoss(0.5);
        long lost = lost(lossy, 100, 140);
        assertThat(lost).as("a range that tells the two apart").isNotEqualTo(lost(lossy, 0, 40));
        try (OneStub stub = OneStub.of(lossy);
                RawClient prober = stub.client()) {
            for (long probe = 100; probe < 140; probe++) {
                prober.send("GET /afloat HTTP/1.1\r\nHost: gannet\r\nSteelyard-Probe: " + probe + "\r\n\r\n");
            }
            stub.until(figures -> figures.probes() == 40);
            assertThat(stub.figures().probesFailed()).isEqualTo(lost);
        }
    }

    /** How many probes from one number to below another a behaviour of the same settings and seed loses. */
    private static long lost(BehaviourSettings settings, long from, long to) {
        Behaviour behaviour = new Behaviour(0, settings, new Chance(1), 0);
        for (long probe = from; probe < to; probe++) {
            behaviour.probe(probe, probe, 0, NOBODY);
        }
        return behaviour.figures(0, NOBODY).probesFailed();
    }

    private static final ReplySink NOBODY = new ReplySink() {
        @Override
        public void reply(long token, long request, int attempt, Reply reply, int status, int bytes, long atNanos) {}

        @Override
        public void probeReply(long token, long probe, Reply reply, int status, long atNanos) {}

        @Override
        public void readingReply(
                long token, long reading, Reply reply, int status, Map<String, Double> gauges, long atNanos) {}

        @Override
        public void listening(boolean open, long atNanos) {}

        @Override
        public void connectionsReset(long atNanos) {}
    };

    // The only test here with a running clock: the stub's own timer has to bring the answer.
    @ParameterizedTest
    @EnumSource(Transport.class)
    void timer_onEitherTransport_bringsTheAnswerAndBodiesAreCounted(Transport transport) throws Exception {
        assumeTrue(transport == Transport.NIO || transport == Transport.best());
        BehaviourSettings settings = BehaviourSettings.of(1, 0, new ServiceTime.Fixed(3_000_000));
        EventLoopGroup loops = transport.loops(1, "test");
        try {
            StubSettings of = new StubSettings(0, freeAddress(), settings, 1, null, null);
            Stub stub = OneStub.now(Stub.start(of, transport, loops.next(), System::nanoTime, new Heard()));
            try (RawClient client = new RawClient(of.address())) {
                String body = "x".repeat(100_000);
                client.send("POST /holds HTTP/1.1\r\nHost: gannet\r\nContent-Length: 100000\r\n\r\n" + body);
                assertThat(client.receive().status()).isEqualTo(200);
                assertThat(OneStub.now(stub.bodyBytes())).isEqualTo(100_000);
            }
            OneStub.now(stub.close());
            assertThat(stub.figures()).failsWithin(Duration.ofSeconds(20));
        } finally {
            loops.shutdownGracefully(0, 5, TimeUnit.SECONDS).await(5_000);
        }
    }

    @Test
    void start_onABusyPort_failsWithTheReason() throws Exception {
        EventLoopGroup loops = Transport.best().loops(1, "test");
        try (ServerSocket busy = new ServerSocket()) {
            busy.bind(new InetSocketAddress("127.0.0.1", 0));
            InetSocketAddress address = new InetSocketAddress("127.0.0.1", busy.getLocalPort());
            StubSettings of = new StubSettings(0, address, OneStub.NO_TIME, 1, null, null);
            assertThat(Stub.start(of, Transport.best(), loops.next(), System::nanoTime, new Heard()))
                    .failsWithin(Duration.ofSeconds(20))
                    .withThrowableThat()
                    .withMessageContaining("in use");
        } finally {
            loops.shutdownGracefully(0, 5, TimeUnit.SECONDS).await(5_000);
        }
    }

    @Test
    void close_withWorkUnderWay_leavesNoSocket() throws Exception {
        OneStub stub = new OneStub(new BackendSpec("gannet", OneStub.TEN_SECONDS, null, null));
        try (RawClient client = stub.client()) {
            client.get("/", 0);
            stub.until(figures -> figures.inService() == 1);
            stub.close();
            assertThat(client.readByte()).isEqualTo(-1);
            assertThat(stub.heard.lines).isEqualTo(List.of("received #0.1", "broken #0.1 0"));
        }
    }

    private static InetSocketAddress freeAddress() throws Exception {
        try (ServerSocket any = new ServerSocket()) {
            any.setReuseAddress(true);
            any.bind(new InetSocketAddress("127.0.0.1", 0));
            return new InetSocketAddress("127.0.0.1", any.getLocalPort());
        }
    }
}
