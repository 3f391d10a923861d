package steelyard.balancer.live.http;

import io.netty.handler.codec.http.HttpObject;
import io.netty.util.ReferenceCountUtil;
import java.util.ArrayDeque;

/** What a client sent before it was its turn, in order. Owns what it holds until it is taken. */
final class SentAhead {
    private final ArrayDeque<HttpObject> parts = new ArrayDeque<>();

    boolean isEmpty() {
        return parts.isEmpty();
    }

    void add(HttpObject part) {
        parts.addLast(part);
    }

    /** The next part, which stays. */
    HttpObject first() {
        return parts.getFirst();
    }

    /** The next part, which is the caller's from here on. */
    HttpObject take() {
        return parts.removeFirst();
    }

    void drop() {
        parts.forEach(ReferenceCountUtil::release);
        parts.clear();
    }
}
