package steelyard.balancer.live.http;

import io.netty.handler.codec.http.HttpHeaderNames;
import io.netty.handler.codec.http.HttpHeaders;
import java.util.Iterator;

/** Requests that come back to where they were: Via says so (RFC 9110, 7.6 and 7.6.3). */
final class Loops {
    private Loops() {}

    /** @param balancer the pseudonym that an entry of this balancer carries */
    static boolean returns(HttpHeaders headers, String balancer) {
        Iterator<String> lines = headers.valueStringIterator(HttpHeaderNames.VIA);
        while (lines.hasNext()) {
            for (String entry : lines.next().split(",", -1)) {
                String[] words = entry.strip().split("[ \t]+", 3);
                if (words.length > 1 && words[1].equalsIgnoreCase(balancer)) {
                    return true;
                }
            }
        }
        return false;
    }
}
