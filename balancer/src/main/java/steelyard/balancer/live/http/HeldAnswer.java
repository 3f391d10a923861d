package steelyard.balancer.live.http;

import io.netty.handler.codec.http.HttpContent;
import io.netty.handler.codec.http.HttpResponse;
import java.util.ArrayList;
import java.util.List;

/**
 * An answer of a status that may be tried again, held back until it is whole: only then has the attempt ended, and only
 * before any of it was passed on may another one be made.
 */
final class HeldAnswer {
    private static final int MOST_HELD = 64 * 1024;

    private final HttpResponse head;
    private final List<HttpContent> pieces = new ArrayList<>();
    private int bytes;

    HeldAnswer(HttpResponse head) {
        this.head = head;
    }

    HttpResponse head() {
        return head;
    }

    void add(HttpContent piece) {
        pieces.add(piece);
        bytes += piece.content().readableBytes();
    }

    /** Whether it is too large to be held any longer. */
    boolean full() {
        return bytes > MOST_HELD;
    }

    /** Hands over the pieces; the caller releases them by sending. */
    List<HttpContent> pieces() {
        return pieces;
    }

    void drop() {
        pieces.forEach(HttpContent::release);
        pieces.clear();
    }
}
