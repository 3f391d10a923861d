package steelyard.balancer.live.http;

import io.netty.channel.Channel;
import io.netty.handler.codec.http.HttpRequest;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.decide.Decider;
import steelyard.balancer.live.guard.ClientKeys;

/** One client as its exchanges see it: who it is, where answers go and how they end. At most one exchange runs. */
final class ClientSide {
    private final PoolFront pool;
    private final Channel channel;
    private final RequestDecoder decoder;
    private final ClientEncoder encoder;
    private final ClientOutput output;
    private final ClientClock clock;
    private final SentAhead ahead;
    private final ClientEnding ending;
    private final ClientReading reading;
    private final Runnable next;
    private @Nullable Exchange exchange;
    private int pinned = Decider.NOBODY;
    private long key;

    /**
     * @param ahead what the client sent before its turn
     * @param next called when the next request may be taken
     */
    ClientSide(
            PoolFront pool,
            Channel channel,
            RequestDecoder decoder,
            ClientEncoder encoder,
            ClientClock clock,
            SentAhead ahead,
            Runnable next) {
        this.pool = pool;
        this.channel = channel;
        this.decoder = decoder;
        this.encoder = encoder;
        this.output = new ClientOutput(channel, encoder, pool.balancer());
        this.clock = clock;
        this.ahead = ahead;
        this.ending = new ClientEnding(
                channel, output, ahead, clock, pool.settings().timeouts().idleNanos());
        this.reading = new ClientReading(channel, decoder, ahead, clock, ending);
        this.next = next;
    }

    /** The connection stands. */
    void opened() {
        key = ClientKeys.of(channel.remoteAddress());
        clock.idle();
    }

    /** The connection is gone, and with it the exchange. */
    void gone() {
        ending.gone();
        Exchange running = exchange;
        exchange = null;
        if (running != null) {
            running.abandon();
        }
    }

    // ---- the exchange that runs

    @Nullable
    Exchange exchange() {
        return exchange;
    }

    void begin(LoopConnections connections, HttpRequest head, boolean keep, boolean oldClient) {
        exchange = new Exchange(this, pool, connections, head, keep, oldClient);
        exchange.begin();
        updateReading();
    }

    /** Whether nothing more belongs to the request under way, or there is none. */
    boolean requestComplete() {
        return exchange == null || exchange.request().complete();
    }

    /** Whether nothing more is taken from the client. */
    boolean ends() {
        return ending.begun();
    }

    void updateReading() {
        reading.update(exchange == null ? null : exchange.request());
    }

    /** What was read is all that is there for now. */
    void readOut() {
        if (exchange != null) {
            exchange.request().flush();
        } else {
            reading.betweenRequests();
        }
    }

    // ---- who it is

    /** What the client is known by. */
    long key() {
        return key;
    }

    int pinned() {
        return pinned;
    }

    void pin(int backend) {
        if (pool.pins()) {
            pinned = backend;
        }
    }

    // ---- answers

    ClientOutput output() {
        return output;
    }

    /** Ends the running exchange with an answer of our own; the connection stays where the request was whole. */
    void answer(OwnAnswer answer) {
        Exchange running = exchange;
        if (running == null) {
            return; // the client left while the attempt failed
        }
        boolean keep = running.keepsClient();
        running.drop();
        output.own(answer, !keep);
        answered(keep);
    }

    void answerAndClose(OwnAnswer answer) {
        output.own(answer, true);
        exchange = null;
        ending.gently();
    }

    /** The answer was written to its end. */
    void answered(boolean keep) {
        exchange = null;
        if (keep) {
            decoder.release(channel);
            clock.idle();
            next.run();
        } else {
            ending.gently();
        }
    }

    /** The content of the request that runs goes wrong: its answer is this one, unless another has begun. */
    void contentFaulty(Exchange running, OwnAnswer answer) {
        boolean silent = !running.passedOn();
        running.abandon();
        exchange = null;
        if (silent) {
            answerAndClose(answer);
        } else {
            truncate(false);
        }
    }

    /**
     * Closes inside an answer, so that the client sees that it is not whole.
     *
     * @param byReset whether an orderly close would look like the end of the content
     */
    void truncate(boolean byReset) {
        exchange = null;
        ending.truncate(byReset);
    }

    /** The exchange became a tunnel. */
    void tunnel(BackendConnection backend, Attempts attempts) {
        exchange = null;
        clock.stop();
        long idleNanos = pool.settings().timeouts().idleNanos();
        SwitchOver.join(channel, encoder, decoder, backend, attempts, idleNanos);
    }
}
