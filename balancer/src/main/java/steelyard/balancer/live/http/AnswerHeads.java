package steelyard.balancer.live.http;

import io.netty.handler.codec.http.HttpHeaderNames;
import io.netty.handler.codec.http.HttpHeaderValues;
import io.netty.handler.codec.http.HttpHeaders;
import io.netty.handler.codec.http.HttpResponse;
import io.netty.handler.codec.http.HttpVersion;

/** Makes the head that goes to the client out of the backend's, in place. */
final class AnswerHeads {
    private AnswerHeads() {}

    /** Whether the transfer coding of an answer is one that was asked for: chunked or none. */
    static boolean codingKnown(HttpResponse response) {
        HttpHeaders headers = response.headers();
        String coding = headers.get(HttpHeaderNames.TRANSFER_ENCODING);
        return coding == null
                || HttpHeaderValues.CHUNKED.contentEqualsIgnoreCase(coding)
                        && headers.getAll(HttpHeaderNames.TRANSFER_ENCODING).size() == 1;
    }

    /** Prepares an interim answer: it is a head alone. */
    static void prepareInterim(HttpResponse response, PoolFront pool) {
        prepareFields(response, pool);
    }

    /** Prepares the head behind which a tunnel begins. */
    static void prepareUpgrade(HttpResponse response, PoolFront pool, String protocol) {
        prepareFields(response, pool);
        Upgrade.set(response.headers(), protocol);
    }

    /**
     * @param empty whether the answer has no content by its status or method
     * @param oldClient whether the client speaks HTTP/1.0, which knows no chunks
     * @return whether the end of the content will be shown by closing alone
     */
    static boolean prepare(HttpResponse response, PoolFront pool, boolean empty, boolean oldClient) {
        HttpHeaders headers = response.headers();
        prepareFields(response, pool);
        if (!headers.contains(HttpHeaderNames.DATE)) {
            headers.set(HttpHeaderNames.DATE, HttpDate.now());
        }
        if (empty) {
            if (oldClient) {
                headers.remove(HttpHeaderNames.TRANSFER_ENCODING);
            }
            return false;
        }
        if (headers.contains(HttpHeaderNames.CONTENT_LENGTH)) {
            return false;
        }
        if (oldClient) {
            headers.remove(HttpHeaderNames.TRANSFER_ENCODING);
            return true;
        }
        headers.set(HttpHeaderNames.TRANSFER_ENCODING, HttpHeaderValues.CHUNKED);
        return false;
    }

    /** Via is owed in answers by a proxy and left to a gateway (RFC 9110, 7.6.3): the stricter rule is kept. */
    private static void prepareFields(HttpResponse response, PoolFront pool) {
        HttpHeaders headers = response.headers();
        Fields.removeHopByHop(headers);
        headers.remove(Fields.FORWARDED); // not for responses (RFC 7239, 4)
        boolean old = response.protocolVersion().minorVersion() == 0;
        headers.add(HttpHeaderNames.VIA, old ? pool.via10() : pool.via11());
        response.setProtocolVersion(HttpVersion.HTTP_1_1);
    }
}
