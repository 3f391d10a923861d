package steelyard.backends.stub;

import io.netty.handler.codec.http.HttpRequest;
import org.jspecify.annotations.Nullable;
import steelyard.backends.behave.Behaviour;

/** One request on one connection, from its head to the last byte of its answer. */
final class Exchange {

    /** What is asked for. Only requests are traffic. */
    enum Kind {
        REQUEST,
        PROBE,
        /** A reading of the load page. */
        READING
    }

    final Connection connection;
    final long token;
    final Kind kind;
    /** Number of the request, the probe or the reading. */
    final long request;

    final int attempt;
    /** Whether the answer has no body because the request is a HEAD. */
    final boolean headOnly;

    final boolean keepAlive;
    /** Kept only while the mappings may still have to see it. */
    @Nullable
    HttpRequest head;

    /** The protocol that it asks to go on in, or null; only a request gets its wish. */
    @Nullable
    Upgrade upgrade;

    /** What the mappings answer, found when the request had been read. */
    Answers.@Nullable Answer answer;

    /** Where the behaviour holds it. */
    int place = Behaviour.NOWHERE;

    /** What to send, once that is known; answers leave in the order of their requests. */
    @Nullable
    Object reply;

    int status;
    boolean over;

    Exchange(
            Connection connection,
            long token,
            Kind kind,
            long request,
            int attempt,
            boolean headOnly,
            boolean keepAlive) {
        this.connection = connection;
        this.token = token;
        this.kind = kind;
        this.request = request;
        this.attempt = attempt;
        this.headOnly = headOnly;
        this.keepAlive = keepAlive;
    }
}
