package steelyard.balancer.live.http;

import io.netty.channel.Channel;
import io.netty.channel.ChannelFuture;
import io.netty.channel.ChannelHandler;
import io.netty.channel.ChannelHandlerContext;
import io.netty.channel.ChannelInboundHandlerAdapter;
import io.netty.channel.ChannelInitializer;
import io.netty.channel.ConnectTimeoutException;
import io.netty.handler.codec.DecoderException;
import io.netty.handler.codec.PrematureChannelClosureException;
import io.netty.handler.codec.http.HttpContent;
import io.netty.handler.codec.http.HttpMethod;
import io.netty.handler.codec.http.HttpObject;
import io.netty.handler.codec.http.HttpRequest;
import io.netty.handler.codec.http.HttpRequestEncoder;
import io.netty.handler.codec.http.HttpResponse;
import io.netty.handler.codec.http.HttpUtil;
import io.netty.handler.codec.http.LastHttpContent;
import io.netty.util.ReferenceCountUtil;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.decide.Outcome;
import steelyard.balancer.live.tcp.Deadline;
import steelyard.balancer.settings.TimeoutSettings;

/**
 * One connection to a backend: it serves one exchange at a time and waits idle between them.
 *
 * <p>An exchange lets go of its connection at the end of the read in which the answer ended, not earlier: what came
 * behind the answer in the same read is then seen, and can never be taken for the answer to the next request.
 */
final class BackendConnection extends ChannelInboundHandlerAdapter {
    private final LoopConnections home;
    private final int backend;
    private final TimeoutSettings timeouts;
    private final BackendDecoder decoder = Codecs.answers(this::moved);
    private @Nullable Channel channel;
    private @Nullable Deadline deadline;

    /** What it serves; null while it is idle. */
    private @Nullable Exchange exchange;

    private boolean reusable = true;
    private boolean interim;
    private boolean answered;
    private boolean headSeen;
    private boolean awaitsFirstByte;

    BackendConnection(LoopConnections home, int backend, TimeoutSettings timeouts, Exchange exchange) {
        this.home = home;
        this.backend = backend;
        this.timeouts = timeouts;
        this.exchange = exchange;
    }

    int backend() {
        return backend;
    }

    boolean open() {
        return channel != null && channel.isActive();
    }

    ChannelHandler initializer() {
        return new ChannelInitializer<Channel>() {
            @Override
            protected void initChannel(Channel opened) {
                opened.pipeline().addLast(decoder, new HttpRequestEncoder(), BackendConnection.this);
            }
        };
    }

    // ---- opening and closing

    void opening(ChannelFuture connecting) {
        channel = connecting.channel();
        deadline = new Deadline(channel.eventLoop(), this::timePassed);
        if (exchange != null) {
            exchange.opening(this);
        }
        connecting.addListener(done -> {
            if (!done.isSuccess()) {
                boolean late = done.cause() instanceof ConnectTimeoutException;
                home.closed(this);
                fail(Outcome.REFUSED, late ? OwnAnswer.UNREACHED : OwnAnswer.REFUSED);
            } else if (exchange == null) {
                close();
            } else {
                exchange.connected(this);
            }
        });
    }

    void close() {
        reusable = false;
        if (channel != null) {
            channel.close();
        }
    }

    /** Ends what it serves, if anything, and closes. */
    void fail(Outcome outcome, OwnAnswer answer) {
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

    // ---- towards the backend

    /** Serves a request whose head is written next. */
    void serve(Exchange served, HttpRequest head) {
        exchange = served;
        interim = false;
        answered = false;
        headSeen = false;
        decoder.expect(HttpMethod.HEAD.equals(head.method()));
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
        if (deadline != null && !headSeen) {
            awaitsFirstByte = true;
            deadline.in(timeouts.firstByteNanos());
        }
    }

    private Channel opened() {
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

    // ---- from the backend

    @Override
    public void channelRead(ChannelHandlerContext context, Object message) {
        HttpObject part = (HttpObject) message;
        Exchange served = exchange;
        if (served == null || answered) {
            reusable = false; // nobody asked for this
            ReferenceCountUtil.release(message);
            if (served == null) {
                close();
            }
            return;
        }
        if (part.decoderResult().isFailure()) {
            ReferenceCountUtil.release(message);
            if (part.decoderResult().cause() instanceof PrematureChannelClosureException) {
                fail(Outcome.BROKEN, OwnAnswer.BROKEN); // the head ended with the connection
            } else {
                fail(Outcome.MALFORMED, OwnAnswer.MALFORMED);
            }
        } else if (part instanceof HttpResponse response) {
            head(served, response);
        } else if (interim) {
            interim = false;
            ReferenceCountUtil.release(message);
        } else {
            answered = part instanceof LastHttpContent;
            served.answerContent((HttpContent) part);
        }
    }

    private void head(Exchange served, HttpResponse response) {
        int status = response.status().code();
        if (status == 101 || !AnswerHeads.codingKnown(response)) {
            fail(Outcome.MALFORMED, OwnAnswer.MALFORMED);
        } else if (status < 200) {
            interim = true;
            served.interim(response);
        } else {
            headSeen = true;
            reusable &= HttpUtil.isKeepAlive(response);
            served.answerHead(response);
        }
    }

    @Override
    public void channelReadComplete(ChannelHandlerContext context) {
        Exchange served = exchange;
        if (served == null) {
            return;
        }
        if (answered) {
            settle(served);
        } else {
            served.flushAnswer();
        }
    }

    private void settle(Exchange served) {
        exchange = null;
        answered = false;
        boolean whole = served.requestComplete();
        if (reusable && whole && open() && decoder.isDrained()) {
            read(true);
            moved();
            home.idle(this);
        } else {
            close();
        }
        served.settled();
    }

    @Override
    public void channelWritabilityChanged(ChannelHandlerContext context) {
        if (exchange != null) {
            exchange.backendWritable();
        }
    }

    @Override
    public void channelInactive(ChannelHandlerContext context) {
        if (deadline != null) {
            deadline.stop();
        }
        home.closed(this);
        ended();
    }

    @Override
    public void exceptionCaught(ChannelHandlerContext context, Throwable cause) {
        if (cause instanceof DecoderException) {
            fail(Outcome.MALFORMED, OwnAnswer.MALFORMED);
        } else {
            ended();
        }
        close();
    }

    private void ended() {
        Exchange served = exchange;
        if (served != null && answered) {
            settle(served);
        } else {
            boolean inside = decoder.bytesSeen();
            fail(inside ? Outcome.BROKEN : Outcome.RESET, inside ? OwnAnswer.BROKEN : OwnAnswer.RESET);
        }
    }
}
