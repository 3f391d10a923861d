package steelyard.balancer.live.http;

import io.netty.buffer.ByteBuf;
import io.netty.buffer.Unpooled;
import io.netty.channel.Channel;
import io.netty.channel.ChannelFutureListener;
import io.netty.channel.ChannelHandlerContext;
import io.netty.channel.ChannelInboundHandlerAdapter;
import io.netty.channel.ChannelOption;
import io.netty.channel.socket.DuplexChannel;
import io.netty.handler.codec.http.DefaultFullHttpResponse;
import io.netty.handler.codec.http.EmptyHttpHeaders;
import io.netty.handler.codec.http.HttpContent;
import io.netty.handler.codec.http.HttpHeaderNames;
import io.netty.handler.codec.http.HttpHeaderValues;
import io.netty.handler.codec.http.HttpMethod;
import io.netty.handler.codec.http.HttpObject;
import io.netty.handler.codec.http.HttpRequest;
import io.netty.handler.codec.http.HttpResponse;
import io.netty.handler.codec.http.HttpUtil;
import io.netty.handler.codec.http.LastHttpContent;
import io.netty.util.ReferenceCountUtil;
import java.util.ArrayDeque;
import java.util.concurrent.TimeUnit;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.decide.Decider;
import steelyard.balancer.live.tcp.Deadline;

/**
 * One client connection: takes its requests one after the other, and answers in their order.
 *
 * <p>What a client sends ahead is held here while an exchange runs, and reading stops until it was taken; a client that
 * sends nothing ahead is always read, so that its leaving is seen at once.
 */
final class ClientHandler extends ChannelInboundHandlerAdapter {
    /** How long a client may take to read the last answer and close, once nothing more is taken from it. */
    private static final long LINGER_NANOS = TimeUnit.SECONDS.toNanos(2);

    private final PoolFront pool;
    private final LoopConnections connections;
    private final ClientEncoder encoder;
    private final Channel channel;
    private final Deadline deadline;
    private final ArrayDeque<HttpObject> ahead = new ArrayDeque<>();
    private @Nullable Exchange exchange;
    private int pinned = Decider.NOBODY;
    private @Nullable HttpResponse heldHead;
    private boolean closing;
    private boolean catchingUp;

    ClientHandler(PoolFront pool, LoopConnections connections, ClientEncoder encoder, Channel channel) {
        this.pool = pool;
        this.connections = connections;
        this.encoder = encoder;
        this.channel = channel;
        this.deadline = new Deadline(channel.eventLoop(), channel::close);
    }

    // ---- from the client

    @Override
    public void channelActive(ChannelHandlerContext context) {
        deadline.in(pool.settings().timeouts().idleNanos());
    }

    @Override
    public void channelRead(ChannelHandlerContext context, Object message) {
        HttpObject part = (HttpObject) message;
        if (closing) {
            ReferenceCountUtil.release(message);
        } else if (!ahead.isEmpty() || waitsItsTurn(part)) {
            ahead.addLast(part);
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
            contentFaulty(exchange);
        } else {
            exchange.content((HttpContent) part);
            updateReading();
        }
    }

    private void begin(HttpRequest request) {
        deadline.clear();
        encoder.answersHead(HttpMethod.HEAD.equals(request.method()));
        boolean oldClient = request.protocolVersion().minorVersion() == 0;
        boolean keep = !oldClient && HttpUtil.isKeepAlive(request);
        boolean content = request.decoderResult().isSuccess() && RequestCheck.hasContent(request);
        OwnAnswer here = RequestCheck.refusal(request);
        if (here == null) {
            here = RequestHeads.prepare(request, pool, channel.remoteAddress());
            if (here != null && here.status().code() != 400 && keep && !content) {
                writeOwn(here, false);
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

    private void contentFaulty(Exchange running) {
        boolean silent = !running.passedOn();
        running.abandon();
        exchange = null;
        if (silent) {
            answerAndClose(OwnAnswer.FAULTY);
        } else {
            truncate(false);
        }
    }

    @Override
    public void channelReadComplete(ChannelHandlerContext context) {
        if (exchange != null) {
            exchange.flushRequest();
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
        closing = true;
        deadline.stop();
        dropAhead();
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
        boolean reading = closing
                || ahead.isEmpty() && (exchange == null || exchange.requestComplete() || exchange.takesContent());
        if (channel.config().isAutoRead() != reading) {
            channel.config().setAutoRead(reading);
        }
    }

    // ---- picking

    int pinned() {
        return pinned;
    }

    void pin(int backend) {
        if (pool.pins()) {
            pinned = backend;
        }
    }

    // ---- towards the client

    boolean writable() {
        return channel.isWritable();
    }

    /** The head of an answer; it is written with what comes next, at the latest at the next flush. */
    void passHead(HttpResponse response, boolean close) {
        if (close) {
            response.headers().set(HttpHeaderNames.CONNECTION, HttpHeaderValues.CLOSE);
        }
        heldHead = response;
    }

    void write(HttpObject message) {
        HttpResponse head = heldHead;
        if (head != null && message instanceof LastHttpContent last) {
            heldHead = null;
            channel.write(whole(head, last.content()), channel.voidPromise());
        } else {
            writeHeldHead();
            channel.write(message, channel.voidPromise());
        }
    }

    private static HttpResponse whole(HttpResponse head, ByteBuf content) {
        return new DefaultFullHttpResponse(
                head.protocolVersion(), head.status(), content, head.headers(), EmptyHttpHeaders.INSTANCE);
    }

    private void writeHeldHead() {
        HttpResponse head = heldHead;
        if (head != null) {
            heldHead = null;
            channel.write(head, channel.voidPromise());
        }
    }

    void flush() {
        writeHeldHead();
        channel.flush();
    }

    /** Ends the running exchange with an answer of our own; the connection stays where the request was whole. */
    void answer(OwnAnswer answer) {
        Exchange running = exchange;
        if (running == null) {
            return; // the client left while the attempt failed
        }
        boolean keep = running.keepsClient();
        running.drop();
        writeOwn(answer, !keep);
        answered(keep);
    }

    private void answerAndClose(OwnAnswer answer) {
        writeOwn(answer, true);
        exchange = null;
        closeGently();
    }

    private void writeOwn(OwnAnswer answer, boolean close) {
        channel.writeAndFlush(
                OwnAnswers.make(answer, pool.balancer(), !encoder.answersHead(), close), channel.voidPromise());
    }

    /** The answer was written to its end. */
    void answered(boolean keep) {
        boolean whole = exchange == null || exchange.requestComplete();
        exchange = null;
        if (keep) {
            deadline.in(pool.settings().timeouts().idleNanos());
            catchUp();
        } else if (whole && ahead.isEmpty()) {
            closing = true;
            closeAfterFlush();
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
        while (!closing && !ahead.isEmpty() && !waitsItsTurn(ahead.getFirst())) {
            accept(ahead.removeFirst());
        }
        catchingUp = false;
        if (closing) {
            dropAhead();
        } else {
            updateReading();
            if (exchange != null) {
                exchange.flushRequest();
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
        closing = true;
        if (byReset) {
            channel.config().setOption(ChannelOption.SO_LINGER, 0);
            channel.close();
        } else {
            closeAfterFlush();
        }
    }

    private void closeAfterFlush() {
        deadline.in(pool.settings().timeouts().idleNanos());
        writeHeldHead();
        channel.writeAndFlush(Unpooled.EMPTY_BUFFER).addListener(ChannelFutureListener.CLOSE);
    }

    /**
     * Says that nothing more comes, then reads and drops until the client closes too: closing at once would answer what
     * it still sends with a reset, and that could destroy the last answer (RFC 9112, 9.6).
     */
    private void closeGently() {
        closing = true;
        dropAhead();
        updateReading();
        if (!(channel instanceof DuplexChannel duplex)) {
            closeAfterFlush();
            return;
        }
        deadline.in(LINGER_NANOS);
        channel.writeAndFlush(Unpooled.EMPTY_BUFFER).addListener(done -> duplex.shutdownOutput());
    }

    private void dropAhead() {
        ahead.forEach(ReferenceCountUtil::release);
        ahead.clear();
    }
}
