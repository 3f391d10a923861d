package steelyard.harness.stage.live;

import io.netty.handler.codec.http.FullHttpRequest;
import java.net.InetSocketAddress;
import java.util.ArrayList;
import java.util.List;
import java.util.concurrent.TimeUnit;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Traffic;

/** The clients of one traffic stream, and what they send. Lives on the generator's loop. */
final class Clients {
    private static final long LONGEST_IDLE_NANOS = TimeUnit.SECONDS.toNanos(30);

    private final Traffic traffic;
    private final InetSocketAddress front;
    private final RequestMaker maker;
    private final @Nullable Client[] byNumber;
    private final List<Client> seen = new ArrayList<>();
    private final long idleNanos;

    /**
     * @param front where they connect to
     * @param idleLimitNanos after how long the balancer closes an idle connection; clients close theirs in half of that,
     *     so that it never closes one just as it is taken up again
     */
    Clients(Traffic traffic, InetSocketAddress front, long idleLimitNanos) {
        this.traffic = traffic;
        this.front = front;
        this.maker = new RequestMaker(traffic, front.getAddress().getHostAddress() + ":" + front.getPort());
        this.byNumber = new Client[traffic.clients()];
        this.idleNanos = Math.min(LONGEST_IDLE_NANOS, idleLimitNanos / 2);
    }

    InetSocketAddress front() {
        return front;
    }

    Client client(int number) {
        Client client = byNumber[number];
        if (client == null) {
            client = new Client();
            byNumber[number] = client;
            seen.add(client);
        }
        return client;
    }

    Exchange exchange(long request, long dueNanos, int stream, int kind) {
        return new Exchange(request, dueNanos, stream, kind, traffic.requests().get(kind), traffic.giveUpNanos());
    }

    FullHttpRequest message(Exchange exchange) {
        return maker.make(exchange.request, exchange.kind);
    }

    /** Closes connections that were idle for long enough by {@code nowNanos}. */
    void closeIdle(long nowNanos) {
        seen.forEach(client -> client.closeIdle(nowNanos - idleNanos));
    }
}
