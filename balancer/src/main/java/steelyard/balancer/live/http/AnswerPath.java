package steelyard.balancer.live.http;

import io.netty.handler.codec.http.HttpContent;
import io.netty.handler.codec.http.HttpMethod;
import io.netty.handler.codec.http.HttpResponse;
import io.netty.handler.codec.http.LastHttpContent;
import org.jspecify.annotations.Nullable;

/** The way of an answer from a backend to the client: straight through, or held back while it may be tried elsewhere. */
final class AnswerPath {
    private final PoolFront pool;
    private final ClientOutput output;
    private final HttpMethod method;
    private final boolean oldClient;
    private @Nullable HeldAnswer held;
    private boolean passedOn;
    private boolean closesClient;
    private boolean endShownByClosing;

    AnswerPath(PoolFront pool, ClientOutput output, HttpMethod method, boolean oldClient) {
        this.pool = pool;
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
        AnswerHeads.prepareUpgrade(response, pool, protocol);
        passedOn = true;
        output.write(response);
        output.write(LastHttpContent.EMPTY_LAST_CONTENT);
        output.flush();
    }

    /** Holds the answer back until it is whole. */
    void hold(HttpResponse response) {
        held = new HeldAnswer(response);
    }

    /** @param close whether the client's connection closes behind it */
    void pass(HttpResponse response, boolean close) {
        int status = response.status().code();
        boolean empty = HttpMethod.HEAD.equals(method) || status == 204 || status == 304;
        endShownByClosing = AnswerHeads.prepare(response, pool, empty, oldClient);
        closesClient = close;
        passedOn = true;
        output.passHead(response, close);
    }

    /** Takes a piece of content; true if an answer that is held became too large for that and has to be passed on. */
    boolean content(HttpContent piece) {
        HeldAnswer answer = held;
        if (answer == null) {
            output.write(piece);
            return false;
        }
        answer.add(piece);
        return answer.full();
    }

    /** Passes on what is held. */
    void release(boolean close) {
        HeldAnswer answer = held;
        if (answer != null) {
            held = null;
            pass(answer.head(), close);
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
