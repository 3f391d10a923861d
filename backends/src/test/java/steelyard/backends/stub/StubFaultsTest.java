package steelyard.backends.stub;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatExceptionOfType;

import java.net.BindException;
import java.net.ConnectException;
import java.net.ServerSocket;
import java.net.SocketException;
import java.net.SocketTimeoutException;
import java.time.Duration;
import org.junit.jupiter.api.Test;
import steelyard.backends.behave.Change;
import steelyard.backends.behave.Change.FailProbe;
import steelyard.backends.behave.Change.Hang;
import steelyard.backends.behave.Change.Heal;
import steelyard.backends.behave.Change.Kill;
import steelyard.backends.behave.Change.Refuse;
import steelyard.backends.behave.Change.Revive;
import steelyard.backends.behave.Change.Slow;

/** Every fault as a client sees it on its socket. */
class StubFaultsTest {

    private static final Duration SERVICE = Duration.ofSeconds(10);
    private static final String PROBE = "GET /afloat HTTP/1.1\r\nHost: gannet\r\n\r\n";

    /** How long a client listens to be sure of silence: too short can only miss a fault, not invent one. */
    private static final int SILENCE_MILLIS = 200;

    @Test
    void kill_connectionsAreResetAndNewOnesRefused() throws Exception {
        try (OneStub stub = OneStub.of(OneStub.TEN_SECONDS);
                RawClient busy = stub.client();
                RawClient idle = stub.client()) {
            busy.get("/", 0);
            stub.until(figures -> figures.inService() == 1);
            idle.send(PROBE).receive();

            stub.apply(new Kill());
            assertThatExceptionOfType(SocketException.class)
                    .isThrownBy(busy::readByte)
                    .withMessageContaining("reset");
            assertThatExceptionOfType(SocketException.class)
                    .isThrownBy(idle::readByte)
                    .withMessageContaining("reset");
            assertThatExceptionOfType(ConnectException.class).isThrownBy(stub::client);
            assertThat(stub.figures().lost()).isEqualTo(1);
            assertThat(stub.heard.lines).containsExactly("received #0.1", "broken #0.1 0");
        }
    }

    /** An answer is due when the kill comes: it is sent first, and the kill finds its connection closed. */
    @Test
    void kill_connectionThatHasJustClosed_isLeftAlone() throws Exception {
        try (OneStub stub = OneStub.of(OneStub.TEN_SECONDS);
                RawClient last = stub.client();
                RawClient idle = stub.client()) {
            last.send("GET / HTTP/1.1\r\nHost: gannet\r\nConnection: close\r\n\r\n");
            stub.until(figures -> figures.inService() == 1);
            idle.send(PROBE).receive();

            stub.clock.addAndGet(SERVICE.toNanos());
            stub.apply(new Kill());
            assertThat(last.receive().status()).isEqualTo(200);
            assertThatExceptionOfType(SocketException.class)
                    .isThrownBy(idle::readByte)
                    .withMessageContaining("reset");
        }
    }

    @Test
    void kill_whileNobodyListens_nobodyElseGetsThePort() throws Exception {
        try (OneStub stub = OneStub.of(OneStub.NO_TIME);
                ServerSocket other = new ServerSocket()) {
            other.setReuseAddress(false);
            stub.apply(new Kill());
            assertThatExceptionOfType(BindException.class).isThrownBy(() -> other.bind(stub.address()));
            stub.apply(new Revive());
            try (RawClient client = stub.client()) {
                assertThat(client.get("/", 0).receive().status()).isEqualTo(200);
            }
        }
    }

    @Test
    void revive_samePortServesAgain() throws Exception {
        try (OneStub stub = OneStub.of(OneStub.NO_TIME)) {
            for (int turn = 0; turn < 5; turn++) {
                try (RawClient client = stub.client()) {
                    assertThat(client.get("/", turn).receive().status()).isEqualTo(200);
                    stub.apply(new Kill());
                    assertThatExceptionOfType(ConnectException.class).isThrownBy(stub::client);
                    stub.apply(new Revive());
                }
            }
            try (RawClient client = stub.client()) {
                assertThat(client.get("/", 9).receive().status()).isEqualTo(200);
            }
        }
    }

    @Test
    void refuse_openConnectionsGoOnNewOnesAreRefused() throws Exception {
        try (OneStub stub = OneStub.of(OneStub.NO_TIME);
                RawClient open = stub.client()) {
            assertThat(open.get("/", 0).receive().status()).isEqualTo(200);
            stub.apply(new Refuse());
            assertThatExceptionOfType(ConnectException.class).isThrownBy(stub::client);
            assertThat(open.get("/", 1).receive().status()).isEqualTo(200);
            stub.apply(Heal.all());
            try (RawClient after = stub.client()) {
                assertThat(after.get("/", 2).receive().status()).isEqualTo(200);
            }
        }
    }

    @Test
    void lostProbe_meetsSilenceWhileRequestsAreAnswered() throws Exception {
        try (OneStub stub = OneStub.of(OneStub.NO_TIME.withProbeLoss(1));
                RawClient client = stub.client();
                RawClient prober = stub.client()) {
            prober.send(PROBE);
            stub.until(figures -> figures.probes() == 1 && figures.probesFailed() == 1);
            assertThat(client.get("/", 1).receive().status()).isEqualTo(200);
            prober.longestRead(SILENCE_MILLIS);
            assertThatExceptionOfType(SocketTimeoutException.class).isThrownBy(prober::readByte);
        }
    }

    @Test
    void hang_requestsAndProbesMeetSilenceForGood() throws Exception {
        try (OneStub stub = OneStub.of(OneStub.NO_TIME)) {
            try (RawClient client = stub.client();
                    RawClient prober = stub.client()) {
                stub.apply(new Hang());
                client.get("/", 0);
                prober.send(PROBE);
                stub.until(figures -> figures.unanswered() == 1 && figures.probesFailed() == 1);
                stub.apply(Heal.all());
                try (RawClient after = stub.client()) {
                    assertThat(after.get("/", 1).receive().status()).isEqualTo(200);
                }
                client.longestRead(SILENCE_MILLIS);
                assertThatExceptionOfType(SocketTimeoutException.class).isThrownBy(client::readByte);
                prober.longestRead(SILENCE_MILLIS);
                assertThatExceptionOfType(SocketTimeoutException.class).isThrownBy(prober::readByte);
            }
            stub.untilHeard("broken #0.1 0");
        }
    }

    @Test
    void hang_expectContinue_isSilentToo() throws Exception {
        try (OneStub stub = OneStub.of(OneStub.NO_TIME);
                RawClient client = stub.client()) {
            stub.apply(new Hang());
            client.send("POST / HTTP/1.1\r\nHost: gannet\r\nContent-Length: 1\r\nExpect: 100-continue\r\n\r\n");
            client.longestRead(SILENCE_MILLIS);
            assertThatExceptionOfType(SocketTimeoutException.class).isThrownBy(client::readByte);
        }
    }

    @Test
    void fail_requestsGetTheStatusProbesDoNot() throws Exception {
        try (OneStub stub = OneStub.of(OneStub.NO_TIME);
                RawClient client = stub.client()) {
            stub.apply(new Change.Fail(1, 502, Change.When.AT_ONCE, false));
            assertThat(client.get("/", 0).receive().status()).isEqualTo(502);
            assertThat(client.send(PROBE).receive().status()).isEqualTo(200);
            stub.apply(Heal.all());
            assertThat(client.get("/", 1).receive().status()).isEqualTo(200);
            stub.untilHeard("answered #0.1 502");
        }
    }

    @Test
    void slow_newWorkTakesLonger() throws Exception {
        try (OneStub stub = OneStub.of(OneStub.TEN_SECONDS);
                RawClient client = stub.client()) {
            stub.apply(new Slow(2, 0, false));
            client.get("/", 0);
            stub.until(figures -> figures.inService() == 1);
            stub.pass(SERVICE);
            assertThat(stub.figures().inService()).isEqualTo(1);
            stub.pass(SERVICE);
            assertThat(client.receive().status()).isEqualTo(200);
        }
    }

    @Test
    void failProbe_onlyProbesFail() throws Exception {
        try (OneStub stub = OneStub.of(OneStub.NO_TIME);
                RawClient client = stub.client()) {
            stub.apply(new FailProbe());
            assertThat(client.send(PROBE).receive().status()).isEqualTo(503);
            assertThat(client.get("/", 0).receive().status()).isEqualTo(200);
        }
    }

    @Test
    void flapProbe_answersAlternateWithTheClock() throws Exception {
        try (OneStub stub = OneStub.of(OneStub.NO_TIME);
                RawClient client = stub.client()) {
            stub.apply(new Change.FlapProbe(Duration.ofSeconds(4).toNanos()));
            assertThat(client.send(PROBE).receive().status()).isEqualTo(503);
            stub.pass(Duration.ofSeconds(2));
            assertThat(client.send(PROBE).receive().status()).isEqualTo(200);
            stub.pass(Duration.ofSeconds(2));
            assertThat(client.send(PROBE).receive().status()).isEqualTo(503);
        }
    }
}
