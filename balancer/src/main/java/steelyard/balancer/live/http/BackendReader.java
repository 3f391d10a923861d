package steelyard.balancer.live.http;

import io.netty.channel.ChannelHandlerContext;
import io.netty.channel.ChannelInboundHandlerAdapter;
import io.netty.handler.codec.DecoderException;
import io.netty.handler.codec.PrematureChannelClosureException;
import io.netty.handler.codec.http.HttpContent;
import io.netty.handler.codec.http.HttpObject;
import io.netty.handler.codec.http.HttpResponse;
import io.netty.handler.codec.http.HttpUtil;
import io.netty.handler.codec.http.LastHttpContent;
import io.netty.util.ReferenceCountUtil;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.decide.Outcome;

/**
 * Reads the answers on one connection to a backend and hands them to the exchange that it serves.
 *
 * <p>An exchange lets go of its connection at the end of the read in which the answer ended, not earlier: what came
 * behind the answer in the same read is then seen, and can never be taken for the answer to the next request.
 */
final class BackendReader extends ChannelInboundHandlerAdapter {
    private final BackendConnection connection;
    private final BackendDecoder decoder;
    private boolean reusable = true;
    private @Nullable HttpResponse switching;
    private boolean interim;
    private boolean answered;
    private boolean headSeen;

    BackendReader(BackendConnection connection, BackendDecoder decoder) {
        this.connection = connection;
        this.decoder = decoder;
    }

    /** The next answer belongs to a new request. */
    void expect(boolean head) {
        interim = false;
        answered = false;
        headSeen = false;
        decoder.expect(head);
    }

    /** Whether the head of the final answer came. */
    boolean headSeen() {
        return headSeen;
    }

    @Override
    public void channelRead(ChannelHandlerContext context, Object message) {
        HttpObject part = (HttpObject) message;
        Exchange served = connection.served();
        if (served == null || answered) {
            reusable = false; // nobody asked for this
            ReferenceCountUtil.release(message);
            if (served == null) {
                connection.close();
            }
        } else if (part.decoderResult().isFailure()) {
            ReferenceCountUtil.release(message);
            faulty(part.decoderResult().cause());
        } else if (part instanceof HttpResponse response) {
            head(served, response);
        } else if (switching != null) {
            ReferenceCountUtil.release(message);
            served.upgraded(switching);
        } else if (interim) {
            interim = false;
            ReferenceCountUtil.release(message);
        } else {
            answered = part instanceof LastHttpContent;
            served.answerContent((HttpContent) part);
        }
    }

    private void faulty(@Nullable Throwable cause) {
        if (cause instanceof PrematureChannelClosureException) {
            connection.fail(Outcome.BROKEN, OwnAnswer.BROKEN); // the head ended with the connection
        } else {
            connection.fail(Outcome.MALFORMED, OwnAnswer.MALFORMED);
        }
    }

    private void head(Exchange served, HttpResponse response) {
        int status = response.status().code();
        if (status == 101 && served.request().agreed(response) != null) {
            switching = response;
        } else if (status == 101 || !AnswerHeads.codingKnown(response)) {
            connection.fail(Outcome.MALFORMED, OwnAnswer.MALFORMED);
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
        Exchange served = connection.served();
        if (served == null) {
            return;
        }
        if (answered) {
            settle(served);
        } else {
            served.client().output().flush();
        }
    }

    private void settle(Exchange served) {
        answered = false;
        connection.release(reusable && served.request().complete() && decoder.isDrained());
        served.settled();
    }

    @Override
    public void channelWritabilityChanged(ChannelHandlerContext context) {
        Exchange served = connection.served();
        if (served != null) {
            served.client().updateReading();
        }
    }

    @Override
    public void channelInactive(ChannelHandlerContext context) {
        connection.gone();
        ended();
    }

    @Override
    public void exceptionCaught(ChannelHandlerContext context, Throwable cause) {
        if (cause instanceof DecoderException) {
            connection.fail(Outcome.MALFORMED, OwnAnswer.MALFORMED);
        } else {
            ended();
        }
        connection.close();
    }

    private void ended() {
        Exchange served = connection.served();
        if (served != null && answered) {
            settle(served);
        } else {
            boolean inside = decoder.bytesSeen();
            connection.fail(inside ? Outcome.BROKEN : Outcome.RESET, inside ? OwnAnswer.BROKEN : OwnAnswer.RESET);
        }
    }
}
