package steelyard.balancer.live.http;

import io.netty.handler.codec.http.HttpContent;
import io.netty.handler.codec.http.HttpMethod;
import io.netty.handler.codec.http.HttpResponse;
import io.netty.handler.codec.http.LastHttpContent;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.decide.Outcome;

/** The way of an answer from a backend to the client: straight through, or held back while it may be tried elsewhere. */
final class AnswerPath {
    private final PoolFront pool;
    private final Attempts attempts;
    private final ClientOutput output;
    private final HttpMethod method;
    private final boolean oldClient;
    private @Nullable HeldAnswer held;
    private boolean passedOn;
    private boolean closesClient;
    private boolean endShownByClosing;

    AnswerPath(PoolFront pool, Attempts attempts, ClientOutput output, HttpMethod method, boolean oldClient) {
        this.pool = pool;
        this.attempts = attempts;
        this.output = output;
        this.method = method;
        this.oldClient = oldClient;
    }

    /** Whether the client got the head of an answer. */
    boolean passedOn() {
        return passedOn;
    }

    /** Whether the client's connection closes behind the answer that was passed on. */
    boolean closesClient() {
        return closesClient;
    }

    /** Whether nothing but the closing shows the end of the content. */
    boolean endShownByClosing() {
        return endShownByClosing;
    }

    boolean holds() {
        return held != null;
    }

    void interim(HttpResponse response) {
        if (!oldClient) {
            AnswerHeads.prepareInterim(response, pool);
            output.write(response);
            output.write(LastHttpContent.EMPTY_LAST_CONTENT);
        }
    }

    /** Passes a 101 on; what follows it is no longer HTTP. */
    void upgrade(HttpResponse response, String protocol) {
        attempts.answered(response);
        AnswerHeads.prepareUpgrade(response, pool, protocol);
        passedOn = true;
        output.write(response);
        output.write(LastHttpContent.EMPTY_LAST_CONTENT);
        output.flush();
    }

    /**
     * Passes the head of an answer on, or holds the answer back until it is whole.
     *
     * @param keeps whether the client's connection may stay open behind it
     */
    void head(HttpResponse response, boolean keeps) {
        attempts.answered(response);
        if (attempts.triesElsewhere(response.status().code())) {
            held = new HeldAnswer(response);
        } else {
            pass(response, keeps);
        }
    }

    private void pass(HttpResponse response, boolean keeps) {
        int status = response.status().code();
        boolean empty = HttpMethod.HEAD.equals(method) || status == 204 || status == 304;
        endShownByClosing = AnswerHeads.prepare(response, pool, empty, oldClient);
        closesClient = !keeps || attempts.saysClose();
        passedOn = true;
        output.passHead(response, closesClient);
    }

    /** Takes a piece of content; one that is held and becomes too large for that is passed on. */
    void content(HttpContent piece, boolean keeps) {
        HttpContent bare = Trailers.dropped(piece);
        HeldAnswer answer = held;
        if (answer == null) {
            output.write(bare);
        } else {
            answer.add(bare);
        }
        if (bare instanceof LastHttpContent) {
            attempts.ended(Outcome.ANSWERED);
        } else if (answer != null && answer.full()) {
            release(keeps);
        }
    }

    /** Passes on what is held. */
    void release(boolean keeps) {
        HeldAnswer answer = held;
        if (answer != null) {
            held = null;
            pass(answer.head(), keeps);
            answer.pieces().forEach(output::write);
        }
    }

    /** Forgets what is held. */
    void drop() {
        if (held != null) {
            held.drop();
            held = null;
        }
    }
}
