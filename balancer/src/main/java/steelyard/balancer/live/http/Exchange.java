package steelyard.balancer.live.http;

import io.netty.buffer.Unpooled;
import io.netty.handler.codec.http.DefaultFullHttpRequest;
import io.netty.handler.codec.http.DefaultLastHttpContent;
import io.netty.handler.codec.http.EmptyHttpHeaders;
import io.netty.handler.codec.http.HttpContent;
import io.netty.handler.codec.http.HttpMethod;
import io.netty.handler.codec.http.HttpRequest;
import io.netty.handler.codec.http.HttpResponse;
import io.netty.handler.codec.http.LastHttpContent;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.decide.Ask;
import steelyard.balancer.core.decide.Decider;
import steelyard.balancer.core.decide.Outcome;
import steelyard.balancer.settings.RetrySettings;

/**
 * One request of a client and the attempts at it, one after the other.
 *
 * <p>Every backend that was picked is reported as ended exactly once: with the last byte of its answer, or with the
 * failure that came first.
 */
final class Exchange {
    private final ClientHandler client;
    private final PoolFront pool;
    private final LoopConnections connections;
    private final HttpRequest head;
    private final RequestBody body;
    private final long number;
    private final boolean keepClient;
    private final boolean oldClient;

    private final Ask ask = new Ask();
    private int backend = Decider.NOBODY;
    private boolean inFlight;
    private @Nullable BackendConnection connection;
    private boolean connected;
    private boolean headSent;

    private @Nullable HeldAnswer held;
    private int status;
    private boolean passedOn;
    private boolean closesClient;
    private boolean endShownByClosing;

    /**
     * @param head prepared for the backend
     * @param keepClient whether the client asked for its connection to stay open
     */
    Exchange(
            ClientHandler client,
            PoolFront pool,
            LoopConnections connections,
            HttpRequest head,
            boolean keepClient,
            boolean oldClient) {
        this.client = client;
        this.pool = pool;
        this.connections = connections;
        this.head = head;
        this.body = new RequestBody(pool.retries(), RequestCheck.hasContent(head));
        this.number = pool.numbers().of(head.headers());
        this.keepClient = keepClient;
        this.oldClient = oldClient;
    }

    // ---- attempts

    /** Makes the first attempt. */
    void begin() {
        head.headers().set(Fields.REQUEST, number);
        ask.pool = pool.number();
        ask.request = number;
        ask.pinned = client.pinned();
        backend = pool.decider().pick(ask);
        if (backend == Decider.NOBODY) {
            client.answer(OwnAnswer.NOBODY);
        } else {
            client.pin(backend);
            attempt();
        }
    }

    private void attempt() {
        inFlight = true;
        connected = false;
        headSent = false;
        head.headers().set(Fields.ATTEMPT, Integer.toString(ask.attempt));
        BackendConnection idle = connections.take(backend);
        if (idle == null) {
            connections.connect(backend, this);
        } else {
            send(idle);
        }
    }

    void opening(BackendConnection opened) {
        connection = opened;
    }

    void connected(BackendConnection opened) {
        send(opened);
        opened.flush();
        client.updateReading();
    }

    private void send(BackendConnection to) {
        connection = to;
        connected = true;
        headSent = true;
        to.moved();
        to.serve(this, body.empty() ? whole() : head);
        body.sendAll(to);
        if (body.complete()) {
            to.awaitFirstByte();
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

    /** The attempt failed; its connection is already gone. */
    void failed(Outcome outcome, OwnAnswer answer) {
        connection = null;
        connected = false;
        if (inFlight) {
            ended(outcome);
        }
        if (passedOn) {
            body.drop();
            client.truncate(endShownByClosing);
            return;
        }
        if (held != null) {
            held.drop();
            held = null;
        }
        if (!pool.retries() || !mayRetry(outcome) || !again()) {
            client.answer(answer);
        }
    }

    private boolean mayRetry(Outcome outcome) {
        boolean idempotent = RequestCheck.idempotent(head.method());
        return pool.decider()
                .retry(pool.number(), number, ask.attempt, outcome, status, idempotent, headSent, body.replayable());
    }

    private boolean again() {
        ask.again(backend);
        ask.pinned = Decider.NOBODY;
        int next = pool.decider().pick(ask);
        if (next == Decider.NOBODY) {
            return false;
        }
        backend = next;
        status = 0;
        attempt();
        if (connected) {
            flushRequest();
            client.updateReading();
        }
        return true;
    }

    private void ended(Outcome outcome) {
        inFlight = false;
        pool.decider().ended(backend, number, ask.attempt, outcome, status);
    }

    // ---- from the client

    boolean requestComplete() {
        return body.complete();
    }

    /** Whether the client's connection may stay open after an answer that is given now. */
    boolean keepsClient() {
        return keepClient && !oldClient && body.complete();
    }

    /** Whether the client got the head of an answer. */
    boolean passedOn() {
        return passedOn;
    }

    /** Whether more content of the request can be taken now. */
    boolean takesContent() {
        return connected && connection != null && connection.writable();
    }

    void content(HttpContent piece) {
        HttpContent bare = withoutTrailers(piece);
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

    void flushRequest() {
        if (connection != null && connected) {
            connection.flush();
        }
    }

    /** The client went away. */
    void abandon() {
        BackendConnection left = connection;
        connection = null;
        if (left != null) {
            left.abandon();
        }
        if (inFlight) {
            ended(Outcome.ABANDONED);
        }
        drop();
    }

    /** Whether the silence is the client's: it does not take the answer, or owes content that could be passed on. */
    boolean awaitsClient() {
        return passedOn ? !client.writable() : !body.complete() && takesContent();
    }

    void clientStalled() {
        abandon();
        if (passedOn) {
            client.truncate(endShownByClosing);
        } else {
            client.answer(OwnAnswer.SLOW_CLIENT);
        }
    }

    /** The client takes answers again, or no longer. */
    void clientWritable(boolean writable) {
        if (connection != null && connected) {
            connection.moved();
            connection.read(writable);
        }
    }

    // ---- from the backend

    void backendWritable() {
        client.updateReading();
    }

    void interim(HttpResponse response) {
        if (!oldClient) {
            AnswerHeads.prepareInterim(response, pool);
            client.write(response);
            client.write(LastHttpContent.EMPTY_LAST_CONTENT);
        }
    }

    void answerHead(HttpResponse response) {
        status = response.status().code();
        RetrySettings retry = pool.settings().retry();
        if (retry != null && retry.also().contains(status) && ask.attempt <= retry.atMost()) {
            held = new HeldAnswer(response);
        } else {
            passOn(response);
        }
    }

    private void passOn(HttpResponse response) {
        boolean empty = HttpMethod.HEAD.equals(head.method()) || status == 204 || status == 304;
        endShownByClosing = AnswerHeads.prepare(response, pool, empty, oldClient);
        closesClient =
                !keepClient || oldClient || !body.complete() || pool.decider().saysClose(backend);
        passedOn = true;
        client.passHead(response, closesClient);
    }

    void answerContent(HttpContent piece) {
        HttpContent bare = withoutTrailers(piece);
        boolean last = bare instanceof LastHttpContent;
        if (held != null) {
            hold(held, bare, last);
            return;
        }
        client.write(bare);
        if (last) {
            ended(Outcome.ANSWERED);
        } else if (connection != null && !client.writable()) {
            connection.read(false);
        }
    }

    private void hold(HeldAnswer answer, HttpContent piece, boolean last) {
        answer.add(piece);
        if (last) {
            ended(Outcome.ANSWERED);
        } else if (answer.full()) {
            passHeld(answer);
        }
    }

    private void passHeld(HeldAnswer answer) {
        held = null;
        passOn(answer.head());
        answer.pieces().forEach(client::write);
    }

    void flushAnswer() {
        client.flush();
    }

    /** The answer is whole and the connection went back or was closed. */
    void settled() {
        connection = null;
        connected = false;
        HeldAnswer answer = held;
        if (answer != null) {
            if (mayRetry(Outcome.ANSWERED) && again()) {
                answer.drop();
                held = null;
                return;
            }
            passHeld(answer);
        }
        drop();
        client.flush();
        client.answered(!closesClient);
    }

    /** Gives back all that is kept. */
    void drop() {
        body.drop();
        if (held != null) {
            held.drop();
            held = null;
        }
    }

    /** Trailer fields are dropped, as RFC 9112, 7.1.2, allows: none can then be taken for a header field. */
    private static HttpContent withoutTrailers(HttpContent piece) {
        if (piece instanceof LastHttpContent last && !last.trailingHeaders().isEmpty()) {
            return new DefaultLastHttpContent(last.content());
        }
        return piece;
    }
}
