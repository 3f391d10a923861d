package steelyard.balancer.live.http;

import io.netty.channel.Channel;
import org.jspecify.annotations.Nullable;

/** Says when a client is read, and which of its time limits runs meanwhile. */
final class ClientReading {
    private final Channel channel;
    private final RequestDecoder decoder;
    private final SentAhead ahead;
    private final ClientClock clock;
    private final ClientEnding ending;

    ClientReading(Channel channel, RequestDecoder decoder, SentAhead ahead, ClientClock clock, ClientEnding ending) {
        this.channel = channel;
        this.decoder = decoder;
        this.ahead = ahead;
        this.clock = clock;
        this.ending = ending;
    }

    /**
     * Reads on while nothing was sent ahead and what comes can be passed on.
     *
     * @param request under way; null for none
     */
    void update(@Nullable RequestPath request) {
        RequestPath open = ending.begun() || request == null || request.complete() ? null : request;
        boolean reading = ending.begun() || inTurn() && (open == null || open.takesContent());
        if (channel.config().isAutoRead() != reading) {
            channel.config().setAutoRead(reading);
        }
        if (open != null && reading) {
            clock.content();
        } else if (request != null) {
            clock.clear();
        }
    }

    /** Whether nothing that was read waits. */
    private boolean inTurn() {
        return !decoder.holds() && ahead.isEmpty();
    }

    /** No request is under way: what came of the next head, if anything, has begun its limit. */
    void betweenRequests() {
        if (!ending.begun() && decoder.headOpen()) {
            clock.head();
        }
    }
}
