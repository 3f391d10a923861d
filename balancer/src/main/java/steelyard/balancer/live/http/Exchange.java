package steelyard.balancer.live.http;

import io.netty.buffer.Unpooled;
import io.netty.handler.codec.http.DefaultFullHttpRequest;
import io.netty.handler.codec.http.DefaultLastHttpContent;
import io.netty.handler.codec.http.EmptyHttpHeaders;
import io.netty.handler.codec.http.HttpContent;
import io.netty.handler.codec.http.HttpHeaderNames;
import io.netty.handler.codec.http.HttpRequest;
import io.netty.handler.codec.http.HttpResponse;
import io.netty.handler.codec.http.LastHttpContent;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.decide.Decider;
import steelyard.balancer.core.decide.Outcome;
import steelyard.balancer.live.guard.WaitingRoom;
import steelyard.balancer.settings.RetrySettings;

/** One request of a client and the attempts at it, one after the other. */
final class Exchange implements WaitingRoom.Waiter {
    private final ClientHandler client;
    private final PoolFront pool;
    private final LoopConnections connections;
    private final HttpRequest head;
    private final RequestBody body;
    private final Attempts attempts;
    private final AnswerPath answer;
    private final boolean keepClient;

    private @Nullable BackendConnection connection;
    private boolean connected;
    private boolean headSent;

    /** What the client gets when a try waits in vain. */
    private OwnAnswer otherwise = OwnAnswer.NOBODY;

    /**
     * @param head prepared for the backend
     * @param keepClient whether the client's connection is to stay open
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
        long number = pool.numbers().of(head.headers());
        if (number < 0) { // of our own; one that was given stands there already
            head.headers().set(Fields.REQUEST, Long.toString(number));
        }
        this.attempts = new Attempts(pool, head, number, connections.room(), client.clientKey());
        this.answer = new AnswerPath(pool, client.output(), head.method(), oldClient);
        this.keepClient = keepClient && !oldClient;
    }

    // ---- attempts

    /** Makes the first attempt. */
    void begin() {
        int backend = attempts.pick(client.pinned(), this);
        if (backend == Decider.NOBODY) {
            client.answer(OwnAnswer.NOBODY);
        } else if (backend != Decider.WAITING) {
            client.pin(backend);
            attempt();
        }
    }

    /** The try that waited has its answer. */
    @Override
    public void placed(int backend) {
        if (backend == Decider.NOBODY) {
            giveUp();
        } else {
            if (attempts.attempt() == 1) {
                client.pin(backend);
            }
            resume();
        }
    }

    private void giveUp() {
        if (answer.holds()) {
            passHeld();
        } else {
            client.answer(otherwise);
        }
    }

    private void resume() {
        answer.drop();
        attempt();
        if (connected) {
            flushRequest();
            client.updateReading();
        }
    }

    private void attempt() {
        connected = false;
        headSent = false;
        head.headers().set(Fields.ATTEMPT, Fields.attempt(attempts.attempt()));
        BackendConnection idle = connections.take(attempts.backend());
        if (idle == null) {
            connections.connect(attempts.backend(), this);
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
        to.serve(this, body.empty() ? whole() : head);
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

    /** The attempt failed; its connection is already gone. */
    void failed(Outcome outcome, OwnAnswer own) {
        connection = null;
        connected = false;
        attempts.ended(outcome);
        if (answer.passedOn()) {
            body.drop();
            client.truncate(answer.endShownByClosing());
            return;
        }
        answer.drop();
        if (!mayRetry(outcome) || !again(own)) {
            client.answer(own);
        }
    }

    private boolean mayRetry(Outcome outcome) {
        return attempts.mayRetry(outcome, headSent, body.replayable());
    }

    /**
     * Makes another attempt, now or once a place is free.
     *
     * @param own what the client gets if none becomes free
     * @return false when there is no other backend
     */
    private boolean again(OwnAnswer own) {
        int backend = attempts.pickAnother(this);
        if (backend == Decider.WAITING) {
            otherwise = own;
        } else if (backend != Decider.NOBODY) {
            resume();
        }
        return backend != Decider.NOBODY;
    }

    // ---- from the client

    boolean requestComplete() {
        return body.complete();
    }

    /** Whether the client's connection may stay open after an answer that is given now. */
    boolean keepsClient() {
        return keepClient && body.complete();
    }

    /** Whether the client got the head of an answer. */
    boolean passedOn() {
        return answer.passedOn();
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
        attempts.abandon();
        drop();
    }

    /** Whether the silence is the client's: it does not take the answer, or owes content that could be passed on. */
    boolean awaitsClient() {
        return answer.passedOn() ? !client.output().writable() : !body.complete() && takesContent();
    }

    void clientStalled() {
        abandon();
        if (answer.passedOn()) {
            client.truncate(answer.endShownByClosing());
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
        answer.interim(response);
    }

    /** Whether a 101 goes over to what the client asked for, and comes when the whole request was sent. */
    boolean agreesTo(HttpResponse response) {
        return body.complete() && Upgrade.agreed(head.headers(), response) != null;
    }

    /** The backend went over: the client is told, and both ends are joined. */
    void upgraded(HttpResponse response) {
        BackendConnection to = connection;
        String protocol = Upgrade.agreed(head.headers(), response);
        if (to == null || protocol == null) {
            return; // the client has left
        }
        attempts.status(response.status().code());
        hold(response);
        answer.upgrade(response, protocol);
        connection = null;
        drop();
        client.tunnel(to, attempts);
    }

    void answerHead(HttpResponse response) {
        int status = response.status().code();
        attempts.status(status);
        hold(response);
        RetrySettings retry = pool.settings().retry();
        if (retry != null && retry.also().contains(status) && attempts.attempt() <= retry.atMost()) {
            answer.hold(response);
        } else {
            answer.pass(response, closesClient());
        }
    }

    /** Adds the cookie that holds the client, where one does. */
    private void hold(HttpResponse response) {
        String cookie = attempts.cookie();
        if (cookie != null) {
            response.headers().add(HttpHeaderNames.SET_COOKIE, cookie);
        }
    }

    private boolean closesClient() {
        return !keepsClient() || pool.decider().saysClose(attempts.backend());
    }

    void answerContent(HttpContent piece) {
        HttpContent bare = withoutTrailers(piece);
        boolean tooLargeToHold = answer.content(bare);
        if (bare instanceof LastHttpContent) {
            attempts.ended(Outcome.ANSWERED);
        } else if (tooLargeToHold) {
            answer.release(closesClient());
        } else if (connection != null && !answer.holds() && !client.output().writable()) {
            connection.read(false);
        }
    }

    void flushAnswer() {
        client.output().flush();
    }

    /** The answer is whole and the connection went back or was closed. */
    void settled() {
        connection = null;
        connected = false;
        if (answer.holds() && mayRetry(Outcome.ANSWERED) && again(OwnAnswer.NOBODY)) {
            return;
        }
        passHeld();
    }

    private void passHeld() {
        if (answer.holds()) {
            answer.release(closesClient());
        }
        drop();
        client.output().flush();
        client.answered(!answer.closesClient());
    }

    /** Gives back all that is kept. */
    void drop() {
        body.drop();
        answer.drop();
    }

    /** Trailer fields are dropped, as RFC 9112, 7.1.2, allows: none can then be taken for a header field. */
    private static HttpContent withoutTrailers(HttpContent piece) {
        if (piece instanceof LastHttpContent last && !last.trailingHeaders().isEmpty()) {
            return new DefaultLastHttpContent(last.content());
        }
        return piece;
    }
}
