package steelyard.balancer.live.http;

import io.netty.channel.Channel;
import io.netty.handler.codec.http.HttpHeaderNames;
import io.netty.handler.codec.http.HttpHeaders;
import io.netty.handler.codec.http.HttpMethod;
import io.netty.handler.codec.http.HttpRequest;
import io.netty.handler.codec.http.HttpVersion;
import java.util.Locale;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.settings.FrontSettings;

/** Makes the head that goes to the backend out of the one that came, in place. */
final class RequestHeads {
    private static final int MOST_DIGITS = 9; // whatever has no more fits an int

    private RequestHeads() {}

    /** @return the answer that the request gets here instead, or null when it can be forwarded */
    static @Nullable OwnAnswer prepare(HttpRequest request, PoolFront pool, Channel channel) {
        HttpHeaders headers = request.headers();
        boolean oldClient = request.protocolVersion().minorVersion() == 0;
        String upgrade = Upgrade.asked(request);
        OwnAnswer here = countForward(request, headers);
        if (here == null && !Fields.removeHopByHop(headers)) {
            here = OwnAnswer.FAULTY;
        }
        if (here == null) {
            here = originForm(request, headers);
        }
        if (here != null) {
            return here;
        }
        if (oldClient) {
            headers.remove(HttpHeaderNames.EXPECT); // RFC 9110, 10.1.1
            if (!headers.contains(HttpHeaderNames.HOST)) {
                headers.set(HttpHeaderNames.HOST, "");
            }
        }
        if (Loops.returns(headers, pool.balancer())) {
            return OwnAnswer.LOOP;
        }
        headers.add(HttpHeaderNames.VIA, oldClient ? pool.via10() : pool.via11());
        if (pool.settings().front().forwarded() != FrontSettings.Forwarded.NOT) {
            headers.add(Fields.FORWARDED, ForwardedElement.of(channel, headers.get(HttpHeaderNames.HOST), pool));
        }
        if (upgrade != null) {
            Upgrade.set(headers, upgrade);
        }
        request.setProtocolVersion(HttpVersion.HTTP_1_1);
        return null;
    }

    /** Max-Forwards of TRACE and OPTIONS (RFC 9110, 7.6.2); other methods may ignore it and do. */
    private static @Nullable OwnAnswer countForward(HttpRequest request, HttpHeaders headers) {
        boolean trace = HttpMethod.TRACE.equals(request.method());
        if (!trace && !HttpMethod.OPTIONS.equals(request.method())) {
            return null;
        }
        String given = headers.get(HttpHeaderNames.MAX_FORWARDS);
        if (given == null) {
            return null;
        }
        if (!given.matches("[0-9]+")) {
            return OwnAnswer.FAULTY;
        }
        int left = given.length() > MOST_DIGITS ? Integer.MAX_VALUE : Integer.parseInt(given);
        if (left == 0) {
            return trace ? OwnAnswer.NO_ECHO : OwnAnswer.OPTIONS_HERE;
        }
        headers.set(HttpHeaderNames.MAX_FORWARDS, left - 1);
        return null;
    }

    /** A target in absolute form names the host, and wins over the Host field (RFC 9112, 3.2.2). */
    private static @Nullable OwnAnswer originForm(HttpRequest request, HttpHeaders headers) {
        String target = request.uri();
        if (target.startsWith("/")) {
            return null;
        }
        if (target.equals("*")) { // of a whole server, which only OPTIONS asks about (RFC 9112, 3.2.4)
            return HttpMethod.OPTIONS.equals(request.method()) ? null : OwnAnswer.FAULTY;
        }
        if (!target.toLowerCase(Locale.ROOT).startsWith("http://")) {
            return OwnAnswer.FAULTY;
        }
        int from = "http://".length();
        int to = from;
        while (to < target.length() && "/?#".indexOf(target.charAt(to)) < 0) {
            to++;
        }
        String host = target.substring(from, to);
        if (host.isEmpty() || !Authority.valid(host)) {
            return OwnAnswer.FAULTY;
        }
        String rest = target.substring(to);
        if (rest.isEmpty() && HttpMethod.OPTIONS.equals(request.method())) {
            rest = "*"; // RFC 9112, 3.2.4
        }
        headers.set(HttpHeaderNames.HOST, host);
        request.setUri(rest.startsWith("/") || rest.equals("*") ? rest : "/" + rest);
        return null;
    }
}
