package steelyard.balancer.live.http;

import io.netty.buffer.Unpooled;
import io.netty.handler.codec.http.DefaultFullHttpRequest;
import io.netty.handler.codec.http.EmptyHttpHeaders;
import io.netty.handler.codec.http.HttpContent;
import io.netty.handler.codec.http.HttpRequest;
import io.netty.handler.codec.http.HttpResponse;
import org.jspecify.annotations.Nullable;

/** The way of a request to a backend: head and content, and the connection that takes them once it stands. */
final class RequestPath {
    private final HttpRequest head;
    private final RequestBody body;
    private @Nullable BackendConnection connection;
    private boolean connected;
    private boolean headSent;

    /**
     * @param head prepared for the backend
     * @param keeps whether another attempt may come to need the content
     */
    RequestPath(HttpRequest head, boolean keeps) {
        this.head = head;
        this.body = RequestBody.of(keeps, RequestCheck.hasContent(head));
    }

    /** Whether the client sent all of the request. */
    boolean complete() {
        return body.complete();
    }

    /** Whether the head of this attempt was sent. */
    boolean headSent() {
        return headSent;
    }

    /** Whether another attempt could send all that came so far again. */
    boolean replayable() {
        return body.replayable();
    }

    /** Whether more content can be taken now. */
    boolean takesContent() {
        return connected && connection != null && connection.writable();
    }

    /** What a 101 goes over to, if the client asked for that and the whole request was sent. */
    @Nullable
    String agreed(HttpResponse response) {
        return body.complete() ? Upgrade.agreed(head.headers(), response) : null;
    }

    // ---- the connection

    /** An attempt begins, without a connection yet. */
    void attempt(int attempt) {
        connected = false;
        headSent = false;
        head.headers().set(Fields.ATTEMPT, Fields.attempt(attempt));
    }

    void opening(BackendConnection opened) {
        connection = opened;
    }

    /** Sends head and what came of the content, without a flush. */
    void send(BackendConnection to, Exchange served) {
        connection = to;
        connected = true;
        headSent = true;
        to.serve(served, body.empty() ? whole() : head);
        body.sendAll(to);
        if (body.complete()) {
            to.awaitFirstByte();
        } else {
            to.moved();
        }
    }

    /** Head and empty content in one, which is encoded into one buffer. */
    private HttpRequest whole() {
        return new DefaultFullHttpRequest(
                head.protocolVersion(),
                head.method(),
                head.uri(),
                Unpooled.EMPTY_BUFFER,
                head.headers(),
                EmptyHttpHeaders.INSTANCE);
    }

    /** The connection is no longer this request's; returns it, or null when there is none. */
    @Nullable
    BackendConnection leave() {
        BackendConnection left = connection;
        connection = null;
        connected = false;
        return left;
    }

    // ---- what moves on it

    void content(HttpContent piece) {
        HttpContent bare = Trailers.dropped(piece);
        if (connection == null || !connected) {
            body.await(bare);
            return;
        }
        body.sent(bare);
        connection.moved();
        connection.write(bare);
        if (body.complete()) {
            connection.awaitFirstByte();
        }
    }

    void flush() {
        if (connection != null && connected) {
            connection.flush();
        }
    }

    /** The client takes answers again, or no longer. */
    void clientWritable(boolean writable) {
        if (connection != null && connected) {
            connection.moved();
            connection.read(writable);
        }
    }

    /** Reads no more of the answer until the client takes it. */
    void holdBack() {
        if (connection != null) {
            connection.read(false);
        }
    }

    /** Gives back the content that is kept. */
    void drop() {
        body.drop();
    }
}
