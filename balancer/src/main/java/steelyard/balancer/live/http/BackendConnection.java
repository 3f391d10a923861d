package steelyard.balancer.live.http;

import io.netty.channel.Channel;
import io.netty.channel.ChannelFuture;
import io.netty.channel.ChannelHandler;
import io.netty.channel.ChannelInitializer;
import io.netty.channel.ChannelPipeline;
import io.netty.handler.codec.http.HttpMethod;
import io.netty.handler.codec.http.HttpObject;
import io.netty.handler.codec.http.HttpRequest;
import io.netty.util.concurrent.Future;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.decide.Outcome;
import steelyard.balancer.live.tcp.Deadline;
import steelyard.balancer.live.tcp.Relay;
import steelyard.balancer.live.tls.BackendTls;
import steelyard.balancer.live.tls.Ends;
import steelyard.balancer.settings.TimeoutSettings;

/** One connection to a backend: it serves one exchange at a time and waits idle between them. */
final class BackendConnection {
    private final LoopConnections home;
    private final int backend;
    private final TimeoutSettings timeouts;
    private final @Nullable BackendTls tls;
    private final BackendDecoder decoder = Codecs.answers(this::moved);
    private final BackendReader reader = new BackendReader(this, decoder);
    private @Nullable Channel channel;
    private @Nullable Deadline deadline;

    /** What it serves; null while it is idle. */
    private @Nullable Exchange exchange;

    /** What its last exchange became, if it became one. */
    private @Nullable Relay tunnel;

    private boolean awaitsFirstByte;

    /** @param tls null for none */
    BackendConnection(
            LoopConnections home, int backend, TimeoutSettings timeouts, @Nullable BackendTls tls, Exchange exchange) {
        this.home = home;
        this.backend = backend;
        this.timeouts = timeouts;
        this.tls = tls;
        this.exchange = exchange;
    }

    int backend() {
        return backend;
    }

    /** What it serves; null while it is idle. */
    @Nullable
    Exchange served() {
        return exchange;
    }

    boolean open() {
        return channel != null && channel.isActive();
    }

    ChannelHandler initializer() {
        return new ChannelInitializer<Channel>() {
            @Override
            protected void initChannel(Channel opened) {
                opened.pipeline().addLast(decoder, new BackendEncoder(), reader);
                BackendTls.secure(tls, opened);
            }
        };
    }

    // ---- opening and closing

    void opening(ChannelFuture connecting) {
        channel = connecting.channel();
        deadline = new Deadline(channel.eventLoop(), this::timePassed);
        Ends.whenUsable(connecting, this::opened);
    }

    private void opened(Future<?> done) {
        if (!done.isSuccess()) {
            home.closed(this);
            fail(Outcome.REFUSED, OwnAnswer.unopened(done.cause()));
        } else if (exchange == null) {
            close();
        } else {
            exchange.connected(this);
        }
    }

    void close() {
        if (channel != null) {
            channel.close();
        }
    }

    /** Its exchange becomes a tunnel: the channel is the relay's from here on, and nothing on it is HTTP. */
    void become(Relay relay) {
        exchange = null;
        tunnel = relay;
        if (deadline != null) {
            deadline.stop();
        }
    }

    /** What is written from here on goes out as it is. */
    void removeEncoder() {
        ChannelPipeline pipeline = opened().pipeline();
        pipeline.remove(reader);
        pipeline.remove(BackendEncoder.class);
    }

    /** What is read from here on, and what came behind the last answer, is passed on as it is. */
    void removeDecoder() {
        opened().pipeline().remove(decoder);
    }

    /** Ends what it serves, if anything, and closes. */
    void fail(Outcome outcome, OwnAnswer answer) {
        if (tunnel != null && outcome == Outcome.CUT) {
            tunnel.cut();
        }
        Exchange served = exchange;
        if (served != null) {
            exchange = null;
            close();
            served.failed(outcome, answer);
        }
    }

    /** The exchange needs it no longer, and what it still says is of no interest. */
    void abandon() {
        exchange = null;
        close();
    }

    /** The answer is whole: waits idle from here on if it can serve again, or closes. */
    void release(boolean reusable) {
        exchange = null;
        if (reusable && open()) {
            read(true); // the idle limit counts from the bytes that came last, a moment ago
            home.idle(this);
        } else {
            close();
        }
    }

    /** The channel is closed. */
    void gone() {
        if (deadline != null) {
            deadline.stop();
        }
        home.closed(this);
    }

    // ---- towards the backend

    /** Serves a request whose head is written next. */
    void serve(Exchange served, HttpRequest head) {
        exchange = served;
        reader.expect(HttpMethod.HEAD.equals(head.method()));
        write(head);
    }

    void write(HttpObject message) {
        Channel to = opened();
        to.write(message, to.voidPromise());
    }

    void flush() {
        opened().flush();
    }

    boolean writable() {
        return opened().isWritable();
    }

    /** Whether answers are read, which is how a slow client slows its backend down. */
    void read(boolean reading) {
        Channel from = opened();
        if (from.config().isAutoRead() != reading) {
            from.config().setAutoRead(reading);
        }
    }

    /** Something moved; from here on nothing may stand still for longer than the idle limit. */
    void moved() {
        if (deadline != null) {
            awaitsFirstByte = false;
            deadline.in(timeouts.idleNanos());
        }
    }

    /** The whole request was sent; the first byte of the answer has to come in time. */
    void awaitFirstByte() {
        if (deadline != null && !reader.headSeen()) {
            awaitsFirstByte = true;
            deadline.in(timeouts.firstByteNanos());
        }
    }

    /** The channel, once it is being opened. */
    Channel opened() {
        if (channel == null) {
            throw new IllegalStateException("not opened");
        }
        return channel;
    }

    private void timePassed() {
        Exchange served = exchange;
        if (served == null) {
            close();
        } else if (awaitsFirstByte) {
            fail(Outcome.LATE, OwnAnswer.LATE);
        } else if (served.awaitsClient()) {
            served.clientStalled();
        } else {
            fail(Outcome.STALLED, OwnAnswer.STALLED);
        }
    }
}
