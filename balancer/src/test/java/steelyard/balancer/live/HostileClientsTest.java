package steelyard.balancer.live;

import static org.assertj.core.api.Assertions.assertThat;
import static org.awaitility.Awaitility.await;

import java.io.IOException;
import java.nio.ByteBuffer;
import java.nio.channels.SocketChannel;
import java.nio.charset.StandardCharsets;
import java.time.Duration;
import java.util.ArrayList;
import java.util.List;
import java.util.concurrent.TimeUnit;
import java.util.concurrent.atomic.AtomicBoolean;
import java.util.concurrent.atomic.AtomicInteger;
import org.junit.jupiter.api.AfterEach;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;
import org.junit.jupiter.api.extension.ExtendWith;

/**
 * Clients that want no answers. All the while somebody else is served without a failure, by a balancer in a process of
 * 160 MiB of heap and 96 MiB of direct memory; afterwards nothing is left of them there.
 */
@Timeout(180)
@ExtendWith(Accounting.class)
class HostileClientsTest {
    private static final int IDLE = 8_000;
    private static final int SLOW = 1_000;
    /** Both ends of the connections to the backend that wait idle for the next request. */
    private static final int KEPT = 40;

    private static final String GET = "GET / HTTP/1.1\r\nHost: a\r\n\r\n";

    private HostileBalancer balancer;
    private int socketsBefore;
    private Thread other;
    private final AtomicBoolean over = new AtomicBoolean();
    private final AtomicInteger served = new AtomicInteger();
    private final AtomicInteger failed = new AtomicInteger();

    @BeforeEach
    void startWithAnHonestClient() throws Exception {
        balancer = HostileBalancer.start();
        ask();
        socketsBefore = balancer.standing()[1];
        other = new Thread(this::beServed, "honest-client");
        other.start();
    }

    private void ask() throws IOException {
        try (Wire wire = Wire.to(balancer.front())) {
            wire.send(GET);
            assertThat(wire.readAnswer()).endsWith("ok");
        }
    }

    /** One connection for all, and a new one now and then. */
    private void beServed() {
        while (!over.get()) {
            try (Wire wire = Wire.to(balancer.front())) {
                for (int i = 0; i < 50 && !over.get(); i++) {
                    wire.send(GET);
                    if (wire.readAnswer().startsWith("HTTP/1.1 200 ")) {
                        served.incrementAndGet();
                    } else {
                        failed.incrementAndGet();
                    }
                    TimeUnit.MILLISECONDS.sleep(5);
                }
            } catch (IOException | InterruptedException e) {
                failed.incrementAndGet();
                return;
            }
        }
    }

    @AfterEach
    void honestClientWasServedAndNothingIsLeft() throws Exception {
        try (HostileBalancer ended = balancer) {
            int until = served.get() + 20;
            await().atMost(Duration.ofSeconds(60)).until(() -> served.get() >= until || failed.get() > 0);
            over.set(true);
            other.join(TimeUnit.SECONDS.toMillis(60));
            assertThat(failed).as("requests of the honest client that failed").hasValue(0);
            await().atMost(Duration.ofSeconds(60)).untilAsserted(() -> {
                int[] standing = ended.standing();
                assertThat(standing[0]).as("in flight").isZero();
                assertThat(standing[1]).as("open sockets").isLessThanOrEqualTo(socketsBefore + KEPT);
            });
            assertThat(ended.end()).as("exit status").isZero();
        }
    }

    @Test
    void idle_thousands_areHeldAndLetGo() throws Exception {
        List<SocketChannel> idle = new ArrayList<>();
        try {
            for (int i = 0; i < IDLE; i++) {
                idle.add(SocketChannel.open(balancer.front()));
            }
            await().atMost(Duration.ofSeconds(60)).until(() -> balancer.standing()[1] >= IDLE || failed.get() > 0);
            int until = served.get() + 20;
            await().atMost(Duration.ofSeconds(60)).until(() -> served.get() >= until || failed.get() > 0);
        } finally {
            for (SocketChannel each : idle) {
                each.close();
            }
        }
    }

    @Test
    void head_slowFromAThousand_areToldAndClosed() throws Exception {
        List<SocketChannel> slow = new ArrayList<>();
        try {
            for (int i = 0; i < SLOW; i++) {
                SocketChannel channel = SocketChannel.open(balancer.front());
                channel.write(octets("GET / HTTP/1.1\r\nX-A: "));
                slow.add(channel);
            }
            for (int round = 0; round < 4; round++) {
                for (SocketChannel channel : slow) {
                    trickle(channel);
                }
            }
            for (SocketChannel channel : slow) {
                channel.socket().setSoTimeout(30_000);
                byte[] told = channel.socket().getInputStream().readAllBytes();
                assertThat(new String(told, StandardCharsets.US_ASCII)).startsWith("HTTP/1.1 408 ");
            }
        } finally {
            for (SocketChannel each : slow) {
                each.close();
            }
        }
    }

    /** A balancer that has answered and closed may refuse the next octet. */
    private static void trickle(SocketChannel channel) {
        try {
            channel.write(octets("x"));
        } catch (IOException closed) {
            assertThat(closed).hasMessageFindingMatch("(?i)reset|pipe|abort");
        }
    }

    @Test
    void head_withoutEnd_is431() throws Exception {
        for (int i = 0; i < 20; i++) {
            flood("GET / HTTP/1.1\r\nHost: a\r\n", "X-A: 0123456789\r\n".repeat(100), "HTTP/1.1 431 ");
        }
        for (int i = 0; i < 20; i++) {
            flood("GET /", "x".repeat(2000), "HTTP/1.1 414 ");
        }
    }

    @Test
    void content_withoutEnd_is413() throws Exception {
        String head = "POST / HTTP/1.1\r\nHost: a\r\nTransfer-Encoding: chunked\r\n\r\n";
        for (int i = 0; i < 10; i++) {
            flood(head, "1000\r\n" + "x".repeat(4096) + "\r\n", "HTTP/1.1 413 ");
        }
    }

    /** Sends the beginning, then more and more, 20 MB at most, until the balancer has answered. */
    private void flood(String begin, String more, String told) throws IOException {
        try (Wire wire = Wire.to(balancer.front())) {
            wire.send(begin);
            try {
                for (int sent = 0; sent < 20_000_000 && !wire.hasInput(); sent += more.length()) {
                    wire.send(more);
                }
            } catch (IOException closed) {
                wire.failure(closed);
            }
            assertThat(wire.readHead()).as("after %s", begin).startsWith(told);
        }
    }

    @Test
    void resets_atEveryOctet_endNothingElse() throws Exception {
        String request = "POST /holds HTTP/1.1\r\nHost: a\r\nContent-Length: 10\r\n\r\n0123456789" + GET;
        for (int octets = 0; octets <= request.length(); octets++) {
            Wire wire = Wire.to(balancer.front());
            wire.send(request.substring(0, octets));
            if (octets % 3 == 0) {
                TimeUnit.MILLISECONDS.sleep(2);
            }
            wire.reset();
        }
        ask();
    }

    @Test
    void pipelined_thousandsUnread_areAnsweredWhenRead() throws Exception {
        List<Wire> clients = new ArrayList<>();
        for (int i = 0; i < 10; i++) {
            Wire wire = Wire.to(balancer.front());
            clients.add(wire);
            Thread sender = new Thread(() -> send(wire, GET.repeat(2_000)), "pipelining-client");
            sender.setDaemon(true);
            sender.start();
        }
        TimeUnit.MILLISECONDS.sleep(300);
        for (Wire wire : clients) {
            for (int i = 0; i < 2_000; i++) {
                assertThat(wire.readAnswer()).startsWith("HTTP/1.1 200 ").endsWith("ok");
            }
            wire.close();
        }
    }

    private static void send(Wire wire, String octets) {
        try {
            wire.send(octets);
        } catch (IOException e) {
            wire.failure(e);
        }
    }

    private static ByteBuffer octets(String text) {
        return ByteBuffer.wrap(text.getBytes(StandardCharsets.US_ASCII));
    }
}
