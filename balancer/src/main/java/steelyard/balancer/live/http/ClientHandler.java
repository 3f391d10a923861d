package steelyard.balancer.live.http;

import io.netty.channel.Channel;
import io.netty.channel.ChannelHandlerContext;
import io.netty.channel.ChannelInboundHandlerAdapter;
import io.netty.handler.codec.http.HttpContent;
import io.netty.handler.codec.http.HttpObject;
import io.netty.handler.codec.http.HttpRequest;
import io.netty.handler.codec.http.HttpUtil;
import io.netty.util.ReferenceCountUtil;

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
    private final RequestDecoder decoder;
    private final ClientClock clock;
    private final SentAhead ahead = new SentAhead();
    private final ClientSide client;
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
        this.decoder = decoder;
        this.clock = new ClientClock(channel.eventLoop(), pool.settings().timeouts(), this::timePassed);
        this.client = new ClientSide(pool, channel, decoder, encoder, clock, ahead, this::catchUp);
    }

    // ---- what the channel tells

    @Override
    public void channelActive(ChannelHandlerContext context) {
        client.opened();
    }

    @Override
    public void channelRead(ChannelHandlerContext context, Object message) {
        HttpObject part = (HttpObject) message;
        if (client.ends()) {
            ReferenceCountUtil.release(message);
        } else if (!ahead.isEmpty() || waitsItsTurn(part)) {
            ahead.add(part);
            client.updateReading();
        } else {
            accept(part);
        }
    }

    @Override
    public void channelReadComplete(ChannelHandlerContext context) {
        if (decoder.holds()) {
            client.updateReading();
        }
        client.readOut();
    }

    @Override
    public void channelWritabilityChanged(ChannelHandlerContext context) {
        Exchange running = client.exchange();
        if (running != null) {
            running.request().clientWritable(channel.isWritable());
        } else {
            catchUp();
        }
    }

    @Override
    public void channelInactive(ChannelHandlerContext context) {
        client.gone();
    }

    @Override
    public void exceptionCaught(ChannelHandlerContext context, Throwable cause) {
        channel.close();
    }

    private void timePassed(ClientClock.Limit limit) {
        switch (limit) {
            case NONE -> {}
            case IDLE, END -> channel.close();
            case HEAD -> client.answerAndClose(OwnAnswer.SLOW_HEAD);
            case CONTENT -> {
                Exchange running = client.exchange();
                if (running != null) {
                    running.clientStalled();
                }
            }
        }
    }

    // ---- requests

    /** A request waits for the answer before it, and for a client that takes answers: none may pile up here. */
    private boolean waitsItsTurn(HttpObject part) {
        return part instanceof HttpRequest
                && (client.exchange() != null && client.requestComplete() || !channel.isWritable());
    }

    private void accept(HttpObject part) {
        Exchange running = client.exchange();
        if (part instanceof HttpRequest request) {
            begin(request);
        } else if (running == null || running.request().complete()) {
            ReferenceCountUtil.release(part); // the empty end of a request without content
        } else if (part.decoderResult().isFailure()) {
            ReferenceCountUtil.release(part);
            client.contentFaulty(
                    running, RequestCheck.faulty(part.decoderResult().cause()));
        } else {
            clock.clear();
            running.request().content((HttpContent) part);
            client.updateReading();
        }
    }

    private void begin(HttpRequest request) {
        clock.clear();
        client.output().answers(request);
        OwnAnswer refusal = RequestCheck.refusal(request);
        if (refusal != null) {
            client.answerAndClose(refusal);
            return;
        }
        boolean oldClient = request.protocolVersion().minorVersion() == 0;
        boolean keep = !oldClient && HttpUtil.isKeepAlive(request);
        boolean content = RequestCheck.hasContent(request);
        OwnAnswer here = RequestHeads.prepare(request, pool, channel);
        if (here == null) {
            client.begin(connections, request, keep, oldClient);
        } else {
            answerHere(here, keep && !content);
        }
    }

    /** @param keep whether the connection may stay open behind an answer that finds no fault */
    private void answerHere(OwnAnswer here, boolean keep) {
        if (keep && here.status().code() != 400) {
            client.output().own(here, false);
            client.answered(true);
        } else {
            client.answerAndClose(here);
        }
    }

    /** Takes what was sent ahead, as far as it goes. */
    private void catchUp() {
        if (catchingUp) {
            return;
        }
        catchingUp = true;
        while (!client.ends() && !ahead.isEmpty() && !waitsItsTurn(ahead.first())) {
            accept(ahead.take());
        }
        catchingUp = false;
        if (client.ends()) {
            ahead.drop();
            return;
        }
        client.updateReading();
        if (client.exchange() != null || ahead.isEmpty()) {
            client.readOut();
        }
    }
}
