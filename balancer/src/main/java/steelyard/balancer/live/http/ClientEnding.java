package steelyard.balancer.live.http;

import io.netty.channel.Channel;
import io.netty.channel.ChannelFutureListener;
import io.netty.channel.socket.DuplexChannel;
import java.util.concurrent.TimeUnit;
import steelyard.balancer.live.tls.Ends;

/** The ways in which a client connection ends from this side. Once one has begun, nothing more is taken from the client. */
final class ClientEnding {
    /** How long a client may take to read the last answer and close, once nothing more is taken from it. */
    private static final long LINGER_NANOS = TimeUnit.SECONDS.toNanos(2);

    private final Channel channel;
    private final ClientOutput output;
    private final SentAhead ahead;
    private final ClientClock clock;
    private final long idleNanos;
    private boolean begun;

    /** @param idleNanos how long what was written may take to leave */
    ClientEnding(Channel channel, ClientOutput output, SentAhead ahead, ClientClock clock, long idleNanos) {
        this.channel = channel;
        this.output = output;
        this.ahead = ahead;
        this.clock = clock;
        this.idleNanos = idleNanos;
    }

    boolean begun() {
        return begun;
    }

    /** The client is gone. */
    void gone() {
        begun = true;
        ahead.drop();
        clock.stop();
    }

    /** Closes as soon as all that was written is out. */
    private void afterFlush() {
        begun = true;
        clock.end(idleNanos);
        output.drained().addListener(ChannelFutureListener.CLOSE);
    }

    /**
     * Says that nothing more comes, then reads and drops until the client closes too: closing at once would answer what
     * it still sends with a reset, and that could destroy the last answer (RFC 9112, 9.6).
     */
    void gently() {
        begun = true;
        ahead.drop();
        channel.config().setAutoRead(true);
        if (!(channel instanceof DuplexChannel)) {
            afterFlush();
            return;
        }
        clock.end(LINGER_NANOS);
        output.drained().addListener(done -> Ends.finish(channel));
    }

    /**
     * Closes inside an answer, so that the client sees that it is not whole.
     *
     * @param byReset whether an orderly close would look like the end of the content
     */
    void truncate(boolean byReset) {
        if (byReset) {
            begun = true;
            Ends.reset(channel);
        } else {
            afterFlush();
        }
    }
}
