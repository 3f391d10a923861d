package steelyard.backends.stub;

import io.netty.handler.codec.http.HttpMethod;
import io.netty.handler.codec.http.HttpRequest;
import io.netty.handler.codec.http.HttpUtil;
import steelyard.backends.stub.Exchange.Kind;

/** Tells from the head of a message what it asks for, and numbers it. On the stub's event loop only. */
final class Reception {

    private final StubSettings settings;
    private long tokens;
    private long probes;
    private long readings;
    private long unnumbered;

    Reception(StubSettings settings) {
        this.settings = settings;
    }

    /** The exchange that a head begins. */
    Exchange begin(Connection connection, HttpRequest head) {
        Kind kind = kind(head);
        long number = numberOf(head, kind);
        int attempt = (int) Math.max(0, Math.min(Integer.MAX_VALUE, RequestHeads.number(head, StubHeaders.ATTEMPT)));
        boolean headOnly = HttpMethod.HEAD.equals(head.method());
        Exchange exchange =
                new Exchange(connection, tokens++, kind, number, attempt, headOnly, HttpUtil.isKeepAlive(head));
        exchange.upgrade = Upgrade.asked(head);
        exchange.head = kind == Kind.REQUEST && settings.answers() != null ? head : null;
        return exchange;
    }

    /** A message that is no HTTP request: it is answered, but is neither traffic nor a probe. */
    Exchange malformed(Connection connection) {
        Exchange exchange = new Exchange(connection, tokens++, Kind.REQUEST, --unnumbered, 0, false, false);
        exchange.over = true;
        return exchange;
    }

    private Kind kind(HttpRequest head) {
        if (RequestHeads.asksFor(head.uri(), settings.probePath())) {
            return Kind.PROBE;
        }
        return RequestHeads.asksFor(head.uri(), settings.loadPath()) ? Kind.READING : Kind.REQUEST;
    }

    /** The number that the head carries, else a running one; those of requests without one are below 0. */
    private long numberOf(HttpRequest head, Kind kind) {
        return switch (kind) {
            case PROBE -> {
                long carried = RequestHeads.number(head, StubHeaders.PROBE);
                probes++;
                yield carried < 0 ? probes - 1 : carried;
            }
            case READING -> readings++;
            case REQUEST -> {
                long carried = RequestHeads.number(head, StubHeaders.REQUEST);
                yield carried < 0 ? --unnumbered : carried;
            }
        };
    }
}
