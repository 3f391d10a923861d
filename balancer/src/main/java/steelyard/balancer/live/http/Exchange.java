package steelyard.balancer.live.http;

import io.netty.handler.codec.http.HttpContent;
import io.netty.handler.codec.http.HttpRequest;
import io.netty.handler.codec.http.HttpResponse;
import io.netty.handler.codec.http.LastHttpContent;
import steelyard.balancer.core.decide.Decider;
import steelyard.balancer.core.decide.Outcome;
import steelyard.balancer.live.guard.WaitingRoom;

/**
 * One request of a client and the attempts at it, one after the other. {@link RequestPath} carries it to a backend,
 * {@link AnswerPath} the answer back; here is decided which attempt comes next and when it is over.
 */
final class Exchange implements WaitingRoom.Waiter {
    private final ClientSide client;
    private final LoopConnections connections;
    private final RequestPath request;
    private final Attempts attempts;
    private final AnswerPath answer;
    private final boolean keepClient;

    /** What the client gets when a try waits in vain. */
    private OwnAnswer otherwise = OwnAnswer.NOBODY;

    /**
     * @param head prepared for the backend
     * @param keepClient whether the client's connection is to stay open
     */
    Exchange(
            ClientSide client,
            PoolFront pool,
            LoopConnections connections,
            HttpRequest head,
            boolean keepClient,
            boolean oldClient) {
        this.client = client;
        this.connections = connections;
        this.request = new RequestPath(head, pool.retries());
        this.attempts = new Attempts(pool, head, connections.room(), client.key());
        this.answer = new AnswerPath(pool, attempts, client.output(), head.method(), oldClient);
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
        if (attempt()) {
            request.flush();
            client.updateReading();
        }
    }

    /** Whether it was sent at once, on a connection that stood idle. */
    private boolean attempt() {
        request.attempt(attempts.attempt());
        BackendConnection idle = connections.take(attempts.backend());
        if (idle == null) {
            connections.connect(attempts.backend(), this);
        } else {
            request.send(idle, this);
        }
        return idle != null;
    }

    void connected(BackendConnection opened) {
        request.send(opened, this);
        opened.flush();
        client.updateReading();
    }

    /** The attempt failed; its connection is already gone. */
    void failed(Outcome outcome, OwnAnswer own) {
        request.leave();
        attempts.ended(outcome);
        if (answer.passedOn()) {
            request.drop();
            client.truncate(answer.endShownByClosing());
            return;
        }
        answer.drop();
        if (!mayRetry(outcome) || !again(own)) {
            client.answer(own);
        }
    }

    private boolean mayRetry(Outcome outcome) {
        return attempts.mayRetry(outcome, request.headSent(), request.replayable());
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

    /** Has that done on its loop, in a task of its own. */
    void later(Runnable what) {
        client.output().later(what);
    }

    RequestPath request() {
        return request;
    }

    ClientSide client() {
        return client;
    }

    /** Whether the client's connection may stay open after an answer that is given now. */
    boolean keepsClient() {
        return keepClient && request.complete();
    }

    /** Whether the client got the head of an answer. */
    boolean passedOn() {
        return answer.passedOn();
    }

    /** The client went away. */
    void abandon() {
        BackendConnection left = request.leave();
        if (left != null) {
            left.abandon();
        }
        attempts.abandon();
        drop();
    }

    /** Whether the silence is the client's: it does not take the answer, or owes content that could be passed on. */
    boolean awaitsClient() {
        return answer.passedOn() ? !client.output().writable() : !request.complete() && request.takesContent();
    }

    void clientStalled() {
        abandon();
        if (answer.passedOn()) {
            client.truncate(answer.endShownByClosing());
        } else {
            client.answer(OwnAnswer.SLOW_CLIENT);
        }
    }

    // ---- from the backend

    void interim(HttpResponse response) {
        answer.interim(response);
    }

    /** The backend went over: the client is told, and both ends are joined. */
    void upgraded(HttpResponse response) {
        String protocol = request.agreed(response);
        BackendConnection to = request.leave();
        if (to == null || protocol == null) {
            return; // the client has left
        }
        answer.upgrade(response, protocol);
        drop();
        client.tunnel(to, attempts);
    }

    void answerHead(HttpResponse response) {
        answer.head(response, keepsClient());
    }

    void answerContent(HttpContent piece) {
        boolean last = piece instanceof LastHttpContent;
        answer.content(piece, keepsClient());
        if (!last && !answer.holds() && !client.output().writable()) {
            request.holdBack();
        }
    }

    /** The answer is whole and the connection went back or was closed. */
    void settled() {
        request.leave();
        if (answer.holds() && mayRetry(Outcome.ANSWERED) && again(OwnAnswer.NOBODY)) {
            return;
        }
        passHeld();
    }

    private void passHeld() {
        if (answer.holds()) {
            answer.release(keepsClient());
        }
        drop();
        client.output().flush();
        client.answered(!answer.closesClient());
    }

    /** Gives back all that is kept. */
    void drop() {
        request.drop();
        answer.drop();
    }
}
