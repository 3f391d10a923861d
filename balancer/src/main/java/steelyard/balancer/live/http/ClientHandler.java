package steelyard.balancer.live.http;

import io.netty.channel.Channel;
import io.netty.channel.ChannelHandlerContext;
import io.netty.channel.ChannelInboundHandlerAdapter;
import io.netty.handler.codec.http.HttpContent;
import io.netty.handler.codec.http.HttpObject;
import io.netty.handler.codec.http.HttpRequest;
import io.netty.handler.codec.http.HttpUtil;
import io.netty.util.ReferenceCountUtil;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.decide.Decider;
import steelyard.balancer.live.guard.ClientKeys;
import steelyard.balancer.live.tcp.Relay;

/**
 * One client connection: takes its requests one after the other, and answers in their order.
 *
 * <p>What a client sends ahead is held here while an exchange runs, and reading stops until it was taken; a client that
 * sends nothing ahead is always read, so that its leaving is seen at once.
 */
final class ClientHandler extends ChannelInboundHandlerAdapter {
    private final PoolFront pool;
    private final LoopConnections connections;
    private final Channel channel;
    private final ClientOutput output;
    private final RequestDecoder decoder;
    private final ClientEncoder encoder;
    private final ClientClock clock;
    private final ClientEnding ending;
    private final SentAhead ahead = new SentAhead();
    private @Nullable Exchange exchange;
    private int pinned = Decider.NOBODY;
    private long clientKey;
    private boolean catchingUp;

    /** @param decoder what the requests of this connection come from */
    ClientHandler(
            PoolFront pool,
            LoopConnections connections,
            RequestDecoder decoder,
            ClientEncoder encoder,
            Channel channel) {
        this.pool = pool;
        this.connections = connections;
        this.channel = channel;
        this.output = new ClientOutput(channel, encoder, pool.balancer());
        this.decoder = decoder;
        this.encoder = encoder;
        this.clock = new ClientClock(channel.eventLoop(), pool.settings().timeouts(), this::timePassed);
        this.ending = new ClientEnding(
                channel, output, clock, pool.settings().timeouts().idleNanos());
    }

    // ---- from the client

    @Override
    public void channelActive(ChannelHandlerContext context) {
        clientKey = ClientKeys.of(channel.remoteAddress());
        clock.idle();
    }

    @Override
    public void channelRead(ChannelHandlerContext context, Object message) {
        HttpObject part = (HttpObject) message;
        if (ending.begun()) {
            ReferenceCountUtil.release(message);
        } else if (!ahead.isEmpty() || waitsItsTurn(part)) {
            ahead.add(part);
            updateReading();
        } else {
            accept(part);
        }
    }

    /** A request waits for the answer before it, and for a client that takes answers: none may pile up here. */
    private boolean waitsItsTurn(HttpObject part) {
        return part instanceof HttpRequest && (exchange != null && exchange.requestComplete() || !channel.isWritable());
    }

    private void accept(HttpObject part) {
        if (part instanceof HttpRequest request) {
            begin(request);
        } else if (exchange == null || exchange.requestComplete()) {
            ReferenceCountUtil.release(part); // the empty end of a request without content
        } else if (part.decoderResult().isFailure()) {
            ReferenceCountUtil.release(part);
            contentFaulty(exchange, RequestCheck.faulty(part.decoderResult().cause()));
        } else {
            clock.clear();
            exchange.content((HttpContent) part);
            updateReading();
        }
    }

    private void begin(HttpRequest request) {
        clock.clear();
        output.answers(request);
        boolean oldClient = request.protocolVersion().minorVersion() == 0;
        boolean keep = !oldClient && HttpUtil.isKeepAlive(request);
        boolean content = request.decoderResult().isSuccess() && RequestCheck.hasContent(request);
        OwnAnswer here = RequestCheck.refusal(request);
        if (here == null) {
            here = RequestHeads.prepare(request, pool, channel);
            if (here != null && here.status().code() != 400 && keep && !content) {
                output.own(here, false);
                answered(true);
                return;
            }
        }
        if (here != null) {
            answerAndClose(here);
            return;
        }
        exchange = new Exchange(this, pool, connections, request, keep, oldClient);
        exchange.begin();
        updateReading();
    }

    private void contentFaulty(Exchange running, OwnAnswer answer) {
        boolean silent = !running.passedOn();
        running.abandon();
        exchange = null;
        if (silent) {
            answerAndClose(answer);
        } else {
            truncate(false);
        }
    }

    @Override
    public void channelReadComplete(ChannelHandlerContext context) {
        if (decoder.holds()) {
            updateReading();
        }
        if (exchange != null) {
            exchange.flushRequest();
        } else if (!ending.begun() && decoder.headOpen()) {
            clock.head();
        }
    }

    @Override
    public void channelWritabilityChanged(ChannelHandlerContext context) {
        if (exchange != null) {
            exchange.clientWritable(channel.isWritable());
        } else {
            catchUp();
        }
    }

    @Override
    public void channelInactive(ChannelHandlerContext context) {
        ending.gone();
        ahead.drop();
        Exchange running = exchange;
        exchange = null;
        if (running != null) {
            running.abandon();
        }
    }

    @Override
    public void exceptionCaught(ChannelHandlerContext context, Throwable cause) {
        channel.close();
    }

    /** Reads on while nothing was sent ahead and what comes can be passed on. */
    void updateReading() {
        boolean content = !ending.begun() && exchange != null && !exchange.requestComplete();
        boolean reading = ending.begun() || !decoder.holds() && ahead.isEmpty() && (!content || takesContent());
        if (channel.config().isAutoRead() != reading) {
            channel.config().setAutoRead(reading);
        }
        if (content && reading) {
            clock.content();
        } else if (exchange != null) {
            clock.clear();
        }
    }

    private boolean takesContent() {
        return exchange != null && exchange.takesContent();
    }

    private void timePassed(ClientClock.Limit limit) {
        switch (limit) {
            case NONE -> {}
            case IDLE, END -> channel.close();
            case HEAD -> answerAndClose(OwnAnswer.SLOW_HEAD);
            case CONTENT -> {
                if (exchange != null) {
                    exchange.clientStalled();
                }
            }
        }
    }

    // ---- picking

    /** What the client is known by. */
    long clientKey() {
        return clientKey;
    }

    int pinned() {
        return pinned;
    }

    void pin(int backend) {
        if (pool.pins()) {
            pinned = backend;
        }
    }

    // ---- towards the client

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

    private void answerAndClose(OwnAnswer answer) {
        output.own(answer, true);
        exchange = null;
        closeGently();
    }

    /** The exchange became a tunnel: both channels are the relay's, whatever came behind the heads included. */
    void tunnel(BackendConnection backend, Attempts attempts) {
        exchange = null;
        clock.stop();
        Relay relay =
                new Relay(channel, backend.opened(), pool.settings().timeouts().idleNanos(), outcome -> {
                    attempts.ended(outcome);
                    backend.gone();
                });
        backend.become(relay);
        relay.join();
        // The decoders come last: what they hold is passed on at once, and no encoder may see it.
        channel.pipeline().remove(this);
        channel.pipeline().remove(encoder);
        backend.removeEncoder();
        backend.removeDecoder();
        channel.pipeline().remove(decoder);
        relay.start();
    }

    private void released() {
        ChannelHandlerContext context = channel.pipeline().context(decoder);
        try {
            decoder.release(context);
        } catch (Exception e) { // as its reading declares; it tells of failures by messages
            context.fireExceptionCaught(e);
        }
    }

    /** The answer was written to its end. */
    void answered(boolean keep) {
        boolean whole = exchange == null || exchange.requestComplete();
        exchange = null;
        if (keep) {
            released();
            clock.idle();
            catchUp();
        } else if (whole && ahead.isEmpty()) {
            ending.afterFlush();
        } else {
            closeGently();
        }
    }

    /** Takes what was sent ahead, as far as it goes. */
    private void catchUp() {
        if (catchingUp) {
            return;
        }
        catchingUp = true;
        while (!ending.begun() && !ahead.isEmpty() && !waitsItsTurn(ahead.first())) {
            accept(ahead.take());
        }
        catchingUp = false;
        if (ending.begun()) {
            ahead.drop();
        } else {
            updateReading();
            if (exchange != null) {
                exchange.flushRequest();
            } else if (ahead.isEmpty() && decoder.headOpen()) {
                clock.head();
            }
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

    private void closeGently() {
        ahead.drop();
        ending.gently();
    }
}
