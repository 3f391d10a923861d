package steelyard.harness.stage.live;

import io.netty.handler.codec.http.FullHttpRequest;
import java.util.ArrayList;
import java.util.List;
import java.util.concurrent.TimeUnit;
import java.util.function.LongSupplier;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Traffic;
import steelyard.harness.stage.Clientele;

/** The clients of one traffic stream, and what they send. Lives on the generator's loop. */
final class Clients {
    private static final long LONGEST_IDLE_NANOS = TimeUnit.SECONDS.toNanos(30);

    private final Traffic traffic;
    private final int stream;
    private final Way way;
    private final Clientele clientele;
    private final ClientAddresses addresses;
    private final LongSupplier nanoClock;
    private final RequestMaker maker;
    private final @Nullable Client[] byNumber;
    private final List<Client> seen = new ArrayList<>();
    private final long idleNanos;

    /**
     * Clients close idle connections in half of the time in which the balancer would, so that it never closes one just as
     * it is taken up again.
     *
     * @param stream the number of the traffic
     * @param nanoClock what the cookies of clients run out by
     */
    Clients(
            Clientele clientele,
            int stream,
            Traffic traffic,
            Way way,
            ClientAddresses addresses,
            LongSupplier nanoClock) {
        this.clientele = clientele;
        this.stream = stream;
        this.traffic = traffic;
        this.way = way;
        this.addresses = addresses;
        this.nanoClock = nanoClock;
        this.maker = new RequestMaker(clientele, stream, traffic, way.authority());
        this.byNumber = new Client[traffic.clients()];
        this.idleNanos = Math.min(LONGEST_IDLE_NANOS, way.idleLimitNanos() / 2);
    }

    Way way() {
        return way;
    }

    Client client(int number) {
        Client client = byNumber[number];
        if (client == null) {
            client = new Client(number, addresses.of(clientele.number(stream, number)), nanoClock);
            byNumber[number] = client;
            seen.add(client);
        }
        return client;
    }

    Exchange exchange(long request, long dueNanos, int stream, int kind) {
        return new Exchange(request, dueNanos, stream, kind, traffic.requests().get(kind), traffic.giveUpNanos());
    }

    FullHttpRequest message(Exchange exchange, Client client) {
        return maker.make(exchange.request, exchange.kind, client);
    }

    /** Closes connections that were idle for long enough by {@code nowNanos}; all of them at {@link Long#MAX_VALUE}. */
    void closeIdle(long nowNanos) {
        long since = nowNanos == Long.MAX_VALUE ? Long.MAX_VALUE : nowNanos - idleNanos;
        seen.forEach(client -> client.closeIdle(since));
    }
}
