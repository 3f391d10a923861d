package steelyard.balancer.live;

import static org.assertj.core.api.Assertions.assertThat;
import static org.awaitility.Awaitility.await;

import java.net.InetAddress;
import java.net.InetSocketAddress;
import java.net.ServerSocket;
import java.net.Socket;
import java.net.SocketTimeoutException;
import java.util.ArrayList;
import java.util.List;
import java.util.concurrent.CountDownLatch;
import java.util.concurrent.TimeUnit;
import java.util.concurrent.atomic.AtomicInteger;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;
import org.junit.jupiter.api.extension.ExtendWith;
import steelyard.balancer.core.decide.Outcome;

/** When connections are opened, kept and closed. */
@Timeout(60)
@ExtendWith(Accounting.class)
class ConnectionsTest {
    private static final String OK = "HTTP/1.1 200 OK\r\nContent-Length: 2\r\n\r\nok";
    private static final String GET = "GET / HTTP/1.1\r\nHost: a\r\n\r\n";

    @Test
    @Duty("H136")
    void backend_closesAnIdleConnection_nextRequestTakesANewOne() throws Exception {
        CountDownLatch closed = new CountDownLatch(1);
        try (FakeBackend backend = FakeBackend.playing(wire -> {
                    wire.readHead();
                    wire.send(OK);
                    wire.finish();
                    if (wire.readHead() == null) {
                        closed.countDown();
                    }
                });
                LivePlay play = LivePlay.of(backend.address());
                Wire client = play.client()) {
            client.send(GET);
            assertThat(client.readAnswer()).endsWith("ok");
            assertThat(closed.await(20, TimeUnit.SECONDS)).isTrue();
            client.send(GET);
            assertThat(client.readAnswer()).endsWith("ok");
            assertThat(backend.connections()).isEqualTo(2);
            assertThat(play.decisions.outcomes()).containsExactly(Outcome.ANSWERED, Outcome.ANSWERED);
        }
    }

    @Test
    void backend_idleConnection_isClosedAtTheLimit() throws Exception {
        CountDownLatch closed = new CountDownLatch(1);
        try (FakeBackend backend = FakeBackend.playing(wire -> {
                    wire.readHead();
                    wire.send(OK);
                    if (wire.readHead() == null) {
                        closed.countDown();
                    }
                });
                LivePlay play = LivePlay.of(pool -> pool.patience(10, 10, 0.2), backend.address())) {
            assertThat(play.ask(GET)).endsWith("ok");
            assertThat(closed.await(20, TimeUnit.SECONDS)).isTrue();
        }
    }

    @Test
    void backend_twoClientsInTurn_shareTheConnectionUsedLast() throws Exception {
        try (FakeBackend backend = FakeBackend.answering(OK);
                LivePlay play = LivePlay.of(backend.address())) {
            for (int i = 0; i < 5; i++) {
                assertThat(play.ask(GET)).endsWith("ok");
            }
            assertThat(backend.connections()).isEqualTo(1);
        }
    }

    @Test
    void backend_manyClientsAtOnce_eachGetTheirOwnAnswer() throws Exception {
        AtomicInteger together = new AtomicInteger();
        CountDownLatch all = new CountDownLatch(20);
        try (FakeBackend backend = FakeBackend.playing(wire -> {
                    for (String head = wire.readHead(); head != null; head = wire.readHead()) {
                        together.incrementAndGet();
                        all.countDown();
                        try {
                            all.await(20, TimeUnit.SECONDS);
                        } catch (InterruptedException e) {
                            return;
                        }
                        String path = head.split(" ")[1];
                        wire.send("HTTP/1.1 200 OK\r\nContent-Length: " + path.length() + "\r\n\r\n" + path);
                    }
                });
                LivePlay play = LivePlay.of(backend.address())) {
            List<Wire> clients = new ArrayList<>();
            for (int i = 0; i < 20; i++) {
                clients.add(play.client());
                clients.get(i).send("GET /" + i + " HTTP/1.1\r\nHost: a\r\n\r\n");
            }
            for (int i = 0; i < 20; i++) {
                assertThat(clients.get(i).readAnswer()).endsWith("\r\n\r\n/" + i);
                clients.get(i).close();
            }
            assertThat(together.get()).isEqualTo(20);
        }
    }

    @Test
    void backend_neverAccepts_is504AtTheConnectLimit() throws Exception {
        try (ServerSocket full = new ServerSocket(0, 1, InetAddress.getLoopbackAddress())) {
            InetSocketAddress address = (InetSocketAddress) full.getLocalSocketAddress();
            List<Socket> fillers = fill(address);
            try (LivePlay play = LivePlay.of(pool -> pool.patience(0.3, 30, 30), address)) {
                assertThat(play.ask(GET))
                        .startsWith("HTTP/1.1 504 ")
                        .containsIgnoringCase("error=connection_timeout\r\n");
                assertThat(play.decisions.outcomes()).containsExactly(Outcome.REFUSED);
            } finally {
                for (Socket filler : fillers) {
                    filler.close();
                }
            }
        }
    }

    /** Connects until the kernel takes no more. */
    private static List<Socket> fill(InetSocketAddress address) throws Exception {
        List<Socket> fillers = new ArrayList<>();
        for (int i = 0; i < 16; i++) {
            Socket filler = new Socket();
            fillers.add(filler);
            try {
                filler.connect(address, 300);
            } catch (SocketTimeoutException e) {
                return fillers;
            }
        }
        throw new AssertionError("the backlog never filled");
    }

    @Test
    @Duty("H133")
    void client_stillSendingWhenTheAnswerComes_canReadAllOfIt() throws Exception {
        String refusal = "HTTP/1.1 413 Content Too Large\r\nContent-Length: 5\r\n\r\nlarge";
        try (FakeBackend backend = FakeBackend.playing(wire -> {
                    wire.readHead();
                    wire.send(refusal);
                    wire.finish();
                    wire.readToEnd();
                });
                LivePlay play = LivePlay.of(backend.address());
                Wire client = play.client()) {
            client.send("PUT / HTTP/1.1\r\nHost: a\r\nContent-Length: 10000000\r\n\r\n");
            assertThat(client.readHead()).startsWith("HTTP/1.1 413 ").containsIgnoringCase("connection: close");
            client.send("x".repeat(1_000_000));
            assertThat(client.readToEnd()).isEqualTo("large");
        }
    }

    @Test
    void client_connectsBeforeBegin_isAnsweredAfterIt() throws Exception {
        try (FakeBackend backend = FakeBackend.answering(OK);
                LivePlay play = LivePlay.waiting(backend.address());
                Wire client = play.client()) {
            client.send(GET);
            play.balancer.begin(System.nanoTime());
            assertThat(client.readAnswer()).endsWith("ok");
        }
    }

    @Test
    void client_vanishesWhileTheConnectionIsBeingMade_endsAbandoned() throws Exception {
        try (ServerSocket full = new ServerSocket(0, 1, InetAddress.getLoopbackAddress())) {
            InetSocketAddress address = (InetSocketAddress) full.getLocalSocketAddress();
            List<Socket> fillers = fill(address);
            try (LivePlay play = LivePlay.of(address)) {
                Wire client = play.client();
                client.send(GET);
                await().until(() -> play.inFlight() == 1);
                client.close();
                await().untilAsserted(
                                () -> assertThat(play.decisions.outcomes()).containsExactly(Outcome.ABANDONED));
            } finally {
                for (Socket filler : fillers) {
                    filler.close();
                }
            }
        }
    }

    @Test
    void retry_afterAWaitForAConnectionOntoAnIdleOne_readsTheRestOfTheContent() throws Exception {
        try (ServerSocket full = new ServerSocket(0, 1, InetAddress.getLoopbackAddress());
                FakeBackend good = FakeBackend.playing(wire -> {
                    for (String head = wire.readHead(); head != null; head = wire.readHead()) {
                        String content = wire.read(Wire.contentLength(head));
                        wire.send("HTTP/1.1 200 OK\r\nContent-Length: " + content.length() + "\r\n\r\n" + content);
                    }
                })) {
            InetSocketAddress address = (InetSocketAddress) full.getLocalSocketAddress();
            List<Socket> fillers = fill(address);
            try (LivePlay play = LivePlay.of(pool -> pool.retrying().patience(1, 30, 30), good.address(), address);
                    Wire client = play.client()) {
                client.send(GET);
                client.readAnswer();
                client.send("POST / HTTP/1.1\r\nHost: a\r\nContent-Length: 10\r\n\r\nhello");
                await().until(() -> play.decisions.picks().size() == 3);
                client.send("gulls");
                assertThat(client.readAnswer()).startsWith("HTTP/1.1 200 ").endsWith("hellogulls");
                assertThat(good.connections()).isEqualTo(1);
            } finally {
                for (Socket filler : fillers) {
                    filler.close();
                }
            }
        }
    }

    @Test
    void loops_several_shareOneDecider() throws Exception {
        try (FakeBackend backend = FakeBackend.answering(OK);
                LivePlay play = LivePlay.onLoops(2, backend.address(), backend.address())) {
            List<Wire> clients = new ArrayList<>();
            for (int i = 0; i < 8; i++) {
                clients.add(play.client());
            }
            for (int round = 0; round < 10; round++) {
                for (Wire client : clients) {
                    client.send(GET);
                }
                for (Wire client : clients) {
                    assertThat(client.readAnswer()).endsWith("ok");
                }
            }
            for (Wire client : clients) {
                client.close();
            }
            assertThat(play.decisions.picks().stream().filter(pick -> pick.backend() == 0))
                    .hasSize(40);
        }
    }
}
