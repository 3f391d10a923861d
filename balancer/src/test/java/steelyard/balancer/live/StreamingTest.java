package steelyard.balancer.live;

import static org.assertj.core.api.Assertions.assertThat;
import static org.awaitility.Awaitility.await;

import java.io.IOException;
import java.io.UncheckedIOException;
import java.nio.charset.StandardCharsets;
import java.util.Arrays;
import java.util.concurrent.CompletableFuture;
import java.util.concurrent.CountDownLatch;
import java.util.concurrent.TimeUnit;
import java.util.concurrent.atomic.AtomicLong;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;
import org.junit.jupiter.api.extension.ExtendWith;

/** Large content: it flows, and a side that does not read slows the other down instead of filling memory. */
@Timeout(120)
@ExtendWith(Accounting.class)
class StreamingTest {
    private static final int PIECE = 64 * 1024;
    private static final int PIECES = 800; // 50 MiB
    private static final long SIZE = (long) PIECE * PIECES;

    private static final String OK = "HTTP/1.1 200 OK\r\nContent-Length: 2\r\n\r\nok";

    /** Both sockets' buffers and the balancer's own, with room to spare; far below the whole content. */
    private static final long MOST_BUFFERED = 24L * 1024 * 1024;

    private static byte[] piece(int number) {
        byte[] piece = new byte[PIECE];
        Arrays.fill(piece, (byte) number);
        return piece;
    }

    private static void readAll(Wire wire) throws IOException {
        for (int i = 0; i < PIECES; i++) {
            if (!Arrays.equals(wire.read(PIECE).getBytes(StandardCharsets.ISO_8859_1), piece(i))) {
                throw new IOException("piece " + i + " is not what was sent");
            }
        }
    }

    @Test
    void answer_clientReadsLate_backendWaitsAndAllArrives() throws Exception {
        AtomicLong sent = new AtomicLong();
        try (FakeBackend backend = FakeBackend.playing(wire -> {
                    wire.readHead();
                    wire.send("HTTP/1.1 200 OK\r\nContent-Length: " + SIZE + "\r\n\r\n");
                    for (int i = 0; i < PIECES; i++) {
                        wire.send(piece(i));
                        sent.addAndGet(PIECE);
                    }
                    wire.readHead();
                });
                LivePlay play = LivePlay.of(backend.address());
                Wire client = play.client()) {
            client.send("GET / HTTP/1.1\r\nHost: a\r\n\r\n");
            client.readHead();
            awaitRest(sent);
            assertThat(sent.get()).isLessThan(MOST_BUFFERED);
            readAll(client);
            await().until(() -> play.inFlight() == 0);
        }
    }

    @Test
    void content_backendReadsLate_clientWaitsAndAllArrives() throws Exception {
        CountDownLatch reads = new CountDownLatch(1);
        AtomicLong sent = new AtomicLong();
        try (FakeBackend backend = FakeBackend.playing(wire -> {
                    wire.readHead();
                    try {
                        reads.await();
                    } catch (InterruptedException e) {
                        return;
                    }
                    readAll(wire);
                    wire.send(OK);
                    wire.readHead();
                });
                LivePlay play = LivePlay.of(Pool::retrying, backend.address());
                Wire client = play.client()) {
            CompletableFuture<Void> sending = CompletableFuture.runAsync(() -> {
                try {
                    client.send("PUT / HTTP/1.1\r\nHost: a\r\nContent-Length: " + SIZE + "\r\n\r\n");
                    for (int i = 0; i < PIECES; i++) {
                        client.send(piece(i));
                        sent.addAndGet(PIECE);
                    }
                } catch (IOException e) {
                    throw new UncheckedIOException(e);
                }
            });
            awaitRest(sent);
            assertThat(sent.get()).isLessThan(MOST_BUFFERED);
            reads.countDown();
            sending.get(60, TimeUnit.SECONDS);
            assertThat(client.readAnswer()).endsWith("ok");
        }
    }

    /** A client that asks on and on without reading must not have its answers, each of one read, pile up here. */
    @Test
    void answers_clientSendsAheadAndReadsLate_backendWaitsAndAllArrive() throws Exception {
        int size = 8 * 1024;
        int answers = 6_400; // 50 MiB
        String answer = "HTTP/1.1 200 OK\r\nContent-Length: " + size + "\r\n\r\n" + "x".repeat(size);
        AtomicLong sent = new AtomicLong();
        try (FakeBackend backend = FakeBackend.playing(wire -> {
                    while (wire.readHead() != null) {
                        wire.send(answer);
                        sent.addAndGet(size);
                    }
                });
                LivePlay play = LivePlay.of(backend.address());
                Wire client = play.client()) {
            CompletableFuture<Void> sending = CompletableFuture.runAsync(() -> {
                try {
                    client.send("GET / HTTP/1.1\r\nHost: a\r\n\r\n".repeat(answers));
                } catch (IOException e) {
                    throw new UncheckedIOException(e);
                }
            });
            awaitRest(sent);
            assertThat(sent.get()).isLessThan(MOST_BUFFERED);
            for (int i = 0; i < answers; i++) {
                assertThat(client.readAnswer()).endsWith("x");
            }
            sending.get(60, TimeUnit.SECONDS);
        }
    }

    /** Waits until a count that grows has stood still for a while. */
    private static void awaitRest(AtomicLong count) {
        long[] last = {-1};
        await().pollInterval(300, TimeUnit.MILLISECONDS)
                .atMost(30, TimeUnit.SECONDS)
                .until(() -> {
                    long now = count.get();
                    boolean rests = now > 0 && now == last[0];
                    last[0] = now;
                    return rests;
                });
    }
}
