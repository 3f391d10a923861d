package steelyard.balancer.live.http;

import io.netty.handler.codec.http.HttpResponse;
import io.netty.handler.codec.http.HttpResponseEncoder;

/** Encodes answers; those to HEAD have no content, whatever their fields say. */
final class ClientEncoder extends HttpResponseEncoder {
    private boolean head;

    /** Whether the answers that follow are to HEAD. */
    void answersHead(boolean head) {
        this.head = head;
    }

    boolean answersHead() {
        return head;
    }

    @Override
    protected boolean isContentAlwaysEmpty(HttpResponse response) {
        return head && response.status().code() >= 200 || super.isContentAlwaysEmpty(response);
    }
}
