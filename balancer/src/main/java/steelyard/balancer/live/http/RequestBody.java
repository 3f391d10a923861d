package steelyard.balancer.live.http;

import io.netty.handler.codec.http.DefaultHttpContent;
import io.netty.handler.codec.http.DefaultLastHttpContent;
import io.netty.handler.codec.http.HttpContent;
import io.netty.handler.codec.http.LastHttpContent;
import java.util.ArrayList;
import java.util.List;
import org.jspecify.annotations.Nullable;

/**
 * The content of a request on its way: what waits for a connection, and what is kept for another attempt.
 *
 * <p>A kept piece shares its bytes with the one that is sent. Beyond 64 KiB nothing more is kept, and the request can
 * not be made again.
 */
final class RequestBody {
    static final int MOST_KEPT = 64 * 1024;

    /** Of every request without content: there is nothing to keep, so that it never changes. */
    private static final RequestBody NONE = new RequestBody(false, true);

    private final boolean keeps;
    private @Nullable List<HttpContent> pieces;
    private int bytes;
    private boolean complete;
    private boolean dropped;

    private RequestBody(boolean keeps, boolean complete) {
        this.keeps = keeps;
        this.complete = complete;
    }

    /** @param keeps whether another attempt may come to need it */
    static RequestBody of(boolean keeps, boolean hasContent) {
        return hasContent ? new RequestBody(keeps, false) : NONE;
    }

    /** Whether the last piece came. */
    boolean complete() {
        return complete;
    }

    /** Whether the request has no content, or none that was not sent. */
    boolean empty() {
        return complete && pieces == null;
    }

    /** Whether all of it that came so far can be sent again. */
    boolean replayable() {
        return !dropped;
    }

    /** Takes a piece over to be sent when a connection stands. */
    void await(HttpContent piece) {
        note(piece);
        add(piece);
    }

    /** Takes a piece that is being sent now; the caller still sends, and by that releases, the piece itself. */
    void sent(HttpContent piece) {
        note(piece);
        if (!keeps || dropped) {
            dropped = true;
        } else if (bytes + piece.content().readableBytes() > MOST_KEPT) {
            drop();
        } else {
            add(copy(piece));
        }
    }

    /** Writes all that waited, and keeps it where it may be needed again. */
    void sendAll(BackendConnection connection) {
        if (pieces == null) {
            return;
        }
        boolean keep = keeps && bytes <= MOST_KEPT;
        for (HttpContent piece : pieces) {
            connection.write(keep ? copy(piece) : piece);
        }
        if (!keep) {
            pieces = null;
            dropped = true;
        }
    }

    /** Gives back what is kept. */
    void drop() {
        if (this == NONE) {
            return;
        }
        dropped = true;
        if (pieces != null) {
            pieces.forEach(HttpContent::release);
            pieces = null;
        }
    }

    private void note(HttpContent piece) {
        complete |= piece instanceof LastHttpContent;
    }

    private void add(HttpContent piece) {
        if (pieces == null) {
            pieces = new ArrayList<>();
        }
        pieces.add(piece);
        bytes += piece.content().readableBytes();
    }

    private static HttpContent copy(HttpContent piece) {
        return piece instanceof LastHttpContent
                ? new DefaultLastHttpContent(piece.content().retainedDuplicate())
                : new DefaultHttpContent(piece.content().retainedDuplicate());
    }
}
